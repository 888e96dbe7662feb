package render

import (
	"cmp"
	"image/color"
	"math"
	"slices"

	"cavitywright/sim/figure"
)

// The measures of the textures of coats, in widths of a hairline: how far into
// the table they reach, and how far apart their parts stand.
const (
	coatDepth  = 5.0 // the height of a saw tooth, and of all textures
	toothPitch = 6.0
	dotInset   = 3.8
	dotPitch   = 5.5
	dotSize    = 1.3
	lineInset  = 3.6
	lineWidth  = 1.3
	postWidth  = 2.2
)

// drawCoat draws the texture of a stretch of wall along its inside, and of a
// loop that is open all around where it would be.
func drawCoat(c Canvas, l figure.Line, v View, look Look) {
	if l.Texture == figure.Gap {
		var p Path
		appendLine(&p, l, v)
		c.Stroke(ClipStroke(p, v.Box, v.Box.W()), Pen{Width: look.Hair, Color: look.Faint, Dash: []float64{look.Tick, look.Tick}, Cap: Butt})
		return
	}
	drawTexture(c, wallPoints(l, v), l.Closed, l.Texture, v.Box, look)
}

// drawTexture draws a texture to the left of a wall that is laid on the canvas.
func drawTexture(c Canvas, pts []wallPoint, closed bool, texture figure.Texture, box Box, look Look) {
	if len(pts) < 2 {
		return
	}
	switch texture {
	case figure.Dotted:
		drawDotted(c, outward(pts, -dotInset*look.Hair, closed), box, look.Ink, look)
	case figure.Double:
		var p Path
		for i, q := range outward(pts, -lineInset*look.Hair, closed) {
			if i == 0 {
				p.MoveTo(q.X, q.Y)
			} else {
				p.LineTo(q.X, q.Y)
			}
		}
		c.Stroke(ClipStroke(p, box, box.W()), Pen{Width: lineWidth * look.Hair, Color: look.Ink, Cap: Butt})
	case figure.Saw:
		drawSaw(c, pts, box, look.Ink, look)
	}
}

func drawDotted(c Canvas, pts []wallPoint, box Box, ink color.RGBA, look Look) {
	d := Dots{Radius: dotSize * look.Hair, Color: ink}
	stations(pts, dotPitch*look.Hair, box, func(q, _ Point, place float64) {
		if place == math.Trunc(place) {
			return // a tooth's end; dots stand between
		}
		d.X, d.Y = append(d.X, q.X), append(d.Y, q.Y)
	})
	c.Dots(d)
}

// drawSaw draws teeth that rise slowly from the wall and fall at once.
func drawSaw(c Canvas, pts []wallPoint, box Box, ink color.RGBA, look Look) {
	depth := coatDepth * look.Hair
	var p Path
	last := math.Inf(-1)
	stations(pts, toothPitch*look.Hair, box, func(q, in Point, place float64) {
		if place != math.Trunc(place) {
			return
		}
		if place == last+1 {
			p.LineTo(q.X+depth*in.X, q.Y+depth*in.Y)
			p.LineTo(q.X, q.Y)
		} else {
			p.MoveTo(q.X, q.Y)
		}
		last = place
	})
	c.Stroke(p, Pen{Width: look.Hair, Color: ink, Cap: Butt})
}

// stations walks along a wall in half steps of about a pitch, fitted so that a
// whole number of steps makes the wall, and yields those within the box: the
// place on the canvas, the direction into the table, and the number of steps
// from the start.
func stations(pts []wallPoint, pitch float64, box Box, yield func(q, in Point, place float64)) {
	length := 0.0
	for i := 1; i < len(pts); i++ {
		length += math.Hypot(pts[i].X-pts[i-1].X, pts[i].Y-pts[i-1].Y)
	}
	if !(length > 0) || !finite(length) {
		return
	}
	half := length / math.Max(1, math.Round(length/pitch)) / 2
	room := box.Inset(-2 * pitch)
	at, next := 0.0, 0.0
	for i := 1; i < len(pts); i++ {
		a, b := pts[i-1].Point, pts[i].Point
		d := math.Hypot(b.X-a.X, b.Y-a.Y)
		if p, q, ok := room.Clip(a, b); ok && d > 0 {
			from, to := math.Hypot(p.X-a.X, p.Y-a.Y), math.Hypot(q.X-a.X, q.Y-a.Y)
			k := math.Max(next, math.Ceil((at+from)/half-hairStep))
			for ; k*half <= at+to+hairStep*half; k++ {
				t := math.Min((k*half-at)/d, 1)
				yield(Point{a.X + t*(b.X-a.X), a.Y + t*(b.Y-a.Y)}, Point{(b.Y - a.Y) / d, -(b.X - a.X) / d}, k/2)
			}
			next = k
		}
		at += d
	}
}

// hairStep is the part of a half step by which a station may stand beyond the
// end of a stretch: the rounding of its length, with a wide margin.
const hairStep = 1e-6

// coatRoom is the height of the band of coats over the strip of the wall under
// an s axis; none where the wall is bare.
func coatRoom(a figure.Axis, look Look) float64 {
	if len(a.Coats) == 0 {
		return 0
	}
	return look.ceil((coatDepth + 2) * look.Hair)
}

// drawCoats draws the wall unrolled: its line along the strip, its coats over
// it on the side of the table, and at openings a gap with two posts.
func drawCoats(c Canvas, a figure.Axis, p Plot, look Look) {
	if len(a.Coats) == 0 || p.Strip.Empty() {
		return
	}
	y := p.Strip.Min.Y
	x0, x1 := p.Frame.Min.X, p.Frame.Max.X
	line := Pen{Width: 1.5 * look.Hair, Color: look.Ink, Cap: Butt}
	at := x0
	box := Box{Point{x0, p.Frame.Max.Y}, Point{x1, p.Strip.Max.Y}}
	for _, s := range inOrder(a.Coats, p) {
		from, to := math.Max(s.Lo, x0), math.Min(s.Hi, x1)
		if from >= to {
			continue
		}
		if s.Texture != figure.Gap {
			pts := []wallPoint{{Point: Point{s.Lo, y}}, {Point: Point{s.Hi, y}}}
			drawTexture(c, pts, false, s.Texture, box, look)
			continue
		}
		c.Fill(NewBox(from, y-look.Hair, to-from, p.Strip.H()+2*look.Hair).Path(), look.Paper)
		c.Stroke(Segment(Point{at, y}, Point{from, y}), line)
		at = to
		for _, x := range []float64{s.Lo, s.Hi} {
			if x >= x0-look.Hair && x <= x1+look.Hair {
				c.Stroke(Segment(Point{x, y - coatDepth*look.Hair}, Point{x, p.Strip.Max.Y}), Pen{Width: postWidth * look.Hair, Color: look.Ink, Cap: Butt})
			}
		}
	}
	c.Stroke(Segment(Point{at, y}, Point{x1, y}), line)
}

// inOrder is the coats with their ends on the canvas, from left to right.
func inOrder(coats []figure.Coated, p Plot) []figure.Coated {
	out := make([]figure.Coated, 0, len(coats))
	for _, s := range coats {
		a, b := p.ToX(s.Lo), p.ToX(s.Hi)
		s.Lo, s.Hi = math.Min(a, b), math.Max(a, b)
		if finite(s.Lo) && finite(s.Hi) {
			out = append(out, s)
		}
	}
	slices.SortFunc(out, func(a, b figure.Coated) int { return cmp.Compare(a.Lo, b.Lo) })
	return out
}
