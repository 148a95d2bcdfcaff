package fitting

import (
	"math"
	"reflect"
	"strings"
	"testing"

	"phaselag/data"
	"phaselag/data/demo"
)

func open(t *testing.T, truth demo.Truth, plan demo.Plan, seed uint64) *data.Campaign {
	t.Helper()
	c, err := data.OpenFS(demo.Campaign(truth, plan, seed), "campaign.yaml")
	if err != nil {
		t.Fatal(err)
	}
	return c
}

// TestBootstrap: campaigns drawn from the compound scatter as the linearised
// uncertainties say, and the answer does not depend on the number of workers.
func TestBootstrap(t *testing.T) {
	if testing.Short() {
		t.Skip("a simulation of its own, left out with -short")
	}
	c := open(t, demo.Gum(), demo.IsothermPlan(), 21)
	const n = 200
	a, err := Characterize(c, &Settings{Replicates: -1, Bootstrap: n, Workers: 1})
	if err != nil {
		t.Fatal(err)
	}
	b, err := Characterize(c, &Settings{Replicates: -1, Bootstrap: n, Workers: 3})
	if err != nil {
		t.Fatal(err)
	}
	if !reflect.DeepEqual(a.Bootstrap, b.Bootstrap) {
		t.Error("one and three workers give different draws")
	}
	if a.Bootstrap.Failed > 0 || len(a.Bootstrap.Rows) < 10 {
		t.Fatalf("%d draws failed, %d quantities", a.Bootstrap.Failed, len(a.Bootstrap.Rows))
	}
	// The standard deviation of 200 draws is known to 5 %.
	for _, q := range a.Bootstrap.Rows {
		if ratio := float64(q.Scatter) / float64(q.U); ratio < 0.8 || ratio > 1.2 {
			t.Errorf("%s scatters by %.3g, %.3g is stated", q.Quantity, float64(q.Scatter), float64(q.U))
		}
		if math.Abs(float64(q.Bias)) > 0.35*float64(q.U) {
			t.Errorf("%s is off by %.3g in the mean, with u %.3g", q.Quantity, float64(q.Bias), float64(q.U))
		}
		if !(q.Low < q.Value && q.Value < q.High) {
			t.Errorf("%s: %g is not between %g and %g", q.Quantity, q.Value, q.Low, q.High)
		}
	}
}

// TestProfile: with many temperatures the profile interval of the WLF constants is
// the linearised one, with few it leans to the side of larger constants, to which
// the law is nearly blind.
func TestProfile(t *testing.T) {
	half := func(r *Result, name string) (down, up, u95 float64) {
		for _, p := range r.Parameters {
			if p.Name == name {
				return float64(p.Value - p.Low), float64(p.High - p.Value), float64(p.U95)
			}
		}
		t.Fatalf("no %s", name)
		return 0, 0, 0
	}
	r, err := Characterize(open(t, demo.Gum(), demo.IsothermPlan(), 3), &Settings{Replicates: -1})
	if err != nil {
		t.Fatal(err)
	}
	for _, name := range []string{"C1", "C2"} {
		down, up, u95 := half(r, name)
		if math.Abs(down/u95-1) > 0.2 || math.Abs(up/u95-1) > 0.2 || !(up > down) {
			t.Errorf("%s: −%.3g +%.3g by profile, ± %.3g linearised", name, down, up, u95)
		}
	}
	few := demo.IsothermPlan()
	for i := range few.Tests {
		if len(few.Tests[i].Temperatures) > 5 {
			few.Tests[i].Temperatures = few.Tests[i].Temperatures[4:9]
		}
	}
	if r, err = Characterize(open(t, demo.Gum(), few, 3), &Settings{Replicates: -1}); err != nil {
		t.Fatal(err)
	}
	if len(r.Parameters) == 0 || r.Parameters[0].Name != "C1" {
		t.Skip("another law")
	}
	if down, up, _ := half(r, "C1"); !math.IsNaN(up) && up < 1.15*down {
		t.Errorf("C1 with five temperatures: −%.3g +%.3g", down, up)
	}
}

// TestCausality: sound isotherms pass, a phase that is off by one and a half degrees
// does not, and the phase is named.
func TestCausality(t *testing.T) {
	alarms := 0
	const n = 12
	for seed := range uint64(n) {
		c := open(t, demo.Gum(), demo.IsothermPlan(), 300+seed)
		r, err := Characterize(c, &Settings{Replicates: -1})
		if err != nil {
			t.Fatal(err)
		}
		if len(r.Causality) != len(r.Shifts) {
			t.Fatalf("%d verdicts of %d isotherms", len(r.Causality), len(r.Shifts))
		}
		for _, f := range r.Findings {
			if f.Code == "isotherm-not-causal" {
				alarms++
			}
		}
	}
	if alarms > 1 {
		t.Errorf("%d alarms in %d sound campaigns", alarms, n)
	}
	c := open(t, demo.Gum(), demo.IsothermPlan(), 300)
	turn := func(x *data.Point) {
		d := 1.5 * math.Pi / 180
		g := complex(x.Storage, x.Loss) * complex(math.Cos(d), math.Sin(d))
		x.Storage, x.Loss = real(g), imag(g)
	}
	for _, r := range isothermsOf(c) {
		for k := range r.Points {
			turn(&r.Points[k])
		}
	}
	r, err := Characterize(c, &Settings{Replicates: -1})
	if err != nil {
		t.Fatal(err)
	}
	for _, f := range r.Findings {
		if f.Code == "isotherm-not-causal" {
			if !strings.Contains(f.Cause, "offset of the phase") {
				t.Errorf("the phase is not named: %s", f.Cause)
			}
			return
		}
	}
	t.Error("a phase off by 1.5° is not seen")
}
