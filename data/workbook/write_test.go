package workbook

import (
	"bytes"
	"math"
	"strconv"
	"testing"
)

func number(s string) float64 {
	v, err := strconv.ParseFloat(s, 64)
	if err != nil {
		return math.NaN()
	}
	return v
}

func TestWrite(t *testing.T) {
	rows := [][]any{{1.0 / 3, "inside", math.NaN()}, {-2.5e-9, "outside: a, b", 7.0}}
	a, err := Write("grid", []string{"x", "text", "y"}, rows)
	if err != nil {
		t.Fatal(err)
	}
	b, err := Write("grid", []string{"x", "text", "y"}, rows)
	if err != nil || !bytes.Equal(a, b) {
		t.Errorf("two runs give different bytes (%v)", err)
	}
	sheets, err := Read(a)
	if err != nil || len(sheets) != 1 || sheets[0].Name != "grid" || len(sheets[0].Rows) != 3 {
		t.Fatalf("%+v, %v", sheets, err)
	}
	// The writer stores 15 significant digits.
	if r := sheets[0].Rows[1]; r[0] != "0.333333333333333" || r[1] != "inside" || len(r) > 2 && r[2] != "" {
		t.Errorf("%q", r)
	}
	if r := sheets[0].Rows[2]; number(r[0]) != -2.5e-9 || r[2] != "7" {
		t.Errorf("%q", r)
	}
}
