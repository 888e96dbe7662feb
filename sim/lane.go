package sim

import (
	"math"

	"cavitywright/table/curve"

	"gonum.org/v1/gonum/spatial/r2"
)

// lane is one orbit under way.
type lane struct {
	last Bounce
	t    float64 // the parameter, on its span, of the point at which it stands; of smooth spans
	// The wall at the last bounce, for the tangent map: its curvature and the
	// cosine to the normal of the outgoing ray; and the same one bounce
	// before, with the incoming cosine at the last.
	kappa, cos   float64
	kappa0, cos0 float64
	cosIn        float64
	// The next hit as far as it was found.
	met    uint64  // see found
	u      uint64  // the distance, as bits; of round
	still  uint64  // not 0: it is undecided
	cell   int     // of a smooth span
	x      float64 // the place in it
	nx, ny float64 // from the centre of the circle met, a unit vector
}

// advance takes every lane that goes on to its next bounce, before the law of
// the wall. Lanes do not know of each other: each result is what it would be
// alone.
func (tr *Tracer) advance(lanes []lane, marks *marks) {
	if !tr.mirrors {
		for i := range lanes {
			if b := &lanes[i].last; b.Stop == Going {
				b.Exit, b.ExitP = 0, 0
			}
		}
	}
	switch {
	case tr.convex != nil:
		tr.convex.find(lanes)
	case tr.quick != nil:
		tr.quick.find(lanes, marks)
	default:
		for i := range lanes {
			if l := &lanes[i]; l.last.Stop == Going {
				tr.search(l)
			}
		}
		return
	}
	// Lanes that met the same kind of wall are landed together: who met what
	// cannot be foreseen by a processor, how many did costs it one guess.
	var met [8][maxLanes]uint8
	n := uint64(0) // a byte a way: how many met it
	for i := range lanes {
		if l := &lanes[i]; l.last.Stop == Going {
			k := l.met & 7
			if l.still != 0 {
				k = uint64(undecided)
			}
			met[k][n>>(8*k)%maxLanes] = uint8(i)
			n += 1 << (8 * k)
		}
	}
	for _, i := range met[undecided][:n>>(8*undecided)&255] {
		tr.search(&lanes[i])
	}
	for _, i := range met[straight][:n>>(8*straight)&255] {
		tr.landStraight(&lanes[i])
	}
	for _, i := range met[bowed][:n>>(8*bowed)&255] {
		tr.reachBowed(&lanes[i])
	}
	tr.landRound(lanes, met[bowed][:n>>(8*bowed)&255])
	tr.landCurved(lanes, met[curved][:n>>(8*curved)&255])
	tr.landRound(lanes, met[round][:n>>(8*round)&255])
}

// maxLanes is the greatest number of lanes.
const maxLanes = 16

// search finds the next hit by first, which decides everything.
func (tr *Tracer) search(l *lane) {
	b := &l.last
	r := ray{p: b.Point, d: b.Dir, left: b.Piece, t: l.t}
	h := tr.first(&r)
	if h.edge < h.u {
		b.N++
		b.Flight, b.Stop = h.edge, h.edgeStop
		b.Piece, b.State = -1, State{math.NaN(), math.NaN()}
		b.Point = r2.Add(r.p, r2.Scale(h.edge, r.d))
		return
	}
	if h.span < 0 {
		b.N++
		b.Flight = math.Inf(1)
		if b.Stop = Lost; tr.open {
			b.Stop, b.Exit, b.Weight = Escaped, b.Weight, 0
		}
		return
	}
	s := &tr.spans[h.span]
	f, x, t := s.frame(&h)
	onCircle := uint64(0)
	if s.kind == curve.Circle {
		onCircle = same(uint64(h.span), uint64(b.Piece))
	}
	b.Point, b.Flight, b.Piece, l.t = h.at, h.u, h.span, t
	l.turn(f.Tangent.X, f.Tangent.Y, f.Curvature, onCircle)
	tr.place(l, s, x)
}

// landStraight puts the lane on a straight span, by which its line leaves the
// table. The components of the direction along and across the wall serve the
// distance too.
func (tr *Tracer) landStraight(l *lane) {
	s, b := &tr.spans[l.met>>3], &l.last
	tx, ty, dx, dy := s.tanA.X, s.tanA.Y, b.Dir.X, b.Dir.Y
	x, y := b.Point.X-s.a.X, b.Point.Y-s.a.Y
	p, cos := float64(dx*tx)+float64(dy*ty), float64(dx*ty)-float64(dy*tx)
	u := (float64(tx*y) - float64(ty*x)) / cos
	along := float64(tx*x) + float64(ty*y) + float64(u*p)
	if !(u > 0 && along >= 0 && along <= s.length) {
		tr.search(l)
		return
	}
	n := unitScale(float64(p*p) + float64(cos*cos))
	p, cos = p*n, cos*n
	b.Point = r2.Vec{X: s.a.X + float64(along*tx), Y: s.a.Y + float64(along*ty)}
	b.Flight, b.P, b.Piece = u, p, int(l.met>>3)
	l.set(p, cos, tx, ty, 0)
	tr.place(l, s, along)
}

// unitScale is the inverse root of a sum of squares of 1 to rounding. What they
// miss of 1 is some 1e-15, and its square nothing.
func unitScale(squares float64) float64 {
	if math.Abs(squares-1) > nearUnit {
		return 1 / math.Sqrt(squares)
	}
	return 1.5 - 0.5*squares
}

// set sends the lane on with the components p along the wall's tangent (tx, ty)
// and cos along its inward normal, where its curvature is kappa.
func (l *lane) set(p, cos, tx, ty, kappa float64) {
	b := &l.last
	b.N++
	l.kappa0, l.cos0 = l.kappa, l.cos
	l.kappa, l.cosIn, l.cos = kappa, cos, cos
	b.Dir = r2.Vec{X: float64(p*tx) - float64(cos*ty), Y: float64(p*ty) + float64(cos*tx)}
}

// reachBowed finds the distance to an arc that focuses, which the line of the
// lane leaves there.
func (tr *Tracer) reachBowed(l *lane) {
	s, b := &tr.spans[l.met>>3], &l.last
	x, y := b.Point.X-s.centre.X, b.Point.Y-s.centre.Y
	along, off := float64(b.Dir.X*x)+float64(b.Dir.Y*y), float64(b.Dir.Y*x)-float64(b.Dir.X*y)
	half := math.Sqrt((s.radius - off) * (s.radius + off))
	l.u = math.Float64bits(pick(same(l.met>>3, uint64(b.Piece)), -2*along, half-along))
}

// landRound puts the lanes on the round spans that they meet at the distances
// u.
func (tr *Tracer) landRound(lanes []lane, which []uint8) {
	for _, i := range which {
		l := &lanes[i]
		s, b := &tr.spans[l.met>>3], &l.last
		u := math.Float64frombits(l.u)
		x := b.Point.X - s.centre.X + float64(u*b.Dir.X)
		y := b.Point.Y - s.centre.Y + float64(u*b.Dir.Y)
		// Put back on the circle, which it misses by rounding.
		n := unitScale((float64(x*x)+float64(y*y))*s.perRadius*s.perRadius) * s.perRadius
		x, y = x*n, y*n
		b.Flight, b.Point = u, r2.Vec{X: s.centre.X + float64(s.radius*x), Y: s.centre.Y + float64(s.radius*y)}
		l.nx, l.ny = x, y
		own := same(l.met>>3, uint64(b.Piece))
		b.Piece = int(l.met >> 3)
		l.turn(-s.sense*y, s.sense*x, s.kappa, own)
	}
	for _, i := range which {
		l := &lanes[i]
		s := &tr.spans[l.met>>3]
		tr.place(l, s, min(float64(s.turned(l.nx, l.ny)*s.radius), s.length))
	}
}

// turn reflects the lane where the wall has the tangent (tx, ty) and the
// curvature kappa. All bits of own are set where the ray comes from the same
// circle.
//
// Only the ratio of the components of the direction is used: it does not depend
// on the lengths of the vectors, whose rounding has a bias that would add up.
func (l *lane) turn(tx, ty, kappa float64, own uint64) {
	b := &l.last
	p := float64(b.Dir.X*tx) + float64(b.Dir.Y*ty)
	cos := float64(b.Dir.X*ty) - float64(b.Dir.Y*tx)
	n := unitScale(float64(p*p) + float64(cos*cos))
	// A chord meets its circle at equal angles.
	p, cos = pick(own, b.P, p*n), pick(own, l.cos, cos*n)
	b.P = p
	l.set(p, cos, tx, ty, kappa)
}

// place sets the arclength, at x from the start of span s, and stops the lane
// where no bounce is defined.
func (tr *Tracer) place(l *lane, s *span, x float64) {
	b := &l.last
	b.S = s.s0 + x
	if b.S >= s.loop1 { // the end of a loop is its start
		b.S = s.loop0
	}
	if l.cos > grazeTol && x >= tr.corner && s.length-x >= tr.corner {
		return
	}
	switch {
	case s.cornerA && near(b.Point, s.a, tr.corner) || s.cornerB && near(b.Point, s.b, tr.corner):
		b.Stop = Corner
	case l.cos < -grazeTol:
		b.Stop = Lost
	case !(l.cos > grazeTol):
		b.Stop = Grazing
	}
}

// pick is x where all bits of m are set, y where none is.
func pick(m uint64, x, y float64) float64 {
	return math.Float64frombits(math.Float64bits(x)&m | math.Float64bits(y)&^m)
}

// nearUnit is how far a sum of squares may be from 1 for one step of Newton's
// method for its inverse root to be exact: what it leaves is 3/8 of the square.
const nearUnit = 1e-9
