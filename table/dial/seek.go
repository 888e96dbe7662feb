package dial

import (
	"fmt"
	"math"

	"cavitywright/table"
	"cavitywright/table/param"
	"cavitywright/table/shape"
	"cavitywright/table/wall"

	"gonum.org/v1/gonum/spatial/r2"
)

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
	changed := func(s shape.Shape) (table.Design, error) {
		items := append([]table.Item(nil), of.Items...)
		items[d.Of].Shape = s
		of.Items = items
		return of, nil
	}
	node, stands := f.Nodes()[d.Node], of.Items[d.Of].Place
	if d.Name == rounding.Name {
		if node.Joint != shape.Corner {
			return s, 0, nil, &Unknown{d.String(), "the node is no corner, so that nothing rounds it"}
		}
		return rounding, node.Fillet * stands.Scale, func(v float64) (table.Design, error) {
			return changed(f.SetFillet(d.Node, v/stands.Scale))
		}, nil
	}
	s = place[0]
	at := stands.Apply(node.At)
	value = at.X
	if d.Name == "y" {
		s, value = place[1], at.Y
	}
	return s, value, func(v float64) (table.Design, error) {
		to := r2.Vec{X: v, Y: at.Y}
		if d.Name == "y" {
			to = r2.Vec{X: at.X, Y: v}
		}
		return changed(f.MoveNode(d.Node, stands.Back(to)))
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
	put := func(from, to float64) (table.Design, error) {
		return changed(func(c *table.Coat) error { c.From, c.To = from, to; return nil })
	}
	switch d.Name {
	case "from":
		return span[0], c.From, func(v float64) (table.Design, error) { return put(v, c.To) }, nil
	case "to":
		return span[1], c.To, func(v float64) (table.Design, error) { return put(c.From, v) }, nil
	case "at":
		s, wide, middle := span[2], c.To-c.From, (c.From+c.To)/2
		s.Lo, s.Hi = math.Min(wide/2, middle), math.Max(1-wide/2, middle)
		return s, middle, func(v float64) (table.Design, error) {
			from := math.Max(0, v-wide/2) // rounding must not take it off its side
			return put(from, math.Min(1, from+wide))
		}, nil
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
