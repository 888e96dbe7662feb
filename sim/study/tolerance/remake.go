package tolerance

import (
	"math"

	"cavitywright/table"
	"cavitywright/table/edit"
	"cavitywright/table/outline"
	"cavitywright/table/plane"
	"cavitywright/table/shape"

	"gonum.org/v1/gonum/spatial/r2"
)

// free is the distance, over the size of the table, within which a wall of other
// curves becomes free: far below any error of a workshop.
const free = 1e-8

// parted is the table with every loop an item of its own; items of several loops
// become free walls.
func parted(t *table.Table) (*table.Table, error) {
	for i := range len(t.Design().Items) {
		loops, err := t.Design().Items[i].Shape.Loops()
		if err != nil {
			return nil, err
		}
		if len(loops) < 2 {
			continue
		}
		if t, err = (edit.Convert{Item: i, Within: free * plane.Diagonal(t.Bounds())}).Apply(t); err != nil {
			return nil, err
		}
	}
	return t, nil
}

// remade is the table with a free wall in place of each loop, of which each must
// be an item of its own; coats stay where they are on the wall.
func remade(t *table.Table, walls []shape.Freeform) (*table.Table, error) {
	d := t.Design()
	whole := true
	for _, c := range d.Coats {
		whole = whole && c.Side == table.AllSides
	}
	if whole { // coats on whole items need no places sought
		items := append([]table.Item(nil), d.Items...)
		for li, w := range walls {
			at := t.Loops()[li]
			items[at.Item].Shape, items[at.Item].Place = w, plane.Identity()
			if at.Side == shape.Obstacle {
				items[at.Item].Role = table.Post
			}
		}
		d.Items = items
		return table.New(d)
	}
	// One item at a time moves the loops in the list; their items stay.
	of := make([]int, len(walls))
	for li := range walls {
		of[li] = t.Loops()[li].Item
	}
	for li, w := range walls {
		place := t.Design().Items[of[li]].Place
		var err error
		if t, err = (edit.Reshape{Item: of[li], Shape: placedBack(w, place)}).Apply(t); err != nil {
			return nil, err
		}
	}
	return t, nil
}

// placedBack is a wall in the coordinates of an item that stands at a place.
func placedBack(w shape.Freeform, at plane.Similarity) shape.Freeform {
	if at == plane.Identity() {
		return w
	}
	list := append([]shape.Node(nil), w.Nodes()...)
	origin := at.Back(r2.Vec{})
	for i := range list {
		n := &list[i]
		n.At = at.Back(n.At)
		n.In, n.Out = r2.Sub(at.Back(n.In), origin), r2.Sub(at.Back(n.Out), origin)
		n.Fillet /= at.Scale
		if n.Span == shape.Elliptic {
			n.Tilt -= at.Angle
		}
	}
	return shape.NewFreeform(list)
}

// etched is the table after a uniform shift of its wall, corners that open
// rounded about where they were, and its error.
func etched(t *table.Table, offset float64) (*table.Table, float64, error) {
	size := plane.Diagonal(t.Bounds())
	o, err := outline.Trace(t, outline.Options{Form: outline.Curves, Bias: offset, ChordError: math.Max(1e-3*math.Abs(offset), 1e-9*size)})
	if err != nil {
		return nil, 0, err
	}
	walls := make([]shape.Freeform, len(o.Paths))
	for i := range o.Paths {
		walls[i] = walled(&o.Paths[i])
	}
	t, err = remade(t, walls)
	return t, o.Achieved, err
}

// smoothKink is the kink (radians) up to which two steps of a traced wall meet
// smoothly.
const smoothKink = 1e-6

// walled is a closed path as a free wall.
func walled(p *outline.Path) shape.Freeform {
	n := len(p.Steps)
	list := make([]shape.Node, n)
	leaves, arrives := make([]r2.Vec, n), make([]r2.Vec, n)
	at := p.Start
	for i, s := range p.Steps {
		k, next := &list[i], &list[(i+1)%n]
		k.At = at
		chord := r2.Sub(s.To, at)
		leaves[i], arrives[i] = chord, chord
		switch s.Kind {
		case outline.Arc:
			k.Span, k.Bulge = shape.Bowed, s.Bulge
			half := 2 * math.Atan(s.Bulge)
			leaves[i], arrives[i] = r2.Rotate(chord, -half, r2.Vec{}), r2.Rotate(chord, half, r2.Vec{})
		case outline.Oval:
			k.Span, k.Bulge = shape.Elliptic, math.Tan(0.25*s.Sweep)
			k.Ratio, k.Tilt = s.Minor/s.Radius, s.Tilt
			leaves[i], arrives[i] = ovalFlow(s, s.From), ovalFlow(s, s.From+s.Sweep)
		case outline.Cubic:
			k.Span, k.Out, next.In = shape.Curved, r2.Sub(s.C[0], at), r2.Sub(s.C[1], s.To)
			leaves[i], arrives[i] = k.Out, r2.Scale(-1, next.In)
		}
		at = s.To
	}
	for i := range list {
		if math.Abs(plane.Angle(arrives[(i+n-1)%n], leaves[i])) < smoothKink {
			list[i].Joint = shape.Smooth
		}
	}
	return shape.NewFreeform(list)
}

// ovalFlow is the direction of an arc of an ellipse at an eccentric angle.
func ovalFlow(s outline.Step, angle float64) r2.Vec {
	sin, cos := math.Sincos(angle)
	v := r2.Rotate(r2.Vec{X: -s.Radius * sin, Y: s.Minor * cos}, s.Tilt, r2.Vec{})
	return r2.Scale(math.Copysign(1, s.Sweep), v)
}

// tooled is the table as a round tool of a radius leaves it: corners that it
// does not reach into are rounded by it. Bends that are tighter than the tool
// stay as they are.
func tooled(t *table.Table, radius float64) (*table.Table, error) {
	if radius <= 0 || !cornered(t) {
		return t, nil
	}
	size := plane.Diagonal(t.Bounds())
	for i := range len(t.Design().Items) {
		if !inward(t, i) {
			continue
		}
		if _, is := t.Design().Items[i].Shape.(shape.Freeform); is {
			continue
		}
		var err error
		if t, err = (edit.Convert{Item: i, Within: free * size}).Apply(t); err != nil {
			return nil, err
		}
	}
	for i, it := range t.Design().Items {
		f, is := it.Shape.(shape.Freeform)
		if !is || !inward(t, i) {
			continue
		}
		list := append([]shape.Node(nil), f.Nodes()...)
		for k := range list {
			n := &list[k]
			if n.Joint == shape.Corner && turnAt(t, i, it.Place.Apply(n.At), free*10*size) > 0 {
				n.Fillet = math.Max(n.Fillet, radius/it.Place.Scale)
			}
		}
		var err error
		if t, err = (edit.Reshape{Item: i, Shape: shape.NewFreeform(list)}).Apply(t); err != nil {
			return nil, err
		}
	}
	return t, nil
}

// inward reports whether an item has a corner into which a tool does not reach.
func inward(t *table.Table, item int) bool {
	for _, j := range t.Joints() {
		if j.Continuity == table.Corner && j.Turn > 0 && t.Pieces()[j.Piece].Item == item {
			return true
		}
	}
	return false
}

// turnAt is the turn of the corner of an item at a place, 0 where there is none.
func turnAt(t *table.Table, item int, at r2.Vec, near float64) float64 {
	for _, j := range t.Joints() {
		if t.Pieces()[j.Piece].Item == item && j.Continuity == table.Corner && r2.Norm(r2.Sub(j.At, at)) <= near {
			return j.Turn
		}
	}
	return 0
}
