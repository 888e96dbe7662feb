package edit

import (
	"slices"

	"cavitywright/table"
	"cavitywright/table/wall"
)

// Coating replaces the law of the bare wall and the coats that lie on it. Name
// is what was done. A nil Bare is a mirror.
type Coating struct {
	Bare  wall.Law
	Coats []table.Coat
	Name  string
}

// Title names the change.
func (c Coating) Title() string { return c.Name }

// Apply replaces them.
func (c Coating) Apply(t *table.Table) (*table.Table, error) {
	return remade(t, func(d *table.Design) error {
		d.Bare, d.Coats = c.Bare, slices.Clone(c.Coats)
		if d.Bare == (wall.Mirror{}) {
			d.Bare = nil
		}
		return nil
	})
}
