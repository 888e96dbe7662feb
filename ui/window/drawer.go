package window

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/layout"
	"fyne.io/fyne/v2/widget"
)

// sheet is one page of the drawer: a subject with its numbers and figures.
type sheet interface {
	// Name is the word on the line of sheets.
	Name() string
	// View is what the page shows; it is asked for once, when the page is
	// opened for the first time.
	View() fyne.CanvasObject
	// Changed tells the page that is open that the session changed: the table,
	// the settings or the look. It is also called when the page is opened.
	Changed()
	// Closed tells it that it is not seen any more: its long work ends.
	Closed()
}

// drawer is the right part of the window: the line under it carries the names of the
// sheets, and a click on one opens it, or shuts the drawer.
type drawer struct {
	w      *Window
	edge   fyne.CanvasObject
	body   *fyne.Container
	names  []*widget.Button
	sheets []sheet
	views  []fyne.CanvasObject
	worn   []fyne.ThemeVariant // the one that each view was last seen in
	open   int                 // the sheet that is open, -1 for none
}

func newDrawer(w *Window, sheets []sheet) *drawer {
	d := &drawer{w: w, sheets: sheets, views: make([]fyne.CanvasObject, len(sheets)), worn: make([]fyne.ThemeVariant, len(sheets)), open: -1, body: container.NewStack()}
	row := container.NewHBox(layout.NewSpacer())
	row.Layout = layout.NewCustomPaddedHBoxLayout(1)
	for i, s := range sheets {
		b := quiet("", s.Name(), func() { d.toggle(i) })
		d.names = append(d.names, b)
		row.Add(tipped("Sheets", b))
	}
	d.edge = container.New(layout.NewCustomPaddedLayout(0, 0, 6, 6), row)
	return d
}

// toggle opens sheet i, or shuts the drawer where it is open.
func (d *drawer) toggle(i int) {
	if d.open == i {
		i = -1
	}
	d.show(i)
}

// show opens sheet i; -1 shuts the drawer.
func (d *drawer) show(i int) {
	if d.open >= 0 {
		d.sheets[d.open].Closed()
		d.names[d.open].Importance = widget.LowImportance
		d.names[d.open].Refresh()
	}
	d.open = i
	d.body.RemoveAll()
	if i >= 0 {
		if d.views[i] == nil {
			d.views[i], d.worn[i] = d.sheets[i].View(), d.w.variant
		}
		d.names[i].Importance = widget.MediumImportance
		d.names[i].Refresh()
		d.body.Add(d.views[i])
	}
	d.w.arrange()
	if i >= 0 && d.worn[i] != d.w.variant {
		d.w.dressUp()
	}
	d.changed()
}

// dressed notes that what is seen wears a variant.
func (d *drawer) dressed(v fyne.ThemeVariant) {
	if d.open >= 0 {
		d.worn[d.open] = v
	}
}

// named opens the sheet of that name, for a command.
func (d *drawer) named(name string) {
	for i, s := range d.sheets {
		if s.Name() == name {
			d.toggle(i)
		}
	}
}

// changed tells the open sheet.
func (d *drawer) changed() {
	if d.open >= 0 {
		d.sheets[d.open].Changed()
	}
}
