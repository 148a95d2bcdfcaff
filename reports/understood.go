package reports

import (
	"fmt"
	"io"
	"math"
	"strings"

	"phaselag/data"
)

// Understood writes how a campaign was read: tests, columns, units, points,
// ranges, assumptions, and the findings.
func Understood(w io.Writer, c *data.Campaign, findings []data.Finding) error {
	var b strings.Builder
	fmt.Fprintf(&b, "%s\n", c.Name)
	if c.Compound.Name != "" {
		fmt.Fprintf(&b, "compound %s %s\n", strings.TrimSpace(c.Compound.Name+" "+c.Compound.Polymer), c.Compound.Batch)
	}
	fmt.Fprintf(&b, "moduli are %s moduli, strains single amplitudes (zero to peak)\n", map[data.Modulus]string{data.Shear: "shear", data.Young: "Young's"}[c.Modulus])
	for _, t := range c.Tests {
		fmt.Fprintf(&b, "\n%s: %s, specimen %s, mounting %s, %s\n", t.Name, t.Kind, t.Specimen, t.Mounting, t.Deformation)
		for _, col := range t.Columns {
			fmt.Fprintf(&b, "    %-19s %s in %s (%s)\n", col.Quantity, quoted(col.Heading), unitText(col.Unit), col.File)
		}
		for _, v := range t.StaticValues {
			fmt.Fprintf(&b, "    %.4g MPa at %s strain, %s, %s\n", v.Modulus/1e6, percentText(v.Strain), secondsText(v.Time), tempText(v.Temperature))
		}
		for _, r := range t.Runs {
			fmt.Fprintf(&b, "    %s\n", runText(r, t.Name))
		}
	}
	if len(c.Assumptions) > 0 {
		fmt.Fprintln(&b, "\nassumptions")
		for _, s := range c.Assumptions {
			for i, l := range wrap(s, 74) {
				fmt.Fprintf(&b, "  %s %s\n", map[bool]string{true: "-", false: " "}[i == 0], l)
			}
		}
	}
	fmt.Fprintln(&b)
	if len(findings) == 0 {
		fmt.Fprintln(&b, "no findings")
	}
	if _, err := io.WriteString(w, b.String()); err != nil {
		return err
	}
	return FindingsText(w, findings)
}

func quoted(s string) string {
	if s == "" {
		return "(stated)"
	}
	return fmt.Sprintf("%q", s)
}

func unitText(s string) string {
	if s == "" {
		return "1"
	}
	return s
}

func percentText(x float64) string {
	if math.IsNaN(x) {
		return "unknown"
	}
	return fmt.Sprintf("%.3g %%", 100*x)
}

func secondsText(x float64) string {
	if math.IsNaN(x) {
		return "time unknown"
	}
	return fmt.Sprintf("after %.3g s", x)
}

func tempText(T float64) string {
	if math.IsNaN(T) {
		return "temperature unknown"
	}
	return fmt.Sprintf("%.4g °C", celsius(T))
}

// runText is one line on a run: what varies, from where to where.
func runText(r data.Run, test string) string {
	type span struct {
		name  string
		scale float64
		unit  string
		get   func(data.Point) float64
	}
	used := 0
	for _, p := range r.Points {
		if p.Used {
			used++
		}
	}
	text := fmt.Sprintf("%-12s %3d points", strings.TrimPrefix(strings.TrimPrefix(r.Name, test), ", "), len(r.Points))
	if used < len(r.Points) {
		text += fmt.Sprintf(", %d used", used)
	}
	for _, s := range []span{
		{"f", 1, "Hz", func(p data.Point) float64 { return p.Frequency }},
		{"t", 1, "s", func(p data.Point) float64 { return p.Time }},
		{"strain", 100, "%", func(p data.Point) float64 { return p.Strain }},
		{"", 1e-6, "MPa", func(p data.Point) float64 { return p.Storage }},
	} {
		lo, hi := math.Inf(1), math.Inf(-1)
		for _, p := range r.Points {
			if v := s.get(p) * s.scale; p.Used && !math.IsNaN(v) {
				lo, hi = min(lo, v), max(hi, v)
			}
		}
		switch {
		case lo > hi:
		case hi-lo <= 1e-9*hi:
			text += fmt.Sprintf(", %s %s", strings.TrimSpace(fmt.Sprintf("%s %.3g", s.name, lo)), s.unit)
		default:
			text += fmt.Sprintf(", %s to %.3g %s", strings.TrimSpace(fmt.Sprintf("%s %.3g", s.name, lo)), hi, s.unit)
		}
	}
	return text
}
