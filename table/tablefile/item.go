package tablefile

import (
	"math"
	"slices"

	"cavitywright/table"
	"cavitywright/table/plane"
	"cavitywright/table/shape"

	"gonum.org/v1/gonum/spatial/r2"
)

var (
	itemKeys = []string{"role", "shape", "at", "angle", "scale", "parameters", "nodes", "symmetry"}
	nodeKeys = []string{"at", "joint", "in", "out", "span", "bulge", "ratio", "tilt", "fillet"}
	foldKeys = []string{"fold", "mirror", "centre"}

	roleWords  = []string{table.Wall: "wall", table.Post: "obstacle"}
	jointWords = []string{shape.Corner: "corner", shape.Smooth: "smooth", shape.Fair: "fair"}
	spanWords  = []string{shape.Straight: "straight", shape.Bowed: "bowed", shape.Curved: "curved", shape.Elliptic: "elliptic"}
)

// freeform is the word for a wall of nodes; all other shapes are in the
// catalogue.
const freeform = "freeform"

// mostBulge is the greatest bulge of an arc that a free wall keeps: 356 degrees
// of a circle.
const mostBulge = 60

// mostFold is the greatest order of a rotation that a free wall keeps, leastRatio
// the least ratio of the axes of an ellipse's arc (the greatest is its inverse),
// mostFillet the greatest radius of one.
const (
	mostFold   = 64
	leastRatio = 0.01
	mostFillet = 1e9
)

func shapeWords() []string {
	var words []string
	for _, k := range shape.Catalogue() {
		words = append(words, k.Name)
	}
	return append(words, freeform)
}

func (c *cursor) item() table.Item {
	at, seen := c.here(), seen{}
	it := table.Item{Place: plane.Identity()}
	inner, list := at, []given(nil)
	kind, free := "", freeWall{}
	for key := range c.keys(itemKeys...) {
		seen.add(key)
		switch key {
		case "role":
			it.Role = table.Role(c.word(roleWords))
		case "shape":
			kind = shapeWords()[c.word(shapeWords())]
		case "at":
			it.Place.Shift = c.point()
		case "angle":
			it.Place.Angle = c.anyNumber()
		case "scale":
			it.Place.Scale = c.number(math.SmallestNonzeroFloat64, math.MaxFloat64)
		case "parameters":
			inner = c.here()
			for name := range c.keys() {
				list = append(list, c.given(name))
			}
		case "nodes":
			free.nodes = c.nodeList()
		case "symmetry":
			free.fold = c.here()
			free.symmetry = c.symmetry()
		}
	}
	c.need(at, seen, "role", "shape")
	it.Shape = c.shape(kind, at, inner, seen, list, free)
	return it
}

// freeWall is what a file says of a free wall.
type freeWall struct {
	nodes    []shape.Node
	symmetry shape.Symmetry
	fold     mark // where the symmetry stands
}

// shape makes the shape of an item at the place at, with its parameters at the
// place inner.
func (c *cursor) shape(kind string, at, inner mark, s seen, list []given, free freeWall) shape.Shape {
	if kind == freeform {
		c.need(at, s, "nodes")
		c.surplus(at, s, "parameters", "a free wall has nodes")
		if c.err != nil {
			return nil
		}
		if free.symmetry.None() {
			return shape.NewFreeform(free.nodes)
		}
		f, ok := shape.Symmetric(free.nodes, free.symmetry)
		if !ok && shape.NewFreeform(free.nodes).Sound() {
			c.refuse(free.fold, "take it out, or set the nodes right", "is not that of the nodes")
		}
		return f
	}
	c.need(at, s, "parameters")
	c.surplus(at, s, "nodes", "only a freeform has nodes")
	c.surplus(at, s, "symmetry", "only a freeform keeps one")
	if c.err != nil {
		return nil
	}
	v := c.values(inner, kind, shape.Find(kind).Specs, list)
	if c.err != nil {
		return nil
	}
	f, err := shape.New(kind, v)
	if err != nil {
		c.refuse(inner, "give it other values", "makes no %s", kind)
		return nil
	}
	return f
}

// surplus refuses a record that has the key.
func (c *cursor) surplus(at mark, s seen, key, reason string) {
	if s[key] {
		at.path = joined(at.path, key)
		c.refuse(at, "take it out", "does not belong here, as %s", reason)
	}
}

// nodeList is the nodes of a free wall. What a file says of a node and the wall
// would not use is refused: it is a slip of the pen.
func (c *cursor) nodeList() []shape.Node {
	var nodes []shape.Node
	var marks []mark
	for range c.list(mostNodes-c.nodes, "nodes") {
		marks = append(marks, c.here())
		nodes = append(nodes, c.node())
	}
	c.nodes += len(nodes)
	none := r2.Vec{}
	for i, n := range nodes {
		before := nodes[(i+len(nodes)-1)%len(nodes)]
		switch {
		case n.Bulge != 0 && n.Span != shape.Bowed && n.Span != shape.Elliptic:
			c.idle(marks[i], "bulge", "the span from here is not bowed")
		case n.Ratio != 0 && n.Span != shape.Elliptic:
			c.idle(marks[i], "ratio", "the span from here is not elliptic")
		case n.Tilt != 0 && n.Span != shape.Elliptic:
			c.idle(marks[i], "tilt", "the span from here is not elliptic")
		case n.Fillet != 0 && n.Joint != shape.Corner:
			c.idle(marks[i], "fillet", "the joint is no corner")
		case n.Out != none && n.Span != shape.Curved:
			c.idle(marks[i], "out", "the span from here is not curved")
		case n.In != none && before.Span != shape.Curved:
			c.idle(marks[i], "in", "the span to here is not curved")
		}
	}
	return slices.Clip(nodes)
}

func (c *cursor) idle(at mark, key, reason string) {
	at.path = joined(at.path, key)
	c.refuse(at, "take it out, or change the span", "is not used, as %s", reason)
}

func (c *cursor) node() shape.Node {
	at, seen, n := c.here(), seen{}, shape.Node{}
	for key := range c.keys(nodeKeys...) {
		seen.add(key)
		switch key {
		case "at":
			n.At = c.point()
		case "joint":
			n.Joint = shape.Joint(c.word(jointWords))
		case "in":
			n.In = c.point()
		case "out":
			n.Out = c.point()
		case "span":
			n.Span = shape.SpanKind(c.word(spanWords))
		case "bulge":
			n.Bulge = c.number(-mostBulge, mostBulge)
		case "ratio":
			n.Ratio = c.number(leastRatio, 1/leastRatio)
		case "tilt":
			n.Tilt = c.anyNumber()
		case "fillet":
			n.Fillet = c.number(0, mostFillet)
		}
	}
	c.need(at, seen, "at")
	return n
}

// symmetry is what a free wall keeps: the order of a rotation, the direction of
// a mirror line (radians), or both, about a centre.
func (c *cursor) symmetry() shape.Symmetry {
	at, seen, s := c.here(), seen{}, shape.Symmetry{}
	for key := range c.keys(foldKeys...) {
		seen.add(key)
		switch key {
		case "fold":
			s.Fold = int(c.whole(2, mostFold))
		case "mirror":
			s.Mirror, s.Axis = true, c.anyNumber()
		case "centre":
			s.Centre = c.point()
		}
	}
	if s.None() {
		c.refuse(at, `write in "fold", "mirror" or both`, "asks for nothing")
	}
	return s
}
