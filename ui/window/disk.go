package window

import (
	"fmt"
	"time"

	"cavitywright/table"
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
}

// keepAfter is how long the hand must rest before a copy is written.
const keepAfter = 600 * time.Millisecond

func newDisk(w *Window, folder string) disk {
	d := disk{w: w, folder: folder}
	if folder != "" {
		d.copy = store.NewRecovery(folder)
	}
	return d
}

// changed writes a copy once the hand rests.
func (d *disk) changed() {
	if d.copy == nil || !d.w.session.Unsaved() || d.kept == d.w.session.Table() {
		return
	}
	if d.timer != nil {
		d.timer.Stop()
	}
	d.timer = time.AfterFunc(keepAfter, func() { d.w.post(d.keep) })
}

func (d *disk) keep() {
	t := d.w.session.Table()
	if !d.w.session.Unsaved() || d.w.session.InGesture() {
		return
	}
	if err := d.copy.Keep(t.Design(), d.w.session.Path(), time.Now()); err != nil {
		d.w.foot.say(err.Error())
		return
	}
	d.kept = t
}

// clear forgets the copy: the document was saved, or given up.
func (d *disk) clear() {
	if d.timer != nil {
		d.timer.Stop()
	}
	d.kept = nil
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
	back := widget.NewButton("Bring it back", func() {
		q.Hide()
		t, err := table.New(r.Design)
		if err != nil {
			d.w.foot.say(err.Error())
			return
		}
		d.w.session.Adopt(t, r.Path)
		d.forget(r)
	})
	back.Importance = widget.HighImportance
	drop := widget.NewButton("Discard it", func() {
		q.Hide()
		d.forget(r)
	})
	q = dialog.NewCustomWithoutButtons("Bring back what was not saved?", container.NewVBox(text, container.NewHBox(back, drop)), d.w.win)
	q.Show()
}

func (d *disk) forget(r store.Recovered) {
	if err := r.Remove(); err != nil {
		d.w.foot.say(err.Error())
	}
}
