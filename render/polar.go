package render

import (
	"math"
	"strconv"

	"cavitywright/render/letter"
	"cavitywright/sim/figure"
)

// PolarPlot is the layout of a quantity against direction: a disc about Centre
// whose rim, Radius away, is the upper end of the axis.
type PolarPlot struct {
	Box     Box
	Centre  Point
	Radius  float64
	Rings   Ladder
	title   string
	caption []string
	detail  detail
	most    float64
}

const (
	// spoke is the angle between the lines of equal direction (degrees).
	spoke = 30
	// leastDisc is the least radius, in small type sizes, of a disc with
	// numbers.
	leastDisc = 5
	// ringAngle is the direction (degrees) along which the rings are numbered:
	// between two spokes, and where a lobe along +x leaves room.
	ringAngle = 105
)

// LayoutPolar lays out a far field within a box: one below the other its name
// with the key of its curves, the disc, and the caption.
func LayoutPolar(f figure.Polar, box Box, look Look) PolarPlot {
	p := PolarPlot{Box: box, detail: full}
	for ; p.detail > bare; p.detail-- {
		if p.fit(f, look); p.Radius >= leastDisc*look.Small {
			return p
		}
	}
	p.fit(f, look)
	return p
}

// fit puts the disc into the room that the writing of the detail leaves.
func (p *PolarPlot) fit(f figure.Polar, look Look) {
	in := p.Box.Inset(look.Margin)
	p.caption = nil
	if p.detail == full {
		p.caption = wrap(f.Caption, in.W(), look.Small)
		if n := float64(len(p.caption)); n > 0 {
			in.Max.Y -= ((n-1)*lineHeight + captionGap + letter.Ascent) * look.Small
		}
	}
	if p.detail >= titled {
		in.Min.Y += polarHead(f) * lineHeight * look.Small
	}
	if p.detail >= numbered {
		in.Min.Y, in.Max.Y = in.Min.Y+lineHeight*look.Small, in.Max.Y-lineHeight*look.Small
		side := (letter.Width("180°", letter.Regular) + labelGap) * look.Small
		in.Min.X, in.Max.X = in.Min.X+side, in.Max.X-side
	}
	p.Centre = Point{(in.Min.X + in.Max.X) / 2, (in.Min.Y + in.Max.Y) / 2}
	p.Radius = max(min(in.W(), in.H())/2, 0)
	_, p.most = mended(figure.Axis{Lo: 0, Hi: f.Radius.Hi})
	p.Rings = Ticks(0, p.most, figure.Linear, 4)
	p.title = title(f.Radius, p.Rings.Exp)
}

// polarHead is the number of lines above the disc.
func polarHead(f figure.Polar) float64 {
	n := 1.0
	for _, c := range f.Curves {
		if c.Name != "" {
			n++
		}
	}
	return n
}

// polarHeight is the height, at a width, at which the disc fills the width to
// polarShare.
func polarHeight(f figure.Polar, width float64, look Look) float64 {
	const share = 0.8
	return share*width + (polarHead(f)+2)*lineHeight*look.Small + captionHeight(f.Caption, width, look)
}

// At is the place of a value in a direction (radians counter-clockwise from
// +x) on the canvas.
func (p PolarPlot) At(angle, value float64) Point {
	r := value / p.most * p.Radius
	return Point{p.Centre.X + r*math.Cos(angle), p.Centre.Y - r*math.Sin(angle)}
}

// ring is the circle of a value.
func (p PolarPlot) ring(value float64) Path {
	const corners = 180
	points := make([]Point, corners)
	for i := range points {
		points[i] = p.At(2*math.Pi*float64(i)/corners, value)
	}
	var c Path
	c.polyline(points, true)
	return c
}

// drawPolar draws curves against direction.
func drawPolar(c Canvas, f figure.Polar, box Box, look Look) {
	p := LayoutPolar(f, box, look)
	faint := Pen{Width: look.Hair, Color: look.Faint}
	for _, t := range p.Rings.Major {
		if t.At > 0 && t.At < p.most {
			c.Stroke(p.ring(t.At), faint)
		}
	}
	for deg := 0; deg < 360; deg += spoke {
		c.Stroke(Segment(p.Centre, p.At(float64(deg)*math.Pi/180, p.most)), faint)
	}
	for _, curve := range f.Curves {
		drawSpread(c, curve, p, look)
	}
	c.Stroke(p.ring(p.most), Pen{Width: look.Hair, Color: look.Ink})
	for i, curve := range f.Curves {
		c.Stroke(ClipStroke(p.outline(curve.X, curve.Y), box, box.W()), curvePen(curve, i, look))
	}
	drawPolarWords(c, f, p, look)
}

// outline is a closed line through values at directions.
func (p PolarPlot) outline(angles, values []float64) Path {
	var points []Point
	for i := range min(len(angles), len(values)) {
		if q := p.At(angles[i], math.Max(values[i], 0)); q.finite() {
			points = append(points, q)
		}
	}
	var line Path
	line.polyline(points, true)
	return line
}

// drawSpread fills one standard error to both sides of a curve: the outer
// outline with the inner one as a hole.
func drawSpread(c Canvas, curve figure.Curve, p PolarPlot, look Look) {
	if len(curve.Err) < len(curve.Y) {
		return
	}
	up, down := make([]float64, len(curve.Y)), make([]float64, len(curve.Y))
	for i, y := range curve.Y {
		up[i], down[i] = math.Min(y+curve.Err[i], 1.2*p.most), y-curve.Err[i]
	}
	band := p.outline(curve.X, up)
	hole := p.outline(curve.X, down)
	band.Ops, band.Points = append(band.Ops, hole.Ops...), append(band.Points, hole.Points...)
	c.Fill(band, Fade(look.Orbit(curve.Hue), bandAlpha))
}

// drawPolarWords sets the directions, the numbers of the rings, the key and
// the caption, so far as there is room.
func drawPolarWords(c Canvas, f figure.Polar, p PolarPlot, look Look) {
	set := func(at Point, s string, h HAlign, v VAlign) {
		c.Text(Text{At: at, Size: look.Small, String: s, H: h, V: v, Color: look.Ink})
	}
	if p.detail >= numbered {
		for deg := 0; deg < 360; deg += spoke {
			a := float64(deg) * math.Pi / 180
			q := p.At(a, p.most)
			gap := 0.35 * look.Small
			h := Center
			if x := math.Cos(a); x > 0.2 {
				h = Left
			} else if x < -0.2 {
				h = Right
			}
			v := Middle
			if y := math.Sin(a); y > 0.9 {
				v = Baseline
			} else if y < -0.9 {
				v = Top
			}
			set(Point{q.X + gap*math.Cos(a), q.Y - gap*math.Sin(a)}, strconv.Itoa(deg)+"°", h, v)
		}
		for _, t := range p.Rings.Major {
			if t.At <= 0 || t.At > p.most*(1+slack) {
				continue
			}
			q := p.At(ringAngle*math.Pi/180, t.At)
			w := look.Small * letter.Width(t.Label, letter.Regular)
			c.Fill(NewBox(q.X-w/2-look.Hair, q.Y-0.5*look.Small, w+2*look.Hair, look.Small).Path(), Fade(look.Paper, 0.75))
			set(q, t.Label, Center, Middle)
		}
	}
	if p.detail >= titled {
		left := p.Box.Min.X + look.Margin
		y := p.Box.Min.Y + look.Margin + letter.Ascent*look.Small
		set(Point{left, y}, p.title, Left, Baseline)
		for i, curve := range f.Curves {
			if curve.Name == "" {
				continue
			}
			y += lineHeight * look.Small
			mid := y - letter.CapHeight/2*look.Small
			c.Stroke(Segment(Point{left, mid}, Point{left + 2.2*look.Small, mid}), curvePen(curve, i, look))
			set(Point{left + 2.7*look.Small, y}, curve.Name, Left, Baseline)
		}
	}
	drawCaption(c, p.caption, p.Box.Min.X+look.Margin, p.Box.Max.Y-look.Margin, look)
}
