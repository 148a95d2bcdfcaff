package reports

import (
	"fmt"
	"math"
	"math/cmplx"
	"math/rand/v2"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"

	"phaselag/models"
)

// variants are compounds with every law, from the demonstration's.
func variants(t *testing.T) map[string]*models.Compound {
	t.Helper()
	base := demoResult(t, 1).Compound
	out := map[string]*models.Compound{"as characterized": base}
	add := func(name string, change func(c *models.Compound)) {
		c := *base
		c.Uncertainty.Parameters, c.Uncertainty.Cholesky = nil, nil
		change(&c)
		v, err := models.New(c)
		if err != nil {
			t.Fatal(name, err)
		}
		out[name] = v
	}
	some := func(x float64) *float64 { return &x }
	add("Arrhenius, density", func(c *models.Compound) {
		c.Shift.Law, c.Shift.Activation = models.LawArrhenius, 60
		c.Vertical.Law, c.Vertical.Expansion = models.VerticalDensity, 6.6e-4
	})
	add("crossover, extra loss", func(c *models.Compound) {
		c.Shift.Law, c.Shift.Crossover = models.LawCrossover, some(-10)
		c.Amplitude.Law, c.Amplitude.ExtraLoss, c.Amplitude.ExtraStrain = models.AmplitudeExtraLoss, some(0.05), some(0.3)
	})
	add("factors, vertical, Maier–Göritz scaling", func(c *models.Compound) {
		c.Shift.Law = models.LawNone
		c.Vertical.Law = models.VerticalFactors
		c.Vertical.Factors = []models.VerticalFactor{{TemperatureC: -40, B: 0.9}, {TemperatureC: 20, B: 1}, {TemperatureC: 80, B: 1.1}}
		c.Amplitude.Law, c.Amplitude.Coupling = models.AmplitudeMaierGoritz, models.Scaling
		c.Amplitude.StorageRatio, c.Amplitude.LossRatio = some(0.5), some(0.06)
	})
	add("no filler", func(c *models.Compound) {
		c.Amplitude.Law = models.AmplitudeNone
	})
	return out
}

// TestCSource compiles the C source of compounds with every law and compares it
// with Compound.Value to 1e-12 at random conditions, and its verdict on the domain.
func TestCSource(t *testing.T) {
	cc, err := exec.LookPath("cc")
	if err != nil {
		t.Skip("no C compiler here")
	}
	rnd := rand.New(rand.NewPCG(4, 2))
	for name, c := range variants(t) {
		source, err := CSource(c)
		if err != nil {
			t.Fatal(name, err)
		}
		dir := t.TempDir()
		var q []models.Condition
		main := "#include <stdio.h>\nint phaselag_modulus(double, double, double, double *, double *);\nint main(void)\n{\n    double re, im;\n    int r;\n"
		for range 300 {
			v := models.Condition{Frequency: math.Pow(10, -3+6*rnd.Float64()), Temperature: 225 + 140*rnd.Float64(), Strain: math.Pow(10, -3.5+3*rnd.Float64())}
			q = append(q, v)
			main += fmt.Sprintf("    r = phaselag_modulus(%.17g, %.17g, %.17g, &re, &im);\n    printf(\"%%d %%.17g %%.17g\\n\", r, re, im);\n", v.Frequency, v.Temperature, v.Strain)
		}
		main += "    return 0;\n}\n"
		for file, text := range map[string]string{"compound.c": string(source), "main.c": main} {
			if err := os.WriteFile(filepath.Join(dir, file), []byte(text), 0o666); err != nil {
				t.Fatal(err)
			}
		}
		binary := filepath.Join(dir, "a.out")
		if b, err := exec.Command(cc, "-std=c99", "-Wall", "-Wextra", "-Werror", "-pedantic", "-O2", "-o", binary, filepath.Join(dir, "compound.c"), filepath.Join(dir, "main.c"), "-lm").CombinedOutput(); err != nil {
			t.Fatalf("%s: %v\n%s", name, err, b)
		}
		b, err := exec.Command(binary).Output()
		if err != nil {
			t.Fatal(name, err)
		}
		lines := strings.Split(strings.TrimSpace(string(b)), "\n")
		for i, v := range q {
			var r int
			var re, im float64
			if _, err := fmt.Sscan(lines[i], &r, &re, &im); err != nil {
				t.Fatal(err)
			}
			want := c.Value(v)
			if r == 2 {
				if real(want) > 0 && !cmplx.IsInf(want) {
					t.Errorf("%s at %+v: no value, should be %v", name, v, want)
				}
				continue
			}
			if d := cmplx.Abs(complex(re, im) - want); d > 1e-12*cmplx.Abs(want) {
				t.Errorf("%s at %+v: %v, should be %v", name, v, complex(re, im), want)
			}
			if inside := c.Inside(v) == nil; inside != (r == 0) {
				t.Errorf("%s at %+v: answer %d, inside %t (%v)", name, v, r, inside, c.Inside(v))
			}
		}
	}
}
