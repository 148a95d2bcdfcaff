package demo

import (
	"math"
	"strings"
	"testing"
)

// The worked examples of a test on a specimen of 1e5+1e4i N/m: 0.2 kg at 100 Hz
// leaves 21043.165+10000i, a frame of 5e6 N/m 98058.062+9611.651i (computed
// independently in double precision).
func TestMachineFaults(t *testing.T) {
	s := Specimen{"pair", 25, 5}
	k := complex(s.Stiffness(), 0)
	for _, c := range []struct {
		fault Fault
		want  complex128
	}{
		{MovingMass(0.2, s), complex(21043.165, 10000)},
		{SoftFrame(5e6, s), complex(98058.062, 9611.651)},
	} {
		r := Row{Frequency: 100, Modulus: complex(1e5, 1e4) / k}
		c.fault(&r)
		if got := r.Modulus * k; math.Abs(real(got-c.want)) > 1e-3 || math.Abs(imag(got-c.want)) > 1e-3 {
			t.Errorf("got %v, want %v", got, c.want)
		}
	}
	// 2·π/4·(25 mm)²/(5 mm) by hand.
	if got := s.Stiffness(); math.Abs(got-0.19634954) > 1e-8 {
		t.Errorf("%g m", got)
	}
}

func TestSpoil(t *testing.T) {
	plan := HM60Plan()
	good := Campaign(HM60(), plan, 1)
	// No fault changes no byte; nor does what is undone.
	for _, name := range []string{"isotherms.csv", "strain-sweeps.csv", "temperature-sweep.csv"} {
		if string(good.Spoil(name, plan.Digits).Bytes(name)) != string(good.Bytes(name)) {
			t.Errorf("%s changed", name)
		}
	}
	bad := good.Spoil("isotherms.csv", plan.Digits, WrongModulus(3), WrongStrain(2), Slip(5, 6, 0.1, 0))
	was, is := strings.Split(string(good.Bytes("isotherms.csv")), "\n"), strings.Split(string(bad.Bytes("isotherms.csv")), "\n")
	if len(was) != len(is) || was[2] != is[2] || was[4] == is[4] {
		t.Errorf("%s\n%s", was[4], is[4])
	}
	if string(good.Bytes("strain-sweeps.csv")) != string(bad.Bytes("strain-sweeps.csv")) {
		t.Error("another file was changed")
	}
	defer func() {
		if recover() == nil {
			t.Error("a missing table is no fault")
		}
	}()
	good.Spoil("nothing.csv", 0)
}
