package fitting

import (
	"flag"
	"fmt"
	"math"
	"math/cmplx"
	"math/rand/v2"
	"strings"
	"sync"
	"testing"

	"phaselag/data"
	"phaselag/data/demo"
)

// What is wrong with a campaign must be seen. Every fault is put into simulated
// campaigns that are otherwise sound, and the share in which it is reported by
// its finding, and named with its place, is counted. The long form is run by
// hand:
//
//	go test ./fitting -run TestPower -v -campaigns 200 -timeout 0

var onlyFault = flag.String("fault", "", "part of the name of the only fault that TestPower looks at")

// fault spoils a campaign and says what a report must name.
type fault struct {
	name  string
	code  string
	spoil func(c *data.Campaign, rnd *rand.Rand) (names []string)
	power float64 // least share of campaigns in which it is found and named
}

// isothermsOf lists the runs of the frequency sweeps.
func isothermsOf(c *data.Campaign) []*data.Run {
	var out []*data.Run
	for i := range c.Tests {
		if c.Tests[i].Kind == data.FrequencySweep {
			for j := range c.Tests[i].Runs {
				out = append(out, &c.Tests[i].Runs[j])
			}
		}
	}
	return out
}

// atEnd turns the phase by up to d degrees, linear from the reference towards the
// cold (or the warm) end.
func atEnd(d float64, cold bool) func(c *data.Campaign, _ *rand.Rand) []string {
	return func(c *data.Campaign, _ *rand.Rand) []string {
		runs := isothermsOf(c)
		end, ref := math.Inf(1), 296.15
		for _, r := range runs {
			if !cold {
				r.Temperature = -r.Temperature
			}
			end = min(end, r.Temperature)
			if !cold {
				r.Temperature = -r.Temperature
			}
		}
		if !cold {
			end = -end
		}
		for _, r := range runs {
			share := max(0, (ref-r.Temperature)/(ref-end))
			for k := range r.Points {
				p := &r.Points[k]
				g := complex(p.Storage, p.Loss) * cmplx.Rect(1, share*d*math.Pi/180)
				p.Storage, p.Loss = real(g), imag(g)
			}
		}
		return nil
	}
}

func faults() []fault {
	return []fault{
		{"2° of phase at the cold end", "superposition-fails", atEnd(2, true), 0.95},
		{"2° of phase at the warm end", "superposition-fails", atEnd(2, false), 0.95},
		{"two temperatures exchanged", "temperatures-exchanged", func(c *data.Campaign, rnd *rand.Rand) []string {
			runs := isothermsOf(c)
			i := rnd.IntN(len(runs) - 1)
			a, b := runs[i], runs[i+1]
			swap := func(r *data.Run, T float64) {
				r.Temperature = T
				for k := range r.Points {
					r.Points[k].Temperature = T
				}
			}
			ta, tb := a.Temperature, b.Temperature
			swap(a, tb)
			swap(b, ta)
			return []string{celsius(ta), celsius(tb)}
		}, 0.95},
		{"2π in the frequency of one isotherm", "isotherm-frequency-unit", func(c *data.Campaign, rnd *rand.Rand) []string {
			runs := isothermsOf(c)
			r := runs[rnd.IntN(len(runs))]
			f := 2 * math.Pi
			if rnd.IntN(2) == 0 {
				f = 1 / f
			}
			for k := range r.Points {
				r.Points[k].Frequency *= f
			}
			return []string{celsius(r.Temperature)}
		}, 0.95},
		{"2 % gross outliers", "outlying-points", func(c *data.Campaign, rnd *rand.Rand) []string {
			var names []string
			for _, r := range isothermsOf(c) {
				for k := range r.Points {
					if rnd.Float64() >= 0.02 || !r.Points[k].Used {
						continue
					}
					p := &r.Points[k]
					g := complex(p.Storage, p.Loss)
					if rnd.IntN(2) == 0 {
						// Away from 90°, beyond which no reader would take it.
						turn := 5 * math.Pi / 180
						if cmplx.Phase(g) > math.Pi/4 {
							turn = -turn
						}
						g *= cmplx.Rect(1, turn)
					} else {
						g *= 1.15
					}
					p.Storage, p.Loss = real(g), imag(g)
					names = append(names, fmt.Sprintf("%s:%d", p.File, p.Row))
				}
			}
			return names
		}, 0.95},
	}
}

func TestPower(t *testing.T) {
	if testing.Short() {
		t.Skip("a simulation of its own, left out with -short")
	}
	n, list := *campaigns, scenarios()[:4]
	if n == 0 {
		n, list = 3, list[1:2]
	}
	for _, sc := range list {
		for _, f := range faults() {
			if *onlyFault != "" && !strings.Contains(f.name, *onlyFault) {
				continue
			}
			var mu sync.Mutex
			found := 0
			eachSeed(9000, n, func(seed uint64) {
				c, err := data.OpenFS(demo.Campaign(sc.truth, sc.plan, seed), "campaign.yaml")
				if err != nil {
					t.Error(err)
					return
				}
				names := f.spoil(c, rand.New(rand.NewPCG(seed, 77)))
				set := Settings{Workers: 1}
				if f.code != "superposition-fails" {
					set.Replicates = -1
				}
				r, err := Characterize(c, &set)
				if err != nil {
					t.Error(err)
					return
				}
				ok, text := named(r, f.code, names)
				mu.Lock()
				defer mu.Unlock()
				if ok {
					found++
				} else {
					t.Logf("%s, %s, seed %d: %s", sc.name, f.name, seed, text)
				}
			})
			t.Logf("| %s | %s | %d | %.3f |", sc.name, f.name, n, float64(found)/float64(n))
			if float64(found) < f.power*float64(n)-1 {
				t.Errorf("%s: %s is found and named in %d of %d", sc.name, f.name, found, n)
			}
		}
	}
}

// named says whether a result has a finding of the code that names everything.
func named(r *Result, code string, names []string) (bool, string) {
	var codes []string
	for _, f := range r.Findings {
		codes = append(codes, f.Code)
		if f.Code != code {
			continue
		}
		text := f.Evidence + " " + lines(f.Rows)
		for _, n := range names {
			if !strings.Contains(text+" ", n+" ") {
				return false, "not named " + n + ": " + text
			}
		}
		return true, ""
	}
	return false, fmt.Sprint("findings: ", codes)
}

// lines writes "a.csv:3-5, 9" as "a.csv:3 a.csv:4 a.csv:5 a.csv:9".
func lines(rows string) string {
	var out []string
	for _, part := range strings.Split(rows, "; ") {
		file, list, ok := strings.Cut(part, ":")
		if !ok {
			continue
		}
		for _, span := range strings.Split(list, ", ") {
			var from, to int
			if n, _ := fmt.Sscanf(span, "%d-%d", &from, &to); n == 1 {
				to = from
			}
			for i := from; i <= to; i++ {
				out = append(out, fmt.Sprintf("%s:%d", file, i))
			}
		}
	}
	return strings.Join(out, " ")
}
