package shape

import (
	"math"

	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// Symmetry is what a free wall keeps while it is edited: the rotations by a
// Fold-th of a turn about the Centre (none for Fold below 2), and where Mirror
// is set the reflection in the line through the Centre in the direction Axis
// (radians from +x), and in those that the rotations make of it.
type Symmetry struct {
	Fold   int
	Mirror bool
	Centre r2.Vec
	Axis   float64
}

// None reports whether the symmetry asks for nothing.
func (s Symmetry) None() bool { return s.Fold < 2 && !s.Mirror }

// motions are the symmetry's elements, the identity first.
func (s Symmetry) motions() []motion {
	fold := max(s.Fold, 1)
	var list []motion
	for k := range fold {
		list = append(list, motion{about: s.Centre, angle: fullTurn * float64(k) / float64(fold)})
	}
	if s.Mirror {
		for k := range fold {
			list = append(list, motion{about: s.Centre, angle: 2*s.Axis + fullTurn*float64(k)/float64(fold), flip: true})
		}
	}
	return list
}

// Mirrors are the directions of the mirror lines, in radians from +x.
func (s Symmetry) Mirrors() []float64 {
	var list []float64
	for _, m := range s.motions() {
		if m.flip {
			list = append(list, m.angle/2)
		}
	}
	return list
}

// motion is a rotation by the angle about a point or, with flip, the reflection
// in the line through it at half the angle.
type motion struct {
	about r2.Vec
	angle float64
	flip  bool
}

func (m motion) vector(v r2.Vec) r2.Vec {
	if m.flip {
		v.Y = -v.Y
	}
	if m.angle == 0 {
		return v
	}
	return turned(v, plane.Polar(m.angle))
}

func (m motion) point(p r2.Vec) r2.Vec {
	if m.angle == 0 && !m.flip {
		return p
	}
	return r2.Add(m.about, m.vector(r2.Sub(p, m.about)))
}

func (m motion) tilt(t float64) float64 {
	if m.flip {
		return m.angle - t
	}
	return m.angle + t
}

// image is a motion with what it makes of the nodes: node k becomes of(k).
type image struct {
	motion
	shift, count int
}

func (g image) of(k int) int {
	if g.flip {
		k = -k
	}
	return ((k+g.shift)%g.count + g.count) % g.count
}

// span is the span that span k becomes: a reflection runs it backwards.
func (g image) span(k int) int {
	if g.flip {
		k++
	}
	return g.of(k)
}

// end is the end that an end of a span becomes.
func (g image) end(e End) End {
	if g.flip {
		return Leaves - e
	}
	return e
}

// alike is the distance, relative to the wall's size, at which a node counts as
// the image of another.
const alike = 1e-6

// group are the images of the nodes under the symmetry; ok is false where the
// nodes do not have it.
func (n nodes) group(s Symmetry) (list []image, ok bool) {
	near := alike * n.size()
	for _, m := range s.motions() {
		g, found := image{m, 0, len(n)}, false
		p := m.point(n[0].At)
		for k := range n {
			if r2.Norm(r2.Sub(p, n[k].At)) <= near {
				g.shift, found = k, true
				break
			}
		}
		for k := 0; found && k < len(n); k++ {
			found = r2.Norm(r2.Sub(m.point(n[k].At), n.at(g.of(k)).At)) <= near && n[k].Span == n.at(g.span(k)).Span
		}
		if !found {
			return nil, false
		}
		list = append(list, g)
	}
	return list, true
}

// kept are the nodes with every one made exactly the image of those nearest to
// the lead.
func (n nodes) kept(group []image, lead int) nodes {
	out := n.clone()
	node, span := make([]bool, len(n)), make([]bool, len(n))
	for d := range n {
		// 0, 1, -1, 2, -2, ... from the lead.
		k := n.wrap(lead + (d+1)/2*(1-2*((d+1)%2)))
		if !node[k] {
			rep := n.balanced(group, k)
			for _, g := range group {
				if i := g.of(k); !node[i] {
					node[i] = true
					t := &out[i]
					t.At, t.Joint, t.Fillet = g.point(rep.At), rep.Joint, rep.Fillet
					t.In, t.Out = g.vector(rep.In), g.vector(rep.Out)
					if g.flip {
						t.In, t.Out = t.Out, t.In
					}
				}
			}
		}
		if !span[k] {
			rep := n[k]
			for _, g := range group {
				if i := g.span(k); !span[i] {
					span[i] = true
					t := &out[i]
					t.Span, t.Bulge, t.Ratio, t.Tilt = rep.Span, rep.Bulge, rep.Ratio, rep.Tilt
					if rep.Span == Elliptic {
						t.Tilt = g.tilt(rep.Tilt)
					}
				} else if i == k && g.flip && rep.Span == Elliptic {
					// Its ellipse lies along the mirror line, or across it.
					quarter := math.Pi / 2
					rep.Tilt = g.angle/2 + math.Round((rep.Tilt-g.angle/2)/quarter)*quarter
					out[k].Tilt = rep.Tilt
				}
			}
		}
	}
	return out
}

// balanced is node k as a motion that leaves it in its place needs it.
func (n nodes) balanced(group []image, k int) Node {
	rep, at, count := n[k], r2.Vec{}, 0.0
	for _, g := range group {
		if g.of(k) == k {
			at, count = r2.Add(at, g.point(rep.At)), count+1
			if g.flip {
				rep.In = r2.Scale(0.5, r2.Add(rep.In, g.vector(rep.Out)))
				rep.Out = g.vector(rep.In)
			}
		}
	}
	if count > 1 {
		rep.At = r2.Scale(1/count, at)
	}
	return rep
}

// Symmetry is the symmetry that the wall keeps.
func (f Freeform) Symmetry() Symmetry { return f.symmetry }

// Symmetric is the wall through the nodes as NewFreeform makes it, with a
// symmetry that they have; ok is false where they do not.
func Symmetric(list []Node, s Symmetry) (f Freeform, ok bool) {
	f = NewFreeform(list)
	if s.None() || f.nodes.fault() != nil || s.Fold > mostFold {
		return f, false
	}
	if _, ok = f.nodes.group(s); ok {
		f.symmetry = s
	}
	return f, ok
}

// Forward is the same wall with its nodes in the order in which it runs,
// counter-clockwise.
func (f Freeform) Forward() Freeform {
	g := NewFreeform(f.nodes)
	g.symmetry = f.symmetry
	return g
}

// group are the images of the wall's nodes: the identity alone where it keeps
// no symmetry.
func (f Freeform) group() []image {
	if !f.symmetry.None() && f.nodes.fault() == nil {
		if g, ok := f.nodes.group(f.symmetry); ok {
			return g
		}
	}
	return []image{{count: len(f.nodes)}}
}

// settled is the wall of the nodes held to their joints and to the symmetry.
func (f Freeform) settled(n nodes, lead int, held *grasp) Freeform {
	n = settledHolding(n, lead, held)
	if f.symmetry.None() || n.fault() != nil {
		return Freeform{nodes: n, symmetry: f.symmetry}
	}
	group, ok := n.group(f.symmetry)
	if !ok {
		return Freeform{nodes: n} // it was edited away
	}
	return Freeform{nodes: settledFrom(n.kept(group, lead).loosened(), lead), symmetry: f.symmetry}
}

// loosened are the nodes with those tangent joints that their arcs and lines do
// not have made corners: to bend one arc on to the next would go round the wall
// and miss the symmetry.
func (n nodes) loosened() nodes {
	for i := range n {
		if n[i].Joint.tangent() && n[i].Span != Curved && n.at(i-1).Span != Curved && n.kink(i) > tangency {
			n[i].Joint = Corner
		}
	}
	return n
}
