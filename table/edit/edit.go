// Package edit holds the changes a person can make to a table, each a Command
// from one immutable table to the next. A refused command changes nothing and
// says why with the error of table.New or a sentence of its own. There are no
// pointers, windows or files here.
package edit

import (
	"fmt"
	"slices"

	"cavitywright/table"
	"cavitywright/table/plane"
	"cavitywright/table/shape"

	"gonum.org/v1/gonum/spatial/r2"
)

// Command is one change.
type Command interface {
	// Apply is the table after the change.
	Apply(t *table.Table) (*table.Table, error)
	// Title names the change in the undo menu, "move the disc".
	Title() string
}

// remade applies f to a copy of the design, whose lists may be changed.
func remade(t *table.Table, f func(d *table.Design) error) (*table.Table, error) {
	d := t.Design()
	d.Items = slices.Clone(d.Items)
	d.Coats = slices.Clone(d.Coats)
	d.Study.Launches = slices.Clone(d.Study.Launches)
	if err := f(&d); err != nil {
		return nil, err
	}
	return table.New(d)
}

// restudied applies f to a copy of the study. The wall is shared with the table
// before, so that what was measured on the one is known to hold for the other.
func restudied(t *table.Table, f func(s *table.Study)) (*table.Table, error) {
	d := t.Design()
	d.Study.Launches = slices.Clone(d.Study.Launches)
	f(&d.Study)
	return table.New(d)
}

// onItem applies f to a copy of item i.
func onItem(t *table.Table, i int, f func(it *table.Item) error) (*table.Table, error) {
	return remade(t, func(d *table.Design) error {
		if i < 0 || i >= len(d.Items) {
			return fmt.Errorf("there is no item %d", i+1)
		}
		return f(&d.Items[i])
	})
}

// Place adds an item. A wall replaces the wall that is there, together with
// what lay on it and the name of the table: it is another table then.
type Place struct{ Item table.Item }

// Title names the change.
func (c Place) Title() string { return "place the " + c.Item.Shape.Kind() }

// Apply adds the item.
func (c Place) Apply(t *table.Table) (*table.Table, error) {
	return remade(t, func(d *table.Design) error {
		if c.Item.Role == table.Wall && hasWall(c.Item.Shape) {
			for i := len(d.Items) - 1; i >= 0; i-- {
				if d.Items[i].Role == table.Wall && hasWall(d.Items[i].Shape) {
					drop(d, i)
				}
			}
			d.Items = slices.Insert(d.Items, 0, c.Item)
			d.Name, d.Notes = "", ""
			for k := range d.Coats {
				d.Coats[k].Item++
			}
			return nil
		}
		d.Items = append(d.Items, c.Item)
		return nil
	})
}

func hasWall(s shape.Shape) bool {
	l, err := s.Loops()
	return err != nil || len(l) > 0 && l[0].Side == shape.Outer
}

// drop takes item i and its coats out of the design.
func drop(d *table.Design, i int) {
	d.Items = slices.Delete(d.Items, i, i+1)
	d.Coats = slices.DeleteFunc(d.Coats, func(c table.Coat) bool { return c.Item == i })
	for k := range d.Coats {
		if d.Coats[k].Item > i {
			d.Coats[k].Item--
		}
	}
}

// Remove takes an item out, with its coats.
type Remove struct{ Item int }

// Title names the change.
func (c Remove) Title() string { return "take out an item" }

// Apply takes the item out.
func (c Remove) Apply(t *table.Table) (*table.Table, error) {
	return remade(t, func(d *table.Design) error {
		if c.Item < 0 || c.Item >= len(d.Items) {
			return fmt.Errorf("there is no item %d", c.Item+1)
		}
		if len(d.Items) == 1 {
			return fmt.Errorf("the last item stays; draw or place another first")
		}
		drop(d, c.Item)
		return nil
	})
}

// Shift puts an item at another place.
type Shift struct {
	Item  int
	Place plane.Similarity
}

// Title names the change.
func (c Shift) Title() string { return "move a shape" }

// Apply moves the item.
func (c Shift) Apply(t *table.Table) (*table.Table, error) {
	return onItem(t, c.Item, func(it *table.Item) error { it.Place = c.Place; return nil })
}

// Drag moves a handle of an item to a point of the table.
type Drag struct {
	Item, Handle int
	To           r2.Vec
}

// Title names the change.
func (c Drag) Title() string { return "drag a handle" }

// Apply moves the handle.
func (c Drag) Apply(t *table.Table) (*table.Table, error) {
	return onItem(t, c.Item, func(it *table.Item) error {
		it.Shape = it.Shape.Moved(c.Handle, it.Place.Back(c.To))
		return nil
	})
}

// SetValue sets a parameter of a figure.
type SetValue struct {
	Item, Param int
	Value       float64
}

// Title names the change.
func (c SetValue) Title() string { return "set a value" }

// Apply sets the parameter.
func (c SetValue) Apply(t *table.Table) (*table.Table, error) {
	return onItem(t, c.Item, func(it *table.Item) error {
		f, ok := it.Shape.(shape.Figure)
		if !ok {
			return fmt.Errorf("a free wall has no parameters; set its nodes")
		}
		f, err := f.With(c.Param, c.Value)
		it.Shape = f
		return err
	})
}

// Reshape replaces an item's shape, for changes that the shape itself has
// made: a node more, a span of another kind. Name is what was done.
type Reshape struct {
	Item  int
	Shape shape.Shape
	Name  string
}

// Title names the change.
func (c Reshape) Title() string { return c.Name }

// Apply replaces the shape. Coats stay where they are on the wall, also where
// its sides are others.
func (c Reshape) Apply(t *table.Table) (*table.Table, error) {
	next, err := onItem(t, c.Item, func(it *table.Item) error { it.Shape = c.Shape; return nil })
	coated := slices.ContainsFunc(t.Design().Coats, func(k table.Coat) bool { return k.Item == c.Item })
	if !coated || err == nil && sides(t, c.Item) == sides(next, c.Item) {
		return next, err
	}
	d := t.Design()
	d.Items = slices.Clone(d.Items)
	d.Items[c.Item].Shape = c.Shape
	return reanchored(t, d, c.Item, []int{c.Item})
}

// SetRole makes an item the wall or an obstacle.
type SetRole struct {
	Item int
	Role table.Role
}

// Title names the change.
func (c SetRole) Title() string { return "change what a shape is" }

// Apply sets the role.
func (c SetRole) Apply(t *table.Table) (*table.Table, error) {
	return onItem(t, c.Item, func(it *table.Item) error { it.Role = c.Role; return nil })
}

// SetHead sets the name, the notes and the unit. The numbers of lengths stay
// as they are: a change of unit is a change of scale.
type SetHead struct {
	Name, Notes string
	Unit        table.Unit
}

// Title names the change.
func (c SetHead) Title() string { return "name, notes or unit" }

// Apply sets the head.
func (c SetHead) Apply(t *table.Table) (*table.Table, error) {
	return remade(t, func(d *table.Design) error {
		d.Name, d.Notes, d.Unit = c.Name, c.Notes, c.Unit
		return nil
	})
}

// Launch adds launches to the study.
type Launch struct{ New []table.Launch }

// Title names the change.
func (c Launch) Title() string { return "launch" }

// Apply adds the launches.
func (c Launch) Apply(t *table.Table) (*table.Table, error) {
	return restudied(t, func(s *table.Study) { s.Launches = append(s.Launches, c.New...) })
}

// SetStudy replaces the study. Name is what was changed in it.
type SetStudy struct {
	Study table.Study
	Name  string
}

// Title names the change.
func (c SetStudy) Title() string { return c.Name }

// Apply replaces the study.
func (c SetStudy) Apply(t *table.Table) (*table.Table, error) {
	return restudied(t, func(s *table.Study) {
		*s = c.Study
		s.Launches = slices.Clone(c.Study.Launches)
	})
}

// SetCoats replaces the coats.
type SetCoats struct{ Coats []table.Coat }

// Title names the change.
func (c SetCoats) Title() string { return "coats of the wall" }

// Apply replaces the coats.
func (c SetCoats) Apply(t *table.Table) (*table.Table, error) {
	return remade(t, func(d *table.Design) error {
		d.Coats = slices.Clone(c.Coats)
		return nil
	})
}
