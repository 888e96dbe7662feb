package edit

import (
	"fmt"
	"slices"

	"cavitywright/table"
	"cavitywright/table/plane"
	"cavitywright/table/shape"
)

// Convert makes an item free walls that lie where it does: exactly where it is
// made of lines, arcs of circles and ellipses and cubics, else within Within (a
// length). An item of several loops becomes as many items.
type Convert struct {
	Item   int
	Within float64
}

// Title names the change.
func (c Convert) Title() string { return "turn into a free wall" }

// Converted are the free walls that Convert would make of an item, in the item's
// own coordinates, their errors in the table's.
func Converted(t *table.Table, c Convert) ([]shape.Freed, error) {
	items := t.Design().Items
	if c.Item < 0 || c.Item >= len(items) {
		return nil, fmt.Errorf("there is no item %d", c.Item+1)
	}
	it := items[c.Item]
	if _, is := it.Shape.(shape.Freeform); is {
		return nil, fmt.Errorf("it is a free wall already")
	}
	if !(c.Within > 0) {
		return nil, fmt.Errorf("the greatest distance from the shape must be above 0; give a length")
	}
	list, err := shape.Free(it.Shape, c.Within/it.Place.Scale)
	for i := range list {
		list[i].Error *= it.Place.Scale
	}
	return list, err
}

// Apply makes the free walls. Coats stay where they are.
func (c Convert) Apply(t *table.Table) (*table.Table, error) {
	list, err := Converted(t, c)
	if err != nil {
		return nil, err
	}
	d := t.Design()
	d.Items = slices.Clone(d.Items)
	it := d.Items[c.Item]
	var into []int
	for i, w := range list {
		role := it.Role
		if w.Side == shape.Obstacle {
			role = table.Post
		}
		n := table.Item{Shape: w.Wall, Place: it.Place, Role: role}
		if i == 0 {
			d.Items[c.Item] = n
			into = append(into, c.Item)
			continue
		}
		into = append(into, len(d.Items))
		d.Items = append(d.Items, n)
	}
	return reanchored(t, d, c.Item, into)
}

// BecomeWall makes an item the wall in place of the one that is there, which
// goes with its coats.
type BecomeWall struct{ Item int }

// Title names the change.
func (c BecomeWall) Title() string { return "make it the wall" }

// Apply makes the item the wall.
func (c BecomeWall) Apply(t *table.Table) (*table.Table, error) {
	return remade(t, func(d *table.Design) error {
		if c.Item < 0 || c.Item >= len(d.Items) {
			return fmt.Errorf("there is no item %d", c.Item+1)
		}
		d.Items[c.Item].Role = table.Wall
		for i := len(d.Items) - 1; i >= 0; i-- {
			if i != c.Item && d.Items[i].Role == table.Wall && hasWall(d.Items[i].Shape) {
				drop(d, i)
			}
		}
		return nil
	})
}

// Arrange puts items at other places, all at once. Name is what was done.
type Arrange struct {
	Items  []int
	Places []plane.Similarity
	Name   string
}

// Title names the change.
func (c Arrange) Title() string { return c.Name }

// Apply moves the items.
func (c Arrange) Apply(t *table.Table) (*table.Table, error) {
	return remade(t, func(d *table.Design) error {
		for k, i := range c.Items {
			if i < 0 || i >= len(d.Items) {
				return fmt.Errorf("there is no item %d", i+1)
			}
			d.Items[i].Place = c.Places[k]
		}
		return nil
	})
}

// Add adds items, all at once.
type Add struct{ Items []table.Item }

// Title names the change.
func (c Add) Title() string { return "add a copy" }

// Apply adds the items.
func (c Add) Apply(t *table.Table) (*table.Table, error) {
	return remade(t, func(d *table.Design) error {
		d.Items = append(d.Items, c.Items...)
		return nil
	})
}
