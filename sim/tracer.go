package sim

import (
	"math"
	"slices"

	"cavitywright/table"
	"cavitywright/table/curve"
	"cavitywright/table/plane"
	"cavitywright/table/wall"

	"gonum.org/v1/gonum/spatial/r2"
)

// Tracer is a table made ready for rays. It is immutable and can be shared by
// any number of walkers.
type Tracer struct {
	table   *table.Table
	spans   []span
	tree    []node  // empty where the spans are few
	order   []int32 // spans in the order of the tree's leaves
	laws    []stretch
	bare    wall.Law // nil for a mirror
	size    float64  // diagonal of the table, the unit of the tolerances
	open    bool
	mirrors bool    // no law but mirrors
	corner  float64 // cornerTol in the table's unit
	convex  *convex // nil where the outer wall is not convex
	quick   *quick  // nil where first looks for every hit
}

// span is one piece of wall in the inner loop.
type span struct {
	kind       curve.Kind
	whole      bool
	cornerA    bool // the wall has a corner at A
	cornerB    bool
	focusing   bool // it turns left
	next, prev int32
	law0, law1 int32 // stretches in Tracer.laws
	a, b       r2.Vec
	apex       r2.Vec // smooth spans
	fine       *fine  // nil beside a cusp
	plain      bool   // Harmonic: the form is a radius without slope
	tanA, tanB r2.Vec // along increasing s
	centre     r2.Vec
	axis       r2.Vec
	radius     float64
	minor      float64 // Oval
	sense      float64
	kappa      float64 // Segment, Circle
	perRadius  float64 // Circle: 1/radius
	startX     float64 // Circle: the direction from its centre to A
	startY     float64
	sideX      float64 // the same a quarter turn on, along the span
	sideY      float64
	t0, t1     float64
	width      float64 // |t1 - t0|
	s0         float64
	loop0      float64 // the loop's arclength is [loop0, loop1)
	loop1      float64
	length     float64
	src        *curve.Span
}

// stretch is a law over [s0, s1] of the table's arclength; nil is a mirror.
type stretch struct {
	s0, s1 float64
	law    wall.Law
}

// Compile makes the table ready for rays.
func Compile(t *table.Table) *Tracer {
	tr := &Tracer{table: t, size: plane.Diagonal(t.Bounds()), open: t.Open()}
	if _, mirror := t.Law().(wall.Mirror); !mirror {
		tr.bare = t.Law()
	}
	pieces := t.Pieces()
	tr.spans = make([]span, len(pieces))
	for i := range pieces {
		tr.spans[i] = compileSpan(&pieces[i], pieces)
		l := t.Loops()[pieces[i].Loop]
		tr.spans[i].loop0, tr.spans[i].loop1 = l.S0, l.S1
	}
	tr.layLaws(t.Stretches())
	tr.grow()
	tr.corner = cornerTol * tr.size
	tr.mirrors = tr.bare == nil && !slices.ContainsFunc(tr.laws, func(s stretch) bool { return s.law != nil })
	if tr.convex = newConvex(tr); tr.convex == nil {
		tr.quick = newQuick(tr)
	}
	return tr
}

func compileSpan(p *table.Piece, pieces []table.Piece) span {
	s := span{
		kind: p.Kind, whole: p.Whole(), cornerA: p.Corner, cornerB: pieces[p.Next].Corner,
		focusing: p.Turn > 0, next: int32(p.Next), prev: int32(p.Prev),
		a: p.A, b: p.B, centre: p.Centre, axis: p.Axis, radius: p.Radius, minor: p.Minor,
		sense: p.Sense(), t0: p.T0, t1: p.T1, width: math.Abs(p.T1 - p.T0), s0: p.S0, length: p.Length, src: &p.Span,
	}
	s.tanA, s.tanB = p.Ends()
	switch p.Kind {
	case curve.Segment:
		s.focusing = false
		s.tanA = plane.Unit(r2.Sub(s.b, s.a))
		s.tanB = s.tanA
	case curve.Circle:
		s.kappa, s.perRadius = s.sense/s.radius, 1/s.radius
		sin, cos := math.Sincos(s.t0)
		s.startX, s.startY = float64(cos*s.axis.X)-float64(sin*s.axis.Y), float64(cos*s.axis.Y)+float64(sin*s.axis.X)
		s.sideX, s.sideY = -s.sense*s.startY, s.sense*s.startX
	case curve.Bezier, curve.Harmonic:
		s.apex = p.Apex()
		s.fine = newFine(&s)
		s.plain = p.Form != nil && p.Form.Of == curve.Radius && p.Form.Slope == 0
	}
	return s
}

// layLaws gives each span the stretches that lie on it.
func (tr *Tracer) layLaws(all []table.Stretch) {
	byPiece := make([][]stretch, len(tr.spans))
	for _, st := range all {
		law := st.Law
		if _, mirror := law.(wall.Mirror); mirror {
			law = nil
		}
		byPiece[st.Piece] = append(byPiece[st.Piece], stretch{st.S0, st.S1, law})
	}
	for i := range tr.spans {
		tr.spans[i].law0 = int32(len(tr.laws))
		tr.laws = append(tr.laws, byPiece[i]...)
		tr.spans[i].law1 = int32(len(tr.laws))
	}
}

// lawAt is the law at the arclength s on span i; nil is a mirror. Of coats that
// overlap the later one counts.
func (tr *Tracer) lawAt(i int, s float64) wall.Law {
	sp := &tr.spans[i]
	for k := sp.law1 - 1; k >= sp.law0; k-- {
		if s >= tr.laws[k].s0 && s <= tr.laws[k].s1 {
			return tr.laws[k].law
		}
	}
	return tr.bare
}

// Table is the table that was compiled.
func (tr *Tracer) Table() *table.Table { return tr.table }

// Length is the length of the table's wall.
func (tr *Tracer) Length() float64 { return tr.table.Length() }

// Uniform is the state at the fractions u and v in [0, 1) of the section:
// drawn evenly, they are even in ds dp.
func (tr *Tracer) Uniform(u, v float64) State {
	return State{S: u * tr.Length(), P: 2*v - 1}
}

// MeanChord is pi A / L, the mean flight between bounces over uniform (s, p) on
// a closed table (Santaló, Integral Geometry and Geometric Probability, 1976,
// ch. 3; with obstacles Chernov, J. Stat. Phys. 88, 1, 1997). NaN for a table
// without an outer wall.
func MeanChord(t *table.Table) float64 {
	if t.Open() {
		return math.NaN()
	}
	return math.Pi * t.Area() / t.Length()
}

// Mirrors reports whether every wall is a mirror: no bounce needs chance.
func (tr *Tracer) Mirrors() bool { return tr.mirrors }
