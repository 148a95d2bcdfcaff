package screen

import (
	"math"
	"slices"
	"strings"
	"testing"

	"phaselag/data"
	"phaselag/data/demo"
)

// A good laboratory raises nothing, whatever the material.
func TestGoodLaboratoriesAreClean(t *testing.T) {
	for seed := uint64(1); seed <= 20; seed++ {
		clean(t, "HM-60", Check(campaign(t, demo.HM60(), demo.HM60Plan(), seed)))
		clean(t, "gum", Check(campaign(t, demo.Gum(), demo.HM60Plan(), seed)))
		// Its glass of 60 MPa is one that no rubber has.
		clean(t, "narrow", Check(campaign(t, demo.Narrow(), demo.NarrowPlan(), seed)), "frame-not-corrected")
		clean(t, "liquid", Check(campaign(t, demo.Liquid(), demo.LiquidPlan(), seed)))
		clean(t, "no superposition", Check(campaign(t, demo.Complex(), demo.IsothermPlan(), seed)))
	}
	clean(t, "empty", Check(&data.Campaign{}))
	clean(t, "noiseless", Check(campaign(t, demo.HM60(), demo.HM60Plan().Noiseless(), 1)))
}

// The density law makes a gum on its plateau softer when colder: no finding.
func TestEntropyElasticRubberIsClean(t *testing.T) {
	truth := demo.Gum()
	truth.Density, truth.Expansion = true, 6.6e-4
	truth.Processes = truth.Processes[1:]
	c := isothermsOf(t, truth, demo.Steps(20, 100, 20), demo.Decades(0.5, 50, 21))
	// Its flat isotherms hardly overlap, which is true and said.
	clean(t, "entropic", Check(c), "isotherms-do-not-overlap", "isotherms-barely-overlap")
}

// Findings come in one order, and Check changes nothing.
func TestCheckIsDeterministic(t *testing.T) {
	c := campaign(t, demo.HM60(), demo.HM60Plan(), 2)
	each(&c.Tests[0], func(p *data.Point) { p.Storage, p.Loss = p.Loss, p.Storage })
	a, b := Check(c), Check(c)
	if !slices.Equal(a, b) || len(a) == 0 {
		t.Error("two checks differ")
	}
}

func TestUnits(t *testing.T) {
	c := campaign(t, demo.HM60(), demo.IsothermPlan(), 1)
	each(&c.Tests[0], func(p *data.Point) { p.Storage *= 1e3; p.Loss *= 1e3 })
	if f := find(t, Check(c), "modulus-too-high"); f.Severity != data.Severe || f.Rows == "" {
		t.Errorf("%+v", f)
	}
	c = campaign(t, demo.HM60(), demo.IsothermPlan(), 1)
	each(&c.Tests[0], func(p *data.Point) { p.Storage *= 1e-6; p.Loss *= 1e-6; p.Strain *= 1000 })
	list := Check(c)
	find(t, list, "modulus-too-low")
	find(t, list, "strain-too-high")
	// A glass of 3 GPa, a soft rubber of 0.1 MPa, a strain of 50 %: none.
	each(&c.Tests[0], func(p *data.Point) { p.Storage, p.Loss, p.Strain = p.Storage*1e5, p.Loss*1e5, 0.5 })
	clean(t, "soft", units(c))
	each(&c.Tests[0], func(p *data.Point) { p.Storage, p.Loss = 3e9, 1e7 })
	clean(t, "glass", units(c))
}

func TestStatedLossFactor(t *testing.T) {
	base := func() *data.Campaign { return campaign(t, demo.HM60(), demo.IsothermPlan(), 1) }
	c := base()
	c.Tests[0].Runs[3].Points[4].StatedLossFactor *= 1.03
	f := find(t, Check(c), "stated-loss-factor-differs")
	if f.Severity != data.Doubt || f.Rows != "isotherms.csv:71" {
		t.Errorf("%+v", f)
	}
	// Written with two decimals: rounding explains up to 0.005.
	c = base()
	each(&c.Tests[0], func(p *data.Point) { p.StatedLossFactor = math.Round(p.StatedLossFactor*100) / 100 })
	clean(t, "rounded", Check(c))
	c.Tests[0].Runs[12].Points[4].StatedLossFactor += 0.01
	find(t, Check(c), "stated-loss-factor-differs")
	// All of them wrong by a factor, and storage by loss.
	c = base()
	each(&c.Tests[0], func(p *data.Point) { p.StatedLossFactor *= 1.2 })
	if f := find(t, Check(c), "stated-loss-factor-differs"); f.Severity != data.Severe || !strings.Contains(f.Evidence, "1.2") {
		t.Errorf("%+v", f)
	}
	c = base()
	each(&c.Tests[0], func(p *data.Point) { p.StatedLossFactor = 1 / p.StatedLossFactor })
	if f := find(t, Check(c), "stated-loss-factor-differs"); !strings.Contains(f.Cause, "changed places") {
		t.Errorf("%+v", f)
	}
}

func TestSwapped(t *testing.T) {
	exchange := func(p *data.Point) { p.Storage, p.Loss = p.Loss, p.Storage }
	for _, truth := range []demo.Truth{demo.HM60(), demo.Gum()} {
		c := campaign(t, truth, demo.IsothermPlan(), 1)
		each(&c.Tests[0], exchange)
		if f := find(t, Check(c), "storage-and-loss-swapped"); f.Severity != data.Severe {
			t.Errorf("%+v", f)
		}
	}
	// A liquid's angle of 85° is its own; exchanged it is found, too.
	c := campaign(t, demo.Liquid(), demo.LiquidPlan(), 1)
	if angle(c.Tests[0].Runs[6].Points[0]) < 80 {
		t.Error("the liquid does not flow")
	}
	clean(t, "liquid", swapped(c))
	each(&c.Tests[0], exchange)
	find(t, swapped(c), "storage-and-loss-swapped")
	// At one frequency: dispersion is taken from temperature.
	sweep := demo.HM60Plan().Only("temperature sweep")
	sweep.Tests[0].Temperatures = demo.Steps(0, 80, 2)
	c = campaign(t, demo.HM60(), sweep, 1)
	clean(t, "sweep", swapped(c))
	each(&c.Tests[0], exchange)
	find(t, swapped(c), "storage-and-loss-swapped")
	sweep.Tests[0].Temperatures = demo.Steps(30, 70, 2)
	clean(t, "liquid sweep", swapped(campaign(t, demo.Liquid(), sweep, 1)))
}

func TestDuplicates(t *testing.T) {
	c := campaign(t, demo.HM60(), demo.IsothermPlan(), 1)
	r := &c.Tests[0].Runs[2]
	copied := r.Points[5]
	copied.Row = 500
	r.Points = append(r.Points, copied)
	if f := find(t, Check(c), "duplicate-rows"); f.Severity != data.Note || f.Rows != "isotherms.csv:500" {
		t.Errorf("%+v", f)
	}
	r.Points[len(r.Points)-1].Loss *= 1.001
	clean(t, "repeat", duplicates(c))
	c.Tests[0].Runs = append(c.Tests[0].Runs, c.Tests[0].Runs[0])
	if f := find(t, Check(c), "duplicate-rows"); f.Severity != data.Doubt {
		t.Errorf("%+v", f)
	}
}

func TestTemperatures(t *testing.T) {
	for _, c := range []struct {
		off, drift float64
		code       string
		severity   data.Severity
	}{
		{0.9, 0, "", ""}, {-1.4, 0, "temperature-off-nominal", data.Doubt}, {2.5, 0, "temperature-off-nominal", data.Severe},
		{0, 0.9, "", ""}, {0, 1.8, "temperature-drifts", data.Doubt},
	} {
		k := campaign(t, demo.HM60(), demo.IsothermPlan(), 1)
		r := &k.Tests[0].Runs[5]
		for i := range r.Points {
			r.Points[i].Temperature += c.off + c.drift*(float64(i)/float64(len(r.Points)-1)-0.5)
		}
		list := temperatures(k)
		if c.code == "" {
			clean(t, "settled", list)
			continue
		}
		if f := find(t, list, c.code); f.Severity != c.severity || f.Rows != "isotherms.csv:109-129" {
			t.Errorf("%+v", f)
		}
		if len(list) != 1 {
			t.Errorf("%d findings", len(list))
		}
	}
}

func TestStrains(t *testing.T) {
	c := campaign(t, demo.HM60(), demo.IsothermPlan(), 1)
	p := &c.Tests[0].Runs[1].Points[20]
	p.Strain *= 0.9
	clean(t, "a tenth", strains(c))
	p.Strain *= 0.5
	if f := find(t, Check(c), "strain-not-constant"); f.Severity != data.Doubt || !strings.Contains(f.Evidence, "1 of 13") {
		t.Errorf("%+v", f)
	}
	each(&c.Tests[0], func(p *data.Point) { p.Strain /= 4 })
	if f := find(t, Check(c), "strain-not-constant"); f.Severity != data.Note {
		t.Errorf("%+v", f)
	}
}

func TestFalling(t *testing.T) {
	// The moving mass that nobody subtracted: G' minus something that grows with f².
	inertia := func(share float64) *data.Campaign {
		c := campaign(t, demo.HM60(), demo.IsothermPlan(), 1)
		each(&c.Tests[0], func(p *data.Point) {
			p.Storage -= share * 2e6 * p.Frequency * p.Frequency / 2500
			p.StatedLossFactor = math.NaN()
		})
		return c
	}
	find(t, Check(inertia(0.3)), "storage-modulus-falls")
	list := falling(inertia(0.3))
	if f := list[len(list)-1]; f.Severity != data.Severe || !strings.HasPrefix(f.Rows, "isotherms.csv:") || !strings.HasPrefix(f.Evidence, "isotherms, 80 °C") {
		t.Errorf("%+v", f)
	}
	clean(t, "little inertia", Check(inertia(0.02)))
	// One point that falls is noise.
	c := campaign(t, demo.HM60(), demo.IsothermPlan(), 1)
	c.Tests[0].Runs[9].Points[10].Storage *= 0.985
	clean(t, "one point", falling(c))
}

func TestFewPoints(t *testing.T) {
	c := isothermsOf(t, demo.HM60(), demo.Steps(-40, 80, 10), demo.Decades(0.5, 50, 5))
	if f := find(t, Check(c), "few-points"); !strings.Contains(f.Evidence, "13 of 13") || !strings.Contains(f.Evidence, "and 9 more") {
		t.Errorf("%+v", f)
	}
	c = isothermsOf(t, demo.HM60(), demo.Steps(-40, 80, 10), demo.Decades(0.5, 50, 9))
	find(t, Check(c), "few-points-a-decade")
	c = isothermsOf(t, demo.HM60(), demo.Steps(-40, 80, 10), demo.Decades(0.5, 50, 11))
	clean(t, "five a decade", Check(c))
	c = isothermsOf(t, demo.HM60(), demo.Steps(-40, 80, 10), demo.Decades(5, 20, 6))
	clean(t, "six in half a decade", fewPoints(c))
	// Points that are not used do not count.
	for i := range c.Tests[0].Runs {
		c.Tests[0].Runs[i].Points[2].Used = false
	}
	find(t, Check(c), "few-points")
}

func TestRepeats(t *testing.T) {
	again := func(factor, turn float64) *data.Campaign {
		c := campaign(t, demo.HM60(), demo.IsothermPlan(), 1)
		other := campaign(t, demo.HM60(), demo.IsothermPlan(), 2).Tests[0]
		other.Name = "again"
		sin, cos := math.Sincos(turn * math.Pi / 180)
		each(&other, func(p *data.Point) {
			p.Storage, p.Loss = factor*(p.Storage*cos-p.Loss*sin), factor*(p.Loss*cos+p.Storage*sin)
		})
		other.Runs = other.Runs[6:8]
		c.Tests = append(c.Tests, other)
		return c
	}
	clean(t, "agreeing", Check(again(1, 0)))
	if f := find(t, Check(again(1.08, 0)), "repeats-disagree"); f.Test != "again" || f.Severity != data.Doubt {
		t.Errorf("%+v", f)
	}
	find(t, Check(again(1, 2)), "repeats-disagree")
	if f := find(t, Check(again(1.3, 0)), "repeats-disagree"); f.Severity != data.Severe {
		t.Errorf("%+v", f)
	}
	// Another strain is another condition.
	c := again(1.08, 0)
	each(&c.Tests[1], func(p *data.Point) { p.Strain *= 2 })
	for i := range c.Tests[1].Runs {
		c.Tests[1].Runs[i].Strain *= 2
	}
	clean(t, "another strain", repeats(c))
}

func TestOverlap(t *testing.T) {
	hertz := demo.Decades(1, 20, 14)
	c := isothermsOf(t, demo.Gum(), []float64{-60, -45, -30, 0, 40}, hertz)
	f := find(t, Check(c), "isotherms-do-not-overlap")
	if f.Severity != data.Severe || !strings.Contains(f.Evidence, "−60 °C and −45 °C") {
		t.Errorf("%+v", f)
	}
	// One isotherm in between joins them.
	for _, f := range overlap(isothermsOf(t, demo.Gum(), []float64{-60, -52.5, -45}, hertz)) {
		if f.Severity == data.Severe {
			t.Errorf("joined isotherms: %+v", f)
		}
	}
	clean(t, "joined", overlap(isothermsOf(t, demo.Gum(), demo.Steps(-60, -40, 5), hertz)))
	// Two isotherms that share only their ends.
	two := isothermsOf(t, demo.Gum(), []float64{-52.5, -45}, hertz)
	top := two.Tests[0].Runs[1].Points[13]
	low := two.Tests[0].Runs[0].Points[0]
	share := 0.97 * top.Storage / low.Storage
	for i := range two.Tests[0].Runs[0].Points {
		p := &two.Tests[0].Runs[0].Points[i]
		p.Storage, p.Loss = p.Storage*share, p.Loss*share*2
	}
	find(t, overlap(two), "isotherms-barely-overlap")
}

func TestSofterWhenColder(t *testing.T) {
	// A stiff, cold specimen beside the compliance of the frame: measured
	// stiffness saturates, and slip takes some more.
	c := campaign(t, demo.HM60(), demo.IsothermPlan(), 1)
	for _, cold := range []struct{ run, factor float64 }{{0, 0.4}, {1, 0.9}} {
		r := &c.Tests[0].Runs[int(cold.run)]
		for i := range r.Points {
			r.Points[i].Storage *= cold.factor
			r.Points[i].Loss *= cold.factor
		}
	}
	f := find(t, Check(c), "softer-when-colder")
	if f.Severity != data.Severe || !strings.Contains(f.Evidence, "at −40 °C the material") {
		t.Errorf("%+v", f)
	}
	// A single row of a temperature sweep, 12 % low.
	c = campaign(t, demo.HM60(), demo.HM60Plan().Only("temperature sweep"), 1)
	p := &c.Tests[0].Runs[0].Points[30]
	p.Storage, p.Loss = p.Storage*0.88, p.Loss*0.88
	if f := find(t, Check(c), "softer-when-colder"); f.Rows != "temperature-sweep.csv:34" {
		t.Errorf("%+v", f)
	}
	// Strained further, a filled rubber may be softer.
	p.Strain *= 3
	clean(t, "strained further", softerWhenColder(c))
}

func TestDrifts(t *testing.T) {
	stepped := func(creep, ramp float64) *data.Campaign {
		plan := demo.HM60Plan().Only("temperature sweep")
		plan.Tests[0].Temperatures = []float64{0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 20, 20, 20, 20, 20, 20, 20, 20, 20, 20}
		c := campaign(t, demo.HM60(), plan, 1)
		points := c.Tests[0].Runs[0].Points
		for i := range points[:10] {
			factor := 1 - creep*float64(i)/9
			points[i].Storage, points[i].Loss = points[i].Storage*factor, points[i].Loss*factor
			points[i].Temperature += ramp * float64(i) / 9
		}
		return c
	}
	clean(t, "steady", Check(stepped(0, 0)), "one-frequency-only")
	if f := find(t, Check(stepped(0.08, 0)), "modulus-drifts"); f.Severity != data.Doubt || f.Rows != "temperature-sweep.csv:4-13" {
		t.Errorf("%+v", f)
	}
	find(t, Check(stepped(0.3, 0)), "modulus-drifts")
	clean(t, "ramp", drifts(stepped(0.08, 0.4)))
}

func TestOnlyOneAndUnstated(t *testing.T) {
	find(t, Check(campaign(t, demo.HM60(), demo.HM60Plan().Only("temperature sweep"), 1)), "one-frequency-only")
	c := isothermsOf(t, demo.HM60(), []float64{23}, demo.Decades(0.5, 50, 21))
	find(t, Check(c), "one-temperature-only")
	c.Uncertainty.Phase = math.NaN()
	if f := find(t, Check(c), "phase-uncertainty-not-stated"); f.Severity != data.Note {
		t.Errorf("%+v", f)
	}
	each(&c.Tests[0], func(p *data.Point) { p.Strain = math.NaN() })
	find(t, Check(c), "strain-never-stated")
	// A relaxation test alone has no phase.
	c = campaign(t, demo.HM60(), demo.HM60Plan().Only("relaxation"), 1)
	c.Uncertainty.Phase = math.NaN()
	clean(t, "relaxation", Check(c))
}

func TestRows(t *testing.T) {
	var list []data.Point
	for _, r := range []int{12, 14, 13, 40, 12} {
		list = append(list, data.Point{File: "b.csv", Row: r})
	}
	list = append(list, data.Point{File: "a.csv", Row: 3})
	if got, want := data.Places(list), "b.csv:12-14, 40; a.csv:3"; got != want {
		t.Errorf("got %q, want %q", got, want)
	}
}

// Values worked by hand.
func TestRobust(t *testing.T) {
	if m := median([]float64{3, 1, 2, 10}); m != 2.5 {
		t.Errorf("median %g", m)
	}
	if s := slope([]float64{0, 1, 2}, []float64{1, 3, 5}); s != 2 {
		t.Errorf("slope %g", s)
	}
	if !math.IsNaN(slope([]float64{1, 1}, []float64{1, 2})) || !math.IsNaN(median(nil)) {
		t.Error("a number from nothing")
	}
	parabola := make([]float64, 20)
	for i := range parabola {
		parabola[i] = float64(i * i)
	}
	if n := noise(parabola); n != 0 {
		t.Errorf("a parabola has noise %g", n)
	}
	if noise(parabola[:4]) != 0 {
		t.Error("noise of four points")
	}
}
