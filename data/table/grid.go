package table

import (
	"fmt"
	"strings"
	"unicode"
	"unicode/utf8"

	"phaselag/data/place"
)

// Limits against hostile files. A table of oscillatory tests has thousands of
// rows and tens of columns.
const (
	maxBytes     = 64 << 20
	maxCells     = 4_000_000
	maxRowCells  = 2_000
	sniffedLines = 400
)

// Cell is one cell with its place in the file.
type Cell struct {
	Text   string // without blanks at its ends, quotes resolved
	Line   int    // from 1
	Column int    // in characters from 1, of the cell's first character
}

// blanks is the separator "any number of blanks or tabulators".
const blanks = " "

// grid splits text at the separator into rows of cells. A row without text is
// an empty slice; the index of a row says nothing about its line.
//
// A cell is quoted if it begins with a double quote and a closing quote stands
// before a separator or a line end within 20 lines; two quotes inside are one.
// Any other quote is text: G" is a heading.
func grid(text, separator string) ([][]Cell, error) {
	g := gridder{separator: separator[0]}
	line := 1
	for i := 0; i < len(text); {
		end := strings.IndexByte(text[i:], '\n')
		if end < 0 {
			end = len(text) - i
		}
		var next, lines int
		if content := text[i : i+end]; strings.IndexByte(content, '"') < 0 {
			g.plainRow(content, line)
			next, lines = i+end+1, 1
		} else {
			next, lines = g.quotedRow(text, i, line)
		}
		line += lines
		i = next
		if !g.endRow() {
			return nil, &place.Error{Line: line - 1, What: fmt.Sprintf("more than %d cells in a row, or %d in all", maxRowCells, maxCells), Hint: "is this the right file, and the right separator?"}
		}
	}
	return g.rows, nil
}

// gridder cuts rows. The cells of many rows share one slice.
type gridder struct {
	separator byte
	rows      [][]Cell
	cells     []Cell // of this chunk
	start     int    // of the row in cells
	total     int
}

// chunk is the number of cells for which memory is taken at once.
const chunk = 8192

func (g *gridder) add(text string, line, column int) {
	if len(g.cells)-g.start > maxRowCells {
		return // the row is refused at its end
	}
	if len(g.cells) == cap(g.cells) {
		row := g.cells[g.start:]
		g.cells, g.start = append(make([]Cell, 0, chunk), row...), 0
	}
	g.cells = append(g.cells, Cell{Text: text, Line: line, Column: column})
}

// endRow takes the cells since the last row as a row, without the empty ones at
// its end, and reports whether the limits are kept.
func (g *gridder) endRow() bool {
	row := g.cells[g.start:len(g.cells):len(g.cells)]
	g.total += len(row)
	g.start = len(g.cells)
	fine := len(row) <= maxRowCells && g.total <= maxCells
	for len(row) > 0 && row[len(row)-1].Text == "" {
		row = row[:len(row)-1]
	}
	g.rows = append(g.rows, row)
	return fine
}

// plainRow cuts a line without quotes.
func (g *gridder) plainRow(s string, line int) {
	column := 1 // of s[i]
	for i := 0; i <= len(s); {
		if g.separator == ' ' {
			n := 0
			for i+n < len(s) && (s[i+n] == ' ' || s[i+n] == '\t') {
				n++
			}
			i, column = i+n, column+n
			if i == len(s) {
				return
			}
		}
		end := i
		for end < len(s) && s[end] != g.separator && (g.separator != ' ' || s[end] != '\t') {
			end++
		}
		cell := s[i:end]
		text := tidy(cell)
		g.add(text, line, column+leading(cell))
		if len(g.cells)-g.start > maxRowCells {
			return
		}
		column += utf8.RuneCountInString(cell) + 1
		i = end + 1
		if g.separator != ' ' && end == len(s) {
			return
		}
	}
}

// quotedRow cuts a row some of whose cells are quoted, perhaps over several
// lines. It gives the start of the next row and the number of lines.
func (g *gridder) quotedRow(text string, i, line int) (next, lines int) {
	separator := string(g.separator)
	column, lines := 1, 1
	for i < len(text) {
		if separator == blanks {
			for i < len(text) && (text[i] == ' ' || text[i] == '\t') {
				i++
				column++
			}
			if i == len(text) {
				break
			}
		}
		cell, length := cutCell(text[i:], separator)
		raw := text[i : i+length]
		if separator != blanks || cell.Text != "" {
			g.add(cell.Text, line+lines-1, column+leading(raw))
		}
		if n := strings.Count(raw, "\n"); n > 0 {
			lines += n
			column = utf8.RuneCountInString(raw[strings.LastIndexByte(raw, '\n')+1:]) + 1
		} else {
			column += utf8.RuneCountInString(raw)
		}
		i += length
		if i == len(text) || text[i] == '\n' {
			break
		}
		i++
		column++
	}
	return i + 1, lines
}

// leading counts the blanks before a cell's text.
func leading(s string) int {
	if s == "" || s[0] > ' ' && s[0] < 0x80 {
		return 0
	}
	n := 0
	for _, r := range s {
		if !unicode.IsSpace(r) {
			return n
		}
		n++
	}
	return 0
}

// cutCell takes the first cell of s, and the length of its text in s, which
// ends before a separator, before a line end or at the end of s.
func cutCell(s, separator string) (c Cell, length int) {
	isEnd := func(b byte) bool {
		return b == '\n' || (separator == blanks && (b == ' ' || b == '\t')) || (separator != blanks && b == separator[0])
	}
	start := 0
	for start < len(s) && s[start] == ' ' && separator != blanks {
		start++
	}
	if start < len(s) && s[start] == '"' {
		var b strings.Builder
		lines := 0
		for j := start + 1; j < len(s) && lines <= 20 && j < start+10_000; j++ {
			if s[j] == '\n' {
				lines++
			}
			if s[j] != '"' {
				b.WriteByte(s[j])
				continue
			}
			if j+1 < len(s) && s[j+1] == '"' {
				b.WriteByte('"')
				j++
				continue
			}
			end := j + 1
			for end < len(s) && s[end] == ' ' && separator != blanks {
				end++
			}
			if end == len(s) || isEnd(s[end]) {
				return Cell{Text: tidy(b.String())}, end
			}
			break
		}
	}
	end := 0
	for end < len(s) && !isEnd(s[end]) {
		end++
	}
	return Cell{Text: tidy(s[:end])}, end
}

// tidy joins lines and blanks of a cell to single blanks.
func tidy(s string) string {
	for i := 0; i < len(s); i++ {
		if s[i] <= ' ' || s[i] >= 0x80 {
			return tidyBlanks(s)
		}
	}
	return s
}

func tidyBlanks(s string) string {
	return strings.Join(strings.Fields(s), " ")
}

// newlines makes every line end a line feed.
func newlines(text string) string {
	text = strings.ReplaceAll(text, "\r\n", "\n")
	return strings.ReplaceAll(text, "\r", "\n")
}

// sniff finds the separator: the one that gives the most cells with numbers,
// times the share of cells that have numbers, in the first lines. In doubt the
// order is tabulator, semicolon, comma, blanks.
func sniff(text string) (string, error) {
	end, lines := 0, 0
	for end < len(text) && lines < sniffedLines && end < 1<<20 {
		if text[end] == '\n' {
			lines++
		}
		end++
	}
	best, bestScore := ",", 0.0
	var trouble error // counts only where nothing else separates the text
	for _, separator := range []string{"\t", ";", ",", blanks} {
		rows, err := grid(text[:end], separator)
		if err != nil {
			trouble = err
			continue
		}
		score := 0.0
		for _, row := range rows {
			numbers := 0
			for _, c := range row {
				if looksNumeric(c.Text) {
					numbers++
				}
			}
			// "Step 2" and "remark 3 of 5" have numbers between blanks in any table.
			if len(row) > 0 && (separator != blanks || numbers >= 2 && 2*numbers >= len(row)) {
				score += float64(numbers) * float64(numbers) / float64(len(row))
			}
		}
		if separator == blanks {
			score /= 1.25
		}
		if score > bestScore*(1+1e-9) {
			best, bestScore = separator, score
		}
	}
	if bestScore == 0 && trouble != nil {
		return "", trouble
	}
	return best, nil
}
