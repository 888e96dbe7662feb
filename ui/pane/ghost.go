package pane

import (
	"cavitywright/render"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/table"
	"cavitywright/ui/live"
)

// ghost is the outline of the table that is kept to compare with.
type ghost struct {
	lines []figure.Line
	of    *table.Table
	scale float64
}

// drawGhost draws the wall of the table that is kept to compare with, dashed,
// under the one at work and in its unit.
func (e *Editor) drawGhost(v render.View, look render.Look) {
	t := e.desk.Session.Reference
	if t == nil {
		e.ghost = ghost{}
		return
	}
	k := t.Design().Unit.Metres() / e.desk.Session.Table().Design().Unit.Metres()
	if e.ghost.of != t || e.ghost.scale != k*v.Scale {
		e.ghost = ghost{measure.Outline(t, 0.2/(k*v.Scale)), t, k * v.Scale}
	}
	for _, l := range e.ghost.lines {
		if l.Role != figure.Wall {
			continue
		}
		var path render.Path
		for i := range l.X {
			c := v.ToCanvas(k*l.X[i], k*l.Y[i])
			if i == 0 {
				path.MoveTo(c.X, c.Y)
			} else {
				path.LineTo(c.X, c.Y)
			}
		}
		if l.Closed {
			path.Close()
		}
		dash := 6 * look.Hair
		e.canvas.Stroke(path, render.Pen{Width: 1.5 * look.Hair, Color: live.Ghost(look), Dash: []float64{dash, dash}})
	}
}
