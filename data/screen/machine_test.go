package screen

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"phaselag/data"
	"phaselag/data/demo"
)

// spoiled is a campaign of one table in which faults act.
func spoiled(t *testing.T, truth demo.Truth, plan demo.Plan, seed uint64, table string, faults ...demo.Fault) *data.Campaign {
	t.Helper()
	return read(t, plan, demo.Campaign(truth, plan, seed).Spoil(table, plan.Digits, faults...))
}

// with returns the first finding with a code.
func with(list []data.Finding, code string) (data.Finding, bool) {
	for _, f := range list {
		if f.Code == code {
			return f, true
		}
	}
	return data.Finding{}, false
}

// A mass takes mω² from the stiffness: at 50 Hz 0.1 kg is 9.87 N/mm of the
// specimen's 390. It must be found from 0.3 kg on and named within 30 %, and
// 0.03 kg must not be.
func TestMassNotCorrected(t *testing.T) {
	piece := demo.HM60Plan().Specimens[0]
	for _, truth := range []demo.Truth{demo.HM60(), demo.Gum(), demo.Complex()} {
		for seed := uint64(1); seed <= 5; seed++ {
			for _, kg := range []float64{0, 0.03, 0.3, 0.6} {
				list := massNotCorrected(spoiled(t, truth, demo.IsothermPlan(), seed, "isotherms.csv", demo.MovingMass(kg, piece)))
				f, ok := with(list, "inertia-not-corrected")
				if ok != (kg > 0.1) {
					t.Errorf("%s, seed %d, %g kg: %v", truth.Name, seed, kg, list)
				}
				if !ok {
					continue
				}
				var m, u float64
				if _, err := fmt.Sscanf(f.Evidence[strings.Index(f.Evidence, "a mass of"):], "a mass of (%g ± %g)", &m, &u); err != nil {
					t.Fatalf("%s: %v", f.Evidence, err)
				}
				if math.Abs(m-kg) > math.Min(0.3*kg, u) || kg == 0.6 && f.Severity != data.Severe {
					t.Errorf("%s, seed %d, %g kg: %s %s", truth.Name, seed, kg, f.Severity, f.Evidence)
				}
			}
		}
	}
	// Without a described specimen the coefficient is all that can be said.
	c := spoiled(t, demo.Gum(), demo.IsothermPlan(), 1, "isotherms.csv", demo.MovingMass(0.6, piece))
	c.Specimens = nil
	if f := find(t, massNotCorrected(c), "inertia-not-corrected"); strings.Contains(f.Evidence, "kg") {
		t.Errorf("%+v", f)
	}
	// A stated mass that is too small has its own cause.
	each(&c.Tests[0], func(p *data.Point) { p.MassShare = 0.01 })
	if f := find(t, massNotCorrected(c), "inertia-not-corrected"); !strings.Contains(f.Cause, "too small") {
		t.Errorf("%+v", f)
	}
}

// A frame of 10 kN/mm beside a piece that would have 120 kN/mm in its glass. Its
// own 1000 kN/mm are rigid.
func TestFrameNotCorrected(t *testing.T) {
	plan := demo.IsothermPlan()
	plan.Tests[0].Temperatures = demo.Steps(-70, 80, 10)
	piece := plan.Specimens[0]
	for _, truth := range []demo.Truth{demo.HM60(), demo.Gum()} {
		for seed := uint64(1); seed <= 5; seed++ {
			clean(t, "rigid", frameNotCorrected(spoiled(t, truth, plan, seed, "isotherms.csv", demo.SoftFrame(1e9, piece))))
			f := find(t, frameNotCorrected(spoiled(t, truth, plan, seed, "isotherms.csv", demo.SoftFrame(1e7, piece))), "frame-not-corrected")
			var k float64
			if i := strings.Index(f.Evidence, "a frame of"); i < 0 {
				t.Errorf("%s", f.Evidence)
			} else if _, err := fmt.Sscanf(f.Evidence[i:], "a frame of %g", &k); err != nil || math.Abs(k-1e4) > 1000 || f.Severity != data.Doubt {
				t.Errorf("%g N/mm: %s %s", k, f.Severity, f.Evidence)
			}
		}
	}
	// A warm window never comes near the frame.
	clean(t, "warm", frameNotCorrected(spoiled(t, demo.HM60(), demo.IsothermPlan(), 1, "isotherms.csv", demo.SoftFrame(1e7, piece))))
	// A second piece of half the thickness runs against half the modulus: the frame.
	plan = demo.HM60Plan().Only("isotherms", "temperature sweep")
	plan.Tests[0].Temperatures = demo.Steps(-70, 80, 10)
	plan.Tests[1].Temperatures = demo.Steps(-70, 80, 1)
	plan.Specimens[1].Thickness = 2.5
	plan.Tests[1].Specimen = "pair-2"
	files := demo.Campaign(demo.HM60(), plan, 1)
	both := files.Spoil("isotherms.csv", 5, demo.SoftFrame(1e7, piece)).Spoil("temperature-sweep.csv", 5, demo.SoftFrame(1e7, plan.Specimens[1]))
	list := frameNotCorrected(read(t, plan, both))
	if len(list) != 2 {
		t.Errorf("%d findings for two pieces beside a soft frame", len(list))
	}
	for _, f := range list {
		if f.Severity != data.Severe || !strings.Contains(f.Evidence, "the same") {
			t.Errorf("%+v", f)
		}
	}
	// The same modulus on both would be a glass.
	same := files.Spoil("isotherms.csv", 5, demo.SoftFrame(1e7, piece)).Spoil("temperature-sweep.csv", 5, demo.SoftFrame(2e7, plan.Specimens[1]))
	if list = frameNotCorrected(read(t, plan, same)); len(list) != 2 {
		t.Errorf("%d findings for two pieces with one plateau", len(list))
	}
	for _, f := range list {
		if f.Severity == data.Severe {
			t.Errorf("%+v", f)
		}
	}
}
