package reports

import (
	"fmt"
	"io"
	"math"

	"phaselag/fitting/peak"
	"phaselag/reports/table"
)

// PeakTable says how far the loss peaks of two batches lie apart.
func PeakTable(s peak.Shift, frequency float64) table.Table {
	t := table.Table{Name: "peak-shift 1", Columns: []table.Column{
		{Key: "quantity"}, {Key: "value", Interval: "U95"}, {Key: "U95", Heading: "± 95 %"}, {Key: "unit"}, {Key: "p", Digits: 2}, {Key: "smallest", Heading: "smallest seen", Digits: 2},
	}}
	nan := math.NaN()
	row := func(name string, value, u float64, unit string, p, smallest float64) {
		t.Rows = append(t.Rows, []table.Cell{table.Text(name), table.Number(value), table.Number(u), table.Text(unit), table.Number(p), table.Number(smallest)})
	}
	row("loss peak of the reference", s.A.T, s.A.U95, "°C", nan, nan)
	row("loss peak of the batch", s.B.T, s.B.U95, "°C", nan, nan)
	row("shift of the loss peak", s.DT, s.U95, "K", s.P, s.SmallestDT)
	row("ratio of the loss factors", s.Ratio, s.RatioU, "1", nan, s.SmallestFactor-1)
	t.Assumptions = append(t.Assumptions,
		fmt.Sprintf("peaks of the loss factor over temperature at %.4g Hz, from %d temperatures about them; the calibration of one thermometer cancels", frequency, s.N))
	if s.SameShape < 0.02 {
		t.Assumptions = append(t.Assumptions, fmt.Sprintf("doubt: the two peaks have different shapes (p = %.2g), so that no single shift describes them", s.SameShape))
	}
	return t
}

// PeakVerdict says in words whether the shift is real.
func PeakVerdict(w io.Writer, s peak.Shift) error {
	verdict := "no shift of the loss peak can be claimed"
	if s.P < 0.05 {
		direction := "higher"
		if s.DT < 0 {
			direction = "lower"
		}
		verdict = fmt.Sprintf("the loss peak of the batch lies %.2g ± %.2g K %s", math.Abs(s.DT), s.U95, direction)
	}
	_, err := fmt.Fprintf(w, "%s (p = %.2g); a shift of %.2g K would have been seen\nin nine of ten cases\n", verdict, s.P, s.SmallestDT)
	return err
}
