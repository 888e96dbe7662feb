package sim

import (
	"math"

	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// An ellipse is met as the unit circle into which its own axes and scales turn
// it: the map keeps lines, order along them and sides.

// unit is the vector v in the span's axes, scaled so that the ellipse is the
// unit circle.
func (s *span) unit(v r2.Vec) r2.Vec {
	return r2.Vec{X: plane.Dot(v, s.axis) / s.radius, Y: plane.Cross(s.axis, v) / s.minor}
}

// onOval is the point of the ellipse in the direction of the unit-circle
// vector w, with its parameter.
func (s *span) onOval(w r2.Vec) (at r2.Vec, t float64) {
	k := 1 / math.Sqrt(plane.Dot(w, w))
	x, y := s.radius*w.X*k, s.minor*w.Y*k
	at = r2.Vec{
		X: s.centre.X + float64(x*s.axis.X) - float64(y*s.axis.Y),
		Y: s.centre.Y + float64(x*s.axis.Y) + float64(y*s.axis.X),
	}
	return at, math.Atan2(w.Y, w.X)
}

// ellipse is the ray in the unit circle's plane: from q along e (not a unit
// vector), mid and half so that the crossings are at mid -+ half along it;
// depth is how far the line passes inside the circle (negative: outside), in
// units of the radius.
func (tr *Tracer) ellipse(s *span, r *ray) (q, e r2.Vec, mid, half, off float64) {
	q, e = s.unit(r2.Sub(r.p, s.centre)), s.unit(r.d)
	n2 := plane.Dot(e, e)
	n := math.Sqrt(n2)
	mid = -plane.Dot(q, e) / n2
	off = -plane.Cross(e, q) / n
	if rest := (1 - off) * (1 + off); rest > 0 {
		half = math.Sqrt(rest) / n
	}
	return q, e, mid, half, off
}

func (tr *Tracer) takeOval(k int, s *span, q, e r2.Vec, u float64, r *ray, h *hit) {
	if u > 0 && u < h.u {
		at, t := s.onOval(r2.Vec{X: q.X + float64(u*e.X), Y: q.Y + float64(u*e.Y)})
		h.take(k, t, at, r)
	}
}

// passOval is passTol in units of the smaller semi-axis.
func (tr *Tracer) passOval(s *span) float64 { return passTol * tr.size / math.Min(s.radius, s.minor) }

func (tr *Tracer) meetOval(k int, s *span, r *ray, h *hit) {
	q, e, mid, half, off := tr.ellipse(s, r)
	if math.Abs(math.Abs(off)-1) < tr.passOval(s) {
		h.graze(mid)
		return
	}
	if half == 0 {
		return
	}
	u := mid - half
	if u <= 0 {
		u = mid + half
	}
	tr.takeOval(k, s, q, e, u, r, h)
}

// meetOvalArc is meetArc in the unit circle's plane.
func (tr *Tracer) meetOvalArc(k int, s *span, sa, sb bool, r *ray, h *hit) {
	q, e, mid, half, off := tr.ellipse(s, r)
	if sa != sb {
		u := mid + half
		if sb != (s.sense > 0) {
			u = mid - half
		}
		tr.takeOval(k, s, q, e, u, r, h)
		return
	}
	n := plane.Unit(plane.Left(e))
	depth := 1 + off
	if sa {
		n, depth = r2.Scale(-1, n), 1-off
	}
	if depth < -tr.passOval(s) {
		return
	}
	a, b := s.unit(r2.Sub(s.a, s.centre)), s.unit(r2.Sub(s.b, s.centre))
	if s.sense*plane.Cross(a, n) < 0 || s.sense*plane.Cross(n, b) < 0 {
		return
	}
	if depth < tr.passOval(s) {
		h.graze(mid)
		return
	}
	if half == 0 {
		return
	}
	u := mid - half
	if u <= 0 {
		u = mid + half
	}
	tr.takeOval(k, s, q, e, u, r, h)
}

// leaveOval is the other crossing with the ellipse that the ray leaves.
func (tr *Tracer) leaveOval(k int, s *span, r *ray, h *hit) {
	q, e := s.unit(r2.Sub(r.p, s.centre)), s.unit(r.d)
	tr.takeOval(k, s, q, e, -2*plane.Dot(q, e)/plane.Dot(e, e), r, h)
}
