package demo

import (
	"bytes"
	"fmt"
	"strconv"
)

// campaignFile writes the campaign file. statics holds, test by test, the value
// of a static test.
func campaignFile(truth Truth, plan Plan, statics []string) []byte {
	var b bytes.Buffer
	line := func(indent, key, value string) {
		if value != "" {
			fmt.Fprintf(&b, "%s%s: %s\n", indent, key, value)
		}
	}
	for _, h := range plan.Head {
		fmt.Fprintf(&b, "# %s\n", h)
	}
	line("", "campaign", quoted(plan.Title))
	line("", "laboratory", quoted(plan.Laboratory))
	line("", "vulcanised", plan.Vulcanised)
	fmt.Fprintln(&b, "compound:")
	line("  ", "name", quoted(truth.Name))
	line("  ", "polymer", plan.Polymer)
	line("  ", "batch", quoted(plan.Batch))
	line("  ", "hardness", plan.Hardness)
	line("  ", "density", plan.Density)
	if len(plan.Specimens) > 0 {
		fmt.Fprintln(&b, "specimens:")
	}
	for _, s := range plan.Specimens {
		fmt.Fprintf(&b, "  %s: {shape: double shear, diameter: %s mm, thickness: %s mm, measured: true}\n",
			s.Name, short(s.Diameter), short(s.Thickness))
	}
	fmt.Fprintln(&b, "tests:")
	for i, t := range plan.Tests {
		fmt.Fprintf(&b, "  - name: %s\n", t.Name)
		line("    ", "kind", string(t.Kind))
		line("    ", "file", t.File)
		line("    ", "deformation", "shear")
		line("    ", "specimen", t.Specimen)
		line("    ", "mounting", quoted(t.Mounting))
		line("    ", "tested", t.Tested)
		if !t.OmitStrain && t.Kind != Static {
			line("    ", "amplitude", "zero to peak")
			line("    ", "strain_source", "measured")
		}
		line("    ", "control", "displacement")
		if t.Kind == TemperatureSweep && t.Rate != 0 {
			line("    ", "rate", short(t.Rate)+" K/min")
		}
		if t.RampTime != 0 {
			line("    ", "ramp_time", short(t.RampTime)+" s")
		}
		if d := direction(t); d != "" {
			line("    ", "direction", d)
		}
		line("    ", "dwell", t.Dwell)
		line("    ", "conditioning", t.Conditioning)
		if statics[i] != "" {
			fmt.Fprintf(&b, "    values:\n      - %s\n", statics[i])
		}
	}
	if len(plan.Analysis) > 0 {
		fmt.Fprintln(&b, "analysis:")
		for _, a := range plan.Analysis {
			fmt.Fprintf(&b, "  %s\n", a)
		}
	}
	if !plan.Unstated {
		e := plan.Errors
		fmt.Fprintln(&b, "uncertainty:")
		line("  ", "temperature_scatter", short(e.TemperatureScatter)+" K")
		line("  ", "temperature_common", short(e.TemperatureCommon)+" K")
		line("  ", "geometry", short(e.Geometry*100)+" %")
		line("  ", "phase", short(e.Phase)+" deg")
	}
	return b.Bytes()
}

// direction says which way a test's own quantity goes.
func direction(t Test) string {
	var list []float64
	switch t.Kind {
	case FrequencySweep:
		list = t.Frequencies
	case StrainSweep:
		list = t.Strains
	case TemperatureSweep:
		list = t.Temperatures
	}
	switch {
	case len(list) < 2:
		return ""
	case list[len(list)-1] > list[0]:
		return "ascending"
	}
	return "descending"
}

// quoted puts a text that is not empty in double quotes, which every YAML
// reader takes as text.
func quoted(s string) string {
	if s == "" {
		return ""
	}
	return strconv.Quote(s)
}

// short writes a stated number; twelve digits hide what 1.5/100·100 leaves.
func short(x float64) string { return strconv.FormatFloat(x, 'g', 12, 64) }
