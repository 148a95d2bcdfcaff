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
	var rows [][]Cell
	var row []Cell
	cells := 0
	line, column := 1, 1
	endRow := func() {
		for len(row) > 0 && row[len(row)-1].Text == "" {
			row = row[:len(row)-1]
		}
		rows = append(rows, row)
		row = nil
	}
	for i := 0; i < len(text); {
		if separator == blanks {
			for i < len(text) && (text[i] == ' ' || text[i] == '\t') {
				i++
				column++
			}
			if i == len(text) {
				break
			}
		}
		cell, next := cutCell(text[i:], separator)
		cell.Line, cell.Column = line, column+leading(text[i:i+next])
		raw := text[i : i+next]
		if n := strings.Count(raw, "\n"); n > 0 {
			line += n
			column = utf8.RuneCountInString(raw[strings.LastIndexByte(raw, '\n')+1:]) + 1
		} else {
			column += utf8.RuneCountInString(raw)
		}
		i += next
		atEnd := i == len(text) || text[i] == '\n'
		if separator != blanks || cell.Text != "" {
			row = append(row, cell)
			cells++
		}
		if len(row) > maxRowCells || cells > maxCells {
			return nil, &place.Error{Line: line, What: fmt.Sprintf("more than %d cells in a row, or %d in all", maxRowCells, maxCells), Hint: "is this the right file, and the right separator?"}
		}
		switch {
		case atEnd:
			endRow()
			i++
			line++
			column = 1
		default:
			i += 1
			column++
			if i == len(text) && separator != blanks {
				endRow()
			}
		}
	}
	if len(row) > 0 {
		endRow()
	}
	return rows, nil
}

// leading counts the blanks before a cell's text.
func leading(s string) int {
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
func sniff(text string) string {
	end, lines := 0, 0
	for end < len(text) && lines < sniffedLines && end < 1<<20 {
		if text[end] == '\n' {
			lines++
		}
		end++
	}
	best, bestScore := ",", 0.0
	for _, separator := range []string{"\t", ";", ",", blanks} {
		rows, err := grid(text[:end], separator)
		if err != nil {
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
			if len(row) > 0 {
				score += float64(numbers) * float64(numbers) / float64(len(row))
			}
		}
		if score > bestScore*(1+1e-9) {
			best, bestScore = separator, score
		}
	}
	return best
}
