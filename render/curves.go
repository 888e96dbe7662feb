package render

import "cavitywright/sim/figure"

// dashes tells curves apart without colour, in multiples of a tick.
var dashes = [...][]float64{nil, {1.6, 0.7}, {0.35, 0.6}, {2, 0.6, 0.35, 0.6}}

// curvePen is the pen of the curve at a place in the list. A guide is thin,
// whatever its place.
func curvePen(curve figure.Curve, place int, look Look) Pen {
	if curve.Form == figure.Guide {
		return Pen{Width: look.Line, Color: look.Orbit(curve.Hue), Dash: []float64{2.4 * look.Tick, 0.8 * look.Tick}, Cap: Butt}
	}
	var dash []float64
	for _, d := range dashes[place%len(dashes)] {
		dash = append(dash, d*look.Tick)
	}
	pen := Pen{Width: 1.4 * look.Line, Color: look.Orbit(curve.Hue), Dash: dash}
	if dash != nil {
		pen.Cap = Butt
	}
	return pen
}

// places counts, for each curve, the measured ones before it: their dashes
// tell them apart, and guides take none of these.
func places(curves []figure.Curve) []int {
	all, n := make([]int, len(curves)), 0
	for i, curve := range curves {
		all[i] = n
		if curve.Form != figure.Guide {
			n++
		}
	}
	return all
}

// marked says whether the points of a curve are marked.
func marked(curve figure.Curve) bool {
	return curve.Form == figure.Points || curve.Form == figure.Joined && len(curve.X) <= fewPoints
}

// drawCurve strokes a curve, broken where it has no value, and marks its
// points where they are few.
func drawCurve(c Canvas, curve figure.Curve, place int, p Plot, look Look) {
	pen := curvePen(curve, place, look)
	if curve.Form != figure.Points {
		shown := curve
		if curve.Form == figure.Steps {
			shown = stepped(curve)
		}
		c.Stroke(ClipStroke(through(shown, p), p.Frame, p.Frame.W()), pen)
	}
	if !marked(curve) {
		return
	}
	var dots Dots
	for i := range min(len(curve.X), len(curve.Y)) {
		if q := (Point{p.ToX(curve.X[i]), p.ToY(curve.Y[i])}); p.Frame.Contains(q) {
			dots.X, dots.Y = append(dots.X, q.X), append(dots.Y, q.Y)
		}
	}
	dots.Radius, dots.Color = 1.5*pen.Width, pen.Color
	c.Dots(dots)
}

// through is the line through the points of a curve on the canvas. Below a
// logarithmic axis a point stands far under the frame, so that a line to it
// falls out of the picture and is not broken.
func through(curve figure.Curve, p Plot) Path {
	var line Path
	for i := range min(len(curve.X), len(curve.Y)) {
		q := Point{p.ToX(curve.X[i]), p.ToY(curve.Y[i])}
		if p.y.log && curve.Y[i] == 0 {
			q.Y = p.Frame.Max.Y + p.Frame.H()
		}
		if i == 0 {
			line.MoveTo(q.X, q.Y)
		} else {
			line.LineTo(q.X, q.Y)
		}
	}
	return line
}

// stepped is a histogram as the corners of its steps: each value reaches half
// way to the neighbours of its class.
func stepped(curve figure.Curve) figure.Curve {
	n := min(len(curve.X), len(curve.Y))
	if n < 2 {
		return curve
	}
	out := figure.Curve{Name: curve.Name, Hue: curve.Hue}
	for i := range n {
		before, after := curve.X[max(i-1, 0)], curve.X[min(i+1, n-1)]
		lo, hi := (before+curve.X[i])/2, (curve.X[i]+after)/2
		if i == 0 {
			lo = curve.X[0] - (hi - curve.X[0])
		}
		if i == n-1 {
			hi = curve.X[i] + (curve.X[i] - lo)
		}
		out.X, out.Y = append(out.X, lo, hi), append(out.Y, curve.Y[i], curve.Y[i])
		if i < len(curve.Err) {
			out.Err = append(out.Err, curve.Err[i], curve.Err[i])
		}
	}
	return out
}

// bandAlpha is how much of the colour of a curve its error band has.
const bandAlpha = 0.22

// drawErrors shows one standard error about a curve: a band, stretch by
// stretch between points that have one, or bars where points stand alone.
func drawErrors(c Canvas, curve figure.Curve, p Plot, look Look) {
	if curve.Form == figure.Steps {
		curve = stepped(curve)
	}
	var up, down []Point
	flush := func() {
		var band Path
		for i := len(down) - 1; i >= 0; i-- {
			up = append(up, down[i])
		}
		band.polyline(up, true)
		if len(down) > 1 {
			c.Fill(ClipFill(band, p.Frame, p.Frame.W()), Fade(look.Orbit(curve.Hue), bandAlpha))
		}
		up, down = up[:0], down[:0]
	}
	for i := range min(len(curve.X), len(curve.Y), len(curve.Err)) {
		x, y, e := p.ToX(curve.X[i]), curve.Y[i], curve.Err[i]
		a, b := Point{x, p.ToY(y + e)}, Point{x, p.ToY(y - e)}
		if a.finite() && !b.finite() && p.y.log {
			b.Y = p.Frame.Max.Y + p.Frame.H() // an error as large as the value reaches below any decade
		}
		switch {
		case !a.finite() || !b.finite():
			flush()
		case curve.Form == figure.Points:
			c.Stroke(ClipStroke(Segment(a, b), p.Frame, p.Frame.W()), Pen{Width: look.Line, Color: look.Orbit(curve.Hue), Cap: Butt})
		default:
			up, down = append(up, a), append(down, b)
		}
	}
	flush()
}
