package window

import (
	"strings"

	"cavitywright/table"
	"cavitywright/table/edit"
	"cavitywright/ui/session"
	"cavitywright/ui/tool"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/driver/desktop"
	"fyne.io/fyne/v2/widget"
)

// command is one thing the program does, with its place in the menu and its
// key. Every command is in one list: the menu, the keys and the searchable
// list are made of it.
type command struct {
	menu string
	name string
	key  fyne.Shortcut // goes through the menu
	bare fyne.KeyName  // a key without a modifier, taken where no field has the focus
	keys string        // how the key is written
	run  func()
	on   func() bool // whether it is ticked in the menu; nil for a command without a tick
}

func ctrl(k fyne.KeyName) fyne.Shortcut {
	return &desktop.CustomShortcut{KeyName: k, Modifier: fyne.KeyModifierShortcutDefault}
}

func ctrlShift(k fyne.KeyName) fyne.Shortcut {
	return &desktop.CustomShortcut{KeyName: k, Modifier: fyne.KeyModifierShortcutDefault | fyne.KeyModifierShift}
}

// allCommands is the list.
func (w *Window) allCommands() []command {
	tools := func(t session.ToolName) func() {
		return func() {
			w.session.Settings.Tool = t
			w.editor.Cancel()
		}
	}
	shows := func(is func(table.Display) bool) func() bool {
		return func() bool { return is(w.session.Table().Design().Study.Display) }
	}
	return []command{
		{"File", "New table from the gallery…", ctrl(fyne.KeyN), "", "Ctrl+N", w.openGallery, nil},
		{"File", "Open…", ctrl(fyne.KeyO), "", "Ctrl+O", w.askOpen, nil},
		{"File", "Import an outline…", nil, "", "", w.askOutline, nil},
		{"File", "Export the wall…", nil, "", "", func() { w.drawer.named("Outline") }, nil},
		{"File", "Save", ctrl(fyne.KeyS), "", "Ctrl+S", w.save, nil},
		{"File", "Save as…", ctrlShift(fyne.KeyS), "", "Ctrl+Shift+S", w.saveAs, nil},
		{"File", "Export figure…", ctrl(fyne.KeyE), "", "Ctrl+E", w.askFigure, nil},
		{"File", "Design sheet as PDF…", nil, "", "", w.askSheet, nil},
		{"File", "Portrait as PNG beside the table file", ctrlShift(fyne.KeyE), "", "Ctrl+Shift+E", w.exportBeside, nil},
		{"Edit", "Undo", &fyne.ShortcutUndo{}, "", "Ctrl+Z", w.undo, nil},
		{"Edit", "Redo", &fyne.ShortcutRedo{}, "", "Ctrl+Y", w.redo, nil},
		{"Edit", "Delete what is selected", nil, fyne.KeyDelete, "Delete", func() { w.sayErr(w.editor.Tool().Delete()) }, nil},
		{"Edit", "Make it an obstacle or the wall", nil, "", "", w.toggleRole, nil},
		{"Edit", "Name and notes…", nil, "", "", w.askName, nil},
		{"Draw", "Reshape: drag handles and shapes", nil, fyne.KeyV, "V", tools(session.Hand), nil},
		{"Draw", "Nodes: click a wall node by node", nil, fyne.KeyN, "N", tools(session.Chain), nil},
		{"Draw", "Freehand: draw a wall in one stroke", nil, fyne.KeyD, "D", tools(session.Stroke), nil},
		{"Draw", "Measure: distances, angles, radii", nil, fyne.KeyX, "X", tools(session.Measure), nil},
		{"Draw", "Place a shape…", nil, fyne.KeyA, "A", w.openShapes, nil},
		{"Draw", "Snap to the grid", nil, fyne.KeyG, "G", func() { w.session.Settings.Snap = 1 - w.session.Settings.Snap; w.session.Touch() }, nil},
		{"Coat", "Opening: pull it along the wall", nil, fyne.KeyO, "O", w.coat("opening"), nil},
		{"Coat", "Lossy mirror: pull it along the wall", nil, "", "", w.coat("lossy"), nil},
		{"Coat", "Dielectric: pull it along the wall", nil, "", "", w.coat("dielectric"), nil},
		{"Coat", "Rough: pull it along the wall", nil, "", "", w.coat("rough"), nil},
		{"Coat", "Mirror: pull it along the wall", nil, "", "", w.coat("mirror"), nil},
		{"Coat", "All of the wall: its law and the medium", nil, "", "", w.bareWall, nil},
		{"Coat", "Duplicate the selected coat", nil, "", "", w.duplicateCoat, nil},
		{"Coat", "Take the selected coat off", nil, "", "", w.deleteCoat, nil},
		{"Launch", "Seed what the portrait shows, evenly", nil, fyne.KeyE, "E", func() { w.sayErr(tool.SeedEvenly(w.session)) }, nil},
		{"Launch", "Take out all launches", nil, fyne.KeyC, "C", func() { w.sayErr(tool.ClearLaunches(w.session)) }, nil},
		{"Launch", "Let the balls run or stand", nil, fyne.KeyP, "P", w.toggleMotion, nil},
		{"Launch", "Stop or go on filling the portrait", nil, fyne.KeyS, "S", w.toggleFilling, nil},
		{"Launch", "Bundle: fan angle, beam width, number…", nil, fyne.KeyB, "B", w.askBundle, nil},
		{"View", "Wall report", nil, fyne.KeyW, "W", func() { w.drawer.named("Wall") }, nil},
		{"View", "Readings", nil, fyne.KeyR, "R", func() { w.drawer.named("Readings") }, nil},
		{"View", "Periodic orbits", nil, "", "", func() { w.drawer.named("Orbits") }, nil},
		{"View", "Modes: Weyl's count", nil, "", "", func() { w.drawer.named("Modes") }, nil},
		{"View", "Survival of rays", nil, fyne.KeyT, "T", func() { w.drawer.named("Survival") }, nil},
		{"View", "Far field of what leaves", nil, fyne.KeyI, "I", func() { w.drawer.named("Far field") }, nil},
		{"View", "Openings: where to put one, and how rays pass between them", nil, fyne.KeyQ, "Q", func() { w.drawer.named("Openings") }, nil},
		{"View", "Studies: turn a number, read at each point", nil, fyne.KeyY, "Y", func() { w.drawer.named("Studies") }, nil},
		{"View", "Tolerance: copies of the wall as a workshop makes them", nil, "", "", func() { w.drawer.named("Tolerance") }, nil},
		{"View", "Wish: seek a wall for it", nil, "", "", func() { w.drawer.named("Wish") }, nil},
		{"View", "Map under the portrait: the next one, or none", nil, fyne.KeyM, "M", w.nextLayer, nil},
		{"View", "Film: let a number run, and write it as a film", nil, "", "", func() { w.drawer.named("Film") }, nil},
		{"View", "Reference: exchange it with the table at work", nil, fyne.KeyJ, "J", w.exchangeReference, nil},
		{"View", "Reference: keep this table to compare with, or drop the one kept", nil, fyne.KeyH, "H", w.toggleReference, func() bool { return w.session.Reference != nil }},
		{"View", "Table fills the window", nil, fyne.Key1, "1", func() { w.grow(0) }, nil},
		{"View", "Rays fill the window", nil, fyne.Key2, "2", func() { w.grow(1) }, nil},
		{"View", "Portrait fills the window", nil, fyne.Key3, "3", func() { w.grow(2) }, nil},
		{"View", "Fit the table, the rays and the whole section", nil, fyne.KeyF, "F", w.fitAll, nil},
		{"View", "Axes: s/L instead of s", nil, "", "", w.display(func(d *table.Display) { d.Position = 1 - d.Position }), shows(func(d table.Display) bool { return d.Position == table.Fraction })},
		{"View", "Axes: χ in degrees instead of p", nil, "", "", w.display(func(d *table.Display) { d.Momentum = 1 - d.Momentum }), shows(func(d table.Display) bool { return d.Momentum == table.Angle })},
		{"View", "Axes: clockwise", nil, "", "", w.display(func(d *table.Display) { d.Sense = 1 - d.Sense }), shows(func(d table.Display) bool { return d.Sense == table.Clockwise })},
		{"View", "Light or dark", nil, fyne.KeyL, "L", w.toggleVariant, nil},
		{"Help", "All commands…", ctrl(fyne.KeyK), "", "Ctrl+K", w.askCommand, nil},
		{"Help", "What is what", nil, fyne.KeyF1, "F1", w.help, nil},
	}
}

// menu is the main menu made of the list.
func (w *Window) menu() *fyne.MainMenu {
	var menus []*fyne.Menu
	at := map[string]*fyne.Menu{}
	for _, c := range w.commands {
		m := at[c.menu]
		if m == nil {
			m = fyne.NewMenu(c.menu)
			at[c.menu] = m
			menus = append(menus, m)
		}
		name := c.name
		if c.bare != "" {
			name += "   " + c.keys
		}
		it := fyne.NewMenuItem(name, func() { w.unlessAsked(c.run) })
		it.Shortcut = c.key
		if c.on != nil {
			it.Checked = c.on()
		}
		m.Items = append(m.Items, it)
	}
	at["File"].Items = append(at["File"].Items, w.recentMenu())
	return fyne.NewMainMenu(menus...)
}

// loose takes a key that no field has.
func (w *Window) loose(k fyne.KeyName) {
	if top := w.win.Canvas().Overlays().Top(); top != nil {
		if k == fyne.KeyEscape {
			w.win.Canvas().Overlays().Remove(top)
		}
		return
	}
	for _, c := range w.commands {
		if c.bare != "" && c.bare == k {
			c.run()
			return
		}
	}
	if k == fyne.KeyEscape {
		w.editor.Cancel()
		w.rays.Cancel()
		w.portrait.Cancel()
	}
}

// undo goes back: in a field that is being typed in, or the document.
func (w *Window) undo() {
	if e, ok := w.win.Canvas().Focused().(interface{ TypedShortcut(fyne.Shortcut) }); ok {
		e.TypedShortcut(&fyne.ShortcutUndo{})
		return
	}
	w.session.Undo()
}

func (w *Window) redo() {
	if e, ok := w.win.Canvas().Focused().(interface{ TypedShortcut(fyne.Shortcut) }); ok {
		e.TypedShortcut(&fyne.ShortcutRedo{})
		return
	}
	w.session.Redo()
}

func (w *Window) toggleRole() {
	i := w.session.Selection.Item
	if i < 0 {
		w.say("Nothing is selected; click a shape first.")
		return
	}
	w.sayErr(w.session.Do(edit.SetRole{Item: i, Role: 1 - w.session.Table().Design().Items[i].Role}))
}

func (w *Window) fitAll() {
	w.editor.Key(fyne.KeyF)
	w.rays.Key(fyne.KeyF)
	w.portrait.Key(fyne.KeyF)
}

func (w *Window) display(change func(*table.Display)) func() {
	return func() {
		study := w.session.Table().Design().Study
		change(&study.Display)
		w.sayErr(w.session.Do(edit.SetStudy{Study: study, Name: "axes"}))
		w.win.SetMainMenu(w.menu())
	}
}

// unlessAsked runs a command unless a question stands in the window: one thing
// at a time.
func (w *Window) unlessAsked(run func()) {
	if w.win.Canvas().Overlays().Top() == nil {
		run()
	}
}

// askCommand shows the searchable list.
func (w *Window) askCommand() {
	found := w.commands
	list := widget.NewList(func() int { return len(found) },
		func() fyne.CanvasObject {
			return container.NewBorder(nil, nil, nil, widget.NewLabel("Ctrl+Shift+S"), widget.NewLabel(""))
		},
		func(i widget.ListItemID, o fyne.CanvasObject) {
			c := o.(*fyne.Container)
			c.Objects[0].(*widget.Label).SetText(found[i].menu + ": " + found[i].name)
			c.Objects[1].(*widget.Label).SetText(found[i].keys)
		})
	search := newField("")
	search.SetPlaceHolder("Type a few letters of what you want to do")
	d := w.closable("All commands", container.NewBorder(search, nil, nil, nil, list), fyne.NewSize(560, 520))
	search.escape = d.Hide
	search.OnChanged = func(s string) {
		found = nil
		for _, c := range w.commands {
			if strings.Contains(strings.ToLower(c.menu+" "+c.name), strings.ToLower(s)) {
				found = append(found, c)
			}
		}
		list.UnselectAll()
		list.Refresh()
	}
	list.OnSelected = func(i widget.ListItemID) {
		d.Hide()
		found[i].run()
	}
	search.OnSubmitted = func(string) {
		if len(found) > 0 {
			d.Hide()
			found[0].run()
		}
	}
	d.Show()
	w.win.Canvas().Focus(search)
}
