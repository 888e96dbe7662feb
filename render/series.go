package render

import "cavitywright/sim/figure"

// fewPoints is the number of points of a curve up to which each of them is
// marked, so that a reader sees what was computed and what only joins it.
const fewPoints = 60

// drawSeries draws curves with their error bands, axes and a legend.
func drawSeries(c Canvas, f figure.Series, p Plot, look Look) {
	for _, curve := range f.Curves {
		drawErrors(c, curve, p, look)
	}
	drawAxes(c, p, look)
	at := places(f.Curves)
	for i, curve := range f.Curves {
		drawCurve(c, curve, at[i], p, look)
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
