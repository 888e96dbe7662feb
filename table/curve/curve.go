// Package curve holds the kinds of curve that a wall is made of: line, circular
// arc, ellipse arc, cubic and harmonic. Each is evaluated from its own formula
// on its arclength, with exact tangent and curvature, and each yields spans:
// pieces that a ray tracer can intersect with proof.
//
// A curve runs from its start to its end; the inside of the table lies on its
// left. Curvature is positive where the curve turns left. Lengths are in the
// table's unit, angles in radians.
//
// The package knows nothing of closed walls, of shapes or of rays.
package curve

import (
	"math"
	"sort"

	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// Curve is a directed piece of wall.
type Curve interface {
	// Length is the arclength, to 1e-12 of itself.
	Length() float64
	// At is the frame at the arclength s in [0, Length], to 1e-12 of the
	// length in position.
	At(s float64) Frame
	// Spans are the curve cut into pieces a tracer knows, in order. Each
	// begins where the one before it ends, bit for bit. The slice is shared
	// and must not be changed.
	Spans() []Span
	// Placed is the curve after a similarity.
	Placed(m plane.Similarity) Curve
	// Reversed is the curve run backwards.
	Reversed() Curve
}

// Frame is a point of a curve with its unit tangent and signed curvature
// (1/length).
type Frame struct {
	Point, Tangent r2.Vec
	Curvature      float64
}

// Normal is the unit normal on the inner (left) side.
func (f Frame) Normal() r2.Vec { return plane.Left(f.Tangent) }

// chain carries the spans of a curve and answers by arclength.
type chain []Span

func (c chain) Spans() []Span { return c }

func (c chain) Length() float64 {
	sum := 0.0
	for i := range c {
		sum += c[i].Length
	}
	return sum
}

func (c chain) At(s float64) Frame {
	for i := range c {
		if s <= c[i].Length || i == len(c)-1 {
			return c[i].FrameAt(c[i].T(s))
		}
		s -= c[i].Length
	}
	panic("curve: no spans")
}

// join makes the end of each span the start of the next, bit for bit.
func join(spans []Span) chain {
	for i := 1; i < len(spans); i++ {
		spans[i].A = spans[i-1].B
	}
	return spans
}

// Bounds is a box that holds every span: the hull of ends and apexes, or of
// the full circle or ellipse that the span is part of where it turns further
// than a quarter.
func Bounds(spans []Span) r2.Box {
	b := plane.Around()
	for i := range spans {
		b = plane.Join(b, spans[i].Bounds())
	}
	return b
}

// maxTurn is the greatest turning (radians) of one smooth span: a little less
// than a quarter turn, so that the tangents at the ends meet at a well placed
// apex.
const maxTurn = 80 * math.Pi / 180

// cuts are the parameters, in ascending order and with lo and hi, at which a
// smooth curve must be cut so that its tangent turns one way by less than
// maxTurn on each piece. bends are the zeros of its curvature in (lo, hi).
func cuts(s *Span, lo, hi float64, bends []float64) []float64 {
	at := append([]float64{lo, hi}, bends...)
	sort.Float64s(at)
	var out []float64
	for i := 1; i < len(at); i++ {
		if at[i]-at[i-1] <= 1e-12*(hi-lo) {
			continue
		}
		out = append(out, at[i-1])
		out = cutTurn(s, at[i-1], at[i], out)
	}
	return append(out, hi)
}

// turnSamples is the number of chords in which the turning of a piece without
// bends is summed; each turns by less than half a turn as long as the piece
// turns less than turnSamples/2 times.
const turnSamples = 16

// finestCut is the least width of a piece in the parameter. Nearer to a place of
// no speed than the root of cuspSpeed2 the tangent is taken from the second
// derivative, whichever way, and looks as if it turned right about: with finer
// cuts a handle of no length at an end would be cut without end.
const finestCut = 4e-9

// cutTurn appends to out the cuts strictly inside (lo, hi), between which the
// curve has no bend.
func cutTurn(s *Span, lo, hi float64, out []float64) []float64 {
	turn, last := 0.0, s.direction(lo, hi)
	at := [turnSamples + 1]float64{}
	for k := 1; k <= turnSamples; k++ {
		t := lo + (hi-lo)*float64(k)/turnSamples
		d := s.direction(t, lo)
		turn += math.Abs(plane.Angle(last, d))
		at[k], last = turn, d
	}
	n := math.Ceil(turn / maxTurn)
	if n < 2 {
		return out
	}
	// Equal shares of the turning, to the resolution of the samples: what
	// counts is the bound, which is checked again piece by piece.
	edge := lo
	for j, k := 1.0, 1; k <= turnSamples && j < n; k++ {
		for at[k] >= turn*j/n && j < n {
			f := (turn*j/n - at[k-1]) / (at[k] - at[k-1])
			t := lo + (hi-lo)*(float64(k-1)+f)/turnSamples
			j++
			if t-edge < finestCut || hi-t < finestCut {
				continue // a turn that the parameter does not resolve
			}
			out = cutTurn(s, edge, t, out)
			out = append(out, t)
			edge = t
		}
	}
	if edge == lo {
		return out
	}
	return cutTurn(s, edge, hi, out)
}
