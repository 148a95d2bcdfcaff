package reports

import (
	"math"
	"os"
	"path/filepath"
	"testing"

	"phaselag/data"
	"phaselag/fitting"
)

// BenchmarkDemo is the whole job on the demonstration: read, fit, judge, write
// every file. It fails where the constants are not those of the simulation
// (C1 6.12, C2 151.3 K, filler 6 kJ/mol) within their intervals.
func BenchmarkDemo(b *testing.B) {
	dir := b.TempDir()
	n := 0
	for b.Loop() {
		c, err := data.Open("../data/demo/campaign.yaml")
		if err != nil {
			b.Fatal(err)
		}
		r, err := fitting.Characterize(c, nil)
		if err != nil {
			b.Fatal(err)
		}
		out := filepath.Join(dir, "result")
		if err := WriteResult(out, r); err != nil {
			b.Fatal(err)
		}
		want := map[string]float64{"C1": 6.12, "C2": 151.3, "filler activation energy": 6}
		for _, p := range r.Parameters {
			if v, ok := want[p.Name]; ok && math.Abs(float64(p.Value)-v) > float64(p.U95) {
				b.Fatalf("%s = %g ± %g, simulated %g", p.Name, float64(p.Value), float64(p.U95), v)
			}
		}
		entries, err := os.ReadDir(filepath.Join(out, "figures"))
		if err != nil || len(entries) < 6 {
			b.Fatalf("%d figures: %v", len(entries), err)
		}
		n++
	}
}
