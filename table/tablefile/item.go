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
	itemKeys = []string{"role", "shape", "at", "angle", "scale", "parameters", "nodes"}
	nodeKeys = []string{"at", "joint", "in", "out", "span", "bulge"}

	roleWords  = []string{table.Wall: "wall", table.Post: "obstacle"}
	jointWords = []string{shape.Corner: "corner", shape.Smooth: "smooth"}
	spanWords  = []string{shape.Straight: "straight", shape.Bowed: "bowed", shape.Curved: "curved"}
)

// freeform is the word for a wall of nodes; all other shapes are in the
// catalogue.
const freeform = "freeform"

// mostBulge is the greatest bulge of an arc that a free wall keeps: 356 degrees
// of a circle.
const mostBulge = 60

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
	kind, nodes := "", []shape.Node(nil)
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
			nodes = c.nodeList()
		}
	}
	c.need(at, seen, "role", "shape")
	it.Shape = c.shape(kind, at, inner, seen, list, nodes)
	return it
}

// shape makes the shape of an item at the place at, with its parameters at the
// place inner.
func (c *cursor) shape(kind string, at, inner mark, s seen, list []given, nodes []shape.Node) shape.Shape {
	if kind == freeform {
		c.need(at, s, "nodes")
		c.surplus(at, s, "parameters", "a free wall has nodes")
		if c.err != nil {
			return nil
		}
		return shape.NewFreeform(nodes)
	}
	c.need(at, s, "parameters")
	c.surplus(at, s, "nodes", "only a freeform has nodes")
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
		case n.Bulge != 0 && n.Span != shape.Bowed:
			c.idle(marks[i], "bulge", "the span from here is not bowed")
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
		}
	}
	c.need(at, seen, "at")
	return n
}
