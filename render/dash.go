package render

import "math"

// maxDashes bounds the dashes of one path; a pattern finer than that is grey
// to any eye, and the rest of the line stays unbroken.
const maxDashes = 20000

// Dashed is the path, whose curves must already be chords, cut into the dashes
// of a pattern: lengths drawn and left out by turns. A pattern without length
// leaves the path as it is.
func (p Path) Dashed(pattern []float64) Path {
	total := 0.0
	for _, d := range pattern {
		total += max(d, 0)
	}
	if !(total > 0) || !finite(total) {
		return p
	}
	var out Path
	made := 0
	p.Contours(math.Inf(1), func(points []Point, closed bool) {
		if closed {
			points = append(points, points[0])
		}
		made += dashLine(&out, points, pattern, maxDashes-made)
	})
	return out
}

// dashLine adds the dashes of one polyline, at most limit of them, and tells
// how many it made.
func dashLine(out *Path, points []Point, pattern []float64, limit int) int {
	k, left, made := 0, max(pattern[0], 0), 0
	if len(points) > 0 {
		out.MoveTo(points[0].X, points[0].Y)
	}
	for i := 1; i < len(points); i++ {
		a, b := points[i-1], points[i]
		length := math.Hypot(b.X-a.X, b.Y-a.Y)
		done := 0.0
		for length-done > left && made < limit {
			done += left
			q := Point{a.X + (b.X-a.X)*done/length, a.Y + (b.Y-a.Y)*done/length}
			if k%2 == 0 {
				out.LineTo(q.X, q.Y)
				made++
			} else {
				out.MoveTo(q.X, q.Y)
			}
			k++
			left = max(pattern[k%len(pattern)], 0)
		}
		left -= length - done
		if k%2 == 0 {
			out.LineTo(b.X, b.Y)
		}
	}
	return made
}
