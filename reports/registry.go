package reports

import (
	"fmt"
	"io"
	"math"
	"strings"

	"phaselag/data/register"
	"phaselag/fitting/quality"
	"phaselag/reports/table"
)

// RegisterTable lists entries of a register.
func RegisterTable(list []register.Summary) table.Table {
	t := table.Table{Name: "batches 1", Columns: []table.Column{{Key: "entry"}, {Key: "batch"}, {Key: "compound"}, {Key: "tested"}, {Key: "registered"}, {Key: "who"}, {Key: "values"}, {Key: "remark"}}}
	for _, s := range list {
		remark := ""
		switch {
		case s.CorrectedBy != 0:
			remark = fmt.Sprintf("corrected by %d", s.CorrectedBy)
		case s.Corrects != 0:
			remark = fmt.Sprintf("corrects %d: %s", s.Corrects, s.Why)
		}
		t.Rows = append(t.Rows, []table.Cell{table.Number(float64(s.ID)), table.Text(s.Batch), table.Text(s.Compound), table.Text(s.Tested), table.Text(day(s.Added)), table.Text(s.Who), table.Number(float64(s.Values)), table.Text(remark)})
	}
	return t
}

// day is the date of an RFC 3339 time.
func day(s string) string {
	if len(s) >= 10 {
		return s[:10]
	}
	return s
}

// EntryTable lists the values of an entry.
func EntryTable(e *register.Entry) table.Table {
	t := table.Table{Name: "batch 1", Columns: []table.Column{{Key: "property"}, {Key: "condition"}, {Key: "value", Interval: "U95"}, {Key: "U95", Heading: "± 95 %"}, {Key: "unit"}}}
	for _, v := range e.Values {
		t.Rows = append(t.Rows, []table.Cell{table.Text(v.Name), table.Text(v.Condition), table.Number(v.Value), table.Number(v.U95), table.Text(v.Unit)})
	}
	return t
}

// EntryLines says what an entry is.
func EntryLines(w io.Writer, e *register.Entry) error {
	text := fmt.Sprintf("entry %d: batch %s of %s, tested %s\nregistered %s by %s, compound file of %d bytes, SHA-256 %s…\n", e.ID, e.Batch, e.Compound, e.Tested, e.Added, e.Who, len(e.File), first(e.SHA256, 12))
	if e.Corrects != 0 {
		text += fmt.Sprintf("corrects entry %d: %s\n", e.Corrects, e.Why)
	}
	if e.CorrectedBy != 0 {
		text += fmt.Sprintf("corrected by entry %d\n", e.CorrectedBy)
	}
	for _, in := range e.Inputs {
		text += fmt.Sprintf("input %s, SHA-256 %s…\n", in.File, first(in.SHA256, 12))
	}
	_, err := io.WriteString(w, text+"\n")
	return err
}

func first(s string, n int) string { return s[:min(n, len(s))] }

// QuantityTable lists what a register has trends of.
func QuantityTable(list []register.Quantity) table.Table {
	t := table.Table{Name: "quantities 1", Columns: []table.Column{{Key: "property"}, {Key: "condition"}}}
	for _, q := range list {
		t.Rows = append(t.Rows, []table.Cell{table.Text(q.Name), table.Text(q.Condition)})
	}
	return t
}

// CapabilityLines says how a process fits between its limits.
func CapabilityLines(w io.Writer, c quality.Capability) error {
	var b strings.Builder
	fmt.Fprintf(&b, "capability of %d batches, mean %.4g, sigma %.3g from the %s, %.3g overall\n", c.N, c.Mean, c.Within, c.From, c.Overall)
	for _, v := range []struct {
		name string
		i    quality.Index
	}{{"Cp ", c.Cp}, {"Cpk", c.Cpk}, {"Pp ", c.Pp}, {"Ppk", c.Ppk}} {
		if !math.IsNaN(v.i.Value) {
			fmt.Fprintf(&b, "  %s %.2f   95 %%: %.2f to %.2f\n", v.name, v.i.Value, v.i.Low, v.i.High)
		}
	}
	for _, d := range c.Doubts {
		for i, l := range wrap("doubt: "+d, 78) {
			fmt.Fprintf(&b, "%s%s\n", map[bool]string{true: "", false: "  "}[i == 0], l)
		}
	}
	_, err := io.WriteString(w, b.String())
	return err
}
