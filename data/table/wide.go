package table

import (
	"fmt"
	"regexp"
	"strconv"
	"strings"

	"phaselag/data/place"
	"phaselag/data/unit"
)

// Wide tables have one block of columns for each temperature (or frequency, or
// strain), which stands in a row above the headings, over the first column of its
// block as a merged cell does, or inside the headings: "G' (MPa) at −20 °C". They
// become long: one row for each row of a block, and a column for what the blocks
// differ in.

// key is what a block of columns belongs to.
type key struct {
	concept Concept
	unit    unit.Unit
	number  string // with a decimal point
	cell    Cell
}

var (
	keyPattern = regexp.MustCompile(`([+\-−]?\d+(?:[.,]\d+)?(?:[eE][+\-−]?\d+)?)\s*([^\s\d,;:()\[\]/]+)`)
	keyWords   = regexp.MustCompile(`(?i)(@|\bat\b|\bbei\b|\bT\s*=|\bf\s*=|^[,;:]|[,;:]$|\(\s*\)|\[\s*\])`)
	keyed      = []Concept{Temperature, Frequency, Strain}
)

// keyOf finds a quantity in a cell, and gives the text without it.
func keyOf(c Cell) (k key, rest string, ok bool) {
	for _, m := range keyPattern.FindAllStringSubmatchIndex(c.Text, 4) {
		number, symbol := c.Text[m[2]:m[3]], c.Text[m[4]:m[5]]
		for _, concept := range keyed {
			u, found := unit.Lookup(symbol, concept.Quantity())
			if !found {
				continue
			}
			rest := strings.TrimSpace(keyWords.ReplaceAllString(strings.TrimSpace(c.Text[:m[0]]+" "+c.Text[m[1]:]), ""))
			return key{concept, u, plainNumber(number), c}, rest, true
		}
	}
	return key{}, c.Text, false
}

func plainNumber(s string) string {
	return strings.NewReplacer("−", "-", ",", ".").Replace(s)
}

// wide holds the key of each column; the zero key for columns that all blocks share.
type wide []key

// keysAbove looks for keys in the last three rows with text above the headings.
func keysAbove(above [][]Cell, columns int) wide {
	seen := 0
	for i := len(above) - 1; i >= 0 && seen < 3; i-- {
		row := above[i]
		if len(row) == 0 {
			continue
		}
		seen++
		starts := map[int]key{}
		label := key{}
		for j, c := range row {
			if c.Text == "" || j >= columns {
				continue
			}
			if k, _, ok := keyOf(c); ok {
				starts[j] = k
				continue
			}
			// "T / °C" and plain numbers after it.
			if u := understand(c.Text); u.HasUnit && (u.Concept == Temperature || u.Concept == Frequency || u.Concept == Strain) {
				label = key{concept: u.Concept, unit: u.Unit}
				continue
			}
			if label.concept != "" && looksNumeric(c.Text) {
				starts[j] = key{label.concept, label.unit, plainNumber(c.Text), c}
			}
		}
		if w := spread(starts, columns); w != nil {
			return w
		}
	}
	return nil
}

// spread gives each column the key at or before it; nil unless there are two keys or
// more, of one concept.
func spread(starts map[int]key, columns int) wide {
	if len(starts) < 2 {
		return nil
	}
	w := make(wide, columns)
	var now key
	for j := range columns {
		if k, ok := starts[j]; ok {
			if now.concept != "" && k.concept != now.concept {
				return nil
			}
			now = k
		}
		w[j] = now
	}
	return w
}

// keysInside looks for keys in the headings themselves, and takes them off them.
func (t *Table) keysInside() wide {
	w := make(wide, len(t.Columns))
	bare := make([]Column, len(t.Columns))
	first := map[Concept]key{}
	repeated := false
	for j, col := range t.Columns {
		bare[j] = col
		if col.Line == 0 {
			return nil
		}
		k, rest, ok := keyOf(Cell{Text: col.Heading, Line: col.Line, Column: col.Place})
		if !ok {
			continue
		}
		u := understand(rest)
		if u.Concept == "" || u.Concept == k.concept {
			continue
		}
		u.Heading, u.Line, u.Place, u.base = col.Heading, col.Line, col.Place, rest
		w[j], bare[j] = k, u
		if f, ok := first[u.Concept]; !ok {
			first[u.Concept] = k
		} else if f.concept != k.concept {
			return nil
		} else if f.number != k.number {
			repeated = true
		}
	}
	if !repeated {
		return nil
	}
	// A column that was chosen by hand keeps what it was chosen for.
	for j := range bare {
		if w[j].concept != "" && t.Columns[j].Concept != "" && t.Columns[j].HasUnit {
			bare[j].Concept, bare[j].Unit, bare[j].HasUnit, bare[j].UnitText = t.Columns[j].Concept, t.Columns[j].Unit, true, t.Columns[j].UnitText
		}
	}
	t.Columns = bare
	return w
}

// unpivot makes a wide table long.
func (t *Table) unpivot(w wide) error {
	if w == nil {
		return nil
	}
	// Columns of the long table: the shared ones, then those of a block.
	var columns []Column
	var blocks []key
	index := map[string]int{} // of a block by its number
	target := make([]int, len(t.Columns))
	block := make([]int, len(t.Columns)) // -1: shared
	shared := 0
	for j, col := range t.Columns {
		if w[j].concept != "" {
			continue
		}
		target[j], block[j] = len(columns), -1
		columns = append(columns, col)
		shared++
	}
	for j, col := range t.Columns {
		if w[j].concept == "" {
			continue
		}
		b, ok := index[w[j].number]
		if !ok {
			b = len(blocks)
			index[w[j].number] = b
			blocks = append(blocks, w[j])
		}
		block[j] = b
		at := -1
		for i := shared; i < len(columns); i++ {
			same := columns[i].name() == col.name() || columns[i].Concept != "" && columns[i].Concept == col.Concept
			taken := false
			for q := range j {
				taken = taken || block[q] == b && target[q] == i && w[q].concept != ""
			}
			if same && !taken {
				at = i
				break
			}
		}
		if at < 0 {
			at = len(columns)
			columns = append(columns, col)
		} else if c := columns[at]; c.HasUnit && col.HasUnit && c.Unit.Symbol != col.Unit.Symbol {
			return &place.Error{Line: col.Line, Column: col.Place, What: fmt.Sprintf("%q has another unit than %q in the block before", clip(col.Heading), clip(c.Heading)), Hint: "write all blocks in the same units"}
		}
		target[j] = at
	}
	if len(blocks) < 2 {
		return nil
	}
	// What the blocks differ in; where each block measures it, it was only set.
	concept := blocks[0].concept
	for _, c := range columns {
		if c.Concept == concept {
			if concept != Temperature {
				return nil
			}
			concept = SetTemperature
		}
	}
	keyColumn := Column{Derived: true, Heading: fmt.Sprintf("%s of the block", concept), Line: blocks[0].cell.Line, Place: blocks[0].cell.Column, Concept: concept, UnitText: blocks[0].unit.Symbol, Unit: blocks[0].unit, HasUnit: true}
	var rows []Row
	for b, k := range blocks {
		text := k.number
		if t.Decimal == "," {
			text = strings.Replace(text, ".", ",", 1)
		}
		for _, r := range t.Rows {
			cells := make([]Cell, len(columns)+1)
			filled := false
			for j, c := range r.Cells {
				if block[j] == -1 || block[j] == b {
					cells[target[j]] = c
					filled = filled || block[j] == b && c.Text != ""
				}
			}
			if !filled {
				continue
			}
			cells[len(columns)] = Cell{text, k.cell.Line, k.cell.Column}
			rows = append(rows, Row{Line: r.Line, Block: r.Block*len(blocks) + b, Cells: cells})
		}
	}
	if len(rows) == 0 {
		return &place.Error{Line: t.HeaderLine, What: "headings, but no number under those of the blocks"}
	}
	t.Columns, t.Rows = append(columns, keyColumn), rows
	var names []string
	for _, k := range blocks {
		if x, err := strconv.ParseFloat(k.number, 64); err == nil && len(names) < 20 {
			names = append(names, strings.Replace(fmt.Sprintf("%g %s", x, k.unit.Symbol), "-", "−", 1))
		}
	}
	t.Assumptions = append(t.Assumptions, fmt.Sprintf("a wide table: %d blocks of columns, one for each %s (%s)", len(blocks), blocks[0].concept, strings.Join(names, ", ")))
	return nil
}
