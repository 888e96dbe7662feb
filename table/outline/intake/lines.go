package intake

import (
	"fmt"

	"cavitywright/table"
)

// Lines say what became of a drawing, a sentence each.
func Lines(a Account, unit table.Unit) []string {
	lines := append([]string(nil), a.Notes...)
	loops := "1 loop"
	if a.Loops > 1 {
		loops = fmt.Sprintf("%d loops, the largest the wall", a.Loops)
	}
	switch {
	case a.Fitted:
		r := a.Residual
		lines = append(lines, fmt.Sprintf("%s; a smooth wall of %d nodes (%d corners) through %d points: residual rms %.3g %s, greatest %.3g %s at (%.6g, %.6g) %s.",
			loops, r.Nodes, r.Corners, r.Points, r.RMS, unit, r.Greatest, unit, r.At.X, r.At.Y, unit))
	case a.Nodes > 0:
		lines = append(lines, fmt.Sprintf("%s, %d nodes, as drawn.", loops, a.Nodes))
	default:
		lines = append(lines, loops+", as drawn.")
	}
	if !a.Fitted && a.FitWithin > 0 {
		lines = append(lines, fmt.Sprintf("A smooth wall within %.2g %s would suit the points.", a.FitWithin, unit))
	}
	if a.Moved > 0 {
		lines = append(lines, fmt.Sprintf("Joints that were smooth but for their digits were made smooth, which moved the wall by %.2g %s at most.", a.Moved, unit))
	}
	return lines
}
