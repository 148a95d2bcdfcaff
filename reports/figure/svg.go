package figure

import (
	"bytes"
	"encoding/xml"
	"fmt"
	"image"
	"image/color"
	"math"
	"strconv"
	"strings"

	stdfont "golang.org/x/image/font"
	"gonum.org/v1/plot/font"
	"gonum.org/v1/plot/vg"
)

// families lists fonts of the same widths, so that text stays in its place
// where the first is missing.
const families = "'Liberation Sans', Arial, Helvetica, Arimo, sans-serif"

// SVG returns f as a file of its own: UTF-8 text that can be searched, no
// element identifiers (several figures can stand in one page), no reference to
// anything outside.
func SVG(f Figure) ([]byte, error) {
	w, h := f.size()
	c := &svgCanvas{height: h / point}
	c.state = svgState{m: Identity, width: 1, colour: "#000000"}
	Draw(f, c)
	if c.err != nil {
		return nil, c.err
	}
	var out bytes.Buffer
	fmt.Fprintf(&out, `<svg xmlns="http://www.w3.org/2000/svg" role="img" width="%smm" height="%smm" viewBox="0 0 %s %s" font-family="%s" fill="none" stroke-linejoin="round">`+"\n",
		short(w), short(h), short(w/point), short(h/point), families)
	out.WriteString("<title>")
	if err := xml.EscapeText(&out, []byte(f.AltText())); err != nil {
		return nil, fmt.Errorf("figure: %w", err)
	}
	out.WriteString("</title>\n")
	fmt.Fprintf(&out, `<rect width="%s" height="%s" fill="#ffffff"/>`+"\n", short(w/point), short(h/point))
	out.Write(c.out.Bytes())
	out.WriteString("</svg>\n")
	return out.Bytes(), nil
}

// svgCanvas writes what is drawn; coordinates in points, turned upside down.
type svgCanvas struct {
	out    bytes.Buffer
	height float64 // pt
	state  svgState
	stack  []svgState
	path   strings.Builder
	err    error
}

type svgState struct {
	m      Affine
	width  float64
	dash   string
	colour string
}

var _ vg.Canvas = (*svgCanvas)(nil)

func (c *svgCanvas) SetLineWidth(w vg.Length) { c.state.width = float64(w) }

func (c *svgCanvas) SetLineDash(pattern []vg.Length, _ vg.Length) {
	parts := make([]string, len(pattern))
	for i, p := range pattern {
		parts[i] = short(float64(p))
	}
	c.state.dash = strings.Join(parts, " ")
}

func (c *svgCanvas) SetColor(col color.Color) {
	if col == nil {
		col = color.Black
	}
	r, g, b, _ := col.RGBA()
	c.state.colour = fmt.Sprintf("#%02x%02x%02x", r>>8, g>>8, b>>8)
}

func (c *svgCanvas) Rotate(rad float64) { c.state.m = c.state.m.Mul(Rotation(rad)) }
func (c *svgCanvas) Translate(p vg.Point) {
	c.state.m = c.state.m.Mul(Affine{A: 1, D: 1, E: float64(p.X), F: float64(p.Y)})
}
func (c *svgCanvas) Scale(x, y float64) { c.state.m = c.state.m.Mul(Affine{A: x, D: y}) }
func (c *svgCanvas) Push()              { c.stack = append(c.stack, c.state) }
func (c *svgCanvas) Pop() {
	c.state = c.stack[len(c.stack)-1]
	c.stack = c.stack[:len(c.stack)-1]
}

func (c *svgCanvas) Stroke(p vg.Path) {
	if c.state.width <= 0 {
		return
	}
	fmt.Fprintf(&c.out, `<path d="%s" stroke="%s" stroke-width="%s"`, c.trace(p), c.state.colour, short(c.state.width))
	if c.state.dash != "" {
		fmt.Fprintf(&c.out, ` stroke-dasharray="%s"`, c.state.dash)
	}
	c.out.WriteString("/>\n")
}

func (c *svgCanvas) Fill(p vg.Path) {
	fmt.Fprintf(&c.out, `<path d="%s" fill="%s"/>`+"\n", c.trace(p), c.state.colour)
}

func (c *svgCanvas) FillString(f font.Face, pt vg.Point, text string) {
	x, y := c.state.m.Apply(float64(pt.X), float64(pt.Y))
	y = c.height - y
	fmt.Fprintf(&c.out, `<text x="%s" y="%s" font-size="%s" fill="%s" xml:space="preserve"`, short(x), short(y), short(float64(f.Font.Size)), c.state.colour)
	if f.Font.Weight == stdfont.WeightBold {
		c.out.WriteString(` font-weight="bold"`)
	}
	if angle := -math.Atan2(c.state.m.B, c.state.m.A) * 180 / math.Pi; angle != 0 {
		fmt.Fprintf(&c.out, ` transform="rotate(%s %s %s)"`, short(angle), short(x), short(y))
	}
	c.out.WriteString(">")
	if err := xml.EscapeText(&c.out, []byte(text)); err != nil && c.err == nil {
		c.err = fmt.Errorf("figure: %w", err)
	}
	c.out.WriteString("</text>\n")
}

// DrawImage draws nothing: figures hold no bitmaps.
func (c *svgCanvas) DrawImage(vg.Rectangle, image.Image) {}

func (c *svgCanvas) trace(p vg.Path) string {
	c.path.Reset()
	Trace(p, c.state.m, c)
	return c.path.String()
}

func (c *svgCanvas) points(command string, xy ...float64) {
	c.path.WriteString(command)
	for i := 0; i < len(xy); i += 2 {
		if i > 0 {
			c.path.WriteByte(' ')
		}
		c.path.WriteString(short(xy[i]) + " " + short(c.height-xy[i+1]))
	}
}

// MoveTo, LineTo, CubeTo and Close make the canvas a Tracer.
func (c *svgCanvas) MoveTo(x, y float64) { c.points("M", x, y) }
func (c *svgCanvas) LineTo(x, y float64) { c.points("L", x, y) }
func (c *svgCanvas) CubeTo(x1, y1, x2, y2, x, y float64) {
	c.points("C", x1, y1, x2, y2, x, y)
}
func (c *svgCanvas) Close() { c.path.WriteString("Z") }

// short writes a coordinate with two decimals at most.
func short(v float64) string {
	s := strconv.FormatFloat(v, 'f', 2, 64)
	s = strings.TrimRight(strings.TrimRight(s, "0"), ".")
	if s == "-0" || s == "" {
		return "0"
	}
	return s
}
