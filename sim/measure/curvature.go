package measure

import (
	"fmt"
	"math"
	"slices"

	"cavitywright/sim/figure"
	"cavitywright/table"
	"cavitywright/table/survey"
)

// mostBend bounds the curvature axis to so many times the value that all but
// one in fifty samples stay below: a sharp tip must not flatten all the rest.
const mostBend = 2

// CurvatureFigure is the curvature along the wall, broken by NaN where it jumps:
// positive where the wall focuses.
func CurvatureFigure(t *table.Table, r *survey.Report) figure.Series {
	u := t.Design().Unit.String()
	f := figure.Series{
		X: figure.Axis{Label: "s", Unit: u, Hi: t.Length()},
		Y: figure.Axis{Label: "κ", Unit: "1/" + u},
	}
	var all []float64
	line := figure.Curve{Hue: Sea}
	for _, run := range r.Bend.Runs {
		line.X = append(append(line.X, run.S...), math.NaN())
		line.Y = append(append(line.Y, run.Kappa...), math.NaN())
		all = append(all, run.Kappa...)
	}
	f.Curves = []figure.Curve{line}
	slices.SortFunc(all, func(a, b float64) int {
		switch a, b := math.Abs(a), math.Abs(b); {
		case a < b:
			return -1
		case a > b:
			return 1
		}
		return 0
	})
	most := 0.0
	for _, k := range all {
		f.Y.Lo, f.Y.Hi = math.Min(f.Y.Lo, k), math.Max(f.Y.Hi, k)
	}
	if n := len(all); n > 0 {
		most = mostBend * math.Abs(all[(n-1)*49/50])
	}
	if f.Y.Hi > most {
		f.Y.Hi = most
	}
	if f.Y.Lo < -most {
		f.Y.Lo = -most
	}
	room := 0.08 * (f.Y.Hi - f.Y.Lo)
	if room == 0 {
		room = 1 / t.Length()
	}
	f.Y.Hi += room
	if f.Y.Lo < 0 {
		f.Y.Lo -= room
	}
	for _, j := range t.Joints() {
		f.X.Marks = append(f.X.Marks, figure.Mark{At: j.S, Kind: figure.Joint})
	}
	f.Caption = []string{fmt.Sprintf("Curvature along the wall, in 1/%s; positive where it focuses.", u)}
	return f
}
