package survey

import (
	"math"

	"cavitywright/table"
	"cavitywright/table/curve"
)

// Bend is how the wall curves.
type Bend struct {
	Runs       []Run
	Focusing   Extreme // the smallest radius of the wall that focuses
	Dispersing Extreme // and of the wall that disperses
}

// Run is the curvature along a stretch on which it is continuous, sampled at S:
// constant ones at their ends, others so densely that a line through the
// samples shows the shape. A plot draws one line a run, so that jumps show as
// jumps. A cusp at an end, where the curvature is infinite, is left out.
type Run struct {
	S, Kappa []float64
	Loop     int
}

// Extreme is a radius of curvature, greater than 0, or 0 at a cusp, where it
// tends to nothing; NaN where no wall bends that way. Place is the first with
// it.
type Extreme struct {
	Radius float64
	Place  Place
}

// Known reports whether some wall bends that way.
func (e Extreme) Known() bool { return !math.IsNaN(e.Radius) }

// runSamples is the number of stretches between two samples of a smooth span,
// which turns by less than a quarter turn, or of an ellipse arc.
const runSamples = 32

func bendOf(t *table.Table) Bend {
	b := Bend{Focusing: Extreme{Radius: math.NaN()}, Dispersing: Extreme{Radius: math.NaN()}}
	pieces := t.Pieces()
	for i := range pieces {
		p := &pieces[i]
		if i == t.Loops()[p.Loop].First || !continues(t, i) {
			b.Runs = append(b.Runs, Run{Loop: p.Loop})
		}
		b.Runs[len(b.Runs)-1].sample(p)
		b.extremes(t, i)
	}
	return b
}

// continues reports whether the curvature is continuous at the start of piece
// i.
func continues(t *table.Table, i int) bool {
	p := &t.Pieces()[i]
	q := &t.Pieces()[p.Prev]
	if p.Corner {
		return false
	}
	a, b := curvature(q, q.Length), curvature(p, 0)
	return math.Abs(a-b) <= sameCurvature*(math.Abs(a)+math.Abs(b)+1/sizeOf(t))
}

// sameCurvature is the jump of curvature, relative to the curvatures and to the
// inverse of the table's size, that counts as none: that of the table's joints.
const sameCurvature = 1e-8

func (r *Run) sample(p *table.Piece) {
	n := runSamples
	if p.Kind == curve.Segment || p.Kind == curve.Circle {
		n = 1
	}
	first := 0
	if len(r.S) > 0 {
		first = 1
	}
	for k := first; k <= n; k++ {
		x := p.Length * float64(k) / float64(n)
		if kappa := curvature(p, x); !math.IsInf(kappa, 0) {
			r.S, r.Kappa = append(r.S, p.S0+x), append(r.Kappa, kappa)
		}
	}
}

// curvature is that at the length x from the start of the piece; of a straight
// one it is 0, never -0.
func curvature(p *table.Piece, x float64) float64 {
	if p.Kind == curve.Segment {
		return 0
	}
	return p.FrameAt(p.T(x)).Curvature
}

func (b *Bend) extremes(t *table.Table, i int) {
	p := &t.Pieces()[i]
	if p.Kind == curve.Segment {
		return
	}
	x := p.Sharpest()
	kappa := curvature(p, x)
	e := &b.Focusing
	if p.Turn < 0 {
		e = &b.Dispersing
	}
	if radius := 1 / math.Abs(kappa); !e.Known() || radius < e.Radius*(1-1e-9) {
		*e = Extreme{radius, placeAt(t, i, x)}
	}
}
