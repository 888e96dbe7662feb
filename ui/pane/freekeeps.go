package pane

import (
	"math"

	"cavitywright/table"
	"cavitywright/table/edit"
	"cavitywright/table/shape"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"
	"gonum.org/v1/gonum/spatial/r2"
)

// What a free wall keeps while it is drawn and dragged: the choice of its
// symmetry, and the numbers of it.

// kept are the symmetries that can be chosen by name; the centre is the origin
// of the shape.
var kept = []struct {
	name string
	s    shape.Symmetry
}{
	{"no symmetry", shape.Symmetry{}},
	{"mirror left–right", shape.Symmetry{Mirror: true, Axis: -math.Pi / 2}},
	{"mirror up–down", shape.Symmetry{Mirror: true}},
	{"both mirrors", shape.Symmetry{Fold: 2, Mirror: true}},
	{"half turns", shape.Symmetry{Fold: 2}},
	{"third turns", shape.Symmetry{Fold: 3}},
	{"quarter turns", shape.Symmetry{Fold: 4}},
	{"fifth turns", shape.Symmetry{Fold: 5}},
	{"sixth turns", shape.Symmetry{Fold: 6}},
	{"three mirrors", shape.Symmetry{Fold: 3, Mirror: true, Axis: math.Pi / 2}},
	{"four mirrors", shape.Symmetry{Fold: 4, Mirror: true}},
}

func keptNames() []string {
	var names []string
	for _, k := range kept {
		names = append(names, k.name)
	}
	return names
}

// keptIndex is the symmetry's place in the list; -1 for another one.
func keptIndex(s shape.Symmetry) int {
	for i, k := range kept {
		if k.s.None() && s.None() || k.s == s {
			return i
		}
	}
	return -1
}

// symmetries chooses what the wall keeps.
func (v *Values) symmetries(f shape.Freeform) fyne.CanvasObject {
	pick := widget.NewSelect(keptNames(), nil)
	if i := keptIndex(f.Symmetry()); i >= 0 {
		pick.SetSelectedIndex(i)
	} else {
		pick.PlaceHolder = "a symmetry of its own"
	}
	pick.OnChanged = func(string) {
		g, err := f.WithSymmetry(kept[pick.SelectedIndex()].s)
		if err != nil {
			v.desk.Say("The free wall stays as it is: " + err.Error())
			v.Refresh()
			return
		}
		v.lay(edit.Reshape{Item: v.of.item, Shape: g, Name: "symmetry"})
	}
	return container.NewGridWrap(fyne.NewSize(158, 36), pick)
}

// symmetryNumbers are the centre of a symmetry and the direction of its mirror
// line, in the table's coordinates. Typed anew, the part of the wall to the left
// of the line is kept.
func (v *Values) symmetryNumbers(s shape.Symmetry) []freeNumber {
	with := func(f shape.Freeform, change func(s *shape.Symmetry)) shape.Freeform {
		next := f.Symmetry()
		change(&next)
		g, err := f.WithSymmetry(next)
		if err != nil {
			v.desk.Say("The free wall stays as it is: " + err.Error())
			return f
		}
		return g
	}
	axis := func(name string, of func(p *r2.Vec) *float64) freeNumber {
		return freeNumber{lengthSpec(name, -1e6), "symmetry",
			func(f shape.Freeform, it table.Item) float64 {
				p := it.Place.Apply(f.Symmetry().Centre)
				return *of(&p)
			},
			func(f shape.Freeform, it table.Item, x float64) shape.Freeform {
				return with(f, func(s *shape.Symmetry) {
					p := it.Place.Apply(s.Centre)
					*of(&p) = x
					s.Centre = it.Place.Back(p)
				})
			}}
	}
	list := []freeNumber{
		axis("centre x", func(p *r2.Vec) *float64 { return &p.X }),
		axis("centre y", func(p *r2.Vec) *float64 { return &p.Y }),
	}
	if s.Mirror {
		list = append(list, freeNumber{angleSpec("mirror line", -math.Pi, math.Pi), "symmetry",
			func(f shape.Freeform, it table.Item) float64 {
				return math.Remainder(f.Symmetry().Axis+it.Place.Angle, 2*math.Pi)
			},
			func(f shape.Freeform, it table.Item, x float64) shape.Freeform {
				return with(f, func(s *shape.Symmetry) { s.Axis = x - it.Place.Angle })
			}})
	}
	return list
}
