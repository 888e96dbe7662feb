package sim

import (
	"math"

	"gonum.org/v1/gonum/spatial/r2"
)

// fine is a smooth span cut into cells of equal steps of its parameter. On each
// the place is a polynomial, from which a crossing is guessed; the guess is
// then corrected on the curve's own formula by one step of Newton's method.
// The arclength is a polynomial too, as exact as that from which it is made.
type fine struct {
	nodes []r2.Vec // the ends of the cells
	cells []cell
	t0    float64
	half  float64 // half the step, with the parameter's sense
}

// cell is one step: powers of the place x in [-1, 1] on it.
type cell struct {
	x, y [placeTerms]float64
	s    [lengthTerms]float64
	mid  float64 // parameter
}

const (
	placeTerms  = 7
	lengthTerms = 10
	fewestCells = 8
	mostCells   = 128
	// placeTol, relative to the span's size, is how exact the place must be
	// for its guess to need one correction: what a step of Newton's method
	// leaves is some square of it.
	placeTol = 1e-10
	// lengthTol, relative to the span's length, is the error of the arclength:
	// the rounding of the sum that it replaces.
	lengthTol = 2e-15
)

// newFine cuts the span, nil where no number of cells will do, as beside a cusp.
func newFine(s *span) *fine {
	for n := fewestCells; n <= mostCells; n *= 2 {
		if f, ok := cutFine(s, n); ok {
			return f
		}
	}
	return nil
}

func cutFine(s *span, n int) (*fine, bool) {
	f := &fine{t0: s.t0, half: (s.t1 - s.t0) / float64(2*n), cells: make([]cell, n), nodes: make([]r2.Vec, n+1)}
	size := r2.Norm(r2.Sub(s.a, s.b))
	for i := range f.cells {
		c := &f.cells[i]
		c.mid = s.t0 + float64(f.half*float64(2*i+1))
		f.nodes[i] = s.at(c.mid - f.half)
		var x, y [placeTerms]float64
		for j := range x {
			p := s.at(c.mid + float64(f.half*placeFit.node[j]))
			x[j], y[j] = p.X, p.Y
		}
		placeFit.through(x[:], c.x[:])
		placeFit.through(y[:], c.y[:])
		var l [lengthTerms]float64
		for j := range l {
			l[j] = s.src.S(c.mid + float64(f.half*lengthFit.node[j]))
		}
		lengthFit.through(l[:], c.s[:])
		for _, x := range [...]float64{-1, -0.4, 0.55, 1} {
			p := s.at(c.mid + f.half*x)
			if !(math.Abs(power(c.x[:], x)-p.X)+math.Abs(power(c.y[:], x)-p.Y) < placeTol*size) ||
				!(math.Abs(power(c.s[:], x)-s.src.S(c.mid+f.half*x)) < lengthTol*s.length) {
				return nil, false
			}
		}
	}
	f.nodes[0], f.nodes[n] = s.a, s.b
	return f, true
}

// guess finds where the line of the lane crosses the span on its way out, by
// the cells. own says that the lane comes from this span.
func (f *fine) guess(s *span, l *lane, own bool) {
	b := &l.last
	px, py, dx, dy := b.Point.X, b.Point.Y, b.Dir.X, b.Dir.Y
	lo, hi := 0, len(f.cells)
	if own {
		k := min(max(int((l.t-f.t0)/(2*f.half)), 0), hi-1)
		// Both ends of the span are on one side: on the left the ray comes
		// back ahead of where it stands, on the right behind.
		if float64(dx*(s.a.Y-py))-float64(dy*(s.a.X-px)) >= 0 {
			lo = k
		} else {
			hi = k + 1
		}
	}
	// From a node on the right of the line to one on the left.
	for hi-lo > 1 {
		m := int(uint(lo+hi) >> 1)
		v := &f.nodes[m]
		d := math.Float64bits(float64(dx*(v.Y-py)) - float64(dy*(v.X-px)))
		low, high := lo, hi
		if d>>63 != 0 {
			low = m
		}
		if d>>63 == 0 {
			high = m
		}
		lo, hi = low, high
	}
	l.cell = lo
	l.x = f.cells[lo].zero(px, py, dx, dy, 1)
}

// zero is the place in the cell where the signed distance from the line through
// (px, py) along (dx, dy) vanishes: rising where sign is 1, falling where it is
// -1. It may lie outside the cell, or be no number.
func (c *cell) zero(px, py, dx, dy, sign float64) float64 {
	g0 := float64(dx*(c.y[0]-py)) - float64(dy*(c.x[0]-px))
	g1 := float64(dx*c.y[1]) - float64(dy*c.x[1])
	g2 := float64(dx*c.y[2]) - float64(dy*c.x[2])
	g3 := float64(dx*c.y[3]) - float64(dy*c.x[3])
	g4 := float64(dx*c.y[4]) - float64(dy*c.x[4])
	g5 := float64(dx*c.y[5]) - float64(dy*c.x[5])
	g6 := float64(dx*c.y[6]) - float64(dy*c.x[6])
	x := -2 * g0 / (g1 + float64(sign*math.Sqrt(float64(g1*g1)-float64(4*g0*g2))))
	for range 2 {
		v := g0 + float64(x*(g1+float64(x*(g2+float64(x*(g3+float64(x*(g4+float64(x*(g5+float64(x*g6)))))))))))
		w := g1 + float64(x*(float64(2*g2)+float64(x*(float64(3*g3)+float64(x*(float64(4*g4)+float64(x*(float64(5*g5)+float64(x*6*g6)))))))))
		x -= v / w
	}
	return x
}

// crossing guesses the parameter at which the span crosses the ray's line,
// between its ends, of which the first lies to the left of the line or not.
func (f *fine) crossing(r *ray, left bool) float64 {
	lo, hi, sign := 0, len(f.cells), 1.0
	if left {
		sign = -1
	}
	for hi-lo > 1 {
		m := int(uint(lo+hi) >> 1)
		if _, l := r.side(f.nodes[m]); l == left {
			lo = m
		} else {
			hi = m
		}
	}
	c := &f.cells[lo]
	x := c.zero(r.p.X, r.p.Y, r.d.X, r.d.Y, sign)
	if !(math.Abs(x) <= 1) {
		x = 0
	}
	return c.mid + float64(f.half*x)
}

// length is the arclength from the span's start to the parameter t.
func (f *fine) length(t float64) float64 {
	x := (t - f.t0) / f.half // from -1 to 1 on the first cell, and 2 on for each other
	k := min(max(int(0.5*x), 0), len(f.cells)-1)
	return power(f.cells[k].s[:], x-float64(2*k+1))
}

// landCurved puts the lanes on the smooth spans that they leave the table by.
func (tr *Tracer) landCurved(lanes []lane, which []uint8) {
	for _, i := range which {
		l := &lanes[i]
		s := &tr.spans[l.met>>3]
		s.fine.guess(s, l, l.last.Piece == int(l.met>>3))
	}
	for _, i := range which {
		l := &lanes[i]
		s, b := &tr.spans[l.met>>3], &l.last
		f := s.fine
		c := &f.cells[l.cell]
		t := c.mid + float64(f.half*l.x)
		at, d1, d2 := s.jet(t)
		px, py, dx, dy := b.Point.X, b.Point.Y, b.Dir.X, b.Dir.Y
		miss := float64(dx*(at.Y-py)) - float64(dy*(at.X-px))
		rise := float64(dx*d1.Y) - float64(dy*d1.X)
		step := miss / rise
		x := l.x - step/f.half
		t -= step
		at.X -= float64(step * d1.X)
		at.Y -= float64(step * d1.Y)
		d1.X -= float64(step * d2.X)
		d1.Y -= float64(step * d2.Y)
		u := float64(dx*(at.X-px)) + float64(dy*(at.Y-py))
		if !(math.Abs(step) < exactStep*s.width && math.Abs(x) <= 1 && u > shortest*s.length && rise*s.sense > 0) {
			tr.search(l)
			continue
		}
		n2 := float64(d1.X*d1.X) + float64(d1.Y*d1.Y)
		n := s.sense / math.Sqrt(n2)
		kappa := (float64(d1.X*d2.Y) - float64(d1.Y*d2.X)) * n / n2
		b.Point, b.Flight, l.t = at, u, t
		b.Piece = int(l.met >> 3)
		l.turn(d1.X*n, d1.Y*n, kappa, 0)
		tr.place(l, s, min(max(power(c.s[:], x), 0), s.length))
	}
}

const (
	// exactStep, relative to the span's width of parameter, is the last
	// correction below which what it leaves, its square, is rounding.
	exactStep = 1e-9
	// shortest, relative to the span's length, is the shortest flight for
	// which the guess is good: on a shorter one the point left is too near.
	shortest = 1e-3
)
