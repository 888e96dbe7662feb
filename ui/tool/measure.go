package tool

import (
	"fmt"
	"math"

	"cavitywright/table"
	"cavitywright/table/plane"
	"cavitywright/table/shape"

	"gonum.org/v1/gonum/spatial/r2"
)

// measure is the pointer that reads off the drawing: a pull reads a distance
// and its direction, a third click the angle between two lines; on the wall it
// reads the radius of curvature, at a node the angle. It snaps to nodes and to
// the wall. It changes nothing.
type measure struct {
	points  []r2.Vec // at most three: from, to, and the end of the other leg
	pulling bool
	at      snap
}

// snap is a place with what it is.
type snap struct {
	at   r2.Vec
	kind snapKind
	s    float64 // on the wall
	item int     // of a node
	node int
}

type snapKind uint8

const (
	nowhere snapKind = iota
	onNode
	onWall
)

// snapTo is the node, else the place on the wall, within reach of p.
func (e *Editor) snapTo(p r2.Vec, reach float64) snap {
	t := e.s.Table()
	best, near := snap{at: p}, reach
	for i, it := range t.Design().Items {
		f, ok := it.Shape.(shape.Freeform)
		if !ok {
			continue
		}
		for k, n := range f.Nodes() {
			if d := r2.Norm(r2.Sub(it.Place.Apply(n.At), p)); d <= near {
				best, near = snap{at: it.Place.Apply(n.At), kind: onNode, item: i, node: k}, d
			}
		}
	}
	if best.kind == onNode {
		return best
	}
	for _, j := range t.Joints() {
		if d := r2.Norm(r2.Sub(j.At, p)); d <= near {
			best, near = snap{at: j.At, kind: onWall, s: j.S}, d
		}
	}
	if best.kind == onWall {
		return best
	}
	if s, d := t.Nearest(p); d <= reach {
		return snap{at: t.At(s).Point, kind: onWall, s: s}
	}
	return best
}

func (m *measure) press(e *Editor, p r2.Vec, reach float64, k Keys) {
	e.near = reach
	at := e.measured(p, reach, k)
	m.at = at
	if n := len(m.points); n == 2 {
		m.points = append(m.points, at.at) // the other leg of an angle
		return
	}
	m.points, m.pulling = []r2.Vec{at.at}, true
}

// measured is the place of p: with Ctrl exactly there.
func (e *Editor) measured(p r2.Vec, reach float64, k Keys) snap {
	if k.Has(Free) {
		return snap{at: p}
	}
	return e.snapTo(p, reach)
}

func (m *measure) drag(e *Editor, p r2.Vec, k Keys) {
	if !m.pulling || len(m.points) == 0 {
		return
	}
	to := e.measured(p, e.near, k).at
	if k.Has(Constrain) {
		to = constrained(m.points[0], p)
	}
	m.points = append(m.points[:1], to)
	e.s.Touch()
}

func (m *measure) release(e *Editor) {
	m.pulling = false
	e.s.Touch()
}

func (m *measure) hover(e *Editor, p r2.Vec) {
	if len(m.points) == 0 {
		m.at = e.snapTo(p, e.near)
	}
}

func (m *measure) draft() (lines [][]r2.Vec, nodes []r2.Vec) {
	if len(m.points) > 1 {
		lines = append(lines, m.points[:2])
	}
	if len(m.points) > 2 {
		lines = append(lines, []r2.Vec{m.points[0], m.points[2]})
	}
	return lines, m.points
}

// text is what is read off.
func (m *measure) text(e *Editor, p r2.Vec, reach float64) string {
	t := e.s.Table()
	u := t.Design().Unit.String()
	switch len(m.points) {
	case 2:
		d := r2.Sub(m.points[1], m.points[0])
		return fmt.Sprintf("Distance %.6g %s, direction %.5g°, Δx %.6g %s, Δy %.6g %s. Click a third point for an angle, or pull anew.",
			r2.Norm(d), u, deg(math.Atan2(d.Y, d.X)), d.X, u, d.Y, u)
	case 3:
		a, b := r2.Sub(m.points[1], m.points[0]), r2.Sub(m.points[2], m.points[0])
		return fmt.Sprintf("Angle %.6g° between legs of %.6g %s and %.6g %s. Press for the next.",
			deg(math.Abs(plane.Angle(a, b))), r2.Norm(a), u, r2.Norm(b), u)
	}
	switch at := e.snapTo(p, reach); at.kind {
	case onNode:
		it := t.Design().Items[at.item]
		f := it.Shape.(shape.Freeform)
		angle := f.InteriorAngle(at.node)
		if it.Role == table.Post {
			angle = 2*math.Pi - angle
		}
		return fmt.Sprintf("Node %d at (%.6g, %.6g) %s, interior angle %.6g°. Pull from here for a distance.", at.node+1, at.at.X, at.at.Y, u, deg(angle))
	case onWall:
		return fmt.Sprintf("%s at s = %.6g %s. Pull from here for a distance.", radiusWords(t, at.s), at.s, u)
	}
	return "Pull from one place to another for a distance; point at the wall for its radius, at a node for its angle."
}

// radiusWords are the radius of curvature of the wall at s.
func radiusWords(t *table.Table, s float64) string {
	k := t.At(s).Curvature
	switch u := t.Design().Unit.String(); {
	case math.IsInf(k, 0) || math.IsNaN(k):
		return "A cusp"
	case k == 0:
		return "Straight wall"
	case k > 0:
		return fmt.Sprintf("Focusing, radius %.6g %s", 1/k, u)
	default:
		return fmt.Sprintf("Dispersing, radius %.6g %s", -1/k, u)
	}
}

func deg(angle float64) float64 { return angle * 180 / math.Pi }
