package reports

import (
	"fmt"
	"math"
	"strings"
	"time"

	"phaselag/data"
	"phaselag/fitting/quality"
	"phaselag/reports/figure"
	"phaselag/reports/table"
)

// Release is a batch held against a specification.
type Release struct {
	Batch, Compound, Tested string
	Approved                string // what it was compared with, "" where nothing was
	Basis                   string // "full characterization" or "short release test of 15 points"
	Specification           *data.Specification
	Lines                   []ReleaseLine
	Decision                quality.Verdict
	Notes                   []string
	Inputs                  []string // "file, SHA-256 …"
}

// ReleaseLine is one limit with what was found. Numbers are in Unit; NaN where there is
// none.
type ReleaseLine struct {
	Property, Condition, Unit string
	Value, U95                float64
	Lower, Upper              float64 // the limits
	AcceptLower, AcceptUpper  float64 // the limits less their guard bands
	Conformity                float64 // probability that the true value keeps the limits
	Decision                  quality.Verdict
	Reason                    string // why nothing is decided, "" otherwise
}

// Overall is accepted if all lines are, rejected if one is, undecided otherwise.
func Overall(lines []ReleaseLine) quality.Verdict {
	out := quality.Accepted
	for _, l := range lines {
		switch {
		case l.Decision == quality.Rejected:
			return quality.Rejected
		case l.Decision != quality.Accepted:
			out = quality.Undecided
		}
	}
	if len(lines) == 0 {
		return quality.Undecided
	}
	return out
}

// ReleaseTable lists the limits with what was found.
func ReleaseTable(r *Release) table.Table {
	t := table.Table{Name: "release 1", Columns: []table.Column{
		{Key: "property"}, {Key: "condition"}, {Key: "value", Interval: "U95"}, {Key: "U95", Heading: "± 95 %"}, {Key: "unit"},
		{Key: "lower", Digits: 4}, {Key: "upper", Digits: 4}, {Key: "accept_from", Heading: "from", Digits: 4}, {Key: "accept_to", Heading: "to", Digits: 4},
		{Key: "probability", Heading: "conforms", Digits: 3}, {Key: "decision"},
	}}
	for _, l := range r.Lines {
		decision := string(l.Decision)
		if l.Reason != "" {
			decision += ": " + l.Reason
		}
		t.Rows = append(t.Rows, []table.Cell{
			table.Text(l.Property), table.Text(l.Condition), table.Number(l.Value), table.Number(l.U95), table.Text(l.Unit),
			table.Number(l.Lower), table.Number(l.Upper), table.Number(l.AcceptLower), table.Number(l.AcceptUpper), table.Number(l.Conformity), table.Text(decision),
		})
	}
	t.Assumptions = append(t.Assumptions, ruleText(r.Specification))
	return t
}

// ruleText says by which rule decisions are made.
func ruleText(s *data.Specification) string {
	if s.Rule == data.Simple {
		return "decision rule: simple acceptance, the value alone is held against the limits; a value on a limit is right in half of the cases"
	}
	return fmt.Sprintf("decision rule: accepted where the value keeps %.3g U from the limits, rejected where it lies beyond them by as much, undecided between (JCGM 106, ISO 14253-1)", s.Guard)
}

// Certificate is a release on one page, for PDF and HTML.
func Certificate(r *Release, set *data.Sheet, date time.Time) figure.Document {
	if set == nil {
		set = &data.Sheet{}
	}
	if date.IsZero() {
		date, _ = time.Parse("2006-01-02", r.Tested)
	}
	d := figure.Document{
		Title: "Release of batch " + stated(r.Batch), Subtitle: "Compound " + stated(r.Compound) + ", specification " + r.Specification.Name,
		Running: strings.Trim(r.Compound+", batch "+r.Batch, ", "), Subject: "Release of a batch against a specification", Date: date, Logo: flat(set.Logo),
	}
	if set.Letter {
		d.Paper = figure.Letter
	}
	d.Author, _, _ = strings.Cut(set.Laboratory, "\n")
	grade := map[quality.Verdict]figure.Grade{quality.Accepted: figure.Note, quality.Rejected: figure.Severe}[r.Decision]
	if grade == "" {
		grade = figure.Doubt
	}
	counts := map[quality.Verdict]int{}
	for _, l := range r.Lines {
		counts[l.Decision]++
	}
	text := fmt.Sprintf("%d of %d limits are kept beyond doubt", counts[quality.Accepted], len(r.Lines))
	if n := counts[quality.Rejected]; n > 0 {
		text += fmt.Sprintf(", %d broken beyond doubt", n)
	}
	if n := counts[quality.Undecided] + counts[quality.NotDecided]; n > 0 {
		text += fmt.Sprintf(", %d cannot be decided with the uncertainty of these tests", n)
	}
	if r.Specification.Rule == data.Simple {
		text = strings.ReplaceAll(text, " beyond doubt", " by the value alone")
	}
	d.Lead = append(d.Lead, figure.Callout{Grade: grade, Title: "Batch " + string(r.Decision), Text: text + "."})
	facts := []figure.Fact{
		{Name: "Batch", Value: stated(r.Batch)}, {Name: "Compound", Value: stated(r.Compound)}, {Name: "Tested", Value: stated(r.Tested)}, {Name: "Basis", Value: r.Basis},
	}
	if r.Approved != "" {
		facts = append(facts, figure.Fact{Name: "Approved compound", Value: r.Approved})
	}
	for _, v := range []figure.Fact{{Name: "Laboratory", Value: strings.Join(strings.Fields(strings.ReplaceAll(set.Laboratory, "\n", ", ")), " ")}, {Name: "Customer", Value: set.Customer}, {Name: "Order", Value: set.Order}} {
		if strings.Trim(v.Value, ", ") != "" {
			v.Value = strings.Trim(v.Value, ", ")
			facts = append(facts, v)
		}
	}
	grid := figure.Grid{Columns: []figure.GridColumn{{Heading: "Property"}, {Heading: "At"}, {Heading: "Value ± 95 %"}, {Heading: "Unit"}, {Heading: "Limits"}, {Heading: "Accepted"}, {Heading: "Conforms", Unit: "%"}, {Heading: "Decision"}}}
	for _, l := range r.Lines {
		value := plusMinus(l.Value, l.U95)
		if math.IsNaN(l.Value) {
			value = "–"
		}
		decision := string(l.Decision)
		if l.Reason != "" {
			decision += ": " + l.Reason
		}
		grid.Rows = append(grid.Rows, []string{l.Property, l.Condition, value, plainUnit(l.Unit), span(l.Lower, l.Upper), span(l.AcceptLower, l.AcceptUpper), conforms(l.Conformity), decision})
	}
	notes := append([]string{sentence(ruleText(r.Specification))}, r.Notes...)
	d.Sections = []figure.Section{
		{Blocks: []figure.Block{figure.Facts{Items: facts}, grid, figure.List{Items: notes}}},
	}
	if s := signatures(set); s != nil {
		d.Sections = append(d.Sections, figure.Section{Blocks: s})
	}
	hashes := append([]string{fmt.Sprintf("specification %s, SHA-256 %s", r.Specification.Name, first(r.Specification.SHA256, 16))}, r.Inputs...)
	d.Sections = append(d.Sections, figure.Section{Blocks: []figure.Block{
		figure.Paragraph{Small: true, Text: Caution},
		figure.Paragraph{Small: true, Text: strings.Join(hashes, "; ") + "."},
	}})
	return d
}

func plainUnit(u string) string {
	if u == "1" {
		return ""
	}
	return u
}

// span is a range with one or two ends.
func span(lo, hi float64) string {
	switch {
	case math.IsNaN(lo) && math.IsNaN(hi):
		return "–"
	case math.IsNaN(lo):
		return "≤ " + short(hi)
	case math.IsNaN(hi):
		return "≥ " + short(lo)
	}
	return short(lo) + " to " + short(hi)
}

// conforms is a probability for people, not rounded to certainty.
func conforms(p float64) string {
	switch {
	case math.IsNaN(p):
		return "–"
	case p > 0.999:
		return "> 99.9"
	case p < 0.001:
		return "< 0.1"
	}
	return short(roundTo(100*p, 3))
}
