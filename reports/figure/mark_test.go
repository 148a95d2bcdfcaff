package figure

import (
	"bytes"
	"math"
	"strings"
	"testing"
)

func layered() Panel {
	return Panel{X: Axis{Min: 0, Max: 10}, Y: Axis{Min: 0, Max: 10}, Top: &Top{Label: "T (°C)", At: []float64{2, 2.1, 8, 40}, Text: []string{"20", "21", "80", "400"}},
		Areas: []Area{
			{Rings: []Ring{{X: []float64{1, 9, 9, 1}, Y: []float64{1, 1, 9, 9}}, {X: []float64{4, 4, 6, 6}, Y: []float64{4, 6, 6, 4}}}, Colour: Steps(3)[1]},
			{Rings: []Ring{{X: []float64{-5, 3, 3, -5}, Y: []float64{-5, -5, 3, 3}}}, Colour: Grey, Hatch: true},
		},
		Series: []Series{
			{Mark: "600", X: []float64{0, 10}, Y: []float64{2, 3}, Line: Solid},
			{Mark: "700", X: []float64{0, 10, math.NaN(), 1, 1.1}, Y: []float64{6, 8, 0, 9, 9}, Line: Solid},
			{X: []float64{5, 5}, Y: []float64{0, 10}, Line: Solid},
		}}
}

// A mark stands on its line, along it, in a gap, clear of other lines; a stretch that is
// too short has none.
func TestMarks(t *testing.T) {
	a := newAxes(layered(), rect{0, 0, 100, 80})
	list := a.stretches()
	if list[0][0].mark == nil || list[1][0].mark == nil || list[1][1].mark != nil || list[2][0].mark != nil {
		t.Fatal("the wrong lines are marked")
	}
	for i := range 2 {
		s := list[i][0]
		m := s.mark
		p, q := s.line[0], s.line[1]
		if want := math.Atan2(q.y-p.y, q.x-p.x); math.Abs(m.angle-want) > 1e-9 {
			t.Errorf("mark %d has the angle %g, want %g", i, m.angle, want)
		}
		if d := (q.x-p.x)*(m.at.y-p.y) - (q.y-p.y)*(m.at.x-p.x); math.Abs(d) > 1e-6 {
			t.Errorf("mark %d at %v is not on its line", i, m.at)
		}
		for y := 0.0; y <= 10; y += 0.1 {
			if m.covers(xy{a.x.place(5), a.y.place(y)}, 0) {
				t.Errorf("mark %d at %v covers another line", i, m.at)
			}
		}
		pieces := s.pieces()
		if len(pieces) != 2 {
			t.Fatalf("%d pieces of line %d", len(pieces), i)
		}
		if got, want := lengthOf(pieces[0])+lengthOf(pieces[1]), lengthOf(s.line)-m.width-2*markRoom; math.Abs(got-want) > 1e-9 {
			t.Errorf("the pieces of line %d are %g mm long, want %g", i, got, want)
		}
		for _, piece := range pieces {
			for _, q := range piece {
				if m.covers(q, 0) {
					t.Errorf("the line runs through mark %d at %v", i, q)
				}
			}
		}
	}
}

// Text never stands upside down, whichever way the line runs.
func TestMarksAreUpright(t *testing.T) {
	for k := range 24 {
		angle := float64(k) * math.Pi / 12
		sin, cos := math.Sincos(angle)
		p := Panel{X: Axis{Min: -1, Max: 1}, Y: Axis{Min: -1, Max: 1}, Series: []Series{{Mark: "500", X: []float64{-cos, cos}, Y: []float64{-sin, sin}, Line: Solid}}}
		m := newAxes(p, rect{0, 0, 100, 80}).stretches()[0][0].mark
		if m == nil || math.Abs(m.angle) > math.Pi/2+1e-6 {
			t.Errorf("%g rad: %+v", angle, m)
		}
	}
}

// Hatched lines lie 45° up, inside the rings and the frame, and leave holes free.
func TestHatch(t *testing.T) {
	ring := []xy{{0, 0}, {20, 0}, {20, 20}, {0, 20}}
	hole := []xy{{8, 8}, {8, 12}, {12, 12}, {12, 8}}
	var length float64
	for _, l := range hatch([][]xy{ring, hole}, rect{0, 0, 20, 20}) {
		if math.Abs((l[1].y-l[0].y)-(l[1].x-l[0].x)) > 1e-9 {
			t.Errorf("%v is not slanted by 45°", l)
		}
		mid := xy{(l[0].x + l[1].x) / 2, (l[0].y + l[1].y) / 2}
		if (rect{8, 8, 12, 12}).has(mid) || !(rect{0, 0, 20, 20}).has(mid) {
			t.Errorf("%v lies outside the area", l)
		}
		length += math.Hypot(l[1].x-l[0].x, l[1].y-l[0].y)
	}
	// A hatch of distance d covers an area A with lines of the length A/d.
	if want := (20*20 - 4*4) / hatchGap; math.Abs(length/want-1) > 0.05 {
		t.Errorf("length %.1f mm, want %.1f", length, want)
	}
}

// Lightness L* of CIE 1976 (ISO/CIE 11664-4; values of sRGB and D65 from memory) falls by
// equal steps, and black letters of any step keep 4.5 : 1 (WCAG 2.1; from memory).
func TestSteps(t *testing.T) {
	luminance := func(c Colour) float64 {
		lin := func(v uint8) float64 {
			x := float64(v) / 255
			if x <= 0.04045 {
				return x / 12.92
			}
			return math.Pow((x+0.055)/1.055, 2.4)
		}
		r, g, b := c.RGB()
		return 0.2126*lin(r) + 0.7152*lin(g) + 0.0722*lin(b)
	}
	list := Steps(8)
	var last float64
	for i, c := range list {
		y := luminance(c)
		l := 116*math.Cbrt(y) - 16
		if i > 0 && (last-l < 3.5 || last-l > 6) {
			t.Errorf("step %d: L* falls by %.1f", i, last-l)
		}
		last = l
		if ratio := (y + 0.05) / 0.05; ratio < 4.5 {
			t.Errorf("step %d: contrast %.1f : 1", i, ratio)
		}
	}
	if len(Steps(0)) != 0 || len(Steps(1)) != 1 {
		t.Error("the number of steps")
	}
}

func TestTopThinsItsLabels(t *testing.T) {
	b, err := SVG(Figure{Width: 100, Height: 80, Panels: []Panel{layered()}})
	if err != nil {
		t.Fatal(err)
	}
	text := string(b)
	for word, want := range map[string]int{">20<": 1, ">21<": 0, ">80<": 1, ">400<": 0, ">T (°C)<": 1, ">600<": 1, ">700<": 1} {
		if n := strings.Count(text, word); n != want {
			t.Errorf("%s stands %d times, not %d", word, n, want)
		}
	}
}

// Areas, marks and tops of hostile numbers give a picture all the same.
func TestHostileLayers(t *testing.T) {
	nan, inf := math.NaN(), math.Inf(1)
	for _, xs := range [][]float64{nil, {1}, {nan, inf, -inf, 1, 2, 3}, {0, 0, 0, 0}, {-1e308, 1e308, 1e308, -1e308}, {5e-324, 1e299, 1, 2}} {
		for _, log := range []bool{false, true} {
			f := Figure{Width: 60, Height: 40, Panels: []Panel{{X: Auto("x", log), Y: Auto("y", log), Top: &Top{At: xs, Text: []string{"a", "", "\x00"}},
				Areas:  []Area{{Rings: []Ring{{X: xs, Y: xs}, {X: xs}}, Hatch: true}, {Rings: []Ring{{X: xs, Y: xs}}}},
				Series: []Series{{X: xs, Y: xs, Line: Solid, Mark: strings.Repeat("m", 80)}, {X: xs, Y: xs, Mark: "m"}}}}}
			b, err := SVG(f)
			if err != nil || bytes.Contains(b, []byte("NaN")) || bytes.Contains(b, []byte("Inf")) {
				t.Errorf("%v: %v", xs, err)
			}
		}
	}
}
