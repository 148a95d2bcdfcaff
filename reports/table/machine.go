package table

import (
	"bytes"
	"encoding/csv"
	"encoding/json"
	"math"
	"strconv"
)

// full writes every digit; "" for NaN.
func full(v float64) string {
	if math.IsNaN(v) {
		return ""
	}
	return strconv.FormatFloat(v, 'g', -1, 64)
}

func (t Table) csv() []byte {
	var b bytes.Buffer
	w := csv.NewWriter(&b)
	record := make([]string, len(t.Columns))
	write := func() {
		if len(record) == 1 && record[0] == "" {
			b.WriteString("\"\"\n") // an empty line would be no row
			return
		}
		_ = w.Write(record) // a buffer takes everything
		w.Flush()
	}
	for j, c := range t.Columns {
		record[j] = c.Key
	}
	write()
	for _, row := range t.Rows {
		for j, c := range row {
			record[j] = c.text
			if c.numeric {
				record[j] = full(c.number)
			}
		}
		write()
	}
	return b.Bytes()
}

func (t Table) json() []byte {
	var b bytes.Buffer
	b.WriteString(`{"phaselag": `)
	text(&b, t.Name)
	b.WriteString(`, "assumptions": [`)
	for i, a := range t.Assumptions {
		if i > 0 {
			b.WriteString(", ")
		}
		text(&b, a)
	}
	b.WriteString(`], "rows": [`)
	for i, row := range t.Rows {
		if i > 0 {
			b.WriteByte(',')
		}
		b.WriteString("\n  {")
		for j, c := range row {
			if j > 0 {
				b.WriteString(", ")
			}
			text(&b, t.Columns[j].Key)
			b.WriteString(": ")
			switch {
			case !c.numeric:
				text(&b, c.text)
			case math.IsNaN(c.number):
				b.WriteString("null")
			default:
				b.WriteString(full(c.number))
			}
		}
		b.WriteByte('}')
	}
	if len(t.Rows) > 0 {
		b.WriteByte('\n')
	}
	b.WriteString("]}\n")
	return b.Bytes()
}

// text writes a JSON string without the escapes that only web pages need.
func text(b *bytes.Buffer, s string) {
	e := json.NewEncoder(b)
	e.SetEscapeHTML(false)
	_ = e.Encode(s) // a string always encodes
	b.Truncate(b.Len() - 1)
}
