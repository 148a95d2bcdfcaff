package specimen

import (
	"math"
	"math/cmplx"
	"testing"

	"pgregory.net/rapid"
)

// The specimen of 1e5 + 1e4i N/m behind 0.2 kg at 100 Hz, and on a frame of
// 5e6 N/m. Computed independently in double precision.
func TestMachine(t *testing.T) {
	k, omega := complex(1e5, 1e4), 2*math.Pi*100
	for _, c := range []struct {
		name     string
		m        Machine
		measured complex128
		tan      float64
	}{
		{"mass", Machine{MovingMass: 0.2}, complex(21043.165, 10000), 0.47521},
		{"frame", Machine{FrameStiffness: 5e6}, complex(98058.062, 9611.651), 0.098020},
	} {
		got, err := c.m.Apply(k, omega)
		if err != nil || cmplx.Abs(got-c.measured) > 1e-3 || math.Abs(imag(got)/real(got)-c.tan) > 1e-5 {
			t.Errorf("%s: measured %v, %v; want %v", c.name, got, err, c.measured)
		}
		back, err := c.m.Correct(got, omega)
		if err != nil || cmplx.Abs(back.Stiffness-k) > 1e-9*cmplx.Abs(k) {
			t.Errorf("%s: back %v, %v", c.name, back, err)
		}
		// tan δ = 0.1 of the specimen. Closed form.
		if want := math.Atan(0.1) - math.Atan(c.tan); math.Abs(back.Phase-want) > 1e-5 {
			t.Errorf("%s: phase %g, want %g", c.name, back.Phase, want)
		}
	}
	c, _ := Machine{MovingMass: 0.2}.Correct(complex(21043.165, 10000), omega)
	near(t, "mass part", c.MassPart, 0.2*omega*omega/math.Hypot(1e5, 1e4), 1e-6)
	c, _ = Machine{FrameStiffness: 5e6}.Correct(complex(98058.062, 9611.651), omega)
	near(t, "frame share", c.FrameShare, math.Hypot(98058.062, 9611.651)/5e6, 1e-9)
}

// A machine of which nothing is stated changes nothing.
func TestNoMachine(t *testing.T) {
	c, err := Machine{}.Correct(complex(3, 1), 1)
	if err != nil || c != (Correction{Stiffness: complex(3, 1)}) {
		t.Errorf("got %+v, %v", c, err)
	}
}

func TestMachineRoundTrip(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		k := complex(rapid.Float64Range(1e3, 1e7).Draw(t, "K1"), rapid.Float64Range(10, 1e6).Draw(t, "K2"))
		m := Machine{
			MovingMass:     rapid.Float64Range(0, 1).Draw(t, "m"),
			FrameStiffness: complex(real(k)*rapid.Float64Range(2, 1000).Draw(t, "ratio"), rapid.Float64Range(0, 1e5).Draw(t, "loss")),
		}
		omega := rapid.Float64Range(0.01, 1).Draw(t, "omega") * math.Sqrt(real(k)/(1e-9+m.MovingMass))
		measured, err := m.Apply(k, omega)
		if err != nil {
			t.Fatal(err)
		}
		c, err := m.Correct(measured, omega)
		if err != nil || cmplx.Abs(c.Stiffness-k) > 1e-12*cmplx.Abs(k) {
			t.Fatalf("%v became %v, %v", k, c.Stiffness, err)
		}
	})
}

func TestMachineRefuses(t *testing.T) {
	nan, inf := math.NaN(), math.Inf(1)
	for _, c := range []struct {
		m     Machine
		k     complex128
		omega float64
		want  string
	}{
		{Machine{MovingMass: -1}, 1, 1, "moving mass"},
		{Machine{MovingMass: nan}, 1, 1, "moving mass"},
		{Machine{FrameStiffness: -5}, 1, 1, "frame stiffness"},
		{Machine{FrameStiffness: complex(nan, 0)}, 1, 1, "frame stiffness"},
		{Machine{FrameStiffness: complex(inf, 0)}, 1, 1, "frame stiffness"},
		{Machine{FrameStiffness: complex(5, -1)}, 1, 1, "frame stiffness"},
		{Machine{}, 1, 0, "angular frequency"},
		{Machine{}, 1, nan, "angular frequency"},
		{Machine{}, complex(nan, 0), 1, "not a finite number"},
		{Machine{FrameStiffness: 5}, 6, 1, "not below the frame's"},
	} {
		got, err := c.m.Correct(c.k, c.omega)
		refused(t, err, c.want)
		if got != (Correction{}) {
			t.Errorf("%s: a correction came with the error", c.want)
		}
	}
	_, err := Machine{MovingMass: 2, FrameStiffness: 1}.Apply(1, 1) // inner = −1 = −K_f
	refused(t, err, "resonate")
}
