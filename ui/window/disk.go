package window

import (
	"context"
	"fmt"
	"time"

	"cavitywright/table"
	"cavitywright/ui/live"
	"cavitywright/ui/store"

	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/dialog"
	"fyne.io/fyne/v2/widget"
)

// disk keeps a copy of what is not saved, for the case of a crash.
type disk struct {
	w      *Window
	folder string
	copy   *store.Recovery
	timer  *time.Timer
	kept   *table.Table
	task   *live.Task       // the copy that is being written; nil for none
	older  *store.Recovered // of a session before, brought back here; kept until there is a copy of our own
}

// keepAfter is how old a change gets before a copy of it is written. In a long
// drag the copies follow each other at this distance.
const keepAfter = 600 * time.Millisecond

func newDisk(w *Window, folder string) disk {
	d := disk{w: w, folder: folder}
	if folder != "" {
		d.copy = store.NewRecovery(folder)
	}
	return d
}

// changed writes a copy soon, or takes it away where nothing is unsaved any
// more: what was undone must not come back after a crash.
func (d *disk) changed() {
	switch {
	case d.copy == nil:
	case !d.w.session.Unsaved():
		if d.kept != nil && !d.w.session.InGesture() {
			d.clear()
		}
	case d.timer == nil && d.task == nil && d.kept != d.w.session.Table():
		d.timer = time.AfterFunc(keepAfter, func() { d.w.post(d.keep) })
	}
}

// keep writes the copy beside the window: the disk may take its time.
func (d *disk) keep() {
	d.timer = nil
	t, path, c := d.w.session.Table(), d.w.session.Path(), d.copy
	if c == nil || !d.w.session.Unsaved() || d.task != nil || t == d.kept {
		return
	}
	write := func(context.Context, func(float64)) error { return c.Keep(t.Design(), path, time.Now()) }
	var task *live.Task
	task = live.Start(d.w.post, write, func(float64) {}, func(err error) {
		if d.task != task {
			return // cleared meanwhile
		}
		d.task, d.kept = nil, t
		if err != nil {
			d.w.foot.say(err.Error())
			return
		}
		d.dropOlder()
		d.changed() // there may be a later change already
	})
	d.task = task
}

// end writes no further copy, and waits for the one that is being written.
func (d *disk) end() {
	if d.timer != nil {
		d.timer.Stop()
	}
	if d.task != nil {
		d.task.Wait()
	}
	d.copy = nil
}

// clear forgets the copy: the document was saved, or given up.
func (d *disk) clear() {
	if d.timer != nil {
		d.timer.Stop()
	}
	if d.task != nil {
		d.task.Wait() // one at a time may touch the copy
	}
	d.timer, d.task, d.kept = nil, nil, nil
	d.dropOlder()
	if d.copy != nil {
		if err := d.copy.Clear(); err != nil {
			d.w.foot.say(err.Error())
		}
	}
}

// offerRecovered asks about what a session that ended without closing left.
func (d *disk) offerRecovered() {
	if d.folder == "" {
		return
	}
	found := store.Found(d.folder)
	if len(found) == 0 {
		return
	}
	r := found[0]
	name := r.Design.Name
	if name == "" {
		name = "an untitled table"
	}
	text := widget.NewLabel(fmt.Sprintf("The last session ended before %s was saved (%s).", name, r.At.Format("2 January 2006, 15:04")))
	var q *dialog.CustomDialog
	back := newAnswer("Bring it back", func() {
		q.Hide()
		t, err := table.New(r.Design)
		if err != nil {
			d.w.foot.say(err.Error())
			return
		}
		d.older = &r
		d.w.session.Adopt(t, r.Path)
	})
	back.Importance = widget.HighImportance
	drop := newAnswer("Discard it", func() {
		q.Hide()
		d.forget(r)
	})
	q = dialog.NewCustomWithoutButtons("Bring back what was not saved?", container.NewVBox(text, container.NewHBox(back, drop)), d.w.win)
	q.Show()
	d.w.win.Canvas().Focus(back)
}

// dropOlder takes away the copy that the document was brought back from.
func (d *disk) dropOlder() {
	if d.older != nil {
		d.forget(*d.older)
		d.older = nil
	}
}

func (d *disk) forget(r store.Recovered) {
	if err := r.Remove(); err != nil {
		d.w.foot.say(err.Error())
	}
}
