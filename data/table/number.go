package table

import (
	"fmt"
	"math"
	"regexp"
	"strings"

	"phaselag/data/place"
	"phaselag/data/unit"
)

// grouped is a number that may have thousands separators.
var grouped = regexp.MustCompile(`^[+\-−]?[1-9]\d{0,2}([., ]\d{3})+([.,]\d+)?$`)

// looksNumeric reports whether a cell is a number with either decimal sign.
func looksNumeric(s string) bool {
	return formOf(s) != noNumber
}

// missing reports whether a cell says in words that there is no number.
func missing(s string) bool {
	switch strings.ToLower(s) {
	case "", "-", "--", "---", "–", "—", "n/a", "na", "n.a.", "#n/a", "nan", "-nan", "nan(ind)", "null", "none":
		return true
	}
	return false
}

// infinite reports whether a cell is an infinity, as programs write it.
func infinite(s string) (float64, bool) {
	switch strings.ToLower(strings.TrimLeft(s, "+-−")) {
	case "inf", "infinity", "∞", "1.#inf":
		if strings.HasPrefix(s, "-") || strings.HasPrefix(s, "−") {
			return math.Inf(-1), true
		}
		return math.Inf(1), true
	}
	return 0, false
}

// findDecimal decides between decimal point and decimal comma. Where the comma
// separates the columns, it is a decimal sign in no cell that is not quoted.
func findDecimal(rows []Row, stated string) (string, error) {
	switch stated {
	case "":
	case ".", ",":
		return stated, nil
	default:
		return "", &place.Error{What: fmt.Sprintf("the decimal sign %q", stated), Hint: `write decimal: "." or decimal: ","`}
	}
	var point, comma, doubtful *Cell
	sure := false
	for r := range rows {
		for i := range rows[r].Cells {
			c := &rows[r].Cells[i]
			switch formOf(c.Text) {
			case withComma:
				if comma == nil {
					comma = c
				}
				switch {
				case sure:
				case grouped.MatchString(c.Text):
					doubtful = c
				default:
					sure = true
				}
			case withPoint:
				if point == nil {
					point = c
				}
			}
		}
	}
	switch {
	case comma == nil:
		return ".", nil
	case point != nil:
		return "", &place.Error{Line: comma.Line, Column: comma.Column,
			What: fmt.Sprintf("a decimal comma or a thousands separator in %q, but a decimal point in %q (line %d)", clip(comma.Text), clip(point.Text), point.Line),
			Hint: `write all numbers alike and without thousands separators, or say reading: {decimal: "."} or {decimal: ","}`}
	case !sure:
		return "", &place.Error{Line: doubtful.Line, Column: doubtful.Column,
			What: fmt.Sprintf("the comma in %q may be a decimal comma or a thousands separator", clip(doubtful.Text)),
			Hint: `if it is a decimal comma, say reading: {decimal: ","}`}
	}
	return ",", nil
}

// number reads a cell: NaN where it is missing, an infinity where it says so.
func (t *Table) number(c Cell) (float64, error) {
	if x, ok := quick(c.Text, t.Decimal[0]); ok {
		return x, nil
	}
	if missing(c.Text) {
		return math.NaN(), nil
	}
	if v, ok := infinite(c.Text); ok {
		return v, nil
	}
	s := c.Text
	if t.Decimal == "," {
		if strings.Contains(s, ".") {
			return math.NaN(), t.notNumber(c)
		}
		s = strings.Replace(s, ",", ".", 1)
	}
	x, err := unit.ParseNumber(s)
	if err != nil {
		return math.NaN(), t.notNumber(c)
	}
	return x, nil
}

func (t *Table) notNumber(c Cell) error {
	e := &place.Error{File: t.File, Line: c.Line, Column: c.Column, What: fmt.Sprintf("%q is not a number", clip(c.Text))}
	if grouped.MatchString(c.Text) {
		e.Hint = "write numbers without thousands separators"
	} else {
		e.Hint = "leave the cell empty if nothing was measured"
	}
	return e
}

// clip keeps hostile input out of messages.
func clip(s string) string {
	if r := []rune(s); len(r) > 60 {
		return string(r[:60]) + "…"
	}
	return s
}
