package window

import (
	"path/filepath"
	"strconv"

	"cavitywright/table"
	"cavitywright/table/edit"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/layout"
	"fyne.io/fyne/v2/widget"
)

// header is the top line: the table's name and unit, whether it is saved, undo
// and redo, and what is handed over.
type header struct {
	w          *Window
	box        fyne.CanvasObject
	name       *widget.Button
	unit       *widget.Select
	saved      *widget.Label
	undo, redo *widget.Button
	bounces    *widget.Select
}

func newHeader(w *Window) *header {
	h := &header{w: w, saved: widget.NewLabel("")}
	h.name = widget.NewButton("", w.askName)
	h.name.Importance = widget.LowImportance
	var units []string
	for _, u := range table.Units() {
		units = append(units, u.String())
	}
	h.unit = widget.NewSelect(units, nil)
	h.unit.OnChanged = func(s string) {
		u, err := table.ParseUnit(s)
		if d := w.session.Table().Design(); err == nil && u != d.Unit {
			if w.session.Do(edit.SetHead{Name: d.Name, Notes: d.Notes, Unit: u}) == nil {
				w.say("The numbers stay; the table is now in %v.", u)
			}
		}
	}
	h.undo = quiet("undo", "Undo", w.session.Undo)
	h.redo = quiet("redo", "Redo", w.session.Redo)
	h.box = container.NewHBox(tippedAll("", []fyne.CanvasObject{
		quiet("gallery", "Gallery", w.openGallery),
		h.name, h.unit, h.saved, layout.NewSpacer(),
		h.undo, h.redo,
		quiet("open", "Open", w.askOpen), quiet("save", "Save", w.save),
		quiet("figure", "Figure", w.askFigure),
	})...)
	return h
}

// refresh brings the line up to date.
func (h *header) refresh() {
	d := h.w.session.Table().Design()
	name := d.Name
	if name == "" {
		name = "Untitled table"
	}
	if h.name.Text != name {
		h.name.SetText(name)
	}
	if h.unit.Selected != d.Unit.String() {
		h.unit.Selected = d.Unit.String()
		h.unit.Refresh()
	}
	state := "not saved"
	if p := h.w.session.Path(); p != "" {
		state = filepath.Base(p)
		if h.w.session.Unsaved() {
			state += " · changed"
		}
	} else if !h.w.session.Unsaved() {
		state = ""
	}
	if h.saved.Text != state {
		h.saved.SetText(state)
	}
	if h.bounces != nil && h.bounces.Selected != strconv.Itoa(d.Study.Bounces) {
		h.bounces.Selected = strconv.Itoa(d.Study.Bounces)
		h.bounces.Refresh()
	}
	undo, redo := h.w.session.Steps()
	able(h.undo, undo != "")
	able(h.redo, redo != "")
	title := name
	if h.w.session.Unsaved() && h.w.session.Path() != "" {
		title += " (changed)"
	}
	if t := title + " · Cavitywright"; h.w.win.Title() != t {
		h.w.win.SetTitle(t)
	}
}

func able(b *widget.Button, can bool) {
	if can && b.Disabled() {
		b.Enable()
	} else if !can && !b.Disabled() {
		b.Disable()
	}
}
