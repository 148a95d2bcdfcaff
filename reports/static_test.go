package reports

import (
	"math"
	"strings"
	"testing"

	"phaselag/models"
	"phaselag/models/mount"
)

// block is four discs 50 × 10 under a load, k and B of a handbook's row for 50 IRHD
// (value from memory).
func block(t *testing.T, more string) *mount.Mount {
	t.Helper()
	m, err := mount.Read("m.yaml", strings.NewReader("elements:\n  disc: {shape: compression pad, diameter: 50 mm, thickness: 10 mm, factor: 0.73, bulk_modulus: 1030 MPa}\ncount: 4\nexcitation: {displacement: 0.05 mm}\n"+more))
	if err != nil {
		t.Fatal(err)
	}
	return m
}

// Static stiffness comes from the tests first, from the model only where asked for, from
// the table last, and each says so. The discs' stiffness at G = E0/3, E0 = 2.20 MPa, is
// 4 · 1407.534 N/mm (computed independently in double precision).
func TestStaticSources(t *testing.T) {
	c := *demoResult(t, 1).Compound
	tested := c.Static
	one := func(m *mount.Mount, choice StaticChoice) (float64, string, string) {
		v, err := models.New(c)
		if err != nil {
			t.Fatal(err)
		}
		tab, err := StaticTable(v, m, choice)
		if err != nil {
			t.Fatal(err)
		}
		if len(tab.Rows) == 0 {
			return math.NaN(), "", strings.Join(tab.Assumptions, "|")
		}
		source, _ := tab.Rows[0][0].Value().(string)
		return tab.Rows[0][4].Float(), source, strings.Join(tab.Assumptions, "|")
	}
	all := StaticChoice{ModelTime: 10, Hardness: 60, Table: mount.Lindley}
	if _, source, _ := one(block(t, ""), all); source != tested[0].Source {
		t.Errorf("with tests the source is %q", source)
	}
	c.Static = []models.StaticItem{{Modulus: 2.2 / 3, Source: "as computed"}}
	if k, _, _ := one(block(t, ""), StaticChoice{}); math.Abs(k/(4*1407.534)-1) > 1e-6 {
		t.Errorf("%g N/mm, should be %g", k, 4*1407.534)
	}
	c.Static = nil
	if _, source, notes := one(block(t, ""), all); source != "model" || !strings.Contains(notes, "doubt") {
		t.Errorf("the model: %q, %q", source, notes)
	}
	if _, source, notes := one(block(t, ""), StaticChoice{Hardness: 60, Table: mount.Lindley}); !strings.Contains(source, "Lindley") || !strings.Contains(notes, "handbook") {
		t.Errorf("the table: %q, %q", source, notes)
	}
	if k, _, notes := one(block(t, ""), StaticChoice{}); !math.IsNaN(k) || !strings.Contains(notes, "no static stiffness") {
		t.Errorf("nothing: %g, %q", k, notes)
	}
}

// Under a load the stiffness of pressed pads is the tangent; the note says how much, and
// beyond a fifth it is refused.
func TestUnderLoad(t *testing.T) {
	c := demoResult(t, 1).Compound
	q := []StiffnessQuery{{10, 296.15, math.NaN()}}
	magnitude := func(m *mount.Mount) float64 {
		tab, _, err := StiffnessTable(c, m, q, q[0], false)
		if err != nil {
			t.Fatal(err)
		}
		return tab.Rows[0][8].Float()
	}
	free := block(t, "load: {mass: 400 kg}")
	loaded, notes, err := UnderLoad(c, free, StaticChoice{})
	if err != nil || len(notes) != 1 || !strings.Contains(notes[0], "tangent") {
		t.Fatal(notes, err)
	}
	if a, b := magnitude(free), magnitude(loaded); !(b > 1.05*a) {
		t.Errorf("%g N/mm unloaded, %g loaded", a, b)
	}
	if again, notes, err := UnderLoad(c, loaded, StaticChoice{}); err != nil || again != loaded || notes != nil {
		t.Error("a loaded mount is loaded again", notes, err)
	}
	if _, _, err := UnderLoad(c, block(t, "load: {mass: 4000 kg}"), StaticChoice{}); err == nil || !strings.Contains(err.Error(), "20 %") {
		t.Errorf("four tonnes: %v", err)
	}
}

// What a mount with a thermal resistance loses is what it makes: rise = R·P of one
// mount, and it is softer for it.
func TestSelfHeating(t *testing.T) {
	c := demoResult(t, 1).Compound
	m := block(t, "load: {mass: 400 kg}\nthermal_resistance: 3 K/W\n")
	q := []StiffnessQuery{{25, 296.15, 4e-4}}
	cold, _, err := StiffnessTable(c, m, q, q[0], false)
	if err != nil {
		t.Fatal(err)
	}
	warm, err := HeatTable(c, m, q)
	if err != nil || len(warm.Rows) != 1 {
		t.Fatal(len(warm.Rows), err)
	}
	rise, power := warm.Rows[0][3].Float(), warm.Rows[0][4].Float()
	if math.Abs(rise/(3*power/4)-1) > 1e-6 || !(rise > 1) {
		t.Errorf("a rise of %g K by %g W", rise, power)
	}
	if !(warm.Rows[0][5].Float() < cold.Rows[0][8].Float()) {
		t.Error("warm is not softer than cold")
	}
	if none, err := HeatTable(c, block(t, ""), q); err != nil || len(none.Rows) != 0 {
		t.Error("heat without a resistance", err)
	}
}
