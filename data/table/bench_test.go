package table

import (
	"bytes"
	"fmt"
	"math"
	"testing"
)

// longTable is a table of frequency sweeps as instruments write them.
func longTable(rows int) []byte {
	var b bytes.Buffer
	b.WriteString("step;f / Hz;T / °C;strain / %;G' / MPa;G'' / MPa;tan δ\n")
	for i := range rows {
		fmt.Fprintf(&b, "%d;%.4f;%.2f;%.4f;%.6f;%.6f;%.5f\n", i/20+1, math.Pow(10, float64(i%20)/10), 20+float64(i/20%9), 0.2+0.0001*float64(i%7), 2+0.01*float64(i%20), 0.2+0.001*float64(i%20), 0.1+0.0001*float64(i%20))
	}
	return b.Bytes()
}

// BenchmarkRead reads a table of 100 000 rows and takes its numbers; the sum of
// them is checked.
func BenchmarkRead(b *testing.B) {
	content := longTable(100_000)
	b.SetBytes(int64(len(content)))
	for b.Loop() {
		t, err := Read("a.csv", content, Settings{})
		if err != nil {
			b.Fatal(err)
		}
		sum := 0.0
		for _, r := range t.Rows {
			for c := 1; c < 7; c++ {
				v, err := t.Value(r, c)
				if err != nil {
					b.Fatal(err)
				}
				sum += v
			}
		}
		if len(t.Rows) != 100_000 || !(sum > 2e11) {
			b.Fatal(len(t.Rows), sum)
		}
	}
}
