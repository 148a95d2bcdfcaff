package figuretest

import (
	"fmt"
	"math"
	"strings"
	"time"

	"phaselag/reports/figure"
	"phaselag/reports/table"
)

// Document returns a document with every kind of block, a table that runs over
// pages, and words that fit on no line. All of it is invented.
func Document() figure.Document {
	results := table.Table{Name: "modulus 1", Columns: []table.Column{
		{Key: "frequency_Hz", Heading: "f", Unit: "Hz"},
		{Key: "storage_MPa", Heading: "G′", Unit: "MPa", Interval: "u1"}, {Key: "u1", Heading: "U_{95}", Unit: "MPa"},
		{Key: "loss_factor", Heading: "tan δ", Unit: "–", Interval: "u2"}, {Key: "u2", Heading: "U_{95}", Unit: "–"},
		{Key: "domain", Heading: "domain"}}}
	for i := range 60 {
		f := math.Pow(10, -6+float64(i)/5)
		m := modulus(f)
		domain := "inside"
		if i > 50 {
			domain = "extrapolated: frequency"
		}
		results.Rows = append(results.Rows, []table.Cell{table.Number(f), table.Number(real(m)), table.Number(0.02 * real(m)),
			table.Number(imag(m) / real(m)), table.Number(0.004 + 0.02*imag(m)/real(m)), table.Text(domain)})
	}
	files := figure.Grid{Caption: "Files that were read", Columns: []figure.GridColumn{{Heading: "file"}, {Heading: "rows", Number: true}, {Heading: "SHA-256"}},
		Rows: [][]string{
			{"isotherms.csv", "273", strings.Repeat("0123456789abcdef", 4)},
			{"a-folder/with-a-long-name/" + strings.Repeat("deeper/", 12) + "strain_sweep_at_23_degrees.csv", "15", strings.Repeat("fedcba9876543210", 4)},
		}}
	return figure.Document{
		Title: "HM-00 (invented compound): dynamic properties", Subtitle: "invented numbers for a test of the layout, batch 0000-00",
		Running: "HM-00, invented", Author: "a laboratory that does not exist", Subject: "layout", Date: time.Date(2026, 11, 12, 0, 0, 0, 0, time.UTC),
		Lead: []figure.Block{
			figure.Facts{Items: []figure.Fact{fact("compound", "HM-00, natural rubber (NR), 60 IRHD, 1.12 g/cm³"), fact("specimen", "double shear, ⌀ 25 mm, two layers of 5 mm"),
				fact("conditioning", "6 cycles at 20 % shear strain, rest 1 h"), fact("amplitudes", "single amplitude (zero to peak), shear strain")}},
			figure.Paragraph{Text: "The modulus at T_{ref} = 20 °C and 10 Hz is G′ = 1.19 ± 0.03 MPa with a loss factor of 0.212 ± 0.009 (95 % intervals). Superposition holds: the misfit beyond noise is below 0.3° and 1 % in every isotherm."},
			figure.Callout{Grade: figure.Doubt, Title: "isotherms-do-not-overlap", Text: "The isotherms at −40 °C and −30 °C share 0.2 decade only.",
				Facts: []figure.Fact{fact("rows", "isotherms.csv:12-54"), fact("evidence", "0.21 decade of common modulus, 0.5 wanted"), fact("remedy", "measure one more isotherm at −35 °C")}},
		},
		Sections: []figure.Section{
			{Heading: "Master curve", Blocks: []figure.Block{
				figure.Picture{Figure: MasterCurve(), Caption: "Storage modulus G′, loss modulus G″ and loss factor against reduced frequency f·a_{T}; symbols: measured at four of the thirteen temperatures."},
				figure.Row{Pictures: []figure.Picture{{Figure: ShiftFactors(), Caption: "Shift factors with 95 % intervals and the law that was chosen."}, {Figure: small(Wicket(), 82, 70), Caption: "Wicket plot: points that fall on one line need no vertical shift."}}},
			}},
			{Heading: "Measurements", Blocks: []figure.Block{
				figure.Picture{Figure: Isotherms(), Caption: "All isotherms as measured."},
				figure.Picture{Figure: StrainSweep(), Caption: "Strain sweeps at 23 °C with 95 % bands of the fit."},
			}, Sections: []figure.Section{{Heading: "Files", Blocks: []figure.Block{files,
				figure.Paragraph{Lead: "Greek and signs.", Text: "αβγδεζηθ κλμν πρσ τφχψω ΓΔΘΛΣΦΩ, primes ′ ″, 10^{−3} ≤ f ≤ 10^{6} Hz, √3·ε, ½, ±, ×, °, µ, ≈, ∞, Příliš žluťoučký kůň; without a glyph: 漢 😀 and a\ttab."}}}}},
			{Heading: "Table of moduli", Blocks: []figure.Block{figure.GridOf(results, "Moduli at 20 °C and 0.2 % strain amplitude")}},
			{Heading: "Findings and assumptions", Blocks: []figure.Block{
				figure.Callout{Grade: figure.Severe, Title: "phase-common-part-not-stated", Text: strings.Repeat("A common error of the phase cannot be seen in repeats. ", 6)},
				figure.Callout{Grade: figure.Note, Title: "no findings in the strain sweeps"},
				figure.List{Items: assumptions(9)},
				figure.List{Numbered: true, Items: []string{"Measure.", "Fit.", "Doubt."}},
				figure.Paragraph{Small: true, Text: "Everything on these pages is invented."},
			}},
		},
	}
}

func fact(name, value string) figure.Fact { return figure.Fact{Name: name, Value: value} }

func small(f figure.Figure, w, h float64) figure.Figure {
	f.Width, f.Height = w, h
	return f
}

func assumptions(n int) []string {
	var out []string
	for i := range n {
		out = append(out, fmt.Sprintf("assumption %d: the strain amplitude of the isotherms is taken as nominal, because the file has no column for it and the campaign does not say how it was measured", i+1))
	}
	return out
}
