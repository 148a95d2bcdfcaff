package table

import (
	"bytes"
	"strings"
	"unicode"

	"golang.org/x/text/width"
)

// The form for people: a line of headings, a line of units where there are
// any, a rule, the rows; numbers stand with their decimal points one below the
// other, texts at the left; two blanks between columns. The assumptions follow
// below.

func (t Table) terminal() []byte {
	headings, units := t.Headings()
	numeric := t.Numeric()
	cells := t.Strings()
	for j := range t.Columns {
		if numeric[j] {
			column := make([]string, len(cells))
			for i := range cells {
				column[i] = cells[i][j]
			}
			for i, s := range AlignPoints(column) {
				cells[i][j] = s
			}
		}
	}
	lines := [][]string{headings}
	if strings.Join(units, "") != "" {
		lines = append(lines, units)
	}
	head := len(lines)
	lines = append(lines, cells...)
	widths := make([]int, len(t.Columns))
	for _, line := range lines {
		for j, s := range line {
			widths[j] = max(widths[j], Width(visible(s)))
		}
	}
	var b bytes.Buffer
	for i, line := range lines {
		if i == head {
			rule(&b, widths)
		}
		var row strings.Builder
		for j, s := range line {
			if j > 0 {
				row.WriteString("  ")
			}
			s = visible(s)
			pad := strings.Repeat(" ", widths[j]-Width(s))
			if numeric[j] {
				row.WriteString(pad + s)
			} else {
				row.WriteString(s + pad)
			}
		}
		b.WriteString(strings.TrimRight(row.String(), " "))
		b.WriteByte('\n')
	}
	if len(cells) == 0 {
		rule(&b, widths)
		b.WriteString("no rows\n")
	}
	if len(t.Assumptions) > 0 {
		b.WriteString("\nassumptions:\n")
		for _, a := range t.Assumptions {
			b.WriteString("  - " + visible(a) + "\n")
		}
	}
	return b.Bytes()
}

func rule(b *bytes.Buffer, widths []int) {
	for j, w := range widths {
		if j > 0 {
			b.WriteString("  ")
		}
		b.WriteString(strings.Repeat("-", w))
	}
	b.WriteByte('\n')
}

// AlignPoints pads numbers with blanks at the right so that, set flush right,
// their decimal points stand one below the other. What does not begin as a
// number is not padded; an exponent counts as part of what follows the point.
func AlignPoints(column []string) []string {
	longest := 0
	for _, s := range column {
		if _, rest, ok := SplitPoint(s); ok {
			longest = max(longest, Width(rest))
		}
	}
	out := make([]string, len(column))
	for i, s := range column {
		out[i] = s
		if _, rest, ok := SplitPoint(s); ok {
			out[i] = s + strings.Repeat(" ", longest-Width(rest))
		}
	}
	return out
}

// SplitPoint cuts a number in front of its decimal point: what stands left of
// the line on which the points of a column are set, and what right of it. It
// is false where s does not begin as a number.
func SplitPoint(s string) (whole, rest string, ok bool) {
	i := 0
	for _, sign := range [...]string{"-", "−"} {
		if strings.HasPrefix(s, sign) {
			i = len(sign)
		}
	}
	start := i
	for i < len(s) && s[i] >= '0' && s[i] <= '9' {
		i++
	}
	return s[:i], s[i:], i > start
}

// visible replaces what would move a terminal's cursor.
func visible(s string) string {
	return strings.Map(func(r rune) rune {
		if unicode.IsControl(r) {
			return '·'
		}
		return r
	}, s)
}

// Width returns the number of columns of a terminal that s takes: two for wide
// East Asian characters (Unicode Standard Annex 11), none for combining marks.
func Width(s string) int {
	n := 0
	for _, r := range s {
		switch {
		case unicode.In(r, unicode.Mn, unicode.Me, unicode.Cf):
		case width.LookupRune(r).Kind() == width.EastAsianWide || width.LookupRune(r).Kind() == width.EastAsianFullwidth:
			n += 2
		default:
			n++
		}
	}
	return n
}
