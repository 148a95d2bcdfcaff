package models

import (
	"math"
	"math/cmplx"
	"testing"

	"pgregory.net/rapid"
)

// valueAt is G* with a parameter moved by e: the common errors act on the
// answer (factor) or on the temperature, the rest on the fields.
func valueAt(t rapid.TB, c *Compound, q Condition, name string, e float64) complex128 {
	switch name {
	case ParamSpecimen:
		return c.Value(q) * complex(1+e, 0)
	case ParamTemperature:
		q.Temperature -= e
		return c.Value(q)
	case ParamPhase:
		return c.Value(q)
	}
	return moved(t, c, map[string]float64{name: e}).Value(q)
}

// Every parameter's derivative against central differences, for every law.
func TestGradientAgainstDifferences(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		c := mustNew(t, anyCompound(t))
		q := anyCondition(t, c)
		// The interpolation between given factors has kinks of the second
		// derivative at its knots; the step of temperature must not straddle one.
		g := make([]complex128, len(c.Uncertainty.Parameters))
		value := c.Gradient(q, g)
		if e := cmplx.Abs(value - c.Value(q)); e > 1e-13*cmplx.Abs(value) {
			t.Fatalf("Gradient returns %v, Value %v", value, c.Value(q))
		}
		for i, name := range c.Uncertainty.Parameters {
			size := 1.0
			if p := field(c, name); p != nil {
				size = math.Max(math.Abs(*p), 0.1)
			}
			h := 1e-5 * size
			d := (valueAt(t, c, q, name, h) - valueAt(t, c, q, name, -h)) / complex(2*h, 0)
			if e := cmplx.Abs(d - g[i]); e > 1e-5*cmplx.Abs(g[i])+1e-8*cmplx.Abs(value)/size {
				t.Errorf("%s: %.9g, differences %.9g", name, g[i], d)
			}
		}
	})
}

// The answer is linear in the moduli: it is the sum of its own parts.
func TestGradientOfLinearParts(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		c := mustNew(t, anyCompound(t))
		q := anyCondition(t, c)
		g := make([]complex128, len(c.Uncertainty.Parameters))
		value := c.Gradient(q, g)
		var sum complex128
		for i, name := range c.Uncertainty.Parameters {
			switch c.derived.params[i].kind {
			case pEquilibrium, pBranch, pStorage, pLoss, pExtraLoss:
				sum += g[i] * complex(*field(c, name), 0)
			case pSpecimen:
				if g[i] != value {
					t.Errorf("a factor of the specimen moves G* by %v, not by G* = %v", g[i], value)
				}
			case pPhase:
				if g[i] != 0 {
					t.Error("the common phase error moves the answer")
				}
			}
		}
		if cmplx.Abs(sum-value) > 1e-12*cmplx.Abs(value) {
			t.Errorf("the parts make %v, not %v", sum, value)
		}
	})
}

// Colder than the reference means a_T > 1 and f_R = f·a_T: a polymer without
// filler and vertical shift has the same modulus at f and T as at f·a_T and
// T_ref, and cooling never softens it.
func TestReducedFrequency(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		in := anyCompound(t)
		in.Amplitude.Law = AmplitudeNone
		in.Vertical.Law = VerticalNone
		if in.Shift.Law == LawNone {
			in.Shift = Shift{Law: LawWLF, C1: 6, C2: 150}
		}
		withCovariance(&in, 0.01)
		c := mustNew(t, in)
		q := anyCondition(t, c)
		reference := c.ReferenceTempC + zeroC
		logA := c.LogShift(q.Temperature)
		if (q.Temperature < reference && !(logA > 0)) || (q.Temperature > reference && !(logA < 0)) {
			t.Errorf("log a_T = %g at %g K, reference %g K", logA, q.Temperature, reference)
		}
		r := Condition{Frequency: q.Frequency * math.Pow(10, logA), Temperature: reference, Strain: math.NaN()}
		if a, b := c.Value(q), c.Value(r); cmplx.Abs(a-b) > 1e-11*cmplx.Abs(a) {
			t.Errorf("%v at %+v, %v at the reduced frequency", a, q, b)
		}
		cold := q
		cold.Temperature -= 1
		if real(c.Value(cold)) < real(c.Value(q))*(1-1e-14) {
			t.Errorf("softer when colder: %g, %g", real(c.Value(cold)), real(c.Value(q)))
		}
	})
}
