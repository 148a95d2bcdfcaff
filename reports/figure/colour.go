package figure

import (
	"image/color"
	"math"
)

// Colour is a colour as 0xRRGGBB. The zero value is black.
type Colour uint32

// The colours of Okabe and Ito, with a grey for what stands behind (value from
// memory: the palette of M. Okabe and K. Ito, "Color Universal Design").
const (
	Black      Colour = 0x000000
	Blue       Colour = 0x0072B2
	Vermillion Colour = 0xD55E00
	Green      Colour = 0x009E73
	Purple     Colour = 0xCC79A7
	Orange     Colour = 0xE69F00
	Sky        Colour = 0x56B4E9
	Yellow     Colour = 0xF0E442
	Grey       Colour = 0x7F7F7F
)

var cycle = [...]Colour{Blue, Vermillion, Green, Purple, Orange, Sky, Black}

// Pick returns the i-th colour of a set of series, i counted from 0. It starts
// again after seven; dash and glyph must then tell the series apart.
func Pick(i int) Colour {
	return cycle[((i%len(cycle))+len(cycle))%len(cycle)]
}

// ramp runs from cold to warm through grey: blue and orange stay apart for
// every common deficiency of colour vision, and lightness falls towards both
// ends, which keeps the extremes readable on white.
var ramp = [...]Colour{0x08306B, 0x0072B2, 0x4FA8DC, 0x8C8C8C, 0xE0A12B, 0xD55E00, 0x7A2A00}

// Ramp returns the colour of element i of n ordered from cold to warm.
func Ramp(i, n int) Colour {
	if n < 2 {
		return Blue
	}
	t := math.Max(0, math.Min(1, float64(i)/float64(n-1))) * float64(len(ramp)-1)
	k := int(math.Min(math.Floor(t), float64(len(ramp)-2)))
	return mix(ramp[k], ramp[k+1], t-float64(k))
}

// Tint returns the opaque colour that a 22 % wash of c has on white paper.
func (c Colour) Tint() Colour { return mix(0xFFFFFF, c, 0.22) }

// RGB returns the components, 0 to 255.
func (c Colour) RGB() (r, g, b uint8) { return uint8(c >> 16), uint8(c >> 8), uint8(c) }

func (c Colour) rgba() color.Color {
	r, g, b := c.RGB()
	return color.RGBA{R: r, G: g, B: b, A: 255}
}

// mix returns a + t(b − a) in each component, rounded.
func mix(a, b Colour, t float64) Colour {
	part := func(shift uint) Colour {
		x, y := float64(a>>shift&0xFF), float64(b>>shift&0xFF)
		return Colour(math.Round(x+t*(y-x))) << shift
	}
	return part(16) | part(8) | part(0)
}
