package screen

import (
	"path/filepath"
	"strings"
	"testing"

	"phaselag/data"
	"phaselag/data/demo"
)

// What the reader makes of a simulated laboratory's files: sound ones raise nothing,
// and faults are found through it as they are in hand-made campaigns.
func TestThroughTheReader(t *testing.T) {
	plan := demo.HM60Plan()
	open := func(files demo.Files) *data.Campaign {
		t.Helper()
		c, err := data.OpenFS(files, demo.CampaignFile)
		if err != nil {
			t.Fatal(err)
		}
		return c
	}
	for seed := uint64(1); seed <= 5; seed++ {
		good := demo.Campaign(demo.HM60(), plan, seed)
		clean(t, "sound", Check(open(good)))
		for _, k := range []struct {
			code, table string
			fault       demo.Fault
		}{
			{"inertia-not-corrected", "isotherms.csv", demo.MovingMass(0.4, plan.Specimens[0])},
			{"contact-lost", "isotherms.csv", demo.Slip(84+10, 84+21, 0.2, 2)},
			{"self-heating", "strain-sweeps.csv", demo.Warming(0.02, 0.006)},
		} {
			f := find(t, Check(open(good.Spoil(k.table, plan.Digits, k.fault))), k.code)
			if f.Severity == data.Note {
				t.Errorf("seed %d: %+v", seed, f)
			}
		}
	}
	// E' as heading of a test in shear.
	good := demo.Campaign(demo.HM60(), plan.Only("isotherms"), 1)
	text := strings.ReplaceAll(string(good.Bytes("isotherms.csv")), "G'", "E'")
	find(t, Check(open(good.With("isotherms.csv", []byte(text)))), "heading-against-deformation")
}

// The reading tests' files hold sound numbers in all dialects: none is severe but
// those whose few temperatures share no modulus.
func TestCorpusIsSound(t *testing.T) {
	names, err := filepath.Glob("../testdata/corpus/*")
	if err != nil || len(names) < 20 {
		t.Fatal(err, len(names))
	}
	read := 0
	for _, name := range names {
		c, err := data.Open(name)
		if err != nil {
			continue // its reading is tested elsewhere
		}
		read++
		for _, f := range Check(c) {
			if f.Severity == data.Severe && f.Code != "isotherms-do-not-overlap" {
				t.Errorf("%s: %s: %s", name, f.Code, f.Evidence)
			}
		}
	}
	if read < 20 {
		t.Errorf("only %d files were read", read)
	}
}

func BenchmarkCheck(b *testing.B) {
	c, err := data.OpenFS(demo.Campaign(demo.HM60(), demo.HM60Plan(), 1), demo.CampaignFile)
	if err != nil {
		b.Fatal(err)
	}
	for b.Loop() {
		Check(c)
	}
}
