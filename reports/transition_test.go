package reports

import (
	"math"
	"strings"
	"testing"

	"phaselag/models"
	"phaselag/reports/figure"
)

func TestTransitionFigure(t *testing.T) {
	c := damper(t)
	n, ok := transitionFigure(c)
	if !ok {
		t.Fatal("no figure")
	}
	text := look(t, "temperature-curves-damper", n.figure)
	for _, want := range []string{"peak of tan δ, 95 %", "peak of G″, 95 %", "10 Hz, 95 % band"} {
		if !strings.Contains(text, want) {
			t.Errorf("no %q", want)
		}
	}
	if !strings.Contains(n.caption, "Glass transition, read by definition: peak of tan δ at 1 Hz −") {
		t.Errorf("caption: %s", n.caption)
	}
	t.Log(n.caption)
	// Every curve stays inside the domain.
	for _, p := range n.figure.Panels {
		for _, s := range p.Series {
			for _, T := range s.X {
				if T < -50-1e-6 || T > 70+1e-6 {
					t.Errorf("%s goes to %g °C", s.Name, T)
				}
			}
		}
	}
}

// A natural rubber above its glass transition has none to read, and the figure says so.
func TestTransitionOutsideTheDomain(t *testing.T) {
	c := filled(t)
	n, ok := transitionFigure(c)
	if !ok || !strings.Contains(n.caption, "No glass transition is read") {
		t.Errorf("%v: %s", ok, n.caption)
	}
	look(t, "temperature-curves-filled", n.figure)
	tab, err := TransitionTable(c, []float64{10})
	if err != nil || len(tab.Rows) != 2 {
		t.Fatal(err)
	}
	for i, row := range tab.Rows {
		if reason := tab.Strings()[i][len(row)-1]; !math.IsNaN(row[2].Float()) || !strings.Contains(reason, "coldest") {
			t.Errorf("%v", row)
		}
	}
}

func TestTransitionTable(t *testing.T) {
	c := damper(t)
	tab, err := TransitionTable(c, []float64{1, 10})
	if err != nil || len(tab.Rows) != 4 {
		t.Fatalf("%v, %d rows", err, len(tab.Rows))
	}
	for i, row := range tab.Rows {
		if len(row) != len(tab.Columns) {
			t.Fatalf("row %d has %d cells", i, len(row))
		}
		kind := models.PeakOfLossFactor
		if i > 1 {
			kind = models.PeakOfLossModulus
		}
		want, err := c.Transition(kind, row[1].Float(), math.NaN())
		if err != nil || math.Abs(row[2].Float()+zeroC-want.Temperature) > 1e-6 || row[3].Float() != want.U95 {
			t.Errorf("row %d: %v, want %+v: %v", i, row, want, err)
		}
	}
	// The loss modulus has its peak at the lower temperature (common practice, no
	// source), and ten times the frequency moves a peak up.
	T := func(i int) float64 { return tab.Rows[i][2].Float() }
	if !(T(2) < T(0) && T(3) < T(1) && T(0) < T(1) && T(2) < T(3)) {
		t.Errorf("peaks at %g, %g; %g, %g °C", T(0), T(1), T(2), T(3))
	}
	// The datasheet prints what there is to read, and nothing where there is nothing.
	if blocks := transitionBlocks(c); len(blocks) != 1 || len(blocks[0].(figure.Grid).Rows) != 6 {
		t.Errorf("%v", blocks)
	}
	if blocks := transitionBlocks(filled(t)); blocks != nil {
		t.Errorf("%v", blocks)
	}
	if _, err := TransitionTable(c, []float64{-1}); err == nil {
		t.Error("a frequency that is none, and no error")
	}
}
