package intake

import (
	"math"
	"strings"

	"cavitywright/table/outline"

	"gonum.org/v1/gonum/spatial/r2"
)

// affine maps x to a x + c y + e, y to b x + d y + f, as SVG writes a matrix.
type affine struct{ a, b, c, d, e, f float64 }

var same = affine{a: 1, d: 1}

// then is m after o.
func (m affine) after(o affine) affine {
	return affine{
		m.a*o.a + m.c*o.b, m.b*o.a + m.d*o.b,
		m.a*o.c + m.c*o.d, m.b*o.c + m.d*o.d,
		m.a*o.e + m.c*o.f + m.e, m.b*o.e + m.d*o.f + m.f,
	}
}

func (m affine) point(p r2.Vec) r2.Vec {
	return r2.Vec{X: m.a*p.X + m.c*p.Y + m.e, Y: m.b*p.X + m.d*p.Y + m.f}
}

func (m affine) vector(p r2.Vec) r2.Vec {
	return r2.Vec{X: m.a*p.X + m.c*p.Y, Y: m.b*p.X + m.d*p.Y}
}

func (m affine) edge(e Edge) Edge {
	e.A, e.B = m.point(e.A), m.point(e.B)
	switch e.Kind {
	case outline.Oval:
		e.Centre, e.U, e.V = m.point(e.Centre), m.vector(e.U), m.vector(e.V)
	case outline.Cubic:
		e.C[0], e.C[1] = m.point(e.C[0]), m.point(e.C[1])
	}
	return e
}

// parseTransform reads the transform attribute: a list of functions, the first
// outermost (SVG 1.1, 7.6).
func parseTransform(text string) (affine, error) {
	m := same
	rest := strings.TrimSpace(text)
	for rest != "" {
		name, after, ok := strings.Cut(rest, "(")
		args, tail, closed := strings.Cut(after, ")")
		if !ok || !closed {
			return m, fault("The transform %q is incomplete; draw the shape anew or take the transform off.", short(text))
		}
		v, err := numbers(args)
		step, fits := transformOf(strings.TrimSpace(name), v)
		if err != nil || !fits {
			return m, fault("The transform %q is none that SVG knows; draw the shape anew or take the transform off.", short(text))
		}
		m = m.after(step)
		rest = strings.TrimLeft(tail, " \t\r\n,")
	}
	return m, nil
}

func transformOf(name string, v []float64) (affine, bool) {
	n := len(v)
	switch {
	case name == "matrix" && n == 6:
		return affine{v[0], v[1], v[2], v[3], v[4], v[5]}, true
	case name == "translate" && n == 1:
		return affine{1, 0, 0, 1, v[0], 0}, true
	case name == "translate" && n == 2:
		return affine{1, 0, 0, 1, v[0], v[1]}, true
	case name == "scale" && n == 1:
		return affine{a: v[0], d: v[0]}, true
	case name == "scale" && n == 2:
		return affine{a: v[0], d: v[1]}, true
	case name == "rotate" && n == 1:
		sin, cos := sincosDeg(v[0])
		return affine{a: cos, b: sin, c: -sin, d: cos}, true
	case name == "rotate" && n == 3:
		sin, cos := sincosDeg(v[0])
		turn := affine{a: cos, b: sin, c: -sin, d: cos}
		return affine{1, 0, 0, 1, v[1], v[2]}.after(turn).after(affine{1, 0, 0, 1, -v[1], -v[2]}), true
	case name == "skewX" && n == 1:
		return affine{a: 1, c: math.Tan(v[0] * math.Pi / 180), d: 1}, true
	case name == "skewY" && n == 1:
		return affine{a: 1, b: math.Tan(v[0] * math.Pi / 180), d: 1}, true
	}
	return same, false
}

// sincosDeg is exact at quarter turns.
func sincosDeg(deg float64) (sin, cos float64) {
	switch math.Mod(math.Mod(deg, 360)+360, 360) {
	case 0:
		return 0, 1
	case 90:
		return 1, 0
	case 180:
		return 0, -1
	case 270:
		return -1, 0
	}
	return math.Sincos(deg * math.Pi / 180)
}

// short is a text as a sentence can quote it.
func short(s string) string {
	s = strings.Join(strings.Fields(s), " ")
	if r := []rune(s); len(r) > 40 {
		return string(r[:40]) + "…"
	}
	return s
}
