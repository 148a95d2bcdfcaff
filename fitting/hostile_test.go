package fitting

import (
	"fmt"
	"math"
	"math/rand/v2"
	"strings"
	"testing"
	"testing/fstest"

	"phaselag/data"
)

// TestNonsense characterizes tables of nonsense: random moduli, temperatures,
// frequencies, amplitudes, few points, huge ranges, constants. There is always
// a result, or an error; what is reported can be written and read back.
func TestNonsense(t *testing.T) {
	n := 150
	if testing.Short() {
		n = 30
	}
	compounds := 0
	for seed := range uint64(n) {
		rnd := rand.New(rand.NewPCG(seed, 7))
		pick := func(v ...float64) float64 { return v[rnd.IntN(len(v))] }
		spread := pick(0, 0.01, 1, 6)
		temps := 1 + rnd.IntN(5)
		step := pick(0, 0.5, 5, 40)
		var b strings.Builder
		b.WriteString("f / Hz,T / °C,strain / %,G' / Pa,G'' / Pa\n")
		for range 1 + rnd.IntN(40) {
			T := 20 + step*float64(rnd.IntN(temps))
			fmt.Fprintf(&b, "%.4g,%.4g,%.4g,%.4g,%.4g\n", math.Pow(10, pick(0, 1, 3)*rnd.Float64()), T, math.Pow(10, pick(0, 2)*rnd.Float64()-1),
				1e6*math.Pow(10, spread*rnd.NormFloat64()), 1e5*math.Pow(10, spread*rnd.NormFloat64()))
		}
		kind := []string{"frequency sweep", "strain sweep", "temperature sweep"}
		yaml := "tests:\n"
		for i := range 1 + rnd.IntN(3) {
			yaml += fmt.Sprintf("  - {name: t%d, kind: %s, file: a.csv, deformation: shear}\n", i, kind[rnd.IntN(3)])
		}
		if rnd.IntN(2) == 0 {
			yaml += "analysis: {vertical_shift: free, reference_temperature: 50 °C}\n"
		}
		c, err := data.OpenFS(fstest.MapFS{"c.yaml": {Data: []byte(yaml)}, "a.csv": {Data: []byte(b.String())}}, "c.yaml")
		if err != nil {
			t.Fatalf("seed %d: %v", seed, err)
		}
		r, err := Characterize(c, &Settings{Replicates: 5})
		if err != nil {
			t.Errorf("seed %d: %v", seed, err)
			continue
		}
		if r.Compound != nil {
			compounds++
		}
		bytes, err := r.JSON()
		if err != nil {
			t.Errorf("seed %d: %v", seed, err)
			continue
		}
		back, err := ReadResult(bytes)
		if err != nil {
			t.Errorf("seed %d: %v", seed, err)
			continue
		}
		if again, _ := back.JSON(); string(again) != string(bytes) {
			t.Errorf("seed %d: not bit for bit", seed)
		}
	}
	t.Logf("%d of %d got a compound", compounds, n)
}
