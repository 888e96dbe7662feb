package curve

import (
	"math"

	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// Arc is the part of an ellipse with semi-axes Major (along the direction
// Tilt, radians from +x) and Minor, from the eccentric angle From over Sweep
// (radians, positive counter-clockwise, at most a full turn). With Major equal
// to Minor it is a circular arc.
type Arc struct {
	Centre             r2.Vec
	Major, Minor, Tilt float64
	From, Sweep        float64
	chain
}

// NewArc is the circular arc of the given centre and radius from the angle
// from over sweep (radians).
func NewArc(centre r2.Vec, radius, from, sweep float64) Arc {
	return NewOval(Arc{Centre: centre, Major: radius, Minor: radius, From: from, Sweep: sweep})
}

// NewOval is the arc that the fields of a describe.
func NewOval(a Arc) Arc {
	n := 1
	full := math.Abs(a.Sweep) >= 2*math.Pi-1e-12
	if full {
		a.Sweep = math.Copysign(2*math.Pi, a.Sweep)
	} else if math.Abs(a.Sweep) > math.Pi+1e-12 {
		n = 2
	}
	spans := make([]Span, n)
	for i := range spans {
		s := &spans[i]
		s.Kind = Oval
		if a.Major == a.Minor {
			s.Kind = Circle
		}
		s.Centre, s.Axis, s.Radius, s.Minor = a.Centre, plane.Polar(a.Tilt), a.Major, a.Minor
		s.T0 = a.From + a.Sweep*float64(i)/float64(n)
		s.T1 = a.From + a.Sweep*float64(i+1)/float64(n)
		s.A, _, _ = s.Jet(s.T0)
		s.B, _, _ = s.Jet(s.T1)
		if full {
			s.B = s.A
		}
		s.finishArc(full)
	}
	a.chain = join(spans)
	return a
}

func (s *Span) finishArc(full bool) {
	s.Turn = s.T1 - s.T0
	if s.Kind == Circle {
		s.Length = math.Abs(s.T1-s.T0) * s.Radius
		return
	}
	s.chart = newChart(s)
	s.Length = s.chart.length
	if !full {
		// An ellipse's tangent turns by the same half turns as its parameter,
		// but not at the same pace in between.
		a, b := s.Ends()
		turn := plane.Angle(a, b)
		if turn*s.Turn < 0 {
			turn += math.Copysign(2*math.Pi, s.Turn)
		}
		s.Turn = turn
	}
}

// ArcThrough is the circular arc from a to b with the given bulge: the tangent
// of a quarter of its sweep, positive when it turns left. Bulge 0 is a Line.
//
// The centre of a nearly straight arc lies so far away that its rounding would
// be felt on the wall. Below flatSweep the arc is given as the cubic with its
// ends, end tangents and middle, which differs from the circle by less than
// 1e-15 of the chord: the error is 2.7e-4 of the radius for a quarter turn and
// falls with the sixth power of the sweep (T. Dokken et al., Comput. Aided
// Geom. Design 7, 33, 1990).
func ArcThrough(a, b r2.Vec, bulge float64) Curve {
	if bulge == 0 {
		return NewLine(a, b)
	}
	sweep := 4 * math.Atan(bulge)
	chord := r2.Sub(b, a)
	if math.Abs(sweep) < flatSweep {
		// The handles are (4/3) tan(sweep/4) R long, R = |chord| / (2 sin(sweep/2)),
		// and make the angle sweep/2 with the chord.
		k := 2 * bulge / (3 * math.Sin(sweep/2))
		sin, cos := math.Sincos(sweep / 2)
		n := plane.Left(chord)
		in := r2.Scale(k, r2.Sub(r2.Scale(cos, chord), r2.Scale(sin, n)))
		out := r2.Scale(k, r2.Add(r2.Scale(cos, chord), r2.Scale(sin, n)))
		return NewCubic([4]r2.Vec{a, r2.Add(a, in), r2.Sub(b, out), b})
	}
	half := 0.5 * math.Hypot(chord.X, chord.Y)
	radius := half / math.Abs(math.Sin(sweep/2))
	// The centre lies on the chord's bisector; cot(sweep/2) half to the left.
	off := half * math.Cos(sweep/2) / math.Sin(sweep/2)
	centre := r2.Add(plane.Lerp(a, b, 0.5), r2.Scale(off, plane.Left(plane.Unit(chord))))
	d := r2.Sub(a, centre)
	arc := NewArc(centre, radius, math.Atan2(d.Y, d.X), sweep)
	arc.chain[0].A = a
	arc.chain[len(arc.chain)-1].B = b
	return arc
}

// flatSweep is the sweep (radians) below which ArcThrough is a cubic.
const flatSweep = 8e-3

// Placed is the arc after m.
func (a Arc) Placed(m plane.Similarity) Curve {
	return NewOval(Arc{
		Centre: m.Apply(a.Centre), Major: a.Major * m.Scale, Minor: a.Minor * m.Scale,
		Tilt: a.Tilt + m.Angle, From: a.From, Sweep: a.Sweep,
	})
}

// Reversed is the arc run backwards.
func (a Arc) Reversed() Curve {
	a.From, a.Sweep = a.From+a.Sweep, -a.Sweep
	return NewOval(a)
}

// arcBounds is the box of the ends and of those extremes of x and y that lie
// on the arc.
func (s *Span) arcBounds() r2.Box {
	minor := s.Minor
	if s.Kind == Circle {
		minor = s.Radius
	}
	b := plane.Around(s.A, s.B)
	ax, ay := math.Atan2(-minor*s.Axis.Y, s.Radius*s.Axis.X), math.Atan2(minor*s.Axis.X, s.Radius*s.Axis.Y)
	for _, t := range [4]float64{ax, ax + math.Pi, ay, ay + math.Pi} {
		if s.holds(t) {
			p, _, _ := s.Jet(t)
			b = plane.Join(b, plane.Around(p))
		}
	}
	return b
}

// holds reports whether the angle t, up to full turns, lies on the arc.
func (s *Span) holds(t float64) bool {
	lo, width := s.T0, s.T1-s.T0
	if width < 0 {
		lo, width = s.T1, -width
	}
	d := math.Mod(t-lo, 2*math.Pi)
	if d < 0 {
		d += 2 * math.Pi
	}
	return d <= width
}
