package pixel

import (
	"math"

	"cavitywright/render"
)

// widestHairline is the width, in pixels, up to which a line is drawn without
// an outline: its joins and ends are too small for their form to be seen.
const widestHairline = 2.2

// Stroke draws along a path. Lines up to 2.2 pixels wide end square.
func (c *Canvas) Stroke(p render.Path, pen render.Pen) {
	if c.img == nil || !(pen.Width > 0) || pen.Color.A == 0 {
		return
	}
	if pen.Width <= widestHairline && pen.Dash == nil && straight(p) {
		c.strokeHair(p, pen)
		return
	}
	p = render.ClipStroke(p, c.bounds.Inset(-pen.Width-1), flatness)
	if pen.Dash != nil {
		p = p.Dashed(pen.Dash)
	}
	if pen.Width <= widestHairline {
		c.strokeHair(p, pen)
		return
	}
	c.strokeWide(p, pen)
}

// straight says whether a path has no curves.
func straight(p render.Path) bool {
	for _, op := range p.Ops {
		if op == render.Cubic {
			return false
		}
	}
	return true
}

// strokeHair draws the straight segments of a path one by one.
func (c *Canvas) strokeHair(p render.Path, pen render.Pen) {
	src := newSource(pen.Color)
	var start, last render.Point
	i := 0
	for _, op := range p.Ops {
		switch op {
		case render.Move:
			start, last = p.Points[i], p.Points[i]
			i++
		case render.Line:
			c.hairline(last, p.Points[i], pen.Width, &src)
			last = p.Points[i]
			i++
		case render.Close:
			c.hairline(last, start, pen.Width, &src)
		}
	}
}

// strokeWide fills the outline of the stroke.
func (c *Canvas) strokeWide(p render.Path, pen render.Pen) {
	// No wider than to cover the picture from anywhere near it.
	width := min(pen.Width, 4*(c.bounds.W()+c.bounds.H()))
	c.line.reset(width/2, pen.Cap)
	p.Contours(flatness, c.line.add)
	c.whole.Reset()
	from := 0
	for _, to := range c.line.ends {
		for i, q := range c.line.points[from:to] {
			if i == 0 {
				c.whole.MoveTo(q.X, q.Y)
			} else {
				c.whole.LineTo(q.X, q.Y)
			}
		}
		c.whole.Close()
		from = to
	}
	p = render.ClipFill(c.whole, c.bounds, flatness)
	area := pixelBounds(p.Points, c.img.Rect)
	if area.Empty() {
		return
	}
	c.cover.begin(area)
	p.Contours(flatness, func(points []render.Point, _ bool) { c.cover.add(points) })
	c.paint(around, pen.Color)
}

// outline collects the outline of strokes: closed contours that all wind the
// same way around what is inked, so that coverage adds up and never cancels.
type outline struct {
	radius float64
	cap    render.Cap
	points []render.Point
	ends   []int // of each contour, in points
	run    []render.Point
}

func (o *outline) reset(radius float64, cap render.Cap) {
	o.radius, o.cap = radius, cap
	o.points, o.ends = o.points[:0], o.ends[:0]
}

// tooNear is the distance, in pixels, below which two points of a path have no
// direction from one to the other.
const tooNear = 1e-6

// add outlines one polyline.
func (o *outline) add(points []render.Point, closed bool) {
	run := o.run[:0]
	for _, q := range points {
		if n := len(run); n == 0 || math.Hypot(q.X-run[n-1].X, q.Y-run[n-1].Y) > tooNear {
			run = append(run, q)
		}
	}
	if n := len(run); closed && n > 1 && math.Hypot(run[0].X-run[n-1].X, run[0].Y-run[n-1].Y) <= tooNear {
		run = run[:n-1]
	}
	o.run = run
	switch {
	case len(run) == 0:
	case len(run) == 1:
		if o.cap == render.Round {
			o.arc(run[0], 0, 2*math.Pi)
			o.finish()
		}
	case closed && len(run) > 2:
		o.side(run, true)
		o.finish()
		reverse(run)
		o.side(run, true)
		o.finish()
	default:
		o.side(run, false)
		o.turnBack(run[len(run)-2], run[len(run)-1])
		reverse(run)
		o.side(run, false)
		o.turnBack(run[len(run)-2], run[len(run)-1])
		o.finish()
	}
}

// side adds the left edge of the stroke along a polyline.
func (o *outline) side(run []render.Point, closed bool) {
	n := len(run)
	for i := range n - 1 {
		o.edge(run[i], run[i+1])
		if i+2 < n {
			o.join(run[i], run[i+1], run[i+2])
		}
	}
	if closed {
		o.join(run[n-2], run[n-1], run[0])
		o.edge(run[n-1], run[0])
		o.join(run[n-1], run[0], run[1])
	}
}

// edge adds the left side of one segment.
func (o *outline) edge(a, b render.Point) {
	h := o.radius / math.Hypot(b.X-a.X, b.Y-a.Y)
	nx, ny := (b.Y-a.Y)*h, -(b.X-a.X)*h
	o.points = append(o.points, render.Point{X: a.X + nx, Y: a.Y + ny}, render.Point{X: b.X + nx, Y: b.Y + ny})
}

// join leads from the edge of ab to that of bc: by an arc on the outer side of
// the turn, by way of the vertex on the inner, where the edges overlap.
func (o *outline) join(a, b, c render.Point) {
	ux, uy, vx, vy := b.X-a.X, b.Y-a.Y, c.X-b.X, c.Y-b.Y
	cross, dot := ux*vy-uy*vx, ux*vx+uy*vy
	turn := math.Atan2(cross, dot)
	if turn <= 0 && turn > -math.Pi {
		o.points = append(o.points, b)
		return
	}
	from := math.Atan2(-ux, uy)
	o.arc(b, from, from+math.Abs(turn))
}

// turnBack ends the stroke at b, coming from a, and leads to its other side.
func (o *outline) turnBack(a, b render.Point) {
	if o.cap == render.Butt {
		return
	}
	from := math.Atan2(-(b.X - a.X), b.Y-a.Y)
	o.arc(b, from, from+math.Pi)
}

// arc adds points of a circle about c between two directions, its chords
// within the flatness.
func (o *outline) arc(c render.Point, from, to float64) {
	step := 2 * math.Acos(max(1-flatness/o.radius, -1))
	n := int(math.Ceil((to - from) / max(step, 0.05)))
	for i := range n + 1 {
		sin, cos := math.Sincos(from + (to-from)*float64(i)/float64(max(n, 1)))
		o.points = append(o.points, render.Point{X: c.X + o.radius*cos, Y: c.Y + o.radius*sin})
	}
}

// finish closes the contour.
func (o *outline) finish() { o.ends = append(o.ends, len(o.points)) }

func reverse(points []render.Point) {
	for i, j := 0, len(points)-1; i < j; i, j = i+1, j-1 {
		points[i], points[j] = points[j], points[i]
	}
}
