// Package dial names one number of a design that can be turned: a parameter of
// a shape, where an item stands, a coordinate of a node, the range or the law of
// a coat, the law of the bare wall. Sweeps, tolerances, searches, films and the
// following of orbits all turn dials; none of them knows shapes or coats.
//
// A dial is written as a place, a point and a name:
//
//	eps                 the parameter of the only item that has one of this name
//	1.eps, 1.x          of item 1: a parameter; x, y (table's unit), turn (radians), scale
//	1.node3.x           of item 1, a free wall: a coordinate of its node 3
//	1.node3.fillet      of its node 3, a corner: the radius that rounds it
//	coat2.from          of coat 2: from, to (fractions of its side), or a parameter of its law
//	coat2.at            of coat 2: its middle, which slides it at the width that it has
//	bare.index          a parameter of the law of the bare wall
//
// Items, nodes and coats are counted from 1, as a person counts them.
package dial

import (
	"fmt"
	"math"
	"regexp"
	"strconv"
	"strings"

	"cavitywright/table"
	"cavitywright/table/param"
	"cavitywright/table/shape"
	"cavitywright/table/wall"
)

// Part is what of a design a dial belongs to.
type Part uint8

// The parts that have dials.
const (
	Item Part = iota
	Node
	Coat
	Bare
)

// Dial is the name of one number. Of is the item or coat from 0, Node the node
// from 0 where Part is Node.
type Dial struct {
	Part     Part
	Of, Node int
	Name     string
}

// Unknown says that a design has no such dial.
type Unknown struct{ Text, Why string }

func (e *Unknown) Error() string {
	return fmt.Sprintf("There is no number called %q here: %s.", e.Text, e.Why)
}

// String is how the dial is written, with its place always given.
func (d Dial) String() string {
	switch d.Part {
	case Item:
		return fmt.Sprintf("%d.%s", d.Of+1, d.Name)
	case Node:
		return fmt.Sprintf("%d.node%d.%s", d.Of+1, d.Node+1, d.Name)
	case Coat:
		return fmt.Sprintf("coat%d.%s", d.Of+1, d.Name)
	}
	return "bare." + d.Name
}

var (
	itemText = regexp.MustCompile(`^(\d{1,6})\.([a-z0-9-]+)$`)
	nodeText = regexp.MustCompile(`^(\d{1,6})\.node(\d{1,6})\.(x|y|fillet)$`)
	coatText = regexp.MustCompile(`^coat(\d{1,6})\.([a-z0-9-]+)$`)
	bareText = regexp.MustCompile(`^bare\.([a-z0-9-]+)$`)
)

// Find is the dial of a design that a text names. The error is an *Unknown.
func Find(d table.Design, text string) (Dial, error) {
	one := func(s string) int { n, _ := strconv.Atoi(s); return n - 1 }
	var found Dial
	switch {
	case nodeText.MatchString(text):
		m := nodeText.FindStringSubmatch(text)
		found = Dial{Node, one(m[1]), one(m[2]), m[3]}
	case itemText.MatchString(text):
		m := itemText.FindStringSubmatch(text)
		found = Dial{Part: Item, Of: one(m[1]), Name: m[2]}
	case coatText.MatchString(text):
		m := coatText.FindStringSubmatch(text)
		found = Dial{Part: Coat, Of: one(m[1]), Name: m[2]}
	case bareText.MatchString(text):
		found = Dial{Part: Bare, Name: bareText.FindStringSubmatch(text)[1]}
	default:
		return bareName(d, text)
	}
	if _, err := found.Value(d); err != nil {
		return Dial{}, err
	}
	return found, nil
}

// bareName is the dial of the only shape that has a parameter of the name.
func bareName(d table.Design, name string) (Dial, error) {
	var all []Dial
	var names []string
	for _, x := range All(d) {
		names = append(names, x.String())
		if x.Name == name && x.Part == Item && x.own(d) {
			all = append(all, x)
		}
	}
	switch len(all) {
	case 1:
		return all[0], nil
	case 0:
		return Dial{}, &Unknown{name, "it has " + listed(names)}
	}
	return Dial{}, &Unknown{name, fmt.Sprintf("%d shapes have one; write %s for the first", len(all), all[0])}
}

// mostListed bounds the names in a sentence.
const mostListed = 12

func listed(names []string) string {
	if len(names) > mostListed {
		return strings.Join(names[:mostListed], ", ") + fmt.Sprintf(" and %d more", len(names)-mostListed)
	}
	return strings.Join(names, ", ")
}

// own reports whether the dial is a parameter of the item's shape.
func (d Dial) own(of table.Design) bool {
	_, ok := d.param(of)
	return ok
}

// param is the index of the shape's parameter of the dial's name.
func (d Dial) param(of table.Design) (int, bool) {
	if f, is := of.Items[d.Of].Shape.(shape.Figure); is {
		for i, s := range f.Family().Specs {
			if s.Name == d.Name {
				return i, true
			}
		}
	}
	return 0, false
}

// place are the names of where an item stands.
var place = []param.Spec{
	{Name: "x", Unit: param.Length, Lo: -1e6, Hi: 1e6, Description: "where the item stands, along x"},
	{Name: "y", Unit: param.Length, Lo: -1e6, Hi: 1e6, Description: "where the item stands, along y"},
	{Name: "turn", Unit: param.Angle, Lo: -math.Pi, Hi: math.Pi, Description: "by how much it is turned"},
	{Name: "scale", Lo: 1e-3, Hi: 1e3, Default: 1, Description: "by what it is enlarged"},
}

// span are the names of where a coat lies.
var span = []param.Spec{
	{Name: "from", Lo: 0, Hi: 1, Description: "where the coat begins, as a fraction of its side"},
	{Name: "to", Lo: 0, Hi: 1, Default: 1, Description: "where the coat ends, as a fraction of its side"},
	{Name: "at", Lo: 0, Hi: 1, Default: 0.5, Description: "where the middle of the coat lies, as a fraction of its side; its width stays"},
}

// rounding is the name of what rounds a corner.
var rounding = param.Spec{Name: "fillet", Unit: param.Length, Lo: 0, Hi: 1e6, Description: "radius of the arc that rounds the corner, 0 for none"}

// All are the dials of a design, in order.
func All(d table.Design) []Dial {
	var all []Dial
	for i, it := range d.Items {
		switch s := it.Shape.(type) {
		case shape.Figure:
			for _, p := range s.Family().Specs {
				all = append(all, Dial{Part: Item, Of: i, Name: p.Name})
			}
		case shape.Freeform:
			for k, n := range s.Nodes() {
				all = append(all, Dial{Node, i, k, "x"}, Dial{Node, i, k, "y"})
				if n.Joint == shape.Corner {
					all = append(all, Dial{Node, i, k, rounding.Name})
				}
			}
		}
		for _, p := range place {
			all = append(all, Dial{Part: Item, Of: i, Name: p.Name})
		}
	}
	for i, c := range d.Coats {
		for _, p := range append(span[:len(span):len(span)], specs(c.Law)...) {
			all = append(all, Dial{Part: Coat, Of: i, Name: p.Name})
		}
	}
	for _, p := range specs(d.Bare) {
		all = append(all, Dial{Part: Bare, Name: p.Name})
	}
	return all
}

// specs are those of a law; none for a mirror.
func specs(l wall.Law) []param.Spec {
	if l == nil {
		return nil
	}
	for _, k := range wall.Kinds() {
		if k.Name == l.Name() {
			return k.Specs
		}
	}
	return nil
}

// Spec describes the number: unit, range and help.
func (d Dial) Spec(of table.Design) (param.Spec, error) {
	s, _, _, err := d.seek(of)
	return s, err
}

// Value is the number as the design has it. The error is an *Unknown.
func (d Dial) Value(of table.Design) (float64, error) {
	_, v, _, err := d.seek(of)
	return v, err
}

// Turned is the design with the number at another value; the design itself is
// not changed. The error is an *Unknown or a *param.RangeError; whether the
// design is a table yet is for table.New to say.
func (d Dial) Turned(of table.Design, v float64) (table.Design, error) {
	s, _, set, err := d.seek(of)
	if err != nil {
		return table.Design{}, err
	}
	if err := s.Check(v); err != nil {
		return table.Design{}, err
	}
	return set(v)
}
