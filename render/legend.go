package render

import (
	"math"

	"cavitywright/render/letter"
	"cavitywright/sim/figure"
)

// legendShare is the part of the frame's width and height that a legend may
// take before it is left out.
const legendShare = 0.7

// drawLegend names the curves in the corner of the frame where the fewest of
// their points lie.
func drawLegend(c Canvas, f figure.Series, p Plot, look Look) {
	curves := f.Curves
	wide, rows := 0.0, 0
	for _, curve := range curves {
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
	place := places(curves)
	for i, curve := range curves {
		if curve.Name == "" {
			continue
		}
		line := Segment(Point{at.Min.X, y}, Point{at.Min.X + sample, y})
		pen := curvePen(curve, place[i], look)
		if curve.Form != figure.Points {
			c.Stroke(line, pen)
		}
		if marked(curve) {
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
