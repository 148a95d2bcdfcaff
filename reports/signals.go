package reports

import (
	"fmt"
	"math"
	"strings"

	"phaselag/data"
	"phaselag/reports/table"
)

// SignalTable lists what was found in the segments of raw signals, with the standard
// uncertainties that their noise leaves.
func SignalTable(signals []data.Signal) table.Table {
	force, travel, stiffness, energy := "N", "mm", "N/mm", "mJ"
	scale := 1e3
	if len(signals) > 0 && signals[0].Torsion {
		force, travel, stiffness, scale = "N·m", "rad", "N·m/rad", 1
	}
	u := func(key, heading, unit, label string) []table.Column {
		return []table.Column{{Key: key, Heading: heading, Unit: unit, Interval: "u_" + key}, {Key: "u_" + key, Heading: label, Unit: unit}}
	}
	t := table.Table{Name: "signals 1", Columns: []table.Column{{Key: "row"}, {Key: "temperature_C", Heading: "T", Unit: "°C", Digits: 3}}}
	t.Columns = append(t.Columns, u("frequency_Hz", "f", "Hz", "± f")...)
	t.Columns = append(t.Columns, u("displacement", "x", travel, "± x")...)
	t.Columns = append(t.Columns, u("force", "F", force, "± F")...)
	t.Columns = append(t.Columns, u("magnitude", "|K*|", stiffness, "± |K*|")...)
	t.Columns = append(t.Columns, u("loss_angle_deg", "δ", "°", "± δ")...)
	t.Columns = append(t.Columns, u("third_harmonic_percent", "3rd", "%", "± 3rd")...)
	t.Columns = append(t.Columns, u("energy_mJ", "loop", energy, "± loop")...)
	t.Columns = append(t.Columns, table.Column{Key: "cycles", Digits: 3}, table.Column{Key: "doubts"})
	const deg = 180 / math.Pi
	for _, g := range signals {
		r := g.Result
		if g.Err != nil {
			row := make([]table.Cell, len(t.Columns))
			for i := range row {
				row[i] = table.Number(math.NaN())
			}
			row[0], row[len(row)-1] = table.Number(float64(g.Row)), table.Text(g.Err.Error())
			t.Rows = append(t.Rows, row)
			continue
		}
		var doubts []string
		for _, d := range r.Doubts {
			doubts = append(doubts, string(d.Code))
		}
		t.Rows = append(t.Rows, []table.Cell{
			table.Number(float64(g.Row)), table.Number(math.Round(100*(g.Temperature-273.15))/100 + 0),
			table.Number(r.Frequency), table.Number(r.UFrequency),
			table.Number(scale * r.Displacement.Amplitude), table.Number(scale * r.Displacement.UAmplitude),
			table.Number(r.Force.Amplitude), table.Number(r.Force.UAmplitude),
			table.Number(r.Magnitude / scale), table.Number(r.UMagnitude / scale),
			table.Number(deg * r.LossAngle), table.Number(deg * r.ULossAngle),
			table.Number(100 * r.Nonlinearity), table.Number(100 * r.UNonlinearity),
			table.Number(1e3 * r.Energy), table.Number(1e3 * r.UEnergy),
			table.Number(r.Cycles), table.Text(strings.Join(doubts, " ")),
		})
	}
	return t
}

// signalLines writes the segments in 80 columns, and their doubts in words below.
func signalLines(b *strings.Builder, in *data.Inspection) error {
	samples := 0
	for _, g := range in.Signals {
		samples += g.Last - g.First + 1
	}
	fmt.Fprintf(b, "raw signals of %d segments, %d samples; single amplitudes, ± standard\nuncertainty from the noise\n\n", len(in.Signals), samples)
	full := SignalTable(in.Signals)
	// The narrow table shows row, T, f, x, F, |K*|, δ and its uncertainty, third
	// harmonic, loop and cycles; rounding goes by the uncertainties.
	words := full.Strings()
	show := []int{0, 1, 2, 4, 6, 8, 10, 11, 12, 14, 16}
	short := table.Table{Name: full.Name}
	for _, j := range show {
		col := full.Columns[j]
		short.Columns = append(short.Columns, table.Column{Key: col.Key, Heading: col.Heading, Unit: col.Unit})
	}
	const most = 24
	for i := range words {
		if i == most {
			break
		}
		var row []table.Cell
		for _, j := range show {
			row = append(row, table.Text(words[i][j]))
		}
		short.Rows = append(short.Rows, row)
	}
	if err := table.Write(b, table.Terminal, short); err != nil {
		return err
	}
	if n := len(full.Rows) - most; n > 0 {
		fmt.Fprintf(b, "and %d more\n", n)
	}
	seen := map[string]int{}
	var order []string
	first := map[string]string{}
	for _, g := range in.Signals {
		if g.Err != nil {
			order, first["unusable"] = appendOnce(order, "unusable", seen), fmt.Sprintf("row %d: %v", g.Row, g.Err)
			continue
		}
		for _, d := range g.Result.Doubts {
			code := string(d.Code)
			if seen[code] == 0 {
				first[code] = fmt.Sprintf("row %d: %s: %s", g.Row, d.Severity, d.Evidence)
				if d.Remedy != "" {
					first[code] += "; " + d.Remedy
				}
			}
			order = appendOnce(order, code, seen)
		}
	}
	if len(order) > 0 {
		fmt.Fprintf(b, "\ndoubts\n")
	}
	for _, code := range order {
		text := fmt.Sprintf("%s (%d of %d segments), %s", code, seen[code], len(in.Signals), first[code])
		for i, l := range wrap(text, 76) {
			fmt.Fprintf(b, "  %s%s\n", map[bool]string{true: "- ", false: "  "}[i == 0], l)
		}
	}
	return nil
}

func appendOnce(list []string, s string, seen map[string]int) []string {
	seen[s]++
	if seen[s] == 1 {
		return append(list, s)
	}
	return list
}
