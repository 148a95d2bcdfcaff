package mount

import (
	"errors"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"testing/fstest"

	"phaselag/data/place"
)

func read(t *testing.T, text string) (*Mount, error) {
	t.Helper()
	return Read("m.yaml", strings.NewReader(text))
}

const whole = `mount: sifter foot
elements:
  pad: {shape: shear pad, area: 1200 mm2, thickness: 12 mm}
  bush: {measured: {stiffness: 420 N/mm, part: magnitude, loss_factor: 0.12, frequency: 15 Hz, temperature: 23 °C, amplitude: 0.5 mm, static_load: 600 N, u: 3 %}, strain_per_displacement: 4 %/mm}
  disc: {shape: shear pad, diameter: 50 mm, thickness: 10 mm, bending: true, compression_coefficient: 0.57, bulk_modulus: 1150 MPa}
arrangement: {parallel: [pad, {series: [bush, {inclined_pair: disc, angle: 30 deg}]}]}
count: 4
direction: vertical
load: {mass: 200 kg}
excitation: {displacement: 0.3 mm}
part_factor: {value: 1.05, u: 3 %}
tolerance: {hardness: 5 IRHD}
`

func TestReadWhole(t *testing.T) {
	m, err := read(t, whole)
	if err != nil {
		t.Fatal(err)
	}
	pad, bush, disc := m.Elements[0].Pad, m.Elements[1].Measured, m.Elements[2].Pad
	for _, c := range []struct {
		name      string
		got, want float64
	}{
		{"area", pad.Area, 1200e-6}, {"thickness", pad.Thickness, 0.012},
		{"stiffness", bush.Stiffness, 420e3}, {"loss factor", bush.LossFactor, 0.12}, {"frequency", bush.Frequency, 15},
		{"temperature", bush.Temperature, 296.15}, {"amplitude", bush.Amplitude, 5e-4}, {"static load", bush.StaticLoad, 600},
		{"u", bush.U, 0.03}, {"strain per displacement", bush.StrainPerDisplacement, 40},
		{"disc's area", disc.Area, math.Pi / 4 * 0.0025}, {"coefficient", disc.Compression, 0.57}, {"bulk", disc.Bulk, 1.15e9},
		{"angle", m.Arrangement.Members[1].Members[1].Angle, math.Pi / 6},
		{"mass", m.Mass, 200}, {"displacement", m.Excitation.Displacement, 3e-4},
		{"factor", m.PartFactor, 1.05}, {"its u", m.PartFactorU, 0.03}, {"hardness", m.Tolerance.Hardness, 5},
	} {
		near(t, c.name, c.got, c.want, 1e-12)
	}
	if m.Name != "sifter foot" || m.Count != 4 || m.Direction != "vertical" || m.Tolerance.Scale != "IRHD" || !disc.Bending || bush.Storage {
		t.Errorf("%+v", m)
	}
	if !math.IsNaN(m.Excitation.Force) {
		t.Error("a force that was not stated")
	}
	if m.Arrangement.Kind != Parallel || m.Arrangement.Members[1].Kind != Series || m.Arrangement.Members[1].Members[0].Element != 1 {
		t.Errorf("arrangement %+v", m.Arrangement)
	}
	if got := strings.Join(m.Assumptions, "; "); !strings.Contains(got, "pad: simple shear") {
		t.Errorf("assumptions: %s", got)
	}
}

func TestReadShortest(t *testing.T) {
	m, err := Read("dir/foot.yaml", strings.NewReader("elements: {pad: {shape: shear pad, length: 40 mm, width: 30 mm, thickness: 1 cm}}\npart_factor: 1.2\n"))
	if err != nil {
		t.Fatal(err)
	}
	if m.Name != "foot" || m.Count != 1 || m.PartFactor != 1.2 || !math.IsNaN(m.PartFactorU) || !math.IsNaN(m.Mass) || m.Arrangement.Kind != Single {
		t.Errorf("%+v", m)
	}
	near(t, "area", m.Elements[0].Pad.Area, 1200e-6, 1e-12)
	m, err = read(t, "elements: {b: {measured: {stiffness: 1 kN/mm, part: storage, loss_angle: 45 deg, frequency: 1 Hz, temperature: 0 °C, amplitude: 0 mm}, strain_per_displacement: 1 %/mm}}\nexcitation: {force: 5 N}")
	if err != nil {
		t.Fatal(err)
	}
	b, err := read(t, "elements: {b: {shape: axial bush, inner_diameter: 20 mm, outer_diameter: 40 mm, length: 40 mm}, p: {shape: compression pad, diameter: 50 mm, thickness: 10 mm, compression_coefficient: 0.6}}\narrangement: {series: [b, p]}")
	if err != nil {
		t.Fatal(err)
	}
	near(t, "bush", b.Elements[0].Bush.Outer, 0.02, 1e-12)
	if !b.Elements[1].Pad.Pressed || b.Elements[1].Pad.Bending {
		t.Errorf("%+v", b.Elements[1].Pad)
	}
	near(t, "loss angle", m.Elements[0].Measured.LossFactor, 1, 1e-12)
	near(t, "force", m.Excitation.Force, 5, 0)
}

// Positions are those of the marked line and column; the hint must contain the
// last text.
func TestReadFaults(t *testing.T) {
	const pad = "elements: {pad: {shape: shear pad, area: 12 mm2, thickness: 1 mm}}\n"
	const two = "direction: vertical\nelements:\n  a: {shape: shear pad, area: 12 mm2, thickness: 1 mm}\n  b: {shape: shear pad, area: 12 mm2, thickness: 1 mm}\n"
	for _, c := range []struct{ name, text, want, hint string }{
		{"empty", "", "m.yaml: the file is empty", "elements"},
		{"comment only", "# nothing\n", "m.yaml: the file is empty", "elements"},
		{"a list", "- 1\n", "m.yaml:1:1: want keys and values, not a list", "elements"},
		{"a word", "hello\n", `m.yaml:1:1: want keys and values, not "hello"`, "elements"},
		{"not YAML", "mount: [\n", "m.yaml:", ""},
		{"two documents", pad + "---\na: 1\n", "a second document", "one mount"},
		{"not text", "mount: \xff\n", "not text in UTF-8", ""},
		{"unknown key", pad + "cuont: 4\n", "m.yaml:2:1: cuont: unknown key", "count"},
		{"unknown key, nothing near", pad + "colour: red\n", "m.yaml:2:1: colour: unknown key", "known keys: mount"},
		{"unknown key inside", "elements: {pad: {shape: shear pad, area: 12 mm2, thicknes: 1 mm}}\n", "elements.pad.thicknes: unknown key", "thickness"},
		{"key twice", pad + "count: 1\ncount: 2\n", "m.yaml:3:", ""},
		{"no elements", "mount: x\n", "m.yaml:1:1: elements: missing", "shear pad"},
		{"elements a list", "elements: [1]\n", "m.yaml:1:11: elements: want named elements", "pad"},
		{"elements null", "elements:\n", "elements: want named elements, not nothing", "pad"},
		{"element a word", "elements: {pad: thick}\n", `m.yaml:1:17: elements.pad: want keys and values, not "thick"`, "shape"},
		{"wrong unit", "elements: {pad: {shape: shear pad, area: 12 mm, thickness: 1 mm}}\n", "m.yaml:1:42: elements.pad.area: ", "mm"},
		{"no unit", "elements: {pad: {shape: shear pad, area: 12, thickness: 1 mm}}\n", "m.yaml:1:42: elements.pad.area: ", "mm"},
		{"null", "elements: {pad: {shape: shear pad, area: , thickness: 1 mm}}\n", "elements.pad.area: want area with its unit, not nothing", ""},
		{"negative", "elements: {pad: {shape: shear pad, area: -12 mm2, thickness: 1 mm}}\n", "elements.pad.area: must be positive", ""},
		{"zero", "elements: {pad: {shape: shear pad, area: 12 mm2, thickness: 0 mm}}\n", "elements.pad.thickness: must be positive", ""},
		{"not finite", "elements: {pad: {shape: shear pad, area: .inf mm2, thickness: 1 mm}}\n", "elements.pad.area: ", ""},
		{"unknown shape", "elements: {pad: {shape: cone, area: 12 mm2, thickness: 1 mm}}\n", "elements.pad.shape: unknown shape", "measured"},
		{"no shape", "elements: {pad: {area: 12 mm2, thickness: 1 mm}}\n", "elements.pad.shape: missing", "measured"},
		{"no thickness", "elements: {pad: {shape: shear pad, area: 12 mm2}}\n", "elements.pad.thickness: missing", "layer"},
		{"no area", "elements: {pad: {shape: shear pad, thickness: 2 mm}}\n", "elements.pad.area: missing", "diameter"},
		{"one side", "elements: {pad: {shape: shear pad, length: 2 mm, thickness: 2 mm}}\n", "needs length and width", "along"},
		{"area and diameter", "elements: {pad: {shape: shear pad, area: 2 mm2, diameter: 2 mm, thickness: 2 mm}}\n", "the area follows", "leave"},
		{"bending of an area", "elements: {pad: {shape: shear pad, area: 12 mm2, thickness: 1 mm, bending: true}}\n", "elements.pad.bending: bending depends", "diameter"},
		{"bending a word", "elements: {pad: {shape: shear pad, area: 12 mm2, thickness: 1 mm, bending: much}}\n", "elements.pad.bending: want true or false", ""},
		{"measured, nothing said", "elements: {b: {measured: {}}}\n", "elements.b.measured.stiffness: missing", ""},
		{"measured, wrong part", "elements: {b: {measured: {stiffness: 1 N/mm, part: loss, frequency: 1 Hz, temperature: 0 C, amplitude: 1 mm}, strain_per_displacement: 1 %/mm}}\n", "elements.b.measured.part: want magnitude or storage", ""},
		{"measured, too cold", "elements: {b: {measured: {stiffness: 1 N/mm, frequency: 1 Hz, temperature: -300 C, amplitude: 1 mm}, strain_per_displacement: 1 %/mm}}\n", "elements.b.measured.temperature: ", ""},
		{"measured, loss twice", "elements: {b: {measured: {stiffness: 1 N/mm, loss_factor: 1, loss_angle: 45 deg, frequency: 1 Hz, temperature: 0 C, amplitude: 1 mm}, strain_per_displacement: 1 %/mm}}\n", "loss_angle: beside loss_factor", "one"},
		{"pressed without coefficient", "elements: {a: {shape: compression pad, diameter: 20 mm, thickness: 5 mm}}\n", "m.yaml:1:12: elements.a.compression_coefficient: missing", "60 IRHD"},
		{"pressed area", "elements: {a: {shape: compression pad, area: 20 mm2, thickness: 5 mm}}\n", "elements.a: a compression pad's stiffness depends on", "diameter"},
		{"bush of no thickness", "elements: {a: {shape: axial bush, inner_diameter: 20 mm, outer_diameter: 2 cm, length: 5 mm}}\n", "elements.a.outer_diameter: must be greater", ""},
		{"half a bush", "elements: {a: {shape: axial bush, inner_diameter: 20 mm, length: 5 mm}}\n", "elements.a.outer_diameter: missing", "20 mm"},
		{"bush with area", "elements: {a: {shape: axial bush, inner_diameter: 20 mm, outer_diameter: 30 mm, length: 5 mm, area: 3 mm2}}\n", "elements.a.area: belongs to a pad", "leave"},
		{"pair of bushes", "direction: vertical\nelements: {a: {shape: axial bush, inner_diameter: 20 mm, outer_diameter: 30 mm, length: 5 mm}}\narrangement: {inclined_pair: a, angle: 30 deg}\n", "elements.a: an inclined pair needs a pad", "measured"},
		{"no arrangement", two, "arrangement: missing", "parallel: [a, b]"},
		{"unknown element", two + "arrangement: {series: [a, c]}\n", `m.yaml:5:27: arrangement.series[1]: no element is called "c"`, ""},
		{"two forms", two + "arrangement: {series: [a], parallel: [b]}\n", "arrangement: want one of parallel", "nest"},
		{"no members", two + "arrangement: {series: []}\n", "arrangement.series: want a list of members", "pad"},
		{"angle alone", two + "arrangement: {angle: 3 deg}\n", "arrangement: an angle without", ""},
		{"pair without angle", two + "arrangement: {inclined_pair: a}\n", "arrangement.angle: missing", "vertical"},
		{"pair of an area", two + "arrangement: {inclined_pair: a, angle: 30 deg}\n", "elements.a: an inclined pair presses its pads, and their stiffness depends on the pad's section", "diameter"},
		{"pair without direction", pad + "arrangement: {inclined_pair: pad, angle: 30 deg}\n", "arrangement: an inclined pair has", "direction: vertical"},
		{"pair too steep", two + "arrangement: {inclined_pair: a, angle: 120 deg}\n", "arrangement.angle: must lie between", ""},
		{"half a mount", pad + "count: 2.5\n", "m.yaml:2:8: count: want a whole number", ""},
		{"no mount", pad + "count: 0\n", "m.yaml:2:8: count: want a positive number", ""},
		{"count with unit", pad + "count: 4 pcs\n", "m.yaml:2:8: count: ", ""},
		{"two excitations", pad + "excitation: {force: 1 N, displacement: 1 mm}\n", "excitation: displacement and force", "held"},
		{"mass in N", pad + "load: {mass: 200 N}\n", "m.yaml:2:14: load.mass: ", "kg"},
		{"factor without value", pad + "part_factor: {u: 3 %}\n", "part_factor.value: missing", "1.05"},
		{"alias", "elements: &e {pad: {shape: shear pad, area: 12 mm2, thickness: 1 mm}}\nload: *e\n", "load: want keys and values, not an alias", ""},
		{"bomb", "a: &a [x,x]\nb: &b [*a,*a]\nc: &c [*b,*b]\nelements: *c\n", "elements: want named elements, not an alias", ""},
		{"deep", pad + "arrangement: " + strings.Repeat("{series: [", 40) + "pad" + strings.Repeat("]}", 40) + "\n", "nested more than", ""},
	} {
		m, err := read(t, c.text)
		switch {
		case err == nil:
			t.Errorf("%s: no error", c.name)
		case m != nil:
			t.Errorf("%s: a mount beside an error", c.name)
		case !strings.Contains(err.Error(), c.want):
			t.Errorf("%s: got %q, want %q", c.name, err, c.want)
		case !strings.HasPrefix(err.Error(), "m.yaml:"):
			t.Errorf("%s: no place in %q", c.name, err)
		default:
			hints := ""
			for _, e := range place.All(err) {
				hints += place.Hint(e) + "\n"
			}
			if !strings.Contains(hints, c.hint) {
				t.Errorf("%s: hints %q, want %q", c.name, hints, c.hint)
			}
		}
	}
	if _, err := Read("big.yaml", strings.NewReader(strings.Repeat("# ", 1<<20))); err == nil {
		t.Error("a file of 2 MiB was read")
	}
}

// All faults of a file are reported at once.
func TestReadReportsAllFaults(t *testing.T) {
	_, err := read(t, "elements: {pad: {shape: shear pad, area: 1 mm, thickness: 0 mm}}\ncount: x\n")
	if n := len(place.All(err)); n != 3 {
		t.Errorf("%d faults in %v", n, err)
	}
}

func TestOpen(t *testing.T) {
	if _, err := Open(filepath.Join(t.TempDir(), "absent.yaml")); !errors.Is(err, os.ErrNotExist) {
		t.Errorf("absent: %v", err)
	}
	if _, err := Open(t.TempDir()); err == nil {
		t.Error("a folder was read")
	}
	m, err := OpenFS(fstest.MapFS{"m.yaml": {Data: []byte(whole)}}, "m.yaml")
	if err != nil || m.Name != "sifter foot" {
		t.Errorf("%v", err)
	}
	if _, err := OpenFS(fstest.MapFS{}, "m.yaml"); !errors.Is(err, os.ErrNotExist) {
		t.Errorf("absent: %v", err)
	}
}

// The demonstration's mount file can be read.
func TestDemonstration(t *testing.T) {
	m, err := Open(filepath.Join("..", "..", "data", "demo", "sifter.yaml"))
	if err != nil {
		t.Fatal(err)
	}
	if m.Count != 4 || m.Mass != 200 || m.Elements[0].Pad.Thickness != 0.02 {
		t.Errorf("%+v", m)
	}
}

func FuzzRead(f *testing.F) {
	f.Add(whole)
	f.Add("elements: {a: {measured: {stiffness: 1 N/mm}}}\narrangement: {series: [a, {inclined_pair: a, angle: 1 rad}]}\n")
	f.Fuzz(func(t *testing.T, text string) {
		m, err := Read("m.yaml", strings.NewReader(text))
		if (m == nil) == (err == nil) {
			t.Errorf("mount %v, error %v", m, err)
		}
		if err == nil {
			if _, err := m.Displaced(soft, 10, 296.15, 1e-4); err != nil && !errors.Is(err, ErrNoBalance) {
				t.Logf("%v", err)
			}
		}
	})
}
