package render

import "math"

// Op is one step of a path.
type Op uint8

// The steps: Move starts a contour and Line draws straight, with one point
// each; Cubic draws a Bézier curve with three, its two control points and its
// end; Close draws back to the start of the contour and ends it, with none. A
// Move must follow.
const (
	Move Op = iota
	Line
	Cubic
	Close
)

// Path is a sequence of contours in canvas units. Its zero value is empty and
// ready for use. Ops tell how to read Points.
type Path struct {
	Ops    []Op
	Points []Point
}

// MoveTo starts a contour.
func (p *Path) MoveTo(x, y float64) { p.add(Move, Point{x, y}) }

// LineTo draws straight to a point.
func (p *Path) LineTo(x, y float64) { p.add(Line, Point{x, y}) }

// CubicTo draws a Bézier curve with two control points to an end.
func (p *Path) CubicTo(c1, c2, end Point) {
	p.Ops = append(p.Ops, Cubic)
	p.Points = append(p.Points, c1, c2, end)
}

// Close draws back to the start of the contour.
func (p *Path) Close() { p.Ops = append(p.Ops, Close) }

// Reset empties the path and keeps its memory.
func (p *Path) Reset() { p.Ops, p.Points = p.Ops[:0], p.Points[:0] }

func (p *Path) add(o Op, q Point) {
	p.Ops = append(p.Ops, o)
	p.Points = append(p.Points, q)
}

// Segment is the straight path from a to b.
func Segment(a, b Point) Path { return Path{Ops: []Op{Move, Line}, Points: []Point{a, b}} }

// kappa is the distance of the control points with which four cubics come
// nearest to the unit circle, 4/3 (sqrt 2 - 1): wrong by less than 3e-4.
const kappa = 0.5522847498307936

// Disc is a circle about c.
func Disc(c Point, r float64) Path {
	var p Path
	k := kappa * r
	p.MoveTo(c.X+r, c.Y)
	p.CubicTo(Point{c.X + r, c.Y + k}, Point{c.X + k, c.Y + r}, Point{c.X, c.Y + r})
	p.CubicTo(Point{c.X - k, c.Y + r}, Point{c.X - r, c.Y + k}, Point{c.X - r, c.Y})
	p.CubicTo(Point{c.X - r, c.Y - k}, Point{c.X - k, c.Y - r}, Point{c.X, c.Y - r})
	p.CubicTo(Point{c.X + k, c.Y - r}, Point{c.X + r, c.Y - k}, Point{c.X + r, c.Y})
	p.Close()
	return p
}

// Contours calls yield for each contour of the path as a polyline, with curves
// replaced by chords that stay within tol of them. The slice is the same memory
// each time. A point that is not finite is left out and breaks the contour
// there; a contour so broken is not closed.
func (p Path) Contours(tol float64, yield func(points []Point, closed bool)) {
	var run []Point
	var start Point
	whole := true
	put := func(q Point) {
		if q.finite() {
			run = append(run, q)
			return
		}
		whole = false
		if len(run) > 0 {
			yield(run, false)
			run = run[:0]
		}
	}
	end := func(closed bool) {
		if closed && !whole {
			put(start)
		}
		if len(run) > 0 {
			yield(run, closed && whole)
		}
		run, whole = run[:0], true
	}
	i := 0
	for _, op := range p.Ops {
		switch op {
		case Move:
			end(false)
			start = p.Points[i]
			put(start)
			i++
		case Line:
			put(p.Points[i])
			i++
		case Cubic:
			if n := len(run); n > 0 {
				flatten(run[n-1], p.Points[i], p.Points[i+1], p.Points[i+2], tol, put)
			} else {
				put(p.Points[i+2])
			}
			i += 3
		case Close:
			end(true)
		}
	}
	end(false)
}

// flatten puts chords of the cubic from a. With n equal steps of the parameter
// a chord strays from the curve by at most sqrt(3)/18 * 6 * bend / n^2, bend
// the larger of the second differences of the four points (Sederberg 2012,
// section 10.6: a bound on the second derivative of 6 * bend, chord error 1/8).
func flatten(a, b, c, d Point, tol float64, put func(Point)) {
	if !b.finite() || !c.finite() || !d.finite() {
		put(d)
		return
	}
	bend := max(math.Hypot(a.X-2*b.X+c.X, a.Y-2*b.Y+c.Y), math.Hypot(b.X-2*c.X+d.X, b.Y-2*c.Y+d.Y))
	n := int(min(max(math.Ceil(math.Sqrt(6*bend/(8*tol))), 1), maxChords))
	for k := 1; k < n; k++ {
		t := float64(k) / float64(n)
		u := 1 - t
		w0, w1, w2, w3 := u*u*u, 3*u*u*t, 3*u*t*t, t*t*t
		put(Point{w0*a.X + w1*b.X + w2*c.X + w3*d.X, w0*a.Y + w1*b.Y + w2*c.Y + w3*d.Y})
	}
	put(d)
}

// maxChords bounds the chords of one cubic: a curve magnified so far that it
// would need more is straight wherever it is seen.
const maxChords = 512

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
