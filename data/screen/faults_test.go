package screen

import (
	"math"
	"slices"
	"strings"
	"testing"

	"phaselag/data"
	"phaselag/data/demo"
)

// A fault and one close to it that is none. The sizes stand in the names. Every case
// is drawn with five seeds, and must be right with each.
func TestFaults(t *testing.T) {
	const iso, sweeps = "isotherms.csv", "strain-sweeps.csv"
	isotherms, hm := demo.IsothermPlan(), demo.HM60Plan()
	bad := func(plan demo.Plan, table string, faults ...demo.Fault) func(*testing.T, uint64) *data.Campaign {
		return func(t *testing.T, seed uint64) *data.Campaign {
			return spoiled(t, demo.HM60(), plan, seed, table, faults...)
		}
	}
	// There and back again: 11 frequencies up, then down.
	upDown := demo.IsothermPlan()
	there := demo.Decades(0.5, 50, 11)
	back := slices.Clone(there)
	slices.Reverse(back)
	upDown.Tests[0].Frequencies = append(slices.Clone(there), back...)
	creep := func(share float64) demo.Fault {
		return demo.Softened(0, 1000, func(r demo.Row) float64 { return share * float64(r.Index%22) / 21 }, 0)
	}
	// A second sweep of the same strains, down.
	backSweep := demo.HM60Plan().Only("strain sweeps")
	up := backSweep.Tests[0].Strains
	down := slices.Clone(up)
	slices.Reverse(down)
	backSweep.Tests[0].Strains = append(slices.Clone(up), down...)
	mullins := func(share float64) demo.Fault {
		return demo.Softened(0, 1000, func(r demo.Row) float64 {
			if r.Index%30 >= 15 {
				return share
			}
			return 0
		}, 0)
	}
	// One piece measured twice.
	twice := func(share float64, conditioned bool, mounting string) func(*testing.T, uint64) *data.Campaign {
		return func(t *testing.T, seed uint64) *data.Campaign {
			plan := demo.IsothermPlan()
			plan.Tests[0].Temperatures = []float64{20, 30, 40}
			again := plan.Tests[0]
			again.Name, again.File, again.Tested, again.Mounting = "again", "again.csv", "2026-11-20", mounting
			plan.Tests = append(plan.Tests, again)
			for i := range plan.Tests {
				if !conditioned {
					plan.Tests[i].Conditioning = ""
				}
			}
			return spoiled(t, demo.HM60(), plan, seed, "again.csv", demo.Softened(0, 1000, func(demo.Row) float64 { return share }, 0))
		}
	}
	// Two strain sweeps on two pieces, the second one's strains wrong by a factor.
	strains := func(factor float64) func(*testing.T, uint64) *data.Campaign {
		return func(t *testing.T, seed uint64) *data.Campaign {
			plan := demo.HM60Plan().Only("strain sweeps")
			again := plan.Tests[0]
			again.Name, again.File, again.Specimen = "again", "again.csv", "pair-1"
			plan.Tests = append(plan.Tests, again)
			return spoiled(t, demo.HM60(), plan, seed, "again.csv", demo.WrongStrain(factor))
		}
	}
	// Two pieces' isotherms, the second one's moduli wrong by a factor.
	moduli := func(factor float64) func(*testing.T, uint64) *data.Campaign {
		return func(t *testing.T, seed uint64) *data.Campaign {
			plan := demo.IsothermPlan()
			plan.Specimens = append(plan.Specimens, demo.Specimen{Name: "strip", Diameter: 25, Thickness: 5})
			again := plan.Tests[0]
			again.Name, again.File, again.Specimen, again.Temperatures = "tension", "tension.csv", "strip", []float64{0, 20, 40}
			plan.Tests = append(plan.Tests, again)
			c := spoiled(t, demo.HM60(), plan, seed, "tension.csv", demo.WrongModulus(factor))
			c.Tests[1].Deformation = data.Tension
			return c
		}
	}
	isoAt := func(percent float64) demo.Plan {
		p := demo.HM60Plan()
		p.Tests[0].Strains = []float64{percent}
		return p
	}
	// The first frequencies measured again at the end of each isotherm, as the reader
	// parts them: a run of their own.
	parted := func(share float64, n int) func(*testing.T, uint64) *data.Campaign {
		return func(t *testing.T, seed uint64) *data.Campaign {
			plan := demo.IsothermPlan()
			f := plan.Tests[0].Frequencies
			plan.Tests[0].Frequencies = append(slices.Clone(f), f[:n]...)
			all := len(f) + n
			c := spoiled(t, demo.HM60(), plan, seed, iso, demo.Softened(0, 1000, func(r demo.Row) float64 { return share * float64(r.Index%all) / float64(all) }, 0))
			var runs []data.Run
			for _, r := range c.Tests[0].Runs {
				again := r
				again.Points = r.Points[len(f):]
				r.Points = r.Points[:len(f)]
				runs = append(runs, r, again)
			}
			c.Tests[0].Runs = runs
			return c
		}
	}
	viscous := func(factor float64, jumble bool) func(*testing.T, uint64) *data.Campaign {
		return func(t *testing.T, seed uint64) *data.Campaign {
			c := campaign(t, demo.HM60(), isotherms, seed)
			i := 0
			each(&c.Tests[0], func(p *data.Point) {
				p.StatedViscosity = magnitude(*p) / (2 * math.Pi * p.Frequency) * factor
				if i++; jumble && i%2 == 0 {
					p.StatedViscosity *= 1.1
				}
			})
			return c
		}
	}
	// Row operations on an isotherm.
	rows := func(change func(*data.Test)) func(*testing.T, uint64) *data.Campaign {
		return func(t *testing.T, seed uint64) *data.Campaign {
			c := campaign(t, demo.HM60(), isotherms, seed)
			change(&c.Tests[0])
			return c
		}
	}
	copied := func(n int) func(*data.Test) {
		return func(test *data.Test) {
			for i := range n {
				p, q := &test.Runs[4].Points[i], test.Runs[5].Points[i]
				p.Storage, p.Loss, p.StatedLossFactor = q.Storage, q.Loss, q.StatedLossFactor
			}
		}
	}
	titled := func(heading string, deformation data.Deformation) func(*testing.T, uint64) *data.Campaign {
		return rows(func(test *data.Test) {
			test.Columns = []data.Column{{File: iso, Heading: heading, Quantity: "storage modulus", Unit: "MPa"}}
			test.Deformation = deformation
		})
	}
	assumed := func(heading string) func(*testing.T, uint64) *data.Campaign {
		return func(t *testing.T, seed uint64) *data.Campaign {
			c := titled(heading, data.SimpleShear)(t, seed)
			c.Assumptions = []string{"isotherms: deformation not stated, taken as shear"}
			return c
		}
	}
	// The three-fold repeats of 11 frequencies, one of which is off.
	triple := demo.IsothermPlan()
	triple.Tests[0].Frequencies = nil
	for _, f := range there {
		triple.Tests[0].Frequencies = append(triple.Tests[0].Frequencies, f, f, f)
	}
	for _, k := range []struct {
		name string
		of   func(*testing.T, uint64) *data.Campaign
		code string
		want data.Severity // "": not found
	}{
		{"the piece slips by 20 % in the middle of 0 °C", bad(isotherms, iso, demo.Slip(84+10, 84+21, 0.20, 2)), "contact-lost", data.Severe},
		{"by 10 %", bad(isotherms, iso, demo.Slip(84+10, 84+21, 0.10, 0)), "contact-lost", data.Doubt},
		{"one row is 10 % low", bad(isotherms, iso, demo.Slip(84+10, 84+11, 0.10, 0)), "contact-lost", ""},
		{"by 1.5 %", bad(isotherms, iso, demo.Slip(84+10, 84+21, 0.015, 0)), "contact-lost", ""},
		{"a strain sweep slips by 20 % at its ninth strain", bad(hm, sweeps, demo.Slip(15+9, 30, 0.2, 3)), "contact-lost", data.Severe},
		{"a temperature sweep slips by 20 % at its fortieth row", bad(hm, "temperature-sweep.csv", demo.Slip(40, 61, 0.2, 3)), "contact-lost", data.Severe},
		{"up and down, 5 % softer at the end", bad(upDown, iso, creep(0.05)), "modulus-drifts-in-run", data.Doubt},
		{"15 % softer", bad(upDown, iso, creep(0.15)), "modulus-drifts-in-run", data.Severe},
		{"0.5 % softer", bad(upDown, iso, creep(0.005)), "modulus-drifts-in-run", ""},
		{"a strain sweep comes back 5 % softer", bad(backSweep, sweeps, mullins(0.05)), "modulus-drifts-in-run", data.Doubt},
		{"a strain sweep comes back as it went", bad(backSweep, sweeps), "modulus-drifts-in-run", ""},
		{"one piece repeated, unconditioned, 8 % softer", twice(0.08, false, "1"), "softens-from-first-run", data.Doubt},
		{"25 % softer", twice(0.25, false, "1"), "softens-from-first-run", data.Severe},
		{"conditioned, 3 % softer", twice(0.03, true, "1"), "softens-from-first-run", data.Note},
		{"unconditioned, 1 % softer", twice(0.01, false, "1"), "softens-from-first-run", ""},
		{"mounted anew, 8 % softer", twice(0.08, false, "2"), "softens-from-first-run", ""},
		{"unconditioned, 8 % stiffer", twice(-0.08, false, "1"), "softens-from-first-run", ""},
		{"warms by 0.05 K a kW/m³", bad(hm, sweeps, demo.Warming(0.05, 0.006)), "self-heating", data.Severe},
		{"warms by 0.003 K a kW/m³", bad(hm, sweeps, demo.Warming(0.003, 0.006)), "self-heating", data.Doubt},
		{"warms by 0.0005 K a kW/m³", bad(hm, sweeps, demo.Warming(0.0005, 0.006)), "self-heating", ""},
		{"isotherms at 0.2 %", bad(hm, sweeps), "strain-beyond-linear-range", ""},
		{"isotherms at 0.6 %", bad(isoAt(0.6), sweeps), "strain-beyond-linear-range", data.Note},
		{"isotherms at 5 %", bad(isoAt(5), sweeps), "strain-beyond-linear-range", data.Doubt},
		{"one of three repeats 15 % high", bad(triple, iso, demo.Slip(33*6+16, 33*6+17, -0.15, 0)), "repeats-scatter-unequally", data.Doubt},
		{"one of three repeats 1 % high", bad(triple, iso, demo.Slip(33*6+16, 33*6+17, -0.01, 0)), "repeats-scatter-unequally", ""},
		{"strains peak to peak in one of two tests", strains(2), "tests-contradict-in-strain", data.Severe},
		{"the other way round", strains(0.5), "tests-contradict-in-strain", data.Severe},
		{"strains rms in one of two tests", strains(1 / math.Sqrt2), "tests-contradict-in-strain", data.Severe},
		{"strains 5 % off", strains(1.05), "tests-contradict-in-strain", ""},
		{"E taken for G in one of two tests", moduli(3), "tests-contradict-in-modulus", data.Severe},
		{"kPa in one of two tests", moduli(1000), "tests-contradict-in-modulus", data.Severe},
		{"E taken for G in the temperature sweep", bad(hm.Only("isotherms", "temperature sweep"), "temperature-sweep.csv", demo.WrongModulus(3)), "tests-contradict-in-modulus", data.Severe},
		{"no modulus is wrong", bad(hm, sweeps), "tests-contradict-in-modulus", ""},
		{"kPa among MPa at 30 °C", bad(isotherms, iso, demo.Slip(7*21, 8*21, -999, 0)), "unit-changes-within-test", data.Severe},
		{"a factor of 20 at 30 °C", bad(isotherms, iso, demo.Slip(7*21, 8*21, -19, 0)), "unit-changes-within-test", ""},
		{"strains of 2e-5 % at most", bad(isotherms, iso, demo.WrongStrain(1e-4)), "strain-too-low", data.Note},
		{"strains of 2e-3 %", bad(isotherms, iso, demo.WrongStrain(1e-2)), "strain-too-low", ""},
		{"8 % softer when the first three frequencies are repeated", parted(0.08, 3), "modulus-drifts-in-run", data.Doubt},
		{"1 % softer when they are", parted(0.01, 3), "modulus-drifts-in-run", ""},
		{"one of two tests 20 % stiffer", moduli(1.2), "tests-contradict-in-modulus", ""},
		{"one of two tests twice as stiff", moduli(2), "tests-contradict-in-modulus", ""},
		{"rad/s read as Hz beside a viscosity", viscous(2*math.Pi, false), "frequency-unit-contradicted", data.Severe},
		{"Hz read as rad/s beside a viscosity", viscous(1/(2*math.Pi), false), "frequency-unit-contradicted", data.Severe},
		{"a viscosity in kPa·s", viscous(1e-3, false), "viscosity-differs", data.Doubt},
		{"a viscosity from elsewhere", viscous(1, true), "viscosity-differs", data.Doubt},
		{"a viscosity that fits", viscous(1.004, false), "viscosity-differs", ""},
		{"a viscosity that fits is no contradiction", viscous(1.004, false), "frequency-unit-contradicted", ""},
		{"eight moduli copied under another temperature", rows(copied(8)), "moduli-copied", data.Severe},
		{"three moduli copied", rows(copied(3)), "moduli-copied", ""},
		{"two rows changed places", rows(func(test *data.Test) {
			p := test.Runs[3].Points
			p[5], p[14] = p[14], p[5]
		}), "steps-out-of-order", data.Note},
		{"frequencies were shuffled on purpose", rows(func(test *data.Test) {
			p := test.Runs[3].Points
			for i := range p {
				j := i * 8 % 21
				p[i], p[j] = p[j], p[i]
			}
		}), "steps-out-of-order", ""},
		{"up and down is in order", bad(upDown, iso), "steps-out-of-order", ""},
		{"descending is stated, and rising", rows(func(test *data.Test) { test.Direction = "descending" }), "direction-contradicted", data.Note},
		{"ascending is stated, and rising", rows(func(test *data.Test) { test.Direction = "ascending" }), "direction-contradicted", ""},
		{"E' in shear", titled("E' / MPa", data.SimpleShear), "heading-against-deformation", data.Doubt},
		{"|E*| in torsion", titled("|E*| / MPa", data.Torsion), "heading-against-deformation", data.Doubt},
		{"G' in tension", titled("G' / MPa", data.Tension), "heading-against-deformation", data.Doubt},
		{"E' in tension", titled("E' / MPa", data.Tension), "heading-against-deformation", ""},
		{"storage modulus in shear", titled("storage modulus", data.SimpleShear), "heading-against-deformation", ""},
		{"an unstated deformation", assumed("storage modulus"), "deformation-not-stated", data.Note},
		{"an unstated deformation, and G' says it", assumed("G' / MPa"), "deformation-not-stated", ""},
	} {
		t.Run(k.name, func(t *testing.T) {
			for seed := uint64(1); seed <= 5; seed++ {
				list := Check(k.of(t, seed))
				f, ok := with(list, k.code)
				if ok != (k.want != "") || f.Severity != k.want {
					t.Errorf("seed %d: want %q, got %q: %s (found %v)", seed, k.want, f.Severity, f.Evidence, codes(list))
				}
				if ok && (f.Evidence == "" || f.Cause == "" || f.Remedy == "" || f.Severity == data.Severe && f.Rows == "") {
					t.Errorf("incomplete: %+v", f)
				}
			}
		})
	}
}

// What a finding says must be right, not only that there is one.
func TestWhatIsSaid(t *testing.T) {
	c := spoiled(t, demo.HM60(), demo.IsothermPlan(), 1, "isotherms.csv", demo.Slip(84+10, 84+21, 0.20, 2))
	// The rows of 0 °C begin in line 88; its eleventh is the first one lost.
	if f := find(t, Check(c), "contact-lost"); f.Rows != "isotherms.csv:98-108" {
		t.Errorf("%+v", f)
	}
	for _, v := range []struct {
		factor float64
		unit   string
	}{{2 * math.Pi, "in Hz and was read as rad/s"}, {1 / (2 * math.Pi), "in rad/s and was read as Hz"}} {
		// The file's viscosity is that of the true frequency f·factor: written f Hz read as
		// rad/s gives 2π too little.
		c := campaign(t, demo.HM60(), demo.IsothermPlan(), 1)
		each(&c.Tests[0], func(p *data.Point) { p.StatedViscosity = magnitude(*p) / (2 * math.Pi * p.Frequency * v.factor) })
		if f := find(t, Check(c), "frequency-unit-contradicted"); !strings.Contains(f.Cause, v.unit) {
			t.Errorf("factor %g: %s", v.factor, f.Cause)
		}
	}
	// 1 GPa to 15 GPa read as Pa of MPa: kPa would be right.
	c = campaign(t, demo.HM60(), demo.IsothermPlan(), 1)
	each(&c.Tests[0], func(p *data.Point) { p.Storage, p.Loss = p.Storage*1e4, p.Loss*1e4 })
	c.Tests[0].Columns = []data.Column{{Quantity: "storage modulus", Unit: "MPa"}}
	if f := find(t, units(c), "modulus-too-high"); !strings.Contains(f.Remedy, "read as kPa the moduli would be") || strings.Contains(f.Remedy, "read as Pa") {
		t.Errorf("%s", f.Remedy)
	}
}

// Critical values of Grubbs' and Cochran's tests as ISO 5725-2 prints them, tables 4 and
// 5 (values from memory).
func TestCriticalValues(t *testing.T) {
	for _, v := range []struct {
		n           int
		alpha, want float64
	}{{3, 0.05, 1.155}, {3, 0.01, 1.155}, {10, 0.05, 2.290}, {10, 0.01, 2.482}, {20, 0.05, 2.709}} {
		if got := grubbs(v.n, v.alpha); math.Abs(got-v.want) > 0.001 {
			t.Errorf("Grubbs, n = %d, %g: %.4f, want %.4f", v.n, v.alpha, got, v.want)
		}
	}
	for _, v := range []struct {
		p, n        int
		alpha, want float64
	}{{5, 2, 0.05, 0.841}, {5, 2, 0.01, 0.928}, {10, 2, 0.05, 0.602}, {10, 2, 0.01, 0.718}, {5, 3, 0.05, 0.684}, {5, 3, 0.01, 0.788}} {
		if got := cochran(v.p, v.n-1, v.alpha); math.Abs(got-v.want) > 0.0006 {
			t.Errorf("Cochran, p = %d, n = %d, %g: %.4f, want %.4f", v.p, v.n, v.alpha, got, v.want)
		}
	}
}

// Of six pieces one is 30 % stiffer: Grubbs names it, as a doubt. At 3 % it may be.
func TestGrubbsNamesAPiece(t *testing.T) {
	build := func(share float64, seed uint64) *data.Campaign {
		plan := demo.IsothermPlan()
		plan.Tests[0].Temperatures = []float64{20, 40}
		for _, name := range []string{"b", "c", "d", "e", "f"} {
			again := plan.Tests[0]
			again.Name, again.File, again.Specimen = name, name+".csv", name
			plan.Specimens = append(plan.Specimens, demo.Specimen{Name: name, Diameter: 25, Thickness: 5})
			plan.Tests = append(plan.Tests, again)
		}
		return spoiled(t, demo.HM60(), plan, seed, "d.csv", demo.Slip(0, 1000, -share, 0))
	}
	for seed := uint64(1); seed <= 5; seed++ {
		f := find(t, outlyingRepeats(build(0.6, seed)), "repeat-outlying")
		if f.Test != "d" || f.Severity != data.Doubt {
			t.Errorf("seed %d: %+v", seed, f)
		}
		clean(t, "3 %", outlyingRepeats(build(0.03, seed)))
	}
}
