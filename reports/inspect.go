package reports

import (
	"fmt"
	"io"
	"strings"

	"phaselag/data"
	reading "phaselag/data/place"
	"phaselag/reports/table"
)

// Inspection writes how a table was understood, in 80 columns.
func Inspection(w io.Writer, in *data.Inspection) error {
	var b strings.Builder
	line := func(format string, a ...any) { fmt.Fprintf(&b, format+"\n", a...) }
	line("%s", in.File)
	separated := "separated by " + in.Separator
	if in.Encoding == "workbook" {
		separated = "every digit of its numbers"
	}
	if len(in.Separator) == 1 {
		separated = fmt.Sprintf("separated by %q", in.Separator)
	}
	if len(in.First) > 0 {
		roughLines(line, in, separated)
		_, err := io.WriteString(w, b.String())
		return err
	}
	line("%s, %s, decimal sign %q", in.Encoding, separated, in.Decimal)
	where := "no headings"
	if in.HeaderLine > 0 {
		where = fmt.Sprintf("headings in line %d", in.HeaderLine)
	}
	if in.UnitsLine > 0 {
		where += fmt.Sprintf(", units in line %d", in.UnitsLine)
	}
	line("%s, %d rows from line %d on%s", where, in.Rows, in.FirstLine, several(in.Blocks))
	line("")
	t := inspectionTable(in, 12, 24)
	t.Assumptions = nil // they stand below
	if err := table.Write(&b, table.Terminal, t); err != nil {
		return err
	}
	line("")
	switch {
	case in.Refused != nil:
		refusedLines(line, in)
	case in.Signals != nil:
		if err := signalLines(&b, in); err != nil {
			return err
		}
	default:
		line("taken for a %s of %d runs", in.Kind, len(in.Runs))
		const most = 12
		for i, r := range in.Runs {
			if i == most {
				line("    and %d more", len(in.Runs)-most)
				break
			}
			_, name, ok := strings.Cut(r.Name, ", ")
			if !ok {
				name = r.Name
			}
			r.Name = name
			line("    %s", runText(r, ""))
		}
	}
	if len(in.Assumptions) > 0 {
		line("\nassumptions")
		for _, s := range in.Assumptions {
			for i, l := range wrap(s, 74) {
				line("  %s %s", map[bool]string{true: "-", false: " "}[i == 0], l)
			}
		}
	}
	snippetLines(line, in)
	_, err := io.WriteString(w, b.String())
	return err
}

func refusedLines(line func(string, ...any), in *data.Inspection) {
	for _, l := range wrap("as it stands the file would be refused: "+in.Refused.Error(), 80) {
		line("%s", l)
	}
	if h := reading.Hint(in.Refused); h != "" {
		for _, l := range wrap("hint: "+h, 80) {
			line("%s", l)
		}
	}
}

func snippetLines(line func(string, ...any), in *data.Inspection) {
	line("\nto read it otherwise, correct this in a campaign file:\n")
	for _, l := range strings.Split(strings.TrimRight(in.Snippet, "\n"), "\n") {
		line("    %s", l)
	}
}

// roughLines shows the first lines of a file whose headings are not understood.
func roughLines(line func(string, ...any), in *data.Inspection, separated string) {
	line("%s, %s; no headings that are understood. It begins:", in.Encoding, separated)
	line("")
	for _, r := range in.First {
		text := ""
		for _, c := range r[1:] {
			text += " | " + c
		}
		line("%s", clip(fmt.Sprintf("line %-3s%s", r[0], text), 78))
	}
	line("")
	refusedLines(line, in)
	snippetLines(line, in)
}

func several(blocks int) string {
	if blocks < 2 {
		return ""
	}
	return fmt.Sprintf(", in %d parts", blocks)
}

// InspectionTable lists the columns of an inspected file.
func InspectionTable(in *data.Inspection) table.Table { return inspectionTable(in, 1<<20, 1<<20) }

// inspectionTable clips values and headings to a number of characters.
func inspectionTable(in *data.Inspection, values, headings int) table.Table {
	t := table.Table{Name: "inspect 1", Columns: []table.Column{
		{Key: "column"}, {Key: "heading"}, {Key: "quantity"}, {Key: "unit"}, {Key: "first"}, {Key: "least"}, {Key: "greatest"}, {Key: "empty"},
	}, Assumptions: in.Assumptions}
	for _, c := range in.Columns {
		quantity := c.Quantity
		if quantity == "" {
			quantity = "not understood"
		}
		unit := c.Unit
		switch {
		case unit == "" && c.Quantity == "":
		case unit == "" && c.Known:
			unit = "1"
		case unit == "" && !c.Text && c.Quantity != "segment":
			unit = "missing"
		case unit != "" && !c.Known:
			unit += " (?)"
		}
		var first []string
		for _, v := range c.First {
			first = append(first, clip(v, values))
		}
		t.Rows = append(t.Rows, []table.Cell{
			table.Number(float64(c.Number)), table.Text(clip(c.Heading, headings)), table.Text(quantity), table.Text(unit), table.Text(strings.Join(first, "  ")),
			table.Number(c.Min), table.Number(c.Max), table.Number(float64(c.Empty)),
		})
	}
	return t
}

// clip shortens a text to n characters.
func clip(s string, n int) string {
	if r := []rune(s); len(r) > n {
		return string(r[:n-1]) + "…"
	}
	return s
}
