package outline

import (
	"math"

	"cavitywright/table"
	"cavitywright/table/curve"
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// written is the chain as steps of the form asked for, and the greatest
// distance of them from it.
func (c *chain) written(o Options, unit table.Unit) (Path, float64, error) {
	w := writer{o: o, unit: unit, path: Path{Side: c.side, Start: o.snapped(c.list[0].a)}}
	for i := range c.list {
		if err := w.add(&c.list[i]); err != nil {
			return w.path, 0, err
		}
	}
	if !c.open && len(w.path.Steps) > 0 { // back to the very start
		w.path.Steps[len(w.path.Steps)-1].To = w.path.Start
	}
	return w.path, w.miss, nil
}

// writer puts stretches down as steps and keeps the greatest distance.
type writer struct {
	o    Options
	unit table.Unit
	path Path
	miss float64
}

func (o Options) snapped(p r2.Vec) r2.Vec {
	if o.Form != Chords || o.Grid == 0 {
		return p
	}
	return r2.Vec{X: math.Round(p.X/o.Grid) * o.Grid, Y: math.Round(p.Y/o.Grid) * o.Grid}
}

func (w *writer) put(s Step, miss float64) {
	w.path.Steps = append(w.path.Steps, s)
	w.miss = math.Max(w.miss, miss)
}

func (w *writer) last() r2.Vec {
	if n := len(w.path.Steps); n > 0 {
		return w.path.Steps[n-1].To
	}
	return w.path.Start
}

// widestArc is the sweep (radians) up to which an arc is one step: three
// quarters of half a turn, so that its centre follows from its ends and radius
// without loss of digits.
const widestArc = 0.75 * math.Pi

func (w *writer) add(s *stretch) error {
	switch {
	case s.kind == Line && w.o.Grid == 0:
		w.put(Step{Kind: Line, To: s.b}, 0)
		return nil
	case s.kind == Arc && w.o.Form != Chords:
		n := math.Ceil(math.Abs(s.sweep)/widestArc - 1e-9)
		for k := 1.0; k <= n; k++ {
			p, _ := s.at(k / n)
			w.put(Step{Kind: Arc, To: p, Bulge: math.Tan(s.sweep / n / 4), Radius: s.radius, Minor: s.radius, Sweep: s.sweep / n}, 0)
		}
		return nil
	case s.kind == Cubic && w.o.Form == Curves && s.bias == 0 && s.span.Kind == curve.Oval:
		n := math.Ceil(math.Abs(s.t1-s.t0)/widestArc - 1e-9)
		for k := 1.0; k <= n; k++ {
			p, _ := s.at(k / n)
			w.put(Step{Kind: Oval, To: p, Radius: s.span.Radius, Minor: s.span.Minor, Tilt: math.Atan2(s.span.Axis.Y, s.span.Axis.X), From: s.t0 + (s.t1-s.t0)*(k-1)/n, Sweep: (s.t1 - s.t0) / n}, 0)
		}
		return nil
	case s.kind == Cubic && w.o.Form == Curves:
		return w.cubics(s, 0, 1, 0)
	}
	return w.chords(s)
}

// cubicSamples is the number of places at which a cubic is compared with what
// it stands for.
const cubicSamples = 24

// cubics puts down the cubics with the points and derivatives of the stretch
// at their ends, halving until they are as near as asked (Hermite; the error
// falls with the fourth power of the part).
func (w *writer) cubics(s *stretch, lo, hi float64, depth int) error {
	step, miss := s.hermite(lo, hi)
	exact := s.span.Kind == curve.Bezier && s.bias == 0
	if !exact && miss > w.o.ChordError {
		if depth > 40 || len(w.path.Steps) > mostSteps {
			p, _ := s.at(lo)
			return refuseAt(p, "The wall cannot be followed to %.3g %s at (%.6g, %.6g) %s; ask for a greater chord error.", w.o.ChordError, w.unit, p.X, p.Y, w.unit)
		}
		mid := 0.5 * (lo + hi)
		if err := w.cubics(s, lo, mid, depth+1); err != nil {
			return err
		}
		return w.cubics(s, mid, hi, depth+1)
	}
	if exact {
		miss = 0
	}
	if hi == 1 {
		step.To = s.b
	}
	w.put(step, miss)
	return nil
}

// hermite is the cubic over a part of the stretch, with its greatest distance
// from it: the part of the difference across the wall, and what the part along
// it makes by the curvature.
func (s *stretch) hermite(lo, hi float64) (Step, float64) {
	third := (hi - lo) / 3
	a, da := s.at(lo)
	b, db := s.at(hi)
	c := [4]r2.Vec{a, r2.Add(a, r2.Scale(third, da)), r2.Sub(b, r2.Scale(third, db)), b}
	worst := 0.0
	for k := range cubicSamples {
		x := (float64(k) + 0.5) / cubicSamples
		f := lo + (hi-lo)*x
		p, _ := s.at(f)
		d := r2.Sub(bezier(c, x), p)
		t := s.tangent(f)
		across, along := math.Abs(plane.Cross(t, d)), plane.Dot(t, d)
		miss := across + 0.5*math.Abs(s.curvature(f))*along*along
		if math.IsNaN(miss) || math.IsInf(miss, 0) {
			miss = r2.Norm(d)
		}
		worst = math.Max(worst, miss)
	}
	return Step{Kind: Cubic, C: [2]r2.Vec{c[1], c[2]}, To: b}, worst
}

func bezier(c [4]r2.Vec, t float64) r2.Vec {
	u := 1 - t
	w := [4]float64{u * u * u, 3 * u * u * t, 3 * u * t * t, t * t * t}
	var p r2.Vec
	for i := range c {
		p = r2.Add(p, r2.Scale(w[i], c[i]))
	}
	return p
}
