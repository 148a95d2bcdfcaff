package reports

import (
	"bytes"
	"testing"

	"phaselag/data"
	"phaselag/data/unit"
	"phaselag/fitting"
	"phaselag/models"
	"phaselag/reports/figure"
)

// The page answers by script where there is a compound, and where the laboratory does
// not keep its constants to itself.
func TestSheetAnswers(t *testing.T) {
	c, err := models.Open("../models/testdata/invented.yaml")
	if err != nil {
		t.Fatal(err)
	}
	doc := figure.Document{Title: "invented"}
	for _, v := range []struct {
		name string
		r    *fitting.Result
		set  *data.Sheet
		want bool
	}{
		{"compound", &fitting.Result{Compound: c}, nil, true},
		{"no compound", &fitting.Result{}, nil, false},
		{"settings without sections", &fitting.Result{Compound: c}, &data.Sheet{}, true},
		{"sections with constants", &fitting.Result{Compound: c}, &data.Sheet{Sections: []string{"identity", "constants"}}, true},
		{"sections without constants", &fitting.Result{Compound: c}, &data.Sheet{Sections: []string{"identity", "properties"}}, false},
	} {
		page, err := htmlSheet(v.r, doc, v.set)
		if err != nil {
			t.Fatal(err)
		}
		for _, part := range []string{`id="live-data"`, "<script", "relaxation_time_s", "script-src"} {
			if bytes.Contains(page, []byte(part)) != v.want {
				t.Errorf("%s: %s in the page is %v", v.name, part, !v.want)
			}
		}
	}
}

func TestTestedDecades(t *testing.T) {
	test := func(kind string, lo, hi float64) fitting.TestSummary {
		return fitting.TestSummary{Kind: kind, Frequency: [2]unit.Number{unit.Number(lo), unit.Number(hi)}}
	}
	for _, v := range []struct {
		tests []fitting.TestSummary
		want  [2]float64
	}{
		{nil, [2]float64{}},
		{[]fitting.TestSummary{test("strain sweep", 10, 10), test("frequency sweep", 0.5, 50)}, [2]float64{0.1, 100}},
		{[]fitting.TestSummary{test("frequency sweep", 1, 100), test("frequency sweep", 5, 1000)}, [2]float64{1, 1000}},
		{[]fitting.TestSummary{test("frequency sweep", 10, 10)}, [2]float64{10, 1000}},
		{[]fitting.TestSummary{test("frequency sweep", 0, 10)}, [2]float64{}},
	} {
		if got := testedDecades(&fitting.Result{Tests: v.tests}); got != v.want {
			t.Errorf("%v: %v", v.tests, got)
		}
	}
}
