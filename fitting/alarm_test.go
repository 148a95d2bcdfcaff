package fitting

import (
	"sync"
	"testing"

	"phaselag/data"
	"phaselag/data/demo"
	"phaselag/models"
)

// TestAlarms counts how often superposition is denied to sound compounds, with
// the bootstrap, and how often a p of 0.02 or less occurs (2 % by design). The
// long form is run by hand:
//
//	go test ./fitting -run TestAlarms -v -campaigns 300 -timeout 0
func TestAlarms(t *testing.T) {
	n := *campaigns
	list := scenarios()[:3]
	if n == 0 {
		n, list = 6, list[1:2]
	}
	for _, sc := range list {
		var mu sync.Mutex
		small, alarms := 0, 0
		eachSeed(5000, n, func(seed uint64) {
			c, err := data.OpenFS(demo.Campaign(sc.truth, sc.plan, seed), "campaign.yaml")
			if err != nil {
				t.Error(err)
				return
			}
			r, err := Characterize(c, &Settings{Workers: 1})
			if err != nil {
				t.Error(err)
				return
			}
			mu.Lock()
			defer mu.Unlock()
			if r.Common.P <= alarmP {
				small++
			}
			if r.Compound.Fit.Superposition.Holds == models.HoldsNo {
				alarms++
			}
		})
		t.Logf("| %s | %d | %.3f | %.3f |", sc.name, n, float64(small)/float64(n), float64(alarms)/float64(n))
		if limit := max(1, 0.04*float64(n)); float64(alarms) > limit {
			t.Errorf("%s: %d alarms in %d sound campaigns", sc.name, alarms, n)
		}
	}
}
