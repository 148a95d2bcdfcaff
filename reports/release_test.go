package reports

import (
	"math"
	"strings"
	"testing"
	"time"

	"phaselag/data"
	"phaselag/fitting/quality"
)

// A batch's own values are held against limits set about them: one clear, one within the
// guard band, one broken, one that cannot be had.
func TestRelease(t *testing.T) {
	c := demoResult(t, 1).Compound
	nan := math.NaN()
	at := func(p data.Property, f, T, lower, upper float64) data.Limit {
		return data.Limit{Property: p, Frequency: f, Temperature: T, Strain: nan, Lower: lower, Upper: upper}
	}
	g := ValueOf(c, at(data.StorageModulus, 10, 296.15, 0, nan))
	eta := ValueOf(c, at(data.LossFactor, 10, 296.15, 0, nan))
	spec := &data.Specification{Name: "s", Rule: data.Guarded, Guard: 1, Limits: []data.Limit{
		at(data.StorageModulus, 10, 296.15, g.Value-2*g.U95, g.Value+2*g.U95),
		at(data.StorageModulus, 10, 296.15, nan, g.Value+0.5*g.U95),
		at(data.LossFactor, 10, 296.15, nan, eta.Value-1.5*eta.U95),
		at(data.LossFactor, 10, 500, nan, 1),
		{Property: data.TemperatureShift, Frequency: nan, Temperature: nan, Strain: nan, Lower: -1, Upper: 1},
	}}
	r := ReleaseOf(c, spec, func(l data.Limit) Found { return ValueOf(c, l) })
	want := []quality.Verdict{quality.Accepted, quality.Undecided, quality.Rejected, quality.NotDecided, quality.NotDecided}
	for i, l := range r.Lines {
		if l.Decision != want[i] {
			t.Errorf("line %d: %s, should be %s: %+v", i+1, l.Decision, want[i], l)
		}
	}
	if l := r.Lines[0]; math.Abs(l.AcceptLower-(g.Value-g.U95)/1e6) > 1e-12*l.Value || l.Unit != "MPa" || l.Conformity < 0.999 {
		t.Errorf("%+v", l)
	}
	if l := r.Lines[1]; !math.IsNaN(l.AcceptLower) || math.Abs(l.Conformity-0.835) > 0.02 { // Φ(0.98) = 0.836 (normal)
		t.Errorf("%+v", l)
	}
	if r.Decision != quality.Rejected {
		t.Errorf("the batch is %s", r.Decision)
	}
	doc := Certificate(r, nil, time.Time{})
	if len(doc.Lead) != 1 || !strings.Contains(doc.Title, c.Compound.Batch) {
		t.Errorf("%+v", doc.Lead)
	}
	spec.Limits = spec.Limits[:1]
	if r := ReleaseOf(c, spec, func(l data.Limit) Found { return ValueOf(c, l) }); r.Decision != quality.Accepted {
		t.Errorf("one good limit: %s", r.Decision)
	}
	spec.Compound = "another"
	if r := ReleaseOf(c, spec, func(l data.Limit) Found { return ValueOf(c, l) }); r.Decision != quality.Undecided || len(r.Notes) == 0 {
		t.Errorf("a specification of another compound: %s", r.Decision)
	}
}
