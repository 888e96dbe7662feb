package sim

import (
	"math"

	"cavitywright/table"
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// Start is where an orbit opens: on the wall at State, or inside at Point along
// the unit vector Dir.
type Start struct {
	From  table.Origin
	State State
	Point r2.Vec
	Dir   r2.Vec
}

// Open opens the orbit.
func (w *Walker) Open(s Start) Bounce {
	w.tr.openLane(&w.lanes[0], s)
	return w.lanes[0].last
}

func (tr *Tracer) openLane(l *lane, s Start) {
	if s.From == table.Inside {
		l.startInside(s.Point, s.Dir)
		return
	}
	tr.start(l, s.State)
}

// Launched are the orbits that a launch of the study makes on this table, in
// order. A launch from a place that is not inside the table makes none.
func (tr *Tracer) Launched(l table.Launch) []Start {
	n := max(l.Count, 1)
	switch l.Pattern {
	case table.Even:
		return tr.even(l.Region, n)
	case table.Sweep:
		return tr.sweep(l.Region, n)
	case table.Single:
		n = 1
	}
	var all []Start
	for i := range n {
		x := 0.0 // from -1/2 to 1/2 across the bundle
		if n > 1 {
			x = float64(i)/float64(n-1) - 0.5
		}
		if s, ok := tr.bundled(l, x); ok {
			all = append(all, s)
		}
	}
	return all
}

// bundled is the orbit at the place x in [-1/2, 1/2] across a bundle.
func (tr *Tracer) bundled(l table.Launch, x float64) (Start, bool) {
	at, angle := l.Point, l.Angle
	if l.From == table.OnWall {
		st := State{S: tr.table.Wrap(l.S * tr.Length()), P: l.P}
		if l.Pattern == table.Fan {
			st.P = math.Sin(math.Asin(l.P) - x*l.Spread)
			return Start{State: st}, math.Abs(st.P) < 1
		}
		if l.Pattern == table.Single {
			return Start{State: st}, true
		}
		f := tr.table.At(st.S)
		at = f.Point
		d := direction(f, l.P, math.Sqrt((1-l.P)*(1+l.P)))
		angle = math.Atan2(d.Y, d.X)
	}
	if l.Pattern == table.Fan {
		angle += x * l.Spread
	}
	d := plane.Polar(angle)
	if l.Pattern == table.Beam {
		at = r2.Add(at, r2.Scale(x*l.Spread, plane.Left(d)))
		if l.From == table.OnWall { // off the wall, onto the beam's front
			at = r2.Add(at, r2.Scale(1e-9*tr.size, d))
		}
	}
	return Start{From: table.Inside, Point: at, Dir: d}, tr.table.Contains(at)
}

// even spreads n states over the region, evenly in ds dp: the additive
// recurrence by the powers of the plastic number (M. Roberts, 2018), whose
// first n points leave no large gap for any n.
func (tr *Tracer) even(g table.Region, n int) []Start {
	const a1, a2 = 0.7548776662466927, 0.5698402909980532 // 1/rho, 1/rho^2, rho^3 = rho + 1
	all := make([]Start, n)
	for i := range all {
		u := math.Mod(0.5+a1*float64(i+1), 1)
		v := math.Mod(0.5+a2*float64(i+1), 1)
		all[i].State = State{
			S: tr.table.Wrap((g.S0 + u*(g.S1-g.S0)) * tr.Length()),
			P: g.P0 + v*(g.P1-g.P0),
		}
	}
	return all
}

// sweep is a row of n states along the region's diagonal.
func (tr *Tracer) sweep(g table.Region, n int) []Start {
	all := make([]Start, n)
	for i := range all {
		x := 0.5
		if n > 1 {
			x = float64(i) / float64(n-1)
		}
		all[i].State = State{S: tr.table.Wrap((g.S0 + x*(g.S1-g.S0)) * tr.Length()), P: g.P0 + x*(g.P1-g.P0)}
	}
	return all
}
