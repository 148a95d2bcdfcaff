package reports

import (
	"os"
	"strconv"
	"time"

	"phaselag/data"
	"phaselag/fitting"
	"phaselag/reports/figure"
	"phaselag/reports/pdf"
)

// outputs makes every file of a result's directory but result.json.
func outputs(r *fitting.Result) ([]file, error) {
	var out []file
	if r.Compound != nil {
		y, err := r.Compound.YAML()
		if err != nil {
			return nil, err
		}
		j, err := r.Compound.JSON()
		if err != nil {
			return nil, err
		}
		out = append(out, file{"compound.yaml", y}, file{"compound.json", j})
	}
	doc := Datasheet(r, sourceDate(), nil)
	p, err := pdf.Bytes(doc)
	if err != nil {
		return nil, err
	}
	h, err := htmlSheet(r, doc, nil)
	if err != nil {
		return nil, err
	}
	out = append(out, file{"datasheet.pdf", p}, file{"datasheet.html", h})
	for _, f := range figures(r) {
		svg, err := figure.SVG(f.figure)
		if err != nil {
			return nil, err
		}
		out = append(out, file{"figures/" + f.name + ".svg", svg})
	}
	tables, err := csvFiles(r)
	if err != nil {
		return nil, err
	}
	return append(out, tables...), nil
}

// sourceDate is the date of SOURCE_DATE_EPOCH (reproducible-builds.org), the
// zero time where it is not set.
func sourceDate() time.Time {
	s, err := strconv.ParseInt(os.Getenv("SOURCE_DATE_EPOCH"), 10, 64)
	if err != nil {
		return time.Time{}
	}
	return time.Unix(s, 0).UTC()
}

// Sheets makes the datasheet alone, as PDF and as HTML, with a laboratory's settings.
func Sheets(r *fitting.Result, set *data.Sheet) (asPDF, asHTML []byte, err error) {
	doc := Datasheet(r, sourceDate(), set)
	if asPDF, err = pdf.Bytes(doc); err != nil {
		return nil, nil, err
	}
	if asHTML, err = htmlSheet(r, doc, set); err != nil {
		return nil, nil, err
	}
	return asPDF, asHTML, nil
}
