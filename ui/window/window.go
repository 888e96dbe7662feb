// Package window puts the panes together: the frame around them, menus and
// dialogs. It decides nothing about tables; it calls the session and the
// engine.
package window

import (
	"fmt"
	"time"

	"cavitywright/table"
	"cavitywright/ui/live"
	"cavitywright/ui/pane"
	"cavitywright/ui/session"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/theme"
	"fyne.io/fyne/v2/widget"
)

// Window is the designer's window.
type Window struct {
	app     fyne.App
	win     fyne.Window
	session *session.Session
	engine  *live.Engine
	desk    *pane.Desk
	post    func(func())

	editor   *pane.Editor
	rays     *pane.Rays
	portrait *pane.Portrait
	values   *pane.Values

	center   *fyne.Container
	boxes    [3]fyne.CanvasObject // the three panes with their headers
	columns  *container.Split
	right    *container.Split
	grown    int // which pane fills the window, -1 for none
	head     *header
	foot     *footer
	drawer   *drawer
	tips     *tips
	orbits   *pane.Orbits    // laid over portrait and rays by their sheet
	floor    *fyne.Container // the panes, and the drawer beside them where it is open
	tools    *choice
	bundle   *choice
	filling  *widget.Button
	layers   *widget.Select // the map under the portrait
	play     *widget.Button
	commands []command
	disk     disk
	task     *live.Task // the figure that is being written; nil for none
	works    []*work    // those of the sheets
	rate     rate
	variant  fyne.ThemeVariant
	watch    func(State)
	last     live.Status // of the work, as it was told last
	beats    int
	stalls   []live.Stall
	sized    *table.Table // whose size the views are for
	dressed  int          // the pane that filled the window when it got its colours, -1 for none
}

// Options are what a caller may set.
type Options struct {
	// Post runs a function on the window's goroutine; nil means fyne.Do.
	Post func(func())
	// Recovery is the folder for copies that survive a crash; empty for none.
	Recovery string
	// Watch, if not nil, is told what the window shows, for tests.
	Watch func(State)
}

// New makes the designer's window on a table. path is its file, empty for
// none.
func New(a fyne.App, t *table.Table, path string, o Options) *Window {
	w := &Window{app: a, win: a.NewWindow("Cavitywright"), grown: -1, dressed: -1, post: o.Post, watch: o.Watch}
	if w.post == nil {
		w.post = fyne.Do
	}
	w.variant = fyne.ThemeVariant(a.Preferences().IntWithFallback("variant", int(theme.VariantLight)))
	a.Settings().SetTheme(dress{w.variant})
	w.session = session.New(t, path)
	w.engine = live.New(w.post, w.shown)
	w.desk = &pane.Desk{Session: w.session, Engine: w.engine, Look: look(w.variant, 1)}
	w.desk.Changed, w.desk.Key = w.show, w.loose
	w.disk = newDisk(w, o.Recovery)
	w.foot = newFooter(w)
	w.desk.Hint, w.desk.Note, w.desk.Say, w.desk.Point = w.foot.hint, w.foot.note, w.foot.say, w.point
	w.editor, w.rays, w.portrait = pane.NewEditor(w.desk), pane.NewRays(w.desk), pane.NewPortrait(w.desk)
	w.orbits = pane.NewOrbits(w.desk, w.portrait, w.rays)
	w.values = pane.NewValues(w.desk)
	w.desk.Free = w.freed
	w.head = newHeader(w)
	w.layout()
	w.session.OnChange(w.changed)
	a.Settings().AddListener(func(fyne.Settings) { w.post(w.changed) })
	w.commands = w.withFreeWalls(w.allCommands())
	w.win.SetMainMenu(w.menu())
	w.win.Canvas().SetOnTypedKey(func(e *fyne.KeyEvent) { w.loose(e.Name) })
	w.win.SetOnDropped(func(_ fyne.Position, uris []fyne.URI) { w.dropped(uris) })
	w.win.SetCloseIntercept(w.close)
	w.win.SetPadded(false)
	w.win.Resize(fyne.NewSize(float32(a.Preferences().FloatWithFallback("width", 1280)), float32(a.Preferences().FloatWithFallback("height", 800))))
	w.changed()
	return w
}

// ShowAndRun shows the window and runs the program until it is closed.
func (w *Window) ShowAndRun() {
	var heart *live.Heart
	w.app.Lifecycle().SetOnStarted(func() {
		w.post(func() {
			w.changed()
			w.disk.offerRecovered()
		})
		time.AfterFunc(700*time.Millisecond, func() { w.post(w.editor.Breathe) })
		if w.watch != nil {
			heart = live.NewHeart(w.post, w.beat)
		}
	})
	w.app.Lifecycle().SetOnStopped(func() {
		if heart != nil {
			heart.Close()
		}
		w.stopTask()
		for _, k := range w.works {
			k.Drop()
		}
		w.disk.end()
		w.engine.Close()
	})
	w.win.ShowAndRun()
}

// Content is what the window shows, for tests without a display.
func (w *Window) Content() fyne.Window { return w.win }

// Session is the document at work.
func (w *Window) Session() *session.Session { return w.session }

// Close ends the engine and the copies.
func (w *Window) Close() {
	w.disk.end()
	w.engine.Close()
}

// layout puts the panes in their places.
func (w *Window) layout() {
	w.boxes[0] = container.NewBorder(w.editorBar(), container.NewPadded(w.values.View), nil, nil, w.editor.Surface)
	w.boxes[1] = container.NewBorder(w.raysBar(), nil, nil, nil, w.rays.Surface)
	w.boxes[2] = container.NewBorder(w.portraitBar(), w.foot.readings, nil, nil, w.portrait.Surface)
	w.right = container.NewVSplit(w.boxes[1], w.boxes[2])
	w.columns = container.NewHSplit(w.boxes[0], w.right)
	p := w.app.Preferences()
	w.columns.SetOffset(p.FloatWithFallback("columns", 0.46))
	w.right.SetOffset(p.FloatWithFallback("rows", 0.46))
	w.center = container.NewStack(w.columns)
	w.drawer = newDrawer(w, []sheet{
		newWallSheet(w),
		newReadingsSheet(w),
		newOrbitSheet(w),
		newSurvivalSheet(w),
		newFarFieldSheet(w),
		newOpeningsSheet(w),
		newModesSheet(w),
		newOutlineSheet(w),
		newStudiesSheet(w),
		newToleranceSheet(w),
		newWishSheet(w),
		newFilmSheet(w),
	})
	w.floor = container.NewStack()
	w.arrange()
	w.tips = newTips(w.post)
	w.win.SetContent(container.NewStack(container.NewBorder(w.head.box, container.NewVBox(w.drawer.edge, w.foot.box), nil, nil, w.floor), w.tips))
}

// arrange puts the panes beside the drawer, or lets them have all the room.
func (w *Window) arrange() {
	p := w.app.Preferences()
	for _, o := range w.floor.Objects {
		if split, is := o.(*container.Split); is {
			p.SetFloat("drawer", split.Offset)
		}
	}
	w.floor.RemoveAll()
	if w.drawer.open < 0 {
		w.floor.Add(w.center)
		return
	}
	split := container.NewHSplit(w.center, w.drawer.body)
	split.SetOffset(p.FloatWithFallback("drawer", 0.68))
	w.floor.Add(split)
}

// grow lets pane i fill the window, or puts it back.
func (w *Window) grow(i int) {
	if w.grown >= 0 || i < 0 {
		i = -1
	}
	w.grown = i
	w.center.RemoveAll()
	if i >= 0 {
		w.center.Add(w.boxes[i])
	} else {
		w.columns.Leading = w.boxes[0]
		w.right.Leading, w.right.Trailing = w.boxes[1], w.boxes[2]
		w.right.Refresh()
		w.columns.Refresh()
		w.center.Add(w.columns)
	}
	w.center.Refresh()
	if w.dressed >= 0 && i != w.dressed {
		w.dressUp() // the other panes were not there
	}
	w.changed()
}

// changed brings everything in step with the session.
func (w *Window) changed() {
	scale := float64(w.win.Canvas().Scale())
	w.desk.Look = look(w.variant, max(scale, 1))
	w.tips.hide()
	w.head.refresh()
	w.tools.show(int(w.session.Settings.Tool))
	w.values.Refresh()
	w.refit()
	w.editor.Redraw()
	w.foot.refresh()
	w.drawer.changed()
	w.show()
	w.disk.changed()
	w.pickUp()
	for _, s := range []*pane.Surface{w.editor.Surface, w.rays.Surface, w.portrait.Surface} {
		s.Again()
	}
}

// refit lets the panes show the whole table where another one, by undo or a
// value typed, is not to be seen in the view that was left.
func (w *Window) refit() {
	t := w.session.Table()
	if w.session.InGesture() || t == w.sized {
		return // the view stands still under the hand
	}
	before := w.sized
	w.sized = t
	if before == nil || t.Bounds() == before.Bounds() {
		return
	}
	w.session.Editor = w.editor.Fitted(w.session.Editor, before)
	w.rays.View = w.rays.Fitted(w.rays.View, before)
}

// pickUp puts frames on the screen that are finished already. While events
// come faster than the window is painted, what the engine posts waits its turn
// behind them; a frame must not.
func (w *Window) pickUp() {
	if w.engine.RaysFrames.Fresh() {
		w.rays.Show()
	}
	if w.engine.PortraitFrames.Fresh() {
		w.portrait.Show()
	}
}

// show asks the engine for what the session holds now.
func (w *Window) show() {
	w.orbits.Redraw()
	r := live.Request{
		Revision: w.session.Revision(), Table: w.session.Table(), Section: w.session.Section,
		Settings: w.session.Settings, Look: w.desk.Look,
		Portrait: w.portrait.Pixels(), Rays: w.rays.Pixels(), RaysView: w.rays.View,
		Reference: w.session.Reference,
	}
	if r.Portrait.X < 2 || r.Rays.X < 2 {
		// A pane that is not on the screen has no size yet, or keeps its last.
		if r.Portrait.X < 2 {
			r.Portrait.X, r.Portrait.Y = 2, 2
		}
		if r.Rays.X < 2 {
			r.Rays.X, r.Rays.Y = 2, 2
		}
	}
	w.engine.Show(r)
}

// shown puts new frames on the screen.
func (w *Window) shown(s live.Status) {
	w.rays.Show()
	w.portrait.Show()
	w.foot.progress(s)
	w.last = s
	if w.watch != nil {
		w.rate.count(time.Now(), w.engine.PortraitFrames.Taken())
		w.watch(w.state(s))
	}
}

// point shows a place in all panes.
func (w *Window) point(p pane.Place) {
	w.editor.Point(p)
	w.rays.Point(p)
	w.portrait.Point(p)
}

// Say shows one sentence, which stays until something changes.
func (w *Window) Say(s string) { w.foot.say(s) }

// say shows one sentence.
func (w *Window) say(format string, args ...any) { w.foot.say(fmt.Sprintf(format, args...)) }

// toggleVariant changes from light to dark and back.
func (w *Window) toggleVariant() {
	w.variant = theme.VariantLight + theme.VariantDark - w.variant
	w.app.Preferences().SetInt("variant", int(w.variant))
	w.dressUp()
	w.changed()
}

// dressUp gives all that is in the window its colours. The toolkit passes by
// what is not seen, such as a sheet that is shut: that is called for again
// when it comes back.
func (w *Window) dressUp() {
	w.app.Settings().SetTheme(dress{w.variant})
	w.drawer.dressed(w.variant)
	w.dressed = w.grown
}

// rate is the number of frames of the portrait painted a second.
type rate struct {
	since     time.Time
	before    int
	PerSecond float64
}

func (r *rate) count(now time.Time, taken int) {
	if d := now.Sub(r.since).Seconds(); d >= 1 {
		r.PerSecond = float64(taken-r.before) / d
		r.since, r.before = now, taken
	}
}
