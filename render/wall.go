package render

import (
	"math"

	"cavitywright/sim/figure"
)

// drawWall draws a wall as a band in the colours of its arclength just outside
// the table, and the wall itself, where rays turn, as a thin line of ink: that
// reads in grey print too. A wall without places is ink alone.
func drawWall(c Canvas, l figure.Line, v View, look Look) {
	pts := wallPoints(l, v)
	if len(pts) > 1 {
		band := min(look.Wall, bandLimit(pts, l.Closed))
		drawBand(c, outward(pts, band/2, l.Closed), band, l.Closed, v, look)
	}
	var p Path
	appendLine(&p, l, v)
	c.Stroke(ClipStroke(p, v.Box, v.Box.W()), Pen{Width: 1.5 * look.Hair, Color: look.Ink})
}

// bandLimit keeps the band of a small post within it: half its smaller extent.
func bandLimit(pts []wallPoint, closed bool) float64 {
	if !closed {
		return math.Inf(1)
	}
	e := Box{pts[0].Point, pts[0].Point}
	for _, q := range pts {
		e.Min = Point{min(e.Min.X, q.X), min(e.Min.Y, q.Y)}
		e.Max = Point{max(e.Max.X, q.X), max(e.Max.Y, q.Y)}
	}
	return min(e.W(), e.H()) / 2
}

// sharp is how far beyond a corner, in widths of the offset, its offset may
// reach; a sharper corner is cut, and the round join of the stroke fills it.
const sharp = 1.5

// outward moves a wall to the right of its direction by d: away from the
// interior, which a loop has on its left.
func outward(pts []wallPoint, d float64, closed bool) []wallPoint {
	n := len(pts)
	out := make([]wallPoint, 0, n+8)
	for i, q := range pts {
		before, after := i, i
		if i == n-1 && closed {
			after = 0
		}
		if i == 0 && closed {
			before = n - 1
		}
		in, hasIn := normal(pts, before-1)
		on, hasOn := normal(pts, after)
		switch {
		case !hasIn:
			in = on
		case !hasOn:
			on = in
		}
		mx, my := in.X+on.X, in.Y+on.Y
		reach := 2 / (mx*mx + my*my) // the mitre point is d * reach * (mx, my)
		if m := math.Sqrt(mx*mx+my*my) * reach; m <= sharp {
			out = append(out, wallPoint{Point{q.X + d*reach*mx, q.Y + d*reach*my}, q.at})
			continue
		}
		out = append(out, wallPoint{Point{q.X + d*in.X, q.Y + d*in.Y}, q.at},
			wallPoint{Point{q.X + d*on.X, q.Y + d*on.Y}, q.at})
	}
	return out
}

// normal is the unit vector to the outside of the stretch from point i to the
// next, as seen on the canvas: the plane's right side, with y down.
func normal(pts []wallPoint, i int) (Point, bool) {
	if i < 0 || i+1 >= len(pts) {
		return Point{}, false
	}
	dx, dy := pts[i+1].X-pts[i].X, pts[i+1].Y-pts[i].Y
	h := math.Hypot(dx, dy)
	return Point{-dy / h, dx / h}, h > 0
}

// bandSteps is how many colours the band of a whole wall has.
const bandSteps = 192

// lap is how far, in widths of the band, a stretch reaches back over the one
// before it: enough that no seam shows, and too little for the twice drawn
// edge to show as a bead.
const lap = 0.12

// drawBand strokes a wall stretch by stretch, one colour each, with straight
// ends that overlap a little.
func drawBand(c Canvas, pts []wallPoint, width float64, closed bool, v View, look Look) {
	clip := v.Box.Inset(-width)
	step := func(q wallPoint) int { return int(math.Floor(q.at * bandSteps)) }
	var p Path
	flush := func(k int) {
		color := look.Hue((float64(k) + 0.5) / bandSteps)
		if q := ClipStroke(p, clip, v.Box.W()); len(q.Ops) > 0 {
			c.Stroke(q, Pen{Width: width, Color: color, Cap: Butt})
		}
	}
	p.MoveTo(pts[0].X, pts[0].Y)
	k := step(pts[0])
	for i := 1; i < len(pts); i++ {
		a, b := pts[i-1], pts[i]
		for step(b) > k && b.at > a.at {
			t := (float64(k+1)/bandSteps - a.at) / (b.at - a.at)
			q := Point{a.X + t*(b.X-a.X), a.Y + t*(b.Y-a.Y)}
			back := toward(q, p.Points[len(p.Points)-1], lap*width)
			p.LineTo(q.X, q.Y)
			flush(k)
			p.Reset()
			p.MoveTo(back.X, back.Y)
			p.LineTo(q.X, q.Y)
			k++
		}
		p.LineTo(b.X, b.Y)
	}
	if closed {
		on := toward(pts[0].Point, pts[1].Point, lap*width)
		p.LineTo(on.X, on.Y)
	}
	flush(k)
}

// toward is the point a distance d on the way from a to b, at most b.
func toward(a, b Point, d float64) Point {
	h := math.Hypot(b.X-a.X, b.Y-a.Y)
	if h <= d {
		return b
	}
	return Point{a.X + (b.X-a.X)*d/h, a.Y + (b.Y-a.Y)*d/h}
}
