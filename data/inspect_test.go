package data

import (
	"os"
	"path/filepath"
	"reflect"
	"strings"
	"testing"
)

// TestSnippet: the entry that inspect proposes, pasted into a campaign file, reads
// the file to the same points as it was understood by itself.
func TestSnippet(t *testing.T) {
	for name, text := range map[string]string{
		"points.csv":  "Messung 12\n\nf / Hz,T / °C,G' / MPa,G'' / MPa\n1,20,1.5,0.1\n10,20,1.7,0.2\n1,40,1.2,0.05\n10,40,1.3,0.1\n",
		"decimal.csv": "f;T;G';tan δ\nHz;°C;MPa;\n1,0;20,0;1,5;0,1\n10,0;20,0;1,7;0,12\n1,0;40,0;1,2;0,05\n10,0;40,0;1,3;0,1\n",
		"tabs.txt":    "ω [rad/s]\tT [K]\tG' [Pa]\tδ [°]\n1\t293.15\t1.5e6\t5\n10\t293.15\t1.7e6\t6\n1\t313.15\t1.2e6\t4\n10\t313.15\t1.3e6\t5\n",
	} {
		dir := t.TempDir()
		file := filepath.Join(dir, name)
		if err := os.WriteFile(file, []byte(text), 0o666); err != nil {
			t.Fatal(err)
		}
		all, err := Inspect(file)
		if err != nil || len(all) != 1 {
			t.Fatal(name, err)
		}
		in := all[0]
		if in.Refused != nil || in.Kind != FrequencySweep || len(in.Runs) != 2 || len(in.Columns) != 4 {
			t.Errorf("%s: %v, %s, %d runs, %d columns", name, in.Refused, in.Kind, len(in.Runs), len(in.Columns))
		}
		campaign := filepath.Join(dir, "campaign.yaml")
		if err := os.WriteFile(campaign, []byte("campaign: pasted\n"+in.Snippet), 0o666); err != nil {
			t.Fatal(err)
		}
		pasted, err := Open(campaign)
		if err != nil {
			t.Fatalf("%s: %v\n%s", name, err, in.Snippet)
		}
		alone, err := Open(file)
		if err != nil {
			t.Fatal(err)
		}
		for i := range alone.Tests[0].Runs {
			if a, b := alone.Tests[0].Runs[i].Points, pasted.Tests[0].Runs[i].Points; !samePoints(a, b) {
				t.Errorf("%s, run %d: pasted %+v, alone %+v", name, i, b, a)
			}
		}
	}
}

func samePoints(a, b []Point) bool {
	strip := func(p []Point) [][4]float64 {
		var out [][4]float64
		for _, v := range p {
			out = append(out, [4]float64{v.Frequency, v.Temperature, v.Storage, v.Loss})
		}
		return out
	}
	return reflect.DeepEqual(strip(a), strip(b))
}

// TestInspectUnreadable: what cannot be read is shown, and why; what is no text is an
// error.
func TestInspectUnreadable(t *testing.T) {
	dir := t.TempDir()
	write := func(name, text string) string {
		file := filepath.Join(dir, name)
		if err := os.WriteFile(file, []byte(text), 0o666); err != nil {
			t.Fatal(err)
		}
		return file
	}
	all, err := Inspect(write("odd.csv", "a;b;c\n1;2;3\n4;5;6\n"))
	if err != nil || len(all) != 1 {
		t.Fatal(err)
	}
	in := all[0]
	if err != nil || in.Refused == nil || len(in.First) != 3 || in.First[1][2] != "2" || !strings.Contains(in.Snippet, "header_row: none") {
		t.Errorf("%+v, %v", in, err)
	}
	all, err = Inspect(write("unit.csv", "f,T / °C,G' / MPa,G'' / MPa\n1,20,1,0.1\n2,20,1.1,0.1\n"))
	if err != nil || len(all) != 1 {
		t.Fatal(err)
	}
	in = all[0]
	if err != nil || in.Refused == nil || in.Columns[0].Known || !strings.Contains(in.Snippet, "# which of") {
		t.Errorf("%+v, %v", in, err)
	}
	for name, text := range map[string]string{"nothing.csv": "", "binary.csv": "\x00\x01\x02\xff\xfe\x00\x00\x07", "campaign.yaml": "campaign: x\n"} {
		if in, err := Inspect(write(name, text)); err == nil {
			t.Errorf("%s: %+v", name, in)
		}
	}
}
