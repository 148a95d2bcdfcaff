package reports

import (
	"fmt"
	"math"
	"testing"
)

func fieldOf(n int, f func(x, y float64) float64) (xs, ys []float64, z [][]float64) {
	for i := range n + 1 {
		xs = append(xs, -1+2*float64(i)/float64(n))
	}
	ys = append(ys, xs...)
	for _, x := range xs {
		var col []float64
		for _, y := range ys {
			col = append(col, f(x, y))
		}
		z = append(z, col)
	}
	return xs, ys, z
}

// signedArea is positive for a ring that runs anticlockwise.
func signedArea(c contour) float64 {
	a := 0.0
	for i := range c.x {
		j := (i + 1) % len(c.x)
		a += (c.x[i]*c.y[j] - c.x[j]*c.y[i]) / 2
	}
	return a
}

func TestContours(t *testing.T) {
	for _, v := range []struct {
		name         string
		f            func(x, y float64) float64
		level        float64
		area         []float64 // of each ring, with sign
		lines        int
		lengthOfLine float64
	}{
		{"disc", func(x, y float64) float64 { return -math.Hypot(x, y) }, -0.6, []float64{math.Pi * 0.36}, 1, 2 * math.Pi * 0.6},
		{"hole", func(x, y float64) float64 { return math.Hypot(x, y) }, 0.6, []float64{4, -math.Pi * 0.36}, 1, 2 * math.Pi * 0.6},
		{"half plane", func(x, y float64) float64 { return x }, 0.25, []float64{1.5}, 1, 2},
		{"everywhere", func(x, y float64) float64 { return 1 }, 0.5, []float64{4}, 0, 0},
		{"nowhere", func(x, y float64) float64 { return 0 }, 0.5, nil, 0, 0},
		{"two corners", func(x, y float64) float64 { return x * y }, 0.25, []float64{0.75 - 0.25*math.Log(4), 0.75 - 0.25*math.Log(4)}, 2, math.NaN()},
	} {
		xs, ys, z := fieldOf(80, v.f)
		var areas []float64
		lines, length := 0, 0.0
		for _, c := range contours(xs, ys, z, v.level) {
			areas = append(areas, signedArea(c))
			lines += len(c.lines)
			for _, l := range c.lines {
				for i := 1; i < len(l[0]); i++ {
					length += math.Hypot(l[0][i]-l[0][i-1], l[1][i]-l[1][i-1])
				}
				for i, x := range l[0] {
					if got := v.f(x, l[1][i]); math.Abs(got-v.level) > 2e-3 {
						t.Errorf("%s: %g on the line of %g", v.name, got, v.level)
					}
				}
			}
		}
		if len(areas) != len(v.area) {
			t.Errorf("%s: areas %v, want %v", v.name, areas, v.area)
			continue
		}
		for i, want := range v.area {
			if math.Abs(areas[i]-want) > 3e-3 {
				t.Errorf("%s: ring %d has the area %.4f, want %.4f", v.name, i, areas[i], want)
			}
		}
		if lines != v.lines || math.Abs(length-v.lengthOfLine) > 5e-3 {
			t.Errorf("%s: %d lines of %.4f, want %d of %.4f", v.name, lines, length, v.lines, v.lengthOfLine)
		}
	}
}

// A cell with two opposite corners inside: the mean decides.
func TestContoursAtASaddle(t *testing.T) {
	for level, rings := range map[float64]int{0.4: 1, 0.6: 2} {
		got := contours([]float64{0, 1}, []float64{0, 1}, [][]float64{{1, 0}, {0, 1}}, level)
		if len(got) != rings {
			t.Errorf("level %g: %d rings, want %d", level, len(got), rings)
		}
		for _, c := range got {
			if signedArea(c) <= 0 {
				t.Errorf("level %g: a ring runs clockwise", level)
			}
		}
	}
}

func TestMapLevels(t *testing.T) {
	for _, v := range []struct {
		lo, hi float64
		want   string
	}{
		{612, 1589, "[700 800 900 1000 1100 1200 1300 1400 1500]"}, {0.11, 0.38, "[0.15 0.2 0.25 0.3 0.35]"}, {0.05, 0.9, "[0.1 0.2 0.3 0.4 0.5 0.6 0.7 0.8]"},
		{3, 3, "[]"}, {1.2, 700, "[2 5 10 20 50 100 200 500]"},
	} {
		got := fmt.Sprint(mapLevels(v.lo, v.hi))
		if v.lo == 0.05 || v.lo == 0.11 { // either way of stepping is good, if it is round and not too dense
			if n := len(mapLevels(v.lo, v.hi)); n < 4 || n > 11 {
				t.Errorf("%g to %g: %s", v.lo, v.hi, got)
			}
			continue
		}
		if got != v.want {
			t.Errorf("%g to %g: %s, want %s", v.lo, v.hi, got, v.want)
		}
	}
}
