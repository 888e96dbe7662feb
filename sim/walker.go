package sim

import (
	"iter"
	"math"

	"cavitywright/table/curve"
	"cavitywright/table/plane"
	"cavitywright/table/wall"

	"gonum.org/v1/gonum/spatial/r2"
)

// Walker follows one orbit at a time on a shared Tracer. It is scratch space:
// one goroutine uses it, and it allocates nothing a bounce.
type Walker struct {
	tr   *Tracer
	ray  ray
	last Bounce
	// The wall at the last bounce, for the tangent map: its curvature and the
	// cosine to the normal of the outgoing ray; and the same one bounce
	// before, with the incoming cosine at the last.
	kappa, cos   float64
	kappa0, cos0 float64
	cosIn        float64
}

// Walker is a new walker on the tracer.
func (tr *Tracer) Walker() *Walker { return &Walker{tr: tr} }

// Start opens an orbit from a point of the section. s is taken modulo L; p must
// lie in (-1, 1).
func (w *Walker) Start(st State) Bounce {
	st.S = w.tr.table.Wrap(st.S)
	i, x := w.tr.table.Locate(st.S)
	s := &w.tr.spans[i]
	t := s.src.T(x)
	f := s.src.FrameAt(t)
	cos := math.Sqrt((1 - st.P) * (1 + st.P))
	w.ray = ray{p: f.Point, d: direction(f, st.P, cos), left: i, t: t}
	w.kappa, w.cos = f.Curvature, cos
	w.last = Bounce{State: st, Piece: i, Point: f.Point, Dir: w.ray.d, Weight: 1}
	if s.cornerA && x < cornerTol*w.tr.size || s.cornerB && s.length-x < cornerTol*w.tr.size {
		w.last.Stop = Corner
	} else if !(cos > grazeTol) {
		w.last.Stop = Grazing
	}
	return w.last
}

// StartInside opens an orbit from a point inside the table, along the unit
// vector dir. Its first Bounce has Piece -1 and no State.
func (w *Walker) StartInside(at, dir r2.Vec) Bounce {
	w.ray = ray{p: at, d: dir, left: -1}
	w.kappa, w.cos = 0, 1
	w.last = Bounce{State: State{math.NaN(), math.NaN()}, Piece: -1, Point: at, Dir: dir, Weight: 1}
	return w.last
}

// direction is the unit vector with the components p along the wall and cos
// along its inward normal, p^2 + cos^2 = 1.
func direction(f curve.Frame, p, cos float64) r2.Vec {
	t := f.Tangent
	return r2.Vec{X: float64(p*t.X) - float64(cos*t.Y), Y: float64(p*t.Y) + float64(cos*t.X)}
}

// Last is the bounce the walker stands at.
func (w *Walker) Last() Bounce { return w.last }

// Next follows the orbit to its next bounce. u is a number drawn evenly from
// [0, 1), used by laws that need chance. The last bounce must not have stopped.
func (w *Walker) Next(u float64) Bounce {
	b := &w.last
	h := w.tr.first(&w.ray)
	b.N++
	b.Exit, b.ExitP = 0, 0
	if h.edge < h.u {
		b.Flight, b.Stop = h.edge, h.edgeStop
		b.Piece, b.State = -1, State{math.NaN(), math.NaN()}
		b.Point = r2.Add(w.ray.p, r2.Scale(h.edge, w.ray.d))
		return *b
	}
	if h.span < 0 {
		b.Flight = math.Inf(1)
		if b.Stop = Lost; w.tr.open {
			b.Stop, b.Exit, b.Weight = Escaped, b.Weight, 0
		}
		return *b
	}
	w.land(&h)
	if b.Stop == Going {
		w.bounce(u)
	}
	return *b
}

// land puts the walker on the wall: place, frame and incoming direction.
func (w *Walker) land(h *hit) {
	b, s := &w.last, &w.tr.spans[h.span]
	b.Piece, b.Point, b.Flight = h.span, h.at, h.u
	f, x, t := s.frame(h)
	b.S = s.s0 + x
	if b.S >= s.loop1 { // the end of a loop is its start
		b.S = s.loop0
	}
	// Only the ratio of the two components is used: it does not depend on the
	// lengths of the two vectors, whose rounding has a bias that would add up.
	p := plane.Dot(w.ray.d, f.Tangent)
	cos := -plane.Dot(w.ray.d, f.Normal())
	k := 1 / math.Sqrt(float64(p*p)+float64(cos*cos))
	p, cos = p*k, cos*k
	if s.kind == curve.Circle && h.span == w.ray.left {
		p, cos = b.P, w.cos // a chord meets its circle at equal angles
	}
	w.kappa0, w.cos0 = w.kappa, w.cos
	w.kappa, w.cosIn, w.cos = f.Curvature, cos, cos
	b.P = p
	w.ray.left, w.ray.p, w.ray.t = h.span, h.at, t
	switch {
	case s.cornerA && near(h.at, s.a, cornerTol*w.tr.size) || s.cornerB && near(h.at, s.b, cornerTol*w.tr.size):
		b.Stop = Corner
	case !(cos > grazeTol):
		b.Stop = Grazing
		if cos < -grazeTol {
			b.Stop = Lost
		}
	default:
		b.Dir = direction(f, p, cos)
		w.ray.d = b.Dir
	}
}

// bounce applies the law of the wall, where it is no mirror.
func (w *Walker) bounce(u float64) {
	b := &w.last
	s := &w.tr.spans[b.Piece]
	var law wall.Law
	if s.law0 == s.law1 {
		law = w.tr.bare
	} else {
		law = w.tr.lawAt(b.Piece, b.S)
	}
	if law == nil {
		return
	}
	o := law.Scatter(wall.Incidence{P: b.P, Curvature: w.kappa}, u)
	b.Exit, b.ExitP = b.Weight*o.Through.Weight, o.Through.P
	b.Weight *= o.Back.Weight
	if o.Back.Weight > 0 {
		// Something always returns: the orbit goes on, however little it
		// carries. Who follows it decides when that is too little.
		b.Weight = max(b.Weight, math.SmallestNonzeroFloat64)
	} else {
		b.Stop = Spent
		if b.Exit > 0 {
			b.Stop = Escaped
		}
		return
	}
	if o.Back.P != b.P {
		b.P = o.Back.P
		w.cos = math.Sqrt((1 - b.P) * (1 + b.P))
		if !(w.cos > grazeTol) {
			b.Stop = Grazing
			return
		}
		b.Dir = direction(s.src.FrameAt(s.param(b.Point, w.ray.t)), b.P, w.cos)
		w.ray.d = b.Dir
	}
}

func near(a, b r2.Vec, gap float64) bool {
	return math.Abs(a.X-b.X) < gap && math.Abs(a.Y-b.Y) < gap
}

// Orbit runs up to n bounces from a state, the opening one not counted. uniform
// draws numbers for the laws that need them; nil where none does.
func (w *Walker) Orbit(st State, n int, uniform func() float64) iter.Seq[Bounce] {
	return func(yield func(Bounce) bool) {
		b := w.Start(st)
		for yield(b) && b.Stop == Going && b.N < n {
			u := 0.0
			if uniform != nil {
				u = uniform()
			}
			b = w.Next(u)
		}
	}
}
