package window

import (
	"context"
	"errors"
	"io"
	"path/filepath"
	"strings"

	"cavitywright/render/export"
	"cavitywright/table"
	"cavitywright/table/outline/intake"
	"cavitywright/ui/live"
	"cavitywright/ui/store"
)

// askOutline asks for a drawing or a table of points.
func (w *Window) askOutline() { w.askFile(".svg", ".csv", ".txt", ".dat") }

// HoldsOutline reports whether a file that could not be opened as a table is
// one to import: a drawing that carries none, or a table of points.
func HoldsOutline(path string, err error) bool {
	if fault := (*store.Fault)(nil); errors.As(err, &fault) {
		return false
	}
	switch strings.ToLower(filepath.Ext(path)) {
	case ".svg":
		return errors.Is(err, export.ErrNoTable)
	case ".csv", ".txt", ".dat":
		return true
	}
	return false
}

// outlines is the sheet of outlines.
func (w *Window) outlines() *outlineSheet {
	for _, s := range w.drawer.sheets {
		if o, is := s.(*outlineSheet); is {
			return o
		}
	}
	return nil
}

// laid is a drawing as a table, with what became of it.
type laid struct {
	drawing intake.Drawing
	table   *table.Table
	account intake.Account
}

// lay makes a table of a drawing, with the section seeded so that its portrait
// is seen at once.
func lay(d intake.Drawing, o intake.Options, name string, seeds int) (laid, error) {
	l := laid{drawing: d}
	design, a, err := d.Design(o)
	l.account = a
	if err != nil {
		return l, err
	}
	design.Name = name
	design.Notes = strings.Join(append([]string{"Imported from an outline."}, intake.Lines(a, design.Unit)...), "\n")
	design.Study.Launches = []table.Launch{{Pattern: table.Even, Count: seeds, Region: table.WholeSection()}}
	l.table, err = table.New(design)
	return l, err
}

// ImportOutline reads an outline and opens it as a new table that is not saved
// yet. What is open stays where that fails. It works beside the window.
func (w *Window) ImportOutline(path string) {
	name := strings.TrimSuffix(filepath.Base(path), filepath.Ext(path))
	var l laid
	seeds := w.session.Settings.SeedAll
	w.outlineWork("Reading the outline", func() error {
		drawing, err := readOutline(path)
		if err != nil {
			return err
		}
		l, err = lay(drawing, intake.Options{}, name, seeds)
		return err
	}, func(err error) {
		s := w.outlines()
		if fault := (*store.Fault)(nil); errors.As(err, &fault) {
			w.foot.say(err.Error())
			return
		}
		if err != nil {
			w.say("%s: %s", filepath.Base(path), err)
			if l.account.Points > 0 { // it can be fitted all the same
				s.take(&l.drawing, l.account, name)
				s.shown()
			}
			return
		}
		w.editor.Cancel()
		w.rays.View.Scale = 0
		w.session.Adopt(l.table, "")
		w.win.SetMainMenu(w.menu())
		s.take(&l.drawing, l.account, name)
		s.shown()
		w.say("Imported: %s", strings.Join(intake.Lines(l.account, l.table.Design().Unit), " "))
	})
}

// readOutline reads the drawing or the points in a file.
func readOutline(path string) (d intake.Drawing, err error) {
	_, err = store.Load(path, func(r io.Reader) (table.Design, error) {
		var err error
		d, err = intake.Read(r)
		return table.Design{}, err
	})
	return d, err
}

// outlineWork does long work beside the window, one at a time.
func (w *Window) outlineWork(what string, do func() error, done func(error)) {
	if w.task != nil {
		w.say("Other work is under way; stop it, or wait until it is done.")
		return
	}
	w.foot.busy(what, 0)
	w.task = live.Start(w.post, func(ctx context.Context, _ func(float64)) error {
		if err := do(); err != nil {
			return err
		}
		return ctx.Err()
	}, func(float64) {}, func(err error) {
		w.task = nil
		w.foot.idle()
		if errors.Is(err, context.Canceled) {
			w.say("Stopped; the table is as it was.")
			return
		}
		done(err)
	})
}
