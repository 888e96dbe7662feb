package pane

import (
	"strings"

	"cavitywright/table"
	"cavitywright/table/edit"
	"cavitywright/table/param"
	"cavitywright/table/wall"
	"cavitywright/ui/session"
	"cavitywright/ui/tool"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"
)

// Laws of the wall in the strip of values: their palette and their numbers.

// palette is the row of laws, that of now marked.
func (v *Values) palette(now wall.Law, chosen func(wall.Law)) fyne.CanvasObject {
	row := container.NewHBox()
	for _, k := range wall.Kinds() {
		b := &widget.Button{Text: kindTitle(k.Name), Importance: widget.LowImportance}
		if k.Name == now.Name() {
			b.Importance = widget.MediumImportance
		}
		b.OnTapped = func() {
			if l, err := session.Brush(k.Name, now); err == nil {
				v.desk.Session.Settings.Law = l
				chosen(l)
			}
		}
		b.ExtendBaseWidget(b)
		row.Add(b)
	}
	return row
}

// lawRows are the numbers of a law; the polarisation is chosen by its name.
func (v *Values) lawRows(grid *fyne.Container, law wall.Law, now func() wall.Law, set func(wall.Law) edit.Command) {
	with := func(i int, x float64) edit.Command {
		values := append(param.Values(nil), now().Values()...)
		values[i] = x
		l, err := wall.Make(law.Name(), values)
		if err != nil {
			return tool.Refused(err)
		}
		return set(l)
	}
	for i, spec := range specsOf(law) {
		if d, ok := law.(wall.Dielectric); ok && spec.Name == "te" {
			choice := widget.NewSelect([]string{wall.TM.String(), wall.TE.String()}, nil)
			choice.SetSelectedIndex(int(d.Polarisation))
			choice.OnChanged = func(string) { v.lay(with(i, float64(choice.SelectedIndex()))) }
			grid.Add(container.NewBorder(nil, nil, container.NewGridWrap(fyne.NewSize(108, 30), widget.NewLabel("polarisation")), nil, choice))
			continue
		}
		grid.Add(v.add(lawSpec(spec), func(x float64) edit.Command { return with(i, x) }))
	}
}

// numbersOf are the values of a law that have a row of their own.
func numbersOf(l wall.Law) []float64 {
	var now []float64
	for i, x := range l.Values() {
		if specsOf(l)[i].Name != "te" {
			now = append(now, x)
		}
	}
	return now
}

func specsOf(l wall.Law) []param.Spec {
	for _, k := range wall.Kinds() {
		if k.Name == l.Name() {
			return k.Specs
		}
	}
	return nil
}

// lawSpec is a law's parameter under the name that a form gives it.
func lawSpec(s param.Spec) param.Spec {
	switch s.Name {
	case "index":
		s.Name = "index inside"
	case "outside":
		s.Name = "index outside"
	case "share":
		s.Name = "share scattered"
	}
	return s
}

// kindTitle is a kind of law as the palette writes it.
func kindTitle(name string) string {
	if name == "lossy" {
		return "Lossy mirror"
	}
	return strings.ToUpper(name[:1]) + name[1:]
}

// lawNote says what the wall does at s, where it is no mirror.
func lawNote(t *table.Table, s float64) string {
	law := t.Law()
	if i := tool.CoatAt(t, s); i >= 0 {
		law = t.Design().Coats[i].Law
	}
	if law == (wall.Mirror{}) {
		return ""
	}
	return " · " + wall.Short(law)
}
