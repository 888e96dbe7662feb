package window

import (
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"strings"

	"cavitywright/table"
	"cavitywright/ui/store"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/dialog"
	"fyne.io/fyne/v2/layout"
	"fyne.io/fyne/v2/storage"
	"fyne.io/fyne/v2/widget"
)

// ReadTable reads a table from a table file, or out of an exported PNG or SVG
// that carries one.
func ReadTable(path string) (*table.Table, error) {
	d, err := store.Load(path, store.Decode)
	var t *table.Table
	if err == nil {
		t, err = table.New(d)
	}
	if fault := (*store.Fault)(nil); err == nil || errors.As(err, &fault) {
		return t, err // the disk's sentence names the file
	}
	return nil, fmt.Errorf("%s: %w", filepath.Base(path), err)
}

// OpenPath opens a file. What is open stays where that fails.
func (w *Window) OpenPath(path string) {
	t, err := ReadTable(path)
	if err != nil && HoldsOutline(path, err) {
		w.ImportOutline(path)
		return
	}
	if err != nil {
		w.foot.say(err.Error())
		return
	}
	path = DocumentPath(path)
	w.openTable(t, path)
	if path != "" {
		w.remember(path)
	}
}

func isTableFile(path string) bool {
	e := strings.ToLower(filepath.Ext(path))
	return e != ".png" && e != ".svg"
}

// openTable shows a table as the document.
func (w *Window) openTable(t *table.Table, path string) {
	w.editor.Cancel()
	w.rays.View.Scale = 0
	w.session.Open(t, path)
	w.disk.clear()
	w.win.SetMainMenu(w.menu())
}

// ifSaved goes on at once, or asks about unsaved changes first.
func (w *Window) ifSaved(then func()) {
	if !w.session.Unsaved() {
		then()
		return
	}
	text := widget.NewLabel("The table has changes that are not saved.")
	var d *dialog.CustomDialog
	save := newAnswer("Save", func() { d.Hide(); w.saveThen(then) })
	save.Importance = widget.HighImportance
	drop := newAnswer("Do not save", func() { d.Hide(); then() })
	back := newAnswer("Back to the table", func() { d.Hide() })
	d = dialog.NewCustomWithoutButtons("Save the changes?", container.NewVBox(text, container.NewHBox(save, drop, back)), w.win)
	d.Show()
	w.win.Canvas().Focus(save)
}

// close asks about unsaved changes and ends the program.
func (w *Window) close() {
	w.ifSaved(func() {
		w.disk.clear()
		p := w.app.Preferences()
		p.SetFloat("columns", w.columns.Offset)
		p.SetFloat("rows", w.right.Offset)
		if s := w.win.Canvas().Size(); s.Width > 200 {
			p.SetFloat("width", float64(s.Width))
			p.SetFloat("height", float64(s.Height))
		}
		w.win.Close()
	})
}

func (w *Window) save() { w.saveThen(func() {}) }

func (w *Window) saveThen(then func()) {
	if p := w.session.Path(); p != "" {
		if w.SaveTo(p) {
			then()
		}
		return
	}
	w.askSave(then)
}

func (w *Window) saveAs() { w.askSave(func() {}) }

// askSave asks for a file to save the table to, and goes on once it is there.
func (w *Window) askSave(then func()) {
	w.askPath(question{what: "Save the table as", folder: w.folder(), name: w.fileName()}, func(path string) error {
		if err := w.saveFile(path); err != nil {
			return err
		}
		then()
		return nil
	})
}

// SaveTo writes the document; false, with a sentence, where that fails.
func (w *Window) SaveTo(path string) bool {
	if err := w.saveFile(path); err != nil {
		w.foot.say(err.Error())
		return false
	}
	return true
}

func (w *Window) saveFile(path string) error {
	path = store.EnsureExt(path)
	if err := store.Save(path, w.session.Table().Design()); err != nil {
		return err
	}
	w.session.Saved(path)
	w.disk.clear()
	w.remember(path)
	w.say("Saved: %s.", path)
	return nil
}

// fileName is a name for the document's file.
func (w *Window) fileName() string {
	if p := w.session.Path(); p != "" {
		return filepath.Base(p)
	}
	name := strings.Map(func(r rune) rune {
		if r == ' ' {
			return '-'
		}
		if r >= '0' && r <= '9' || r >= 'a' && r <= 'z' || r >= 'A' && r <= 'Z' || r == '-' {
			return r
		}
		return -1
	}, w.session.Table().Design().Name)
	if name == "" {
		name = "table"
	}
	return strings.ToLower(name) + ".cavity.json"
}

// folder is where files were last, or the home folder.
func (w *Window) folder() string {
	if p := w.session.Path(); p != "" {
		return filepath.Dir(p)
	}
	if d := w.app.Preferences().String("folder"); d != "" {
		return d
	}
	home, err := os.UserHomeDir()
	if err != nil {
		return "."
	}
	return home
}

// question is what a file is asked for, with what stands in its fields.
type question struct {
	what, folder, name string
	trouble            string // why the last answer could not be used
}

// askPath asks for a file to write: a folder and a name. Nothing is touched
// before the answer, and an existing file is asked about. Where then fails, the
// question comes again with the reason.
func (w *Window) askPath(q question, then func(path string) error) {
	where, file := newField(q.folder), newField(q.name)
	browse := newAnswer("Browse…", func() {
		d := dialog.NewFolderOpen(func(u fyne.ListableURI, err error) {
			if err == nil && u != nil {
				where.SetText(u.Path())
			}
		}, w.win)
		d.Resize(fyne.NewSize(800, 560))
		d.Show()
	})
	var d *dialog.CustomDialog
	write := func() {
		d.Hide()
		q.folder, q.name = where.Text, file.Text
		path := filepath.Join(q.folder, q.name)
		finish := func() {
			if err := then(path); err != nil {
				q.trouble = sentence(err.Error())
				w.askPath(q, then)
				return
			}
			w.app.Preferences().SetString("folder", q.folder)
		}
		if strings.TrimSpace(q.name) == "" {
			q.trouble = "Type a name for the file."
			w.askPath(q, then)
			return
		}
		if _, err := os.Stat(path); err == nil && path != w.session.Path() {
			dialog.ShowConfirm("Replace the file?", filepath.Base(path)+" is there already.", func(yes bool) {
				if yes {
					finish()
				}
			}, w.win)
			return
		}
		finish()
	}
	trouble := widget.NewLabel(q.trouble)
	trouble.Wrapping = fyne.TextWrapWord
	form := widget.NewForm(widget.NewFormItem("Name", file), widget.NewFormItem("Folder", container.NewBorder(nil, nil, nil, browse, where)))
	ok := newAnswer("Write", write)
	ok.Importance = widget.HighImportance
	cancel := newAnswer("Cancel", func() { d.Hide() })
	d = dialog.NewCustomWithoutButtons(q.what, container.NewBorder(nil, container.NewHBox(layout.NewSpacer(), cancel, ok), nil, nil, container.NewVBox(form, trouble)), w.win)
	for _, f := range []*field{where, file} {
		f.OnSubmitted = func(string) { write() }
		f.escape = func() { d.Hide() }
	}
	d.Resize(fyne.NewSize(640, 250))
	d.Show()
	w.win.Canvas().Focus(file)
}

// field is an entry of a question: Escape takes the question back.
type field struct {
	widget.Entry
	escape func()
}

func newField(text string) *field {
	f := &field{}
	f.ExtendBaseWidget(f)
	f.SetText(text)
	return f
}

// TypedKey gives up on Escape.
func (f *field) TypedKey(e *fyne.KeyEvent) {
	if e.Name == fyne.KeyEscape {
		f.escape()
		return
	}
	f.Entry.TypedKey(e)
}

// askOpen asks for a file to read.
func (w *Window) askOpen() { w.askFile(".json", ".png", ".svg", ".csv") }

// askFile asks for a file with one of the endings, and opens it.
func (w *Window) askFile(endings ...string) {
	w.ifSaved(func() {
		d := dialog.NewFileOpen(func(r fyne.URIReadCloser, err error) {
			if err != nil || r == nil {
				return
			}
			path := r.URI().Path()
			_ = r.Close()
			w.app.Preferences().SetString("folder", filepath.Dir(path))
			w.OpenPath(path)
		}, w.win)
		d.SetFilter(storage.NewExtensionFileFilter(endings))
		if l, err := storage.ListerForURI(storage.NewFileURI(w.folder())); err == nil {
			d.SetLocation(l)
		}
		d.Resize(fyne.NewSize(900, 600))
		d.Show()
	})
}

// dropped opens what was dropped on the window.
func (w *Window) dropped(uris []fyne.URI) {
	if len(uris) > 0 {
		w.ifSaved(func() { w.OpenPath(uris[0].Path()) })
	}
}

// mostRecent is the number of files that are remembered.
const mostRecent = 8

// remember puts a file at the head of the recent ones.
func (w *Window) remember(path string) {
	list := []string{path}
	for _, p := range w.app.Preferences().StringList("recent") {
		if p != path && len(list) < mostRecent {
			list = append(list, p)
		}
	}
	w.app.Preferences().SetStringList("recent", list)
	w.win.SetMainMenu(w.menu())
}

func (w *Window) recentMenu() *fyne.MenuItem {
	m := fyne.NewMenuItem("Recent files", nil)
	m.ChildMenu = fyne.NewMenu("")
	for _, p := range w.app.Preferences().StringList("recent") {
		m.ChildMenu.Items = append(m.ChildMenu.Items, fyne.NewMenuItem(p, func() { w.ifSaved(func() { w.OpenPath(p) }) }))
	}
	if len(m.ChildMenu.Items) == 0 {
		m.Disabled = true
	}
	return m
}

// DocumentPath is the file that a table read from path is saved to: none for a
// figure, which is not saved over.
func DocumentPath(path string) string {
	if isTableFile(path) {
		return path
	}
	return ""
}
