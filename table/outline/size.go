package outline

import (
	"math"

	"cavitywright/table/plane"

	"gonum.org/v1/gonum/integrate/quad"
	"gonum.org/v1/gonum/spatial/r2"
)

// Points are the corners of a path of lines, the start first; the last of a
// closed path is that before its start.
func (p *Path) Points() []r2.Vec {
	out := []r2.Vec{p.Start}
	for _, s := range p.Steps {
		out = append(out, s.To)
	}
	if n := len(out); n > 1 && out[n-1] == out[0] {
		out = out[:n-1]
	}
	return out
}

// Area is the signed area that a closed path encloses, in closed form.
func (p *Path) Area() float64 {
	sum, at := 0.0, p.Start
	for _, s := range p.Steps {
		a, b := r2.Sub(at, p.Start), r2.Sub(s.To, p.Start)
		sum += 0.5 * plane.Cross(a, b)
		switch s.Kind {
		case Arc, Oval: // the segment between arc and chord
			sum += 0.5 * s.Radius * s.Minor * (s.Sweep - math.Sin(s.Sweep))
		case Cubic:
			sum += cubicArea([4]r2.Vec{at, s.C[0], s.C[1], s.To})
		}
		at = s.To
	}
	return sum
}

// cubicArea is the signed area between a cubic and its chord; the quadrature is
// exact for the polynomial that it integrates.
func cubicArea(c [4]r2.Vec) float64 {
	return quad.Fixed(func(t float64) float64 {
		return 0.5 * plane.Cross(r2.Sub(bezier(c, t), c[0]), flow(c, t))
	}, 0, 1, 4, nil, 0)
}

// flow is the derivative of a cubic.
func flow(c [4]r2.Vec, t float64) r2.Vec {
	u := 1 - t
	d := r2.Scale(3*u*u, r2.Sub(c[1], c[0]))
	d = r2.Add(d, r2.Scale(6*u*t, r2.Sub(c[2], c[1])))
	return r2.Add(d, r2.Scale(3*t*t, r2.Sub(c[3], c[2])))
}

// Length is the length of the path; of a cubic by quadrature.
func (p *Path) Length() float64 {
	sum, at := 0.0, p.Start
	for _, s := range p.Steps {
		switch s.Kind {
		case Arc:
			sum += s.Radius * math.Abs(s.Sweep)
		case Oval:
			sum += quad.Fixed(func(t float64) float64 {
				sin, cos := math.Sincos(t)
				return math.Hypot(s.Radius*sin, s.Minor*cos)
			}, math.Min(s.From, s.From+s.Sweep), math.Max(s.From, s.From+s.Sweep), gauss, nil, 0)
		case Cubic:
			c := [4]r2.Vec{at, s.C[0], s.C[1], s.To}
			sum += quad.Fixed(func(t float64) float64 { return r2.Norm(flow(c, t)) }, 0, 1, gauss, nil, 0)
		default:
			sum += r2.Norm(r2.Sub(s.To, at))
		}
		at = s.To
	}
	return sum
}
