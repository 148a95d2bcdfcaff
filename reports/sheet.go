package reports

import (
	"fmt"
	"math"
	"strings"

	"phaselag/data"
	"phaselag/fitting"
	"phaselag/models"
	"phaselag/reports/figure"
	"phaselag/reports/table"
)

// psi is one pound-force per square inch in Pa: 0.45359237·9.80665/0.0254² (by
// definition of its parts).
const psi = 0.45359237 * 9.80665 / (0.0254 * 0.0254)

func fahrenheit(celsius float64) float64 { return celsius*1.8 + 32 }

// inchPound is a table with moduli in psi and temperatures in °F.
func inchPound(t table.Table) table.Table {
	t.Columns = append([]table.Column{}, t.Columns...)
	rows := make([][]table.Cell, len(t.Rows))
	for i, r := range t.Rows {
		rows[i] = append([]table.Cell{}, r...)
	}
	t.Rows = rows
	for j := range t.Columns {
		c := &t.Columns[j]
		var turn func(float64) float64
		switch c.Unit {
		case "MPa":
			c.Unit, turn = "psi", func(x float64) float64 { return x * 1e6 / psi }
		case "°C":
			c.Unit, turn = "°F", fahrenheit
		default:
			continue
		}
		for _, r := range rows {
			r[j] = table.Number(turn(r[j].Float()))
		}
	}
	return t
}

// atConditions answers at the laboratory's standard conditions; what lies outside
// the domain is said in words, in place of numbers.
func atConditions(c *models.Compound, list []data.SheetCondition) (t table.Table, outside []string) {
	var q []models.Condition
	for _, v := range list {
		q = append(q, models.Condition{Frequency: v.Frequency, Temperature: v.Temperature, Strain: v.Strain})
	}
	t, _, err := ModulusTable(c, q, false)
	if err != nil {
		return table.Table{Name: "modulus 1"}, []string{sentence(err.Error())}
	}
	for i, row := range t.Rows {
		if reason, ok := row[len(row)-1].Value().(string); ok && strings.HasPrefix(reason, "outside") {
			outside = append(outside, fmt.Sprintf("Row %d: %s", i+1, sentence(reason)))
		}
	}
	return t, outside
}

// method says how the numbers were made, in the words of the standards.
func method(r *fitting.Result, set *data.Sheet) []figure.Block {
	if r.Compound == nil {
		return nil
	}
	c := r.Compound
	text := "Storage and loss moduli are those of forced oscillation (terms as in ISO 4664-1 and ISO 6721-1). "
	if len(r.Isotherms) > 1 {
		text += "The isotherms were superposed on frequency; a spectrum of relaxation times, the shift law"
		if c.Amplitude.Law != models.AmplitudeNone {
			text += ", the strain dependence"
		}
		text += " and the errors of temperature and specimens were found in one least-squares fit to magnitude and phase of all points used. Unshifted segments, master curve, shift factors and the form of the plots follow ISO 18437-6, 7.1"
		text += "; the closed-form overlap shifts of that standard stand beside the fitted ones in tables/shift-factors.csv. "
	} else {
		text += "A spectrum of relaxation times was found by a least-squares fit to magnitude and phase of all points used. "
	}
	text += "Intervals are for 95 % and hold the noise found in the measurements, the scatter of temperature from run to run, differences between specimens, and the common uncertainties stated under provenance (JCGM 100)."
	blocks := []figure.Block{figure.Paragraph{Text: text}}
	if set.Method != "" {
		blocks = append(blocks, figure.Paragraph{Lead: "Laboratory.", Text: strings.TrimSpace(set.Method)})
	}
	trace := "not stated by the laboratory"
	if set.Trace != "" {
		trace = strings.TrimSpace(set.Trace)
	}
	return append(blocks, figure.Paragraph{Lead: "Traceability.", Text: sentence(trace)})
}

// signatures leaves room for the hand.
func signatures(set *data.Sheet) []figure.Block {
	if len(set.Signatories) == 0 {
		return nil
	}
	g := figure.Grid{Columns: []figure.GridColumn{{Heading: "Name"}, {Heading: "Function"}, {Heading: "Date"}, {Heading: "Signature"}}}
	for _, s := range set.Signatories {
		g.Rows = append(g.Rows, []string{s.Name, s.Role, "____________", "____________________________"})
	}
	return []figure.Block{g}
}

// family is what general tables say of a rubber, for orientation.
type family struct {
	name       string
	transition [2]float64 // °C, the spread between tables
	loss       [2]float64 // loss factor at 10 to 100 Hz near room temperature
}

// families by ISO 1629 symbol. Transitions: the spread between three public tables of
// glass transitions; loss factors: one public table of mixed origin, for filled
// compounds. Values from memory, orientation only.
var families = map[string]family{
	"NR": {"natural rubber", [2]float64{-72, -60}, [2]float64{0.05, 0.15}}, "IR": {"isoprene rubber", [2]float64{-72, -60}, [2]float64{0.05, 0.15}},
	"BR": {"butadiene rubber", [2]float64{-112, -100}, [2]float64{0.03, 0.10}}, "SBR": {"styrene-butadiene rubber", [2]float64{-60, -50}, [2]float64{0.10, 0.25}},
	"CR": {"chloroprene rubber", [2]float64{-50, -43}, [2]float64{0.08, 0.20}}, "NBR": {"nitrile rubber", [2]float64{-50, -25}, [2]float64{0.10, 0.30}},
	"IIR": {"butyl rubber", [2]float64{-73, -66}, [2]float64{0.20, 0.50}}, "CIIR": {"chlorobutyl rubber", [2]float64{-73, -66}, [2]float64{0.25, 0.92}},
	"EPDM": {"ethylene-propylene-diene rubber", [2]float64{-55, -55}, [2]float64{0.05, 0.15}}, "VMQ": {"silicone rubber", [2]float64{-127, -125}, [2]float64{0.10, 0.30}},
	"FKM": {"fluorocarbon rubber", [2]float64{-10, -10}, [2]float64{0.15, 0.35}},
}

// typical holds the compound against what is usual for its polymer.
func typical(r *fitting.Result, _ *data.Sheet) figure.Section {
	s := figure.Section{Heading: "Beside typical values of the polymer"}
	f, ok := families[strings.ToUpper(strings.TrimSpace(r.Campaign.Compound.Polymer))]
	if !ok || r.Compound == nil {
		return s
	}
	g := figure.Grid{Columns: []figure.GridColumn{{Heading: "Property"}, {Heading: "This compound"}, {Heading: "Usual for " + f.name}, {Heading: "Verdict"}}}
	q := models.Condition{Frequency: 10, Temperature: 23 + zeroC, Strain: math.NaN()}
	if m, err := r.Compound.Modulus(q); err == nil {
		verdict := "usual"
		switch {
		case m.LossFactor+m.LossFactorU95 < f.loss[0]:
			verdict = "lower than usual"
		case m.LossFactor-m.LossFactorU95 > f.loss[1]:
			verdict = "higher than usual"
		}
		g.Rows = append(g.Rows, []string{"loss factor at 10 Hz, 23 °C", plusMinus(m.LossFactor, m.LossFactorU95), short(f.loss[0]) + " to " + short(f.loss[1]), verdict})
	}
	usual := rangeText(f.transition[0], f.transition[1]) + " °C"
	own := "not reached: the coldest test is at " + short(r.Compound.Domain.Temperature[0]) + " °C"
	if r.Compound.Domain.Temperature[0] < f.transition[1]+20 {
		own = "see temperature dependence"
	}
	g.Rows = append(g.Rows, []string{"glass transition (static, by calorimetry)", own, usual, "a dynamic reading lies some ten kelvins higher"})
	s.Blocks = []figure.Block{g, figure.Paragraph{Small: true, Text: "Orientation only, from general reference tables that differ among themselves; fillers, plasticisers and crosslinks move all of these. They are no limits."}}
	return s
}
