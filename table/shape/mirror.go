package shape

import (
	"math"

	"cavitywright/table/curve"
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// WithSymmetry is the wall with a symmetry that it keeps from now on. Where it
// does not have it yet, the part of it from the mirror line on (to the left of
// its direction; of a rotation, from the direction of the axis on) is kept and
// repeated. The error is a *Fault.
func (f Freeform) WithSymmetry(s Symmetry) (Freeform, error) {
	if s.None() {
		return Freeform{nodes: f.nodes}, nil
	}
	if s.Fold < 2 {
		s.Fold = 0
	}
	if !plane.Finite(s.Centre) || !plane.Finite(r2.Vec{X: s.Axis}) || s.Fold > mostFold {
		return f, misfit("its symmetry is no number; choose one of up to %d-fold", mostFold)
	}
	if err := f.nodes.fault(); err != nil {
		return f, err
	}
	n := f.nodes.clone()
	if sense(n.curves()) < 0 {
		n = n.reversed()
	}
	if group, ok := n.group(s); ok {
		if !s.Mirror {
			s.Axis = 0
		}
		return Freeform{nodes: settled(settled(n).kept(group, 0).loosened()), symmetry: s}, nil
	}
	n, err := n.repeated(s)
	if err != nil {
		return f, err
	}
	if !s.Mirror {
		s.Axis = 0
	}
	if err := n.fault(); err != nil {
		return f, misfit("it cannot be made symmetric; draw it nearer to what it shall be")
	}
	g := Freeform{nodes: n, symmetry: s}.settled(n, 0, nil)
	if g.symmetry.None() {
		return f, misfit("it cannot be made symmetric; draw it nearer to what it shall be")
	}
	return g, nil
}

// mostFold is the greatest order of a rotation.
const mostFold = 64

// repeated is the chain made of its part in one sector of the symmetry.
func (n nodes) repeated(s Symmetry) (nodes, error) {
	fold := max(s.Fold, 1)
	width := fullTurn / float64(fold)
	if s.Mirror {
		width /= 2
	}
	n, first, err := n.cutBy(s.Centre, s.Axis)
	if err != nil {
		return nil, err
	}
	mark := n[first].At
	n, last, err := n.cutBy(s.Centre, s.Axis+width)
	if err != nil {
		return nil, err
	}
	for n.at(first).At != mark {
		first++ // the second cut came before it
	}
	var part nodes
	for k := first; ; k++ {
		part = append(part, *n.at(k))
		if k > first && n.wrap(k) == n.wrap(last) {
			break
		}
	}
	unit := part[:len(part)-1].clone()
	if s.Mirror {
		line := motion{about: s.Centre, angle: 2 * (s.Axis + width), flip: true}
		part[0].At = onRay(s.Centre, s.Axis, part[0].At)
		part[len(part)-1].At = onRay(s.Centre, s.Axis+width, part[len(part)-1].At)
		unit = part.andMirrored(line)
	} else {
		// The last span ends where the next sector begins.
		back := motion{about: s.Centre, angle: -width}
		unit[0].In = back.vector(part[len(part)-1].In)
	}
	var out nodes
	for k := range fold {
		m := motion{about: s.Centre, angle: fullTurn * float64(k) / float64(fold)}
		for _, q := range unit {
			q.At, q.In, q.Out, q.Tilt = m.point(q.At), m.vector(q.In), m.vector(q.Out), m.tilt(q.Tilt)
			out = append(out, q)
		}
	}
	return out.without(alike * n.size()), nil
}

// Repeated is the wall of an open chain of nodes and its images under the
// symmetry. An end of the chain within near (a length) of a mirror line, or of
// the image of the other end, is put there. The span of the last node counts
// only where the chain does not end on a mirror line.
func Repeated(chain []Node, s Symmetry, near float64) (Freeform, bool) {
	n := nodes(chain).clone()
	if s.None() || len(n) == 0 {
		return NewFreeform(n), false
	}
	fold := max(s.Fold, 1)
	var out nodes
	if s.Mirror {
		var onto [2]bool
		for e, k := range [2]int{0, len(n) - 1} {
			p, off := s.onMirror(n[k].At)
			if onto[e] = off <= near; onto[e] {
				n[k].At = p
			}
		}
		m := s.mirrorAt(n[len(n)-1].At)
		back := nodes{}
		for k := len(n) - 1; k >= 0; k-- {
			q := n[k]
			q.At, q.In, q.Out = m.point(q.At), m.vector(n[k].Out), m.vector(n[k].In)
			q.Span, q.Bulge, q.Ratio, q.Tilt = Straight, 0, 0, 0
			if k > 0 {
				b := n[k-1]
				q.Span, q.Bulge, q.Ratio, q.Tilt = b.Span, b.Bulge, b.Ratio, m.tilt(b.Tilt)
			}
			switch {
			case k == len(n)-1 && onto[1]:
				last := &n[k]
				last.Span, last.Bulge, last.Ratio, last.Tilt, last.Out = q.Span, q.Bulge, q.Ratio, q.Tilt, q.Out
			case k == 0 && onto[0] && fold == 1:
				n[0].In = q.In
			default:
				back = append(back, q)
			}
		}
		n = append(n, back...)
	}
	for k := range fold {
		m := motion{about: s.Centre, angle: fullTurn * float64(k) / float64(fold)}
		for i, q := range n {
			q.At, q.In, q.Out = m.point(q.At), m.vector(q.In), m.vector(q.Out)
			if q.Span == Elliptic {
				q.Tilt = m.tilt(q.Tilt)
			}
			if len(out) > 0 && i == 0 && r2.Norm(r2.Sub(q.At, out[len(out)-1].At)) <= near {
				q.In = out[len(out)-1].In
				out = out[:len(out)-1]
			}
			out = append(out, q)
		}
	}
	if len(out) > 1 && fold > 1 && r2.Norm(r2.Sub(out[0].At, out[len(out)-1].At)) <= near {
		out[0].In = out[len(out)-1].In
		out = out[:len(out)-1]
	}
	return Symmetric(out, s)
}

// onMirror is the point of the nearest mirror line, and the distance to it.
func (s Symmetry) onMirror(p r2.Vec) (r2.Vec, float64) {
	best, least := p, math.Inf(1)
	for k := range max(s.Fold, 1) {
		u := plane.Polar(s.Axis + math.Pi*float64(k)/float64(max(s.Fold, 1)))
		q := r2.Add(s.Centre, r2.Scale(plane.Dot(r2.Sub(p, s.Centre), u), u))
		if d := r2.Norm(r2.Sub(p, q)); d < least {
			best, least = q, d
		}
	}
	return best, least
}

// mirrorAt is the reflection whose line passes nearest to p.
func (s Symmetry) mirrorAt(p r2.Vec) motion {
	var best motion
	least := math.Inf(1)
	for _, m := range s.motions() {
		if d := r2.Norm(r2.Sub(m.point(p), p)); m.flip && d < least {
			best, least = m, d
		}
	}
	return best
}

// without is the chain without the nodes that lie within near of the next one.
func (n nodes) without(near float64) nodes {
	var out nodes
	for i := range n {
		if r2.Norm(n.chord(i)) > near {
			out = append(out, n[i])
		}
	}
	return out
}

// onRay is p moved onto the ray from the centre.
func onRay(centre r2.Vec, angle float64, p r2.Vec) r2.Vec {
	u := plane.Polar(angle)
	return r2.Add(centre, r2.Scale(plane.Dot(r2.Sub(p, centre), u), u))
}

// andMirrored is the open chain from one mirror line to the other, followed by
// its image in the second, without the node on the first.
func (n nodes) andMirrored(m motion) nodes {
	out := n.clone()
	last := len(n) - 1
	out[0].In = motion{angle: m.angle, flip: true}.vector(out[0].Out) // put right by the symmetry
	for k := last; k > 0; k-- {
		q, before := n[k], n[k-1]
		if k == last {
			q = out[last]
			q.Out = m.vector(n[k].In)
		} else {
			q.At, q.In, q.Out = m.point(q.At), m.vector(n[k].Out), m.vector(n[k].In)
		}
		q.Span, q.Bulge, q.Ratio, q.Tilt = before.Span, before.Bulge, before.Ratio, m.tilt(before.Tilt)
		if k == last {
			q.Joint = Corner
			if d := n.arriving(k - 1); before.Span == Curved && n[k].Joint.tangent() || math.Abs(plane.Dot(d, plane.Polar(m.angle/2))) <= tangency {
				q.Joint = Smooth
			}
			out[last] = q
			continue
		}
		out = append(out, q)
	}
	out[0].Joint = Corner
	if n[0].Joint.tangent() && n[0].Span == Curved || math.Abs(math.Cos(plane.Angle(n.leaving(0), r2.Sub(n[0].At, m.about)))) <= tangency {
		out[0].Joint = Smooth
	}
	return out
}

// raySamples is the number of stretches of each piece of a span in which a
// crossing of a ray is looked for.
const raySamples = 32

// cutBy is the chain with a node where the ray from the centre crosses it, and
// that node. It must cross it once.
func (n nodes) cutBy(centre r2.Vec, angle float64) (nodes, int, error) {
	u := plane.Polar(angle)
	off := func(c curve.Curve, s float64) (across, along float64) {
		d := r2.Sub(c.At(s).Point, centre)
		return plane.Cross(u, d), plane.Dot(u, d)
	}
	near := alike * n.size()
	type hit struct {
		span int
		s    float64
	}
	var hits []hit
	curves := n.curves()
	for i, c := range curves {
		steps := raySamples * len(c.Spans())
		for k := range steps {
			lo, hi := c.Length()*float64(k)/float64(steps), c.Length()*float64(k+1)/float64(steps)
			a, _ := off(c, lo)
			b, _ := off(c, hi)
			if (a < 0) == (b < 0) {
				continue
			}
			for range 60 { // more than the bits of a number
				mid := 0.5 * (lo + hi)
				if m, _ := off(c, mid); (m < 0) == (a < 0) {
					lo = mid
				} else {
					hi = mid
				}
			}
			if _, along := off(c, lo); along > 0 {
				hits = append(hits, hit{i, lo})
			}
		}
	}
	if len(hits) != 1 {
		return nil, 0, misfit("it meets the line of symmetry at %d places on one side of its centre, not at one; move the centre or reshape the wall", len(hits))
	}
	h := hits[0]
	switch l := curves[h.span].Length(); {
	case h.s <= near:
		return n, h.span, nil
	case l-h.s <= near:
		return n, n.wrap(h.span + 1), nil
	}
	n = n.clone()
	mid := n.split(h.span, n.share(h.span, curves[h.span], h.s))
	at := h.span + 1
	return append(n[:at], append(nodes{mid}, n[at:]...)...), at, nil
}
