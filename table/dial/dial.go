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
//	coat2.from          of coat 2: from, to (fractions of its side), or a parameter of its law
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

	"gonum.org/v1/gonum/spatial/r2"
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
	nodeText = regexp.MustCompile(`^(\d{1,6})\.node(\d{1,6})\.([xy])$`)
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
}

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
			for k := range s.Nodes() {
				all = append(all, Dial{Node, i, k, "x"}, Dial{Node, i, k, "y"})
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

// seek finds the number: its description, its value, and how it is set.
func (d Dial) seek(of table.Design) (s param.Spec, value float64, set func(float64) (table.Design, error), err error) {
	switch d.Part {
	case Item:
		return d.seekItem(of)
	case Node:
		return d.seekNode(of)
	case Coat:
		return d.seekCoat(of)
	}
	s, value, remake, ok := seekLaw(of.Bare, d.Name)
	if !ok {
		return s, 0, nil, &Unknown{d.String(), "the bare wall's law has no such parameter"}
	}
	return s, value, func(v float64) (table.Design, error) {
		of.Bare, err = remake(v)
		return of, err
	}, nil
}

func (d Dial) seekItem(of table.Design) (s param.Spec, value float64, set func(float64) (table.Design, error), err error) {
	if d.Of < 0 || d.Of >= len(of.Items) {
		return s, 0, nil, &Unknown{d.String(), fmt.Sprintf("the table has %d items", len(of.Items))}
	}
	changed := func(change func(*table.Item) error) (table.Design, error) {
		items := append([]table.Item(nil), of.Items...)
		if err := change(&items[d.Of]); err != nil {
			return table.Design{}, err
		}
		of.Items = items
		return of, nil
	}
	it := of.Items[d.Of]
	if i, ok := d.param(of); ok {
		f := it.Shape.(shape.Figure)
		return f.Family().Specs[i], f.Values()[i], func(v float64) (table.Design, error) {
			return changed(func(it *table.Item) error {
				g, err := f.With(i, v)
				it.Shape = g
				return err
			})
		}, nil
	}
	for i, s := range place {
		if s.Name == d.Name {
			at := func(it *table.Item) *float64 {
				return []*float64{&it.Place.Shift.X, &it.Place.Shift.Y, &it.Place.Angle, &it.Place.Scale}[i]
			}
			return s, *at(&it), func(v float64) (table.Design, error) {
				return changed(func(it *table.Item) error { *at(it) = v; return nil })
			}, nil
		}
	}
	return s, 0, nil, &Unknown{d.String(), fmt.Sprintf("the %s has no such parameter", it.Shape.Kind())}
}

func (d Dial) seekNode(of table.Design) (s param.Spec, value float64, set func(float64) (table.Design, error), err error) {
	if d.Of < 0 || d.Of >= len(of.Items) {
		return s, 0, nil, &Unknown{d.String(), fmt.Sprintf("the table has %d items", len(of.Items))}
	}
	f, is := of.Items[d.Of].Shape.(shape.Freeform)
	if !is || d.Node < 0 || d.Node >= len(f.Nodes()) {
		return s, 0, nil, &Unknown{d.String(), "the item has no such node"}
	}
	s = place[0]
	at := of.Items[d.Of].Place.Apply(f.Nodes()[d.Node].At)
	value = at.X
	if d.Name == "y" {
		s, value = place[1], at.Y
	}
	return s, value, func(v float64) (table.Design, error) {
		to := r2.Vec{X: v, Y: at.Y}
		if d.Name == "y" {
			to = r2.Vec{X: at.X, Y: v}
		}
		items := append([]table.Item(nil), of.Items...)
		it := &items[d.Of]
		it.Shape = f.MoveNode(d.Node, it.Place.Back(to))
		of.Items = items
		return of, nil
	}, nil
}

func (d Dial) seekCoat(of table.Design) (s param.Spec, value float64, set func(float64) (table.Design, error), err error) {
	if d.Of < 0 || d.Of >= len(of.Coats) {
		return s, 0, nil, &Unknown{d.String(), fmt.Sprintf("the table has %d coats", len(of.Coats))}
	}
	changed := func(change func(*table.Coat) error) (table.Design, error) {
		coats := append([]table.Coat(nil), of.Coats...)
		if err := change(&coats[d.Of]); err != nil {
			return table.Design{}, err
		}
		of.Coats = coats
		return of, nil
	}
	c := of.Coats[d.Of]
	for i, s := range span {
		if s.Name == d.Name {
			at := func(c *table.Coat) *float64 { return []*float64{&c.From, &c.To}[i] }
			return s, *at(&c), func(v float64) (table.Design, error) {
				return changed(func(c *table.Coat) error { *at(c) = v; return nil })
			}, nil
		}
	}
	s, value, remake, ok := seekLaw(c.Law, d.Name)
	if !ok {
		return s, 0, nil, &Unknown{d.String(), "the coat's law has no such parameter"}
	}
	return s, value, func(v float64) (table.Design, error) {
		return changed(func(c *table.Coat) (err error) {
			c.Law, err = remake(v)
			return err
		})
	}, nil
}

// seekLaw finds a parameter of a law.
func seekLaw(l wall.Law, name string) (s param.Spec, value float64, remake func(float64) (wall.Law, error), ok bool) {
	for i, s := range specs(l) {
		if s.Name == name {
			return s, l.Values()[i], func(v float64) (wall.Law, error) {
				values := append(param.Values(nil), l.Values()...)
				values[i] = v
				return wall.Make(l.Name(), values)
			}, true
		}
	}
	return s, 0, nil, false
}
