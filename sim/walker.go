package sim

import (
	"iter"
	"math"

	"cavitywright/table/curve"
	"cavitywright/table/wall"

	"gonum.org/v1/gonum/spatial/r2"
)

// Walker follows one orbit at a time on a shared Tracer. It is scratch space:
// one goroutine uses it, and it allocates nothing a bounce.
type Walker struct {
	tr    *Tracer
	lanes [1]lane
	marks marks
}

// Walker is a new walker on the tracer.
func (tr *Tracer) Walker() *Walker { return &Walker{tr: tr} }

// Start opens an orbit from a point of the section. s is taken modulo L; p must
// lie in (-1, 1).
func (w *Walker) Start(st State) Bounce {
	w.tr.start(&w.lanes[0], st)
	return w.lanes[0].last
}

func (tr *Tracer) start(l *lane, st State) {
	st.S = tr.table.Wrap(st.S)
	i, x := tr.table.Locate(st.S)
	s := &tr.spans[i]
	l.t = s.src.T(x)
	f := s.src.FrameAt(l.t)
	cos := math.Sqrt((1 - st.P) * (1 + st.P))
	l.kappa, l.cos = f.Curvature, cos
	l.last = Bounce{State: st, Piece: i, Point: f.Point, Dir: direction(f, st.P, cos), Weight: 1}
	if s.cornerA && x < tr.corner || s.cornerB && s.length-x < tr.corner {
		l.last.Stop = Corner
	} else if !(cos > grazeTol) {
		l.last.Stop = Grazing
	}
}

// StartInside opens an orbit from a point inside the table, along the unit
// vector dir. Its first Bounce has Piece -1 and no State.
func (w *Walker) StartInside(at, dir r2.Vec) Bounce {
	w.lanes[0].startInside(at, dir)
	return w.lanes[0].last
}

func (l *lane) startInside(at, dir r2.Vec) {
	l.kappa, l.cos = 0, 1
	l.last = Bounce{State: State{math.NaN(), math.NaN()}, Piece: -1, Point: at, Dir: dir, Weight: 1}
}

// direction is the unit vector with the components p along the wall and cos
// along its inward normal, p^2 + cos^2 = 1.
func direction(f curve.Frame, p, cos float64) r2.Vec {
	t := f.Tangent
	return r2.Vec{X: float64(p*t.X) - float64(cos*t.Y), Y: float64(p*t.Y) + float64(cos*t.X)}
}

// Last is the bounce the walker stands at.
func (w *Walker) Last() Bounce { return w.lanes[0].last }

// Next follows the orbit to its next bounce. u is a number drawn evenly from
// [0, 1), used by laws that need chance. The last bounce must not have stopped.
func (w *Walker) Next(u float64) Bounce {
	l := &w.lanes[0]
	w.tr.advance(w.lanes[:], &w.marks)
	if !w.tr.mirrors && l.last.Stop == Going {
		w.tr.bounce(l, u)
	}
	return l.last
}

// bounce applies the law of the wall, where it is no mirror.
func (tr *Tracer) bounce(l *lane, u float64) {
	b := &l.last
	s := &tr.spans[b.Piece]
	var law wall.Law
	if s.law0 == s.law1 {
		law = tr.bare
	} else {
		law = tr.lawAt(b.Piece, b.S)
	}
	if law == nil {
		return
	}
	o := law.Scatter(wall.Incidence{P: b.P, Curvature: l.kappa}, u)
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
		l.cos = math.Sqrt((1 - b.P) * (1 + b.P))
		if !(l.cos > grazeTol) {
			b.Stop = Grazing
			return
		}
		b.Dir = direction(s.src.FrameAt(s.param(b.Point, l.t)), b.P, l.cos)
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
