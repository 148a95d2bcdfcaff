package models

import (
	"math"
	"math/cmplx"
	"testing"
)

// plainValue is the model written out once more, without any of the kernels.
func plainValue(c *Compound, f, celsius, gamma float64) complex128 {
	d := celsius - c.ReferenceTempC
	T, T0 := celsius+zeroC, c.ReferenceTempC+zeroC
	a := math.Pow(10, -float64(c.Shift.C1)*d/(float64(c.Shift.C2)+d))
	g := complex(c.Linear.Equilibrium, 0)
	for _, b := range c.Linear.Branches {
		x := complex(0, 2*math.Pi*f*a*b.Time)
		g += complex(b.Modulus, 0) * x / (1 + x)
	}
	g *= complex(T/T0/(1+float64(c.Vertical.Expansion)*d), 0)
	r := math.Pow(gamma/(float64(c.Amplitude.Critical)/100), float64(c.Amplitude.Exponent))
	phi := math.Exp(float64(c.Amplitude.Activation) * 1e3 / 8.31446261815324 * (1/T - 1/T0))
	loss := phi * float64(c.Amplitude.Loss) * 2 * r / (1 + r*r)
	storage := phi*float64(c.Amplitude.Storage)/(1+r*r) + loss*2/math.Pi*math.Log(f/float64(c.Amplitude.ReferenceFrequency))
	return (g + complex(storage, loss)) * 1e6
}

func TestValueWrittenOut(t *testing.T) {
	c := mustNew(t, sample())
	for _, f := range []float64{0.1, 1, 10, 200} {
		for _, celsius := range []float64{-40, -10, 23, 80} {
			for _, gamma := range []float64{0.002, 0.012, 0.2} {
				checkValue(t, c, c.Value(Condition{f, celsius + zeroC, gamma}), f, celsius, gamma)
			}
		}
	}
	if n := testing.AllocsPerRun(100, func() { sink = c.Value(Condition{10, 250, 0.01}) }); n != 0 {
		t.Errorf("Value allocates %g times", n)
	}
}

func checkValue(t testing.TB, c *Compound, got complex128, f, celsius, gamma float64) {
	t.Helper()
	if want := plainValue(c, f, celsius, gamma); cmplx.Abs(got-want) > 1e-12*cmplx.Abs(want) {
		t.Errorf("G*(%g Hz, %g °C, %g) = %.14g, want %.14g", f, celsius, gamma, got, want)
	}
}

var sink complex128

// BenchmarkValue is one modulus without interval: 30 branches, WLF, density,
// causal Kraus.
func BenchmarkValue(b *testing.B) {
	c := mustNew(b, sample())
	b.ReportAllocs()
	for b.Loop() {
		sink = c.Value(Condition{17, 10 + zeroC, 0.004})
	}
	checkValue(b, c, sink, 17, 10, 0.004)
}

// BenchmarkModulus is one modulus with four intervals from 41 parameters.
func BenchmarkModulus(b *testing.B) {
	c := mustNew(b, sample())
	var m Modulus
	b.ReportAllocs()
	for b.Loop() {
		var err error
		if m, err = c.Modulus(Condition{17, 10 + zeroC, 0.004}); err != nil {
			b.Fatal(err)
		}
	}
	checkValue(b, c, complex(m.Storage, m.Loss), 17, 10, 0.004)
}

func BenchmarkRead(b *testing.B) {
	y, err := mustNew(b, sample()).YAML()
	if err != nil {
		b.Fatal(err)
	}
	b.SetBytes(int64(len(y)))
	for b.Loop() {
		if _, err := Read(y); err != nil {
			b.Fatal(err)
		}
	}
}
