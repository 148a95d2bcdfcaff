package qr

import (
	"math"
	"math/rand/v2"
	"testing"
)

// TestFront compares the triangle of the block factorization with that of the
// dense one: RᵀR = AᵀA in every element, for blocks with own, chained, shared
// and empty columns.
func TestFront(t *testing.T) {
	rnd := rand.New(rand.NewPCG(5, 1))
	for range 200 {
		blocks, shared := 1+rnd.IntN(9), rnd.IntN(6)
		n := shared + 2*blocks + 1 // own and chained columns, and one that nothing touches
		last := make([]int, n)
		for c := range n {
			last[c] = blocks + 1
		}
		touched := make([][]int, blocks)
		for b := range blocks {
			for c := range shared {
				touched[b] = append(touched[b], c)
			}
			own, chain := shared+b, shared+blocks+b
			touched[b] = append(touched[b], own, chain)
			if b > 0 {
				touched[b] = append(touched[b], chain-1)
				last[chain-1] = b
			}
			last[own], last[chain] = b, b
			touched[b] = append(touched[b], n)
		}
		f := NewFront(n, last)
		gram := make([]float64, (n+1)*(n+1))
		for b := range blocks {
			m := rnd.IntN(40)
			a := make([]float64, m*len(touched[b]))
			for i := range a {
				a[i] = rnd.NormFloat64()
			}
			if rnd.IntN(5) == 0 && m > 0 {
				clear(a[:m])
			}
			before := append([]float64(nil), a...)
			f.Add(touched[b], a, m)
			for i := range a {
				if a[i] != before[i] {
					t.Fatal("the block was changed")
				}
			}
			for i, c := range touched[b] {
				for j, d := range touched[b] {
					gram[c*(n+1)+d] += dot(a[i*m:(i+1)*m], a[j*m:(j+1)*m])
				}
			}
		}
		f.Finish()
		got := make([]float64, (n+1)*(n+1))
		seen := map[int]bool{}
		for _, r := range f.Rows {
			for i, c := range r.Columns {
				if seen[c] {
					t.Fatalf("column %d comes again after its elimination", c)
				}
				for j, d := range r.Columns {
					got[c*(n+1)+d] += r.Elements[i] * r.Elements[j]
				}
			}
			seen[r.Columns[0]] = true
		}
		got[n*(n+1)+n] += f.Rest * f.Rest
		for i := range got {
			if math.Abs(got[i]-gram[i]) > 1e-11*(1+math.Abs(gram[i])) {
				t.Fatalf("blocks %d, shared %d: element %d,%d is %g, should be %g", blocks, shared, i/(n+1), i%(n+1), got[i], gram[i])
			}
		}
	}
}
