package render

import (
	"math"

	"cavitywright/render/letter"
	"cavitywright/sim/figure"
)

// fewPoints is the number of points of a curve up to which each of them is
// marked, so that a reader sees what was computed and what only joins it.
const fewPoints = 60

// drawSeries draws curves with their error bands, axes and a legend.
func drawSeries(c Canvas, f figure.Series, p Plot, look Look) {
	for _, curve := range f.Curves {
		drawErrors(c, curve, p, look)
	}
	drawAxes(c, p, look)
	for i, curve := range f.Curves {
		drawCurve(c, curve, i, p, look)
	}
	drawLevels(c, f.Y.Marks, p, look)
	for _, m := range f.X.Marks {
		x := look.snap(p.ToX(m.At))
		if x > p.Frame.Min.X && x < p.Frame.Max.X {
			c.Stroke(Segment(Point{x, p.Frame.Min.Y}, Point{x, p.Frame.Max.Y}),
				Pen{Width: look.Hair, Color: look.Ink, Dash: []float64{look.Tick, look.Tick}, Cap: Butt})
		}
	}
	if p.detail >= titled {
		drawNames(c, f.X.Marks, p, look)
	}
	if p.detail >= numbered {
		drawLegend(c, f, p, look)
	}
}

// dashes tells curves apart without colour, in multiples of a tick.
var dashes = [...][]float64{nil, {1.6, 0.7}, {0.35, 0.6}, {2, 0.6, 0.35, 0.6}}

// curvePen is the pen of the curve at a place in the list.
func curvePen(curve figure.Curve, place int, look Look) Pen {
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

// drawCurve strokes a curve, broken where it has no value, and marks its
// points where they are few.
func drawCurve(c Canvas, curve figure.Curve, place int, p Plot, look Look) {
	n := min(len(curve.X), len(curve.Y))
	var line Path
	var dots Dots
	for i := range n {
		q := Point{p.ToX(curve.X[i]), p.ToY(curve.Y[i])}
		if i == 0 {
			line.MoveTo(q.X, q.Y)
		} else {
			line.LineTo(q.X, q.Y)
		}
		if p.Frame.Contains(q) {
			dots.X, dots.Y = append(dots.X, q.X), append(dots.Y, q.Y)
		}
	}
	pen := curvePen(curve, place, look)
	c.Stroke(ClipStroke(line, p.Frame, p.Frame.W()), pen)
	if n <= fewPoints {
		dots.Radius, dots.Color = 1.5*pen.Width, pen.Color
		c.Dots(dots)
	}
}

// bandAlpha is how much of the colour of a curve its error band has.
const bandAlpha = 0.22

// drawErrors fills the band of one standard error about a curve, stretch by
// stretch between points that have one.
func drawErrors(c Canvas, curve figure.Curve, p Plot, look Look) {
	n := min(len(curve.X), len(curve.Y), len(curve.Err))
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
	for i := range n {
		x, y, e := p.ToX(curve.X[i]), curve.Y[i], curve.Err[i]
		a, b := Point{x, p.ToY(y + e)}, Point{x, p.ToY(y - e)}
		if a.finite() && !b.finite() && p.y.log {
			b.Y = p.Frame.Max.Y + p.Frame.H() // an error as large as the value reaches below any decade
		}
		if !a.finite() || !b.finite() {
			flush()
			continue
		}
		up, down = append(up, a), append(down, b)
	}
	flush()
}

// legendShare is the part of the frame's width and height that a legend may
// take before it is left out.
const legendShare = 0.7

// drawLegend names the curves in the corner of the frame where the fewest of
// their points lie.
func drawLegend(c Canvas, f figure.Series, p Plot, look Look) {
	wide, rows := 0.0, 0
	for _, curve := range f.Curves {
		if curve.Name != "" {
			wide = max(wide, letter.Width(curve.Name, letter.Regular))
			rows++
		}
	}
	if rows == 0 {
		return
	}
	sample := 2.2 * look.Small
	w := sample + (wide+0.5)*look.Small
	h := float64(rows-1)*lineHeight*look.Small + letter.CapHeight*look.Small
	if w > legendShare*p.Frame.W() || h > legendShare*p.Frame.H() {
		return
	}
	at := quietCorner(f, p, w, h, look)
	c.Fill(at.Inset(-0.35*look.Small).Path(), Fade(look.Paper, 0.8))
	y := at.Min.Y + letter.CapHeight/2*look.Small
	for i, curve := range f.Curves {
		if curve.Name == "" {
			continue
		}
		line := Segment(Point{at.Min.X, y}, Point{at.Min.X + sample, y})
		pen := curvePen(curve, i, look)
		c.Stroke(line, pen)
		if len(curve.X) <= fewPoints {
			c.Dots(Dots{X: []float64{at.Min.X + sample/2}, Y: []float64{y}, Radius: 1.5 * pen.Width, Color: pen.Color})
		}
		c.Text(Text{At: Point{at.Min.X + sample + 0.5*look.Small, y}, Size: look.Small,
			String: curve.Name, V: Middle, Color: look.Ink})
		y += lineHeight * look.Small
	}
}

// quietCorner is the corner of the frame, for a legend of size w by h, that
// covers the least length of curve; the upper right one among equals.
func quietCorner(f figure.Series, p Plot, w, h float64, look Look) Box {
	gap := look.Tick + 0.6*look.Small
	in := p.Frame.Inset(gap)
	corners := [...]Box{
		NewBox(in.Max.X-w, in.Min.Y, w, h), NewBox(in.Max.X-w, in.Max.Y-h, w, h),
		NewBox(in.Min.X, in.Min.Y, w, h), NewBox(in.Min.X, in.Max.Y-h, w, h),
	}
	best, least := corners[0], math.Inf(1)
	for _, b := range corners {
		covered := 0.0
		for _, curve := range f.Curves {
			covered += lengthIn(b.Inset(-0.5*look.Small), curve, p)
		}
		if covered < least {
			best, least = b, covered
		}
	}
	return best
}

// lengthIn is the length of a curve within a box of the canvas.
func lengthIn(b Box, curve figure.Curve, p Plot) float64 {
	sum := 0.0
	for i := 1; i < min(len(curve.X), len(curve.Y)); i++ {
		q, r, ok := b.Clip(Point{p.ToX(curve.X[i-1]), p.ToY(curve.Y[i-1])}, Point{p.ToX(curve.X[i]), p.ToY(curve.Y[i])})
		if ok {
			sum += math.Hypot(r.X-q.X, r.Y-q.Y)
		}
	}
	return sum
}
