package reports

import (
	"math"
	"slices"

	"phaselag/data"
	"phaselag/fitting"
	"phaselag/reports/figure"
	"phaselag/reports/html"
	"phaselag/reports/interactive"
)

// htmlSheet is the datasheet as a page: doc, and where there is a compound a part that
// answers and draws by script. That part holds the whole compound: where a laboratory
// leaves the constants out of its sheet, it is left out too.
func htmlSheet(r *fitting.Result, doc figure.Document, set *data.Sheet) ([]byte, error) {
	if r.Compound == nil || set != nil && len(set.Sections) > 0 && !slices.Contains(set.Sections, "constants") {
		return html.Bytes(doc)
	}
	live, err := interactive.New(r.Compound, interactive.Options{OwnStrainNote: OwnStrainNote(r.Compound), Frequencies: testedDecades(r)})
	if err != nil {
		return nil, err
	}
	return html.BytesLive(doc, live)
}

// testedDecades are the whole decades around the frequencies of the sweeps, Hz, two
// at least; zero where there is none.
func testedDecades(r *fitting.Result) [2]float64 {
	lo, hi := math.Inf(1), math.Inf(-1)
	for _, t := range r.Tests {
		if f := t.Frequency; t.Kind == "frequency sweep" && f[0] > 0 {
			lo, hi = min(lo, float64(f[0])), max(hi, float64(f[1]))
		}
	}
	if !(lo <= hi) {
		return [2]float64{}
	}
	a, b := math.Floor(math.Log10(lo)+1e-9), math.Ceil(math.Log10(hi)-1e-9)
	if b < a+2 {
		b = a + 2
	}
	return [2]float64{math.Pow(10, a), math.Pow(10, b)}
}
