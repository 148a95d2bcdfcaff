package reports

import (
	"fmt"
	"io"
	"math"
	"strings"

	"phaselag/data"
	"phaselag/fitting/changes"
	"phaselag/models"
	"phaselag/reports/table"
)

// ChangesTable lists what changed, change by change.
func ChangesTable(c *changes.Comparison) table.Table {
	t := table.Table{Name: "changes 1", Columns: []table.Column{
		{Key: "change"}, {Key: "value", Interval: "U95"}, {Key: "U95", Heading: "± 95 %"}, {Key: "unit"}, {Key: "p", Digits: 2}, {Key: "real"}, {Key: "smallest", Heading: "smallest seen", Digits: 2},
	}, Assumptions: c.Assumptions}
	for _, v := range c.Changes {
		verdict := "no"
		switch {
		case !v.Determined:
			verdict = "not determined: " + v.Reason
		case v.Real:
			verdict = "yes"
		}
		t.Rows = append(t.Rows, []table.Cell{table.Text(string(v.Kind)), table.Number(v.Value), table.Number(v.U95), table.Text(v.Kind.Unit()), table.Number(v.P), table.Text(verdict), table.Number(v.Smallest)})
	}
	return t
}

// doubtfulMisfit is the p from which on the changes do not describe the difference.
const doubtfulMisfit = 0.01

// ChangesVerdict says it in words.
func ChangesVerdict(w io.Writer, c *changes.Comparison) error {
	var lines []string
	for _, v := range c.Changes {
		if !v.Real {
			continue
		}
		switch v.Kind {
		case changes.Temperature:
			lines = append(lines, fmt.Sprintf("the glass transition lies %.2g ± %.2g K %s", math.Abs(v.Value), v.U95, higher(v.Value)))
		default:
			lines = append(lines, fmt.Sprintf("%s %s by %.2g ± %.2g %%", strings.TrimSuffix(strings.TrimSuffix(string(v.Kind), " factor"), " change"), higher(v.Value-1), 100*math.Abs(v.Value-1), 100*v.U95))
		}
	}
	if lines == nil {
		lines = append(lines, "no change can be claimed")
	}
	lines[0] = strings.ToUpper(lines[0][:1]) + lines[0][1:]
	what := "noise"
	if c.OfCompounds {
		what = "left undescribed"
	}
	text := strings.Join(lines, "; ") + fmt.Sprintf(".\n%d points, %s %.2g %% and %.2g°; family of changes at 5 %% (Holm).\n", c.Points, what, 100*c.SigmaM, c.SigmaPhase*180/math.Pi)
	if c.Misfit < doubtfulMisfit {
		text += fmt.Sprintf("doubt: these changes do not describe all of the difference (p = %.2g): the batch\ndiffers in another way, too, or something went wrong with its tests.\n", c.Misfit)
	}
	_, err := io.WriteString(w, text)
	return err
}

func higher(x float64) string {
	if x < 0 {
		return "lower"
	}
	return "higher"
}

// FoundBy reads the property of a limit from a comparison: a change, or the modulus that
// the changes make of the approved compound's.
func FoundBy(c *changes.Comparison, l data.Limit) Found {
	if !l.Property.AtCondition() {
		v, ok := c.Found(string(l.Property))
		switch {
		case !ok:
			return notFound("no change has the name %s", l.Property)
		case !v.Determined:
			return notFound("not determined: %s", v.Reason)
		}
		return Found{Value: v.Value, U95: v.U95, Freedom: c.Freedom}
	}
	m, err := c.Modulus(models.Condition{Frequency: l.Frequency, Temperature: l.Temperature, Strain: l.Strain})
	if err != nil {
		return notFound("%v", err)
	}
	return pick(m, l.Property, c.Freedom)
}

// ReleaseByPoints is a release by a short test that was compared with the approved
// compound.
func ReleaseByPoints(campaign *data.Campaign, approved *models.Compound, c *changes.Comparison, spec *data.Specification) *Release {
	r := Decide(spec, func(l data.Limit) Found { return FoundBy(c, l) })
	r.Batch, r.Compound = campaign.Compound.Batch, campaign.Compound.Name
	for _, t := range campaign.Tests {
		r.Tested = max(r.Tested, t.Tested)
	}
	r.Basis = fmt.Sprintf("release test of %d points against the approved compound", c.Points)
	r.Approved = strings.Trim(approved.Compound.Name+", batch "+approved.Compound.Batch, ", ")
	r.Notes = append(r.Notes, "Only the changes of the approved compound that the program lists were fitted: shift of the transition, stiffness, loss, filler network.")
	for _, a := range c.Assumptions {
		r.Notes = append(r.Notes, sentence(a))
	}
	if c.Misfit < doubtfulMisfit {
		r.Notes = append(r.Notes, fmt.Sprintf("These changes do not describe all of the difference (p = %.2g): a full characterization is due.", c.Misfit))
		if r.Decision == "accepted" {
			r.Decision = "undecided"
		}
	}
	for _, in := range campaign.Inputs {
		r.Inputs = append(r.Inputs, fmt.Sprintf("%s, SHA-256 %s", in.File, first(in.SHA256, 16)))
	}
	return r
}
