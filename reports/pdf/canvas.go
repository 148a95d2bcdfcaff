package pdf

import (
	"image"
	"image/color"
	"math"

	"codeberg.org/go-pdf/fpdf"
	stdfont "golang.org/x/image/font"
	"gonum.org/v1/plot/font"
	"gonum.org/v1/plot/vg"

	"phaselag/reports/figure"
)

const point = 25.4 / 72 // mm

// canvas draws on a rectangle of a page.
//
// The drawing has points and y upwards, the page millimetres and y downwards:
// with the rectangle's lower left corner at (x0, y0) and magnification k,
//
//	x = x0 + k·X,   y = y0 − k·Y,   k in mm a point.
//
// Transformations are kept here, not in the file, so that the page's own state
// stays what it was.
type canvas struct {
	pdf   *fpdf.Fpdf
	scale float64 // magnification of lines and type
	state state
	stack []state
}

type state struct {
	m      figure.Affine
	width  float64 // pt
	dash   []float64
	colour color.Color
}

var _ vg.Canvas = (*canvas)(nil)

// drawFigure draws f with its upper left corner at (x, y), scale times its size.
func drawFigure(pdf *fpdf.Fpdf, f figure.Figure, x, y, scale float64) {
	_, h := f.Size()
	k := point * scale
	c := &canvas{pdf: pdf, scale: scale, state: state{m: figure.Affine{A: k, D: -k, E: x, F: y + h*scale}, width: 1, colour: color.Black}}
	pdf.SetLineJoinStyle("round")
	figure.Draw(f, c)
	pdf.SetDashPattern(nil, 0)
	pdf.SetLineJoinStyle("miter")
	pdf.SetTextColor(0, 0, 0)
	pdf.SetDrawColor(0, 0, 0)
	pdf.SetFillColor(255, 255, 255)
}

func (c *canvas) SetLineWidth(w vg.Length) { c.state.width = float64(w) }

func (c *canvas) SetLineDash(pattern []vg.Length, _ vg.Length) {
	c.state.dash = nil
	for _, p := range pattern {
		c.state.dash = append(c.state.dash, float64(p)*point*c.scale)
	}
}

func (c *canvas) SetColor(col color.Color) {
	if col == nil {
		col = color.Black
	}
	c.state.colour = col
}

func (c *canvas) rgb() (r, g, b int) {
	x, y, z, _ := c.state.colour.RGBA()
	return int(x >> 8), int(y >> 8), int(z >> 8)
}

func (c *canvas) Rotate(rad float64) { c.state.m = c.state.m.Mul(figure.Rotation(rad)) }
func (c *canvas) Translate(p vg.Point) {
	c.state.m = c.state.m.Mul(figure.Affine{A: 1, D: 1, E: float64(p.X), F: float64(p.Y)})
}
func (c *canvas) Scale(x, y float64) { c.state.m = c.state.m.Mul(figure.Affine{A: x, D: y}) }
func (c *canvas) Push()              { c.stack = append(c.stack, c.state) }
func (c *canvas) Pop() {
	c.state = c.stack[len(c.stack)-1]
	c.stack = c.stack[:len(c.stack)-1]
}

func (c *canvas) Stroke(p vg.Path) {
	if c.state.width <= 0 || len(p) == 0 {
		return
	}
	c.pdf.SetDrawColor(c.rgb())
	c.pdf.SetLineWidth(c.state.width * point * c.scale)
	c.pdf.SetDashPattern(c.state.dash, 0)
	figure.Trace(p, c.state.m, tracer{c.pdf})
	c.pdf.DrawPath("D")
}

func (c *canvas) Fill(p vg.Path) {
	if len(p) == 0 {
		return
	}
	c.pdf.SetFillColor(c.rgb())
	figure.Trace(p, c.state.m, tracer{c.pdf})
	c.pdf.DrawPath("F")
}

func (c *canvas) FillString(f font.Face, pt vg.Point, text string) {
	if f.Font.Size <= 0 || text == "" {
		return
	}
	style := ""
	if f.Font.Weight == stdfont.WeightBold {
		style = "B"
	}
	c.pdf.SetFont(family, style, float64(f.Font.Size)*c.scale)
	c.pdf.SetTextColor(c.rgb())
	x, y := c.state.m.Apply(float64(pt.X), float64(pt.Y))
	// the page's y runs downwards, so its angle has the other sign
	angle := -math.Atan2(c.state.m.B, c.state.m.A) * 180 / math.Pi
	if math.Abs(angle) < 1e-9 {
		c.pdf.Text(x, y, printable(text))
		return
	}
	c.pdf.TransformBegin()
	c.pdf.TransformRotate(angle, x, y)
	c.pdf.Text(x, y, printable(text))
	c.pdf.TransformEnd()
}

// DrawImage draws nothing: figures hold no bitmaps.
func (c *canvas) DrawImage(vg.Rectangle, image.Image) {}

// tracer hands a path to the page.
type tracer struct{ pdf *fpdf.Fpdf }

func (t tracer) MoveTo(x, y float64) { t.pdf.MoveTo(x, y) }
func (t tracer) LineTo(x, y float64) { t.pdf.LineTo(x, y) }
func (t tracer) CubeTo(x1, y1, x2, y2, x, y float64) {
	t.pdf.CurveBezierCubicTo(x1, y1, x2, y2, x, y)
}
func (t tracer) Close() { t.pdf.ClosePath() }
