package fitting

import (
	"testing"

	"phaselag/data"
	"phaselag/data/demo"
)

// A refinement that begins on a kink of the sum of squares, where a modulus leaves zero,
// makes no step; it must not cost the compound. One campaign of 500 met one: this.
func TestRefineOnAKink(t *testing.T) {
	plan := demo.HM60Plan()
	plan.Errors.TemperatureCommon, plan.Errors.Phase = 0, 0
	c, err := data.OpenFS(demo.Campaign(demo.HM60(), plan, 9130), demo.CampaignFile)
	if err != nil {
		t.Fatal(err)
	}
	r, err := Characterize(c, &Settings{Replicates: -1, Workers: 1})
	if err != nil {
		t.Fatal(err)
	}
	if r.Compound == nil {
		t.Fatalf("no compound: %+v", r.Findings)
	}
	for _, f := range r.Findings {
		if f.Severity == data.Severe {
			t.Errorf("%+v", f)
		}
	}
	if s := float64(r.Compound.Fit.SigmaMagnitude); s > 0.7 {
		t.Errorf("noise of %g %%, drawn was 0.5 %%", s)
	}
}
