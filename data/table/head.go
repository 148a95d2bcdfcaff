package table

import (
	"fmt"
	"strings"

	"phaselag/data/place"
	"phaselag/data/unit"
)

// searched is the number of rows in which the headings must be found.
const searched = 500

// head finds the row of headings and the row of units, fills t.Columns and
// returns the rows after them.
func (t *Table) head(rows [][]Cell, s Settings) ([][]Cell, error) {
	if s.HeaderRow == NoHeader {
		return t.headless(rows, s)
	}
	at, err := findHeadings(rows, s)
	if err != nil {
		return nil, err
	}
	headings := rows[at]
	t.HeaderLine = headings[0].Line
	t.Columns = make([]Column, len(headings))
	for i, c := range headings {
		t.Columns[i] = understand(c.Text)
		t.Columns[i].Line, t.Columns[i].Place = c.Line, c.Column
	}
	if t.Separator != blanks {
		t.wide = keysAbove(rows[:at], len(headings))
	}
	rest := rows[at+1:]
	if u := findUnits(rest, t.Columns, s); u >= 0 {
		t.UnitsLine = rest[u][0].Line
		for i, c := range rest[u] {
			if i < len(t.Columns) && c.Text != "" {
				t.Columns[i].setUnit(strings.Trim(c.Text, "[]() "))
			}
		}
		rest = rest[u+1:]
	} else if s.UnitsRow > 0 {
		return nil, &place.Error{Line: s.UnitsRow, What: "no row of units after the headings in this line", Hint: "correct units_row under reading, or leave it out"}
	}
	if err := t.choose(s.Wants); err != nil {
		return nil, err
	}
	if t.wide == nil {
		t.wide = t.keysInside()
	}
	return rest, nil
}

// headless makes columns without headings: those chosen by number.
func (t *Table) headless(rows [][]Cell, s Settings) ([][]Cell, error) {
	need := 0
	for _, w := range s.Wants {
		if w.Number == 0 {
			return nil, &place.Error{What: fmt.Sprintf("the file is said to have no headings, so the %s needs the number of its column", w.Concept),
				Hint: fmt.Sprintf("say columns: {%s: {column: 1, unit: …}}", w.Concept)}
		}
		need = max(need, w.Number)
	}
	if need == 0 {
		return nil, &place.Error{What: "the file is said to have no headings, and no columns are chosen by number",
			Hint: "say for example columns: {time: {column: 1, unit: s}, relaxation modulus: {column: 2, unit: MPa}}"}
	}
	for at, row := range rows {
		if len(row) < need {
			continue
		}
		numeric := true
		for _, w := range s.Wants {
			numeric = numeric && (w.Concept.Quantity() == "" || looksNumeric(row[w.Number-1].Text))
		}
		if !numeric {
			continue
		}
		t.Columns = make([]Column, len(row))
		for i := range t.Columns {
			t.Columns[i].Heading = fmt.Sprintf("column %d", i+1)
		}
		return rows[at:], t.choose(s.Wants)
	}
	return nil, &place.Error{What: fmt.Sprintf("no row has numbers in the chosen columns (separator %q)", t.Separator), Hint: "check the numbers of the columns and the separator under reading"}
}

// findHeadings gives the index of the row of headings: the one that was stated;
// else the first row with all headings that were chosen by hand; else the first
// row without numbers in which at least two different concepts are understood.
func findHeadings(rows [][]Cell, s Settings) (int, error) {
	if s.HeaderRow > 0 {
		for i, row := range rows {
			if len(row) > 0 && row[0].Line == s.HeaderRow {
				return i, nil
			}
		}
		return 0, &place.Error{Line: s.HeaderRow, What: "no headings in this line", Hint: "correct header_row under reading; lines count from 1"}
	}
	var chosen []string
	for _, w := range s.Wants {
		if w.Heading != "" {
			chosen = append(chosen, w.Heading)
		}
	}
	firstText := -1
	for i, row := range rows[:min(len(rows), searched)] {
		if len(row) == 0 || hasNumber(row) {
			continue
		}
		if firstText < 0 && len(row) > 1 {
			firstText = i
		}
		if len(chosen) > 0 {
			all := true
			for _, h := range chosen {
				all = all && headingIndex(texts(row), h) >= 0
			}
			if all {
				return i, nil
			}
			continue
		}
		if concepts(row) >= 2 {
			return i, nil
		}
	}
	if len(chosen) > 0 {
		e := &place.Error{What: fmt.Sprintf("no row has the heading %q", clip(chosen[0])), Hint: "correct columns in the campaign file"}
		if len(chosen) > 1 {
			e.What = fmt.Sprintf("no row has all the headings %q", chosen)
		}
		if firstText >= 0 {
			e.Hint = fmt.Sprintf("line %d has: %s", rows[firstText][0].Line, list(texts(rows[firstText])))
		}
		return 0, e
	}
	e := &place.Error{
		What: "no row of headings was understood",
		Hint: "say in the campaign file columns: {frequency: {heading: …, unit: Hz}, storage modulus: {heading: …, unit: MPa}, …}, or for a file without headings reading: {header_row: none} and columns: {frequency: {column: 1, unit: Hz}, …}",
	}
	if firstText >= 0 {
		e.Line = rows[firstText][0].Line
		e.What = fmt.Sprintf("the headings are not understood: %s", list(texts(rows[firstText])))
	}
	return 0, e
}

func hasNumber(row []Cell) bool {
	for _, c := range row {
		if looksNumeric(c.Text) {
			return true
		}
	}
	return false
}

// concepts counts the different concepts in a row of headings.
func concepts(row []Cell) int {
	seen := map[Concept]bool{}
	for _, c := range row {
		u := understand(c.Text)
		if u.Concept == "" {
			if _, rest, ok := keyOf(c); ok {
				u = understand(rest) // "G' (MPa) at −20 °C"
			}
		}
		if u.Concept != "" && u.Concept != Segment {
			seen[u.Concept] = true
		}
	}
	return len(seen)
}

func texts(row []Cell) []string {
	s := make([]string, len(row))
	for i, c := range row {
		s[i] = c.Text
	}
	return s
}

// headingIndex finds a heading as the user wrote it: letter by letter first,
// then with primes and blanks alike.
func headingIndex(headings []string, wanted string) int {
	for i, h := range headings {
		if h == wanted {
			return i
		}
	}
	same := func(s string) string {
		return strings.ReplaceAll(primes.Replace(s), " ", "")
	}
	w := same(wanted)
	for i, h := range headings {
		if w != "" && same(h) == w {
			return i
		}
	}
	return -1
}

// findUnits gives the index of the row of units among the rows after the
// headings, -1 if there is none: a row without numbers in which at least half
// of the cells are units, or the row that was stated.
func findUnits(rest [][]Cell, columns []Column, s Settings) int {
	for i, row := range rest {
		if len(row) == 0 {
			continue
		}
		if s.UnitsRow > 0 {
			if row[0].Line == s.UnitsRow {
				return i
			}
			continue
		}
		units, filled := 0, 0
		for j, c := range row {
			text := strings.Trim(c.Text, "[]() ")
			if text == "" {
				continue
			}
			filled++
			if text == "-" || len(unit.Known(text)) > 0 || j < len(columns) && columns[j].Concept == Frequency && text == "1/s" {
				units++
			}
		}
		if !hasNumber(row) && units > 0 && 2*units >= filled {
			return i
		}
		return -1
	}
	return -1
}

// choose applies the columns that were chosen by hand.
func (t *Table) choose(wants []Want) error {
	for _, w := range wants {
		i := w.Number - 1
		switch {
		case w.Heading != "":
			i = headingIndex(t.Headings(), w.Heading)
			if i < 0 {
				return &place.Error{Line: t.HeaderLine, What: fmt.Sprintf("no column has the heading %q", clip(w.Heading)), Hint: "the headings are " + list(t.Headings())}
			}
		case w.Number > len(t.Columns):
			return &place.Error{Line: t.HeaderLine, What: fmt.Sprintf("there is no column %d for the %s: the table has %d", w.Number, w.Concept, len(t.Columns))}
		case w.Number <= 0:
			found := t.FindAll(w.Concept)
			if len(found) != 1 {
				return &place.Error{Line: t.HeaderLine, What: fmt.Sprintf("%d columns were understood as the %s", len(found), w.Concept),
					Hint: fmt.Sprintf("say columns: {%s: {heading: …, unit: %s}}; the headings are %s", w.Concept, w.Unit, list(t.Headings()))}
			}
			i = found[0]
		}
		for j := range t.Columns {
			if t.Columns[j].Concept == w.Concept && j != i {
				t.Columns[j].Concept = ""
			}
		}
		col := &t.Columns[i]
		if col.Concept != w.Concept {
			// The heading means something else, or nothing; its unit may stand
			// in one of the usual forms all the same.
			col.Concept, col.Modulus, col.Angular = w.Concept, "", false
			text := col.UnitText
			for _, c := range candidates(col.Heading) {
				if _, ok := unit.Lookup(c.unit, w.Concept.Quantity()); ok {
					text = c.unit
					break
				}
			}
			col.setUnit(text)
		}
		if w.Unit != "" {
			col.Angular = false
			col.setUnit(w.Unit)
		}
		if col.Concept != w.Concept {
			return &place.Error{Line: t.HeaderLine, What: fmt.Sprintf("%q is not a unit of the %s", clip(col.UnitText), w.Concept)}
		}
		if err := t.require(i); err != nil {
			return err
		}
	}
	return nil
}

// list writes headings for a message.
func list(headings []string) string {
	var b strings.Builder
	for i, h := range headings {
		if i == 30 {
			b.WriteString(", …")
			break
		}
		if i > 0 {
			b.WriteString(", ")
		}
		b.WriteString(Quote(h))
	}
	return b.String()
}
