package sim

// Jacobian is the derivative of one step of the map, (ds', dp') by (ds, dp):
// lengths in the table's unit.
type Jacobian struct{ SS, SP, PS, PP float64 }

// Identity is the derivative of no step.
func Identity() Jacobian { return Jacobian{SS: 1, PP: 1} }

// Times is the derivative of a step j after a step k.
func (j Jacobian) Times(k Jacobian) Jacobian {
	return Jacobian{
		SS: float64(j.SS*k.SS) + float64(j.SP*k.PS),
		SP: float64(j.SS*k.SP) + float64(j.SP*k.PP),
		PS: float64(j.PS*k.SS) + float64(j.PP*k.PS),
		PP: float64(j.PS*k.SP) + float64(j.PP*k.PP),
	}
}

// Det is the determinant, 1 for every step off a mirror.
func (j Jacobian) Det() float64 { return float64(j.SS*j.PP) - float64(j.SP*j.PS) }

// Trace is the sum of the diagonal.
func (j Jacobian) Trace() float64 { return j.SS + j.PP }

// Apply is the derivative along (ds, dp).
func (j Jacobian) Apply(ds, dp float64) (float64, float64) {
	return float64(j.SS*ds) + float64(j.SP*dp), float64(j.PS*ds) + float64(j.PP*dp)
}

// Jacobian is the derivative of the step that led to the last bounce, from the
// bounce before it (both on the wall, off mirrors): with the flight l, the
// curvatures k0, k1 and the cosines c0, c1 to the normal,
//
//	ds'/ds = (l k0 - c0) / c1              ds'/dp = -l / (c0 c1)
//	dp'/ds = c1 k0 + c0 k1 - l k0 k1       dp'/dp = (l k1 - c1) / c0
//
// (M. V. Berry, Eur. J. Phys. 2, 91, 1981, eq. (13), there for a convex wall
// and the angle from the tangent).
func (w *Walker) Jacobian() Jacobian { return w.lanes[0].jacobian() }

func (l *lane) jacobian() Jacobian {
	u, k0, k1, c0, c1 := l.last.Flight, l.kappa0, l.kappa, l.cos0, l.cosIn
	return Jacobian{
		SS: (float64(u*k0) - c0) / c1,
		SP: -u / (c0 * c1),
		PS: float64(c1*k0) + float64(c0*k1) - float64(u*k0*k1),
		PP: (float64(u*k1) - c1) / c0,
	}
}

// Map is one step of an area-preserving map of the section. A Walker's is
// WallMap; those who measure maps declare this, so that they can be tested on
// maps with known answers.
type Map interface {
	Step(State) (State, Jacobian, Stop)
}

// WallMap is the bounce map of a table without chance.
type WallMap struct{ w *Walker }

// Map is the walker's bounce map.
func (w *Walker) Map() WallMap { return WallMap{w} }

// Step is the state after one bounce.
func (m WallMap) Step(st State) (State, Jacobian, Stop) {
	if b := m.w.Start(st); b.Stop != Going {
		return st, Identity(), b.Stop
	}
	b := m.w.Next(0)
	if b.Stop != Going {
		return b.State, Identity(), b.Stop
	}
	return b.State, m.w.Jacobian(), Going
}
