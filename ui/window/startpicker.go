package window

import (
	"fmt"
	"strings"

	"cavitywright/sim/measure/leak"
	"cavitywright/table"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"
)

// startPicker chooses how rays start. What needs a place shows a field for it.
type startPicker struct {
	box    *fyne.Container
	kind   *widget.Select
	places *widget.Entry
	picked func()
}

// startKinds are the choices in order, with what stands before the places on a
// command line, and an example of them.
var startKinds = []struct{ name, form, example string }{
	{"as suits the wall", "", ""},
	{"even in ds dp", "even", ""},
	{"above the critical angle", "trapped", ""},
	{"even over the area", "area", ""},
	{"through the openings", "openings", ""},
	{"through opening number", "opening:", "1"},
	{"from a point", "point:", "0, 0"},
	{"along a line", "line:", "-0.1, 0, 0.1, 0"},
}

func newStartPicker(picked func()) *startPicker {
	p := &startPicker{picked: picked, places: widget.NewEntry()}
	var names []string
	for _, k := range startKinds {
		names = append(names, k.name)
	}
	p.places.Hide()
	p.places.OnSubmitted = func(string) { picked() }
	p.kind = widget.NewSelect(names, func(string) {
		k := startKinds[p.kind.SelectedIndex()]
		if k.example == "" {
			p.places.Hide()
		} else {
			p.places.SetText(k.example)
			p.places.Show()
		}
		p.box.Refresh()
		picked()
	})
	p.kind.Selected = names[0]
	p.box = container.NewHBox(p.kind, container.NewStack(p.places, container.New(wide(120))))
	return p
}

// wide is an empty room of a width that what lies over it fills.
type wide float32

// MinSize is the width.
func (w wide) MinSize([]fyne.CanvasObject) fyne.Size { return fyne.NewSize(float32(w), 1) }

// Layout has nothing to lay out.
func (w wide) Layout([]fyne.CanvasObject, fyne.Size) {}

// seeding is what is chosen on a table.
func (p *startPicker) seeding(t *table.Table) (leak.Seeding, error) {
	k := startKinds[max(p.kind.SelectedIndex(), 0)]
	if k.form == "" {
		return leak.NaturalSeeding(t), nil
	}
	text := k.form
	if k.example != "" {
		text += strings.TrimSpace(p.places.Text)
	}
	s, err := leak.ParseSeeding(text)
	if err != nil {
		return s, fmt.Errorf("the place %q is not understood; write %s", p.places.Text, k.example)
	}
	return s, nil
}
