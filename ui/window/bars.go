package window

import (
	"strconv"

	"cavitywright/table"
	"cavitywright/table/edit"
	"cavitywright/ui/live"
	"cavitywright/ui/session"
	"cavitywright/ui/tool"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"
)

// editorBar is the header of the table's pane: which tool the pointer holds.
func (w *Window) editorBar() fyne.CanvasObject {
	w.tools = newChoice([]string{"hand", "chain", "stroke", "coat", "measure"}, []string{"Reshape", "Nodes", "Freehand", "Coats", "Measure"}, func(i int) {
		w.session.Settings.Tool = session.ToolName(i)
		w.editor.Cancel()
	})
	snap := quiet("snap", "Grid", nil)
	snap.OnTapped = func() {
		w.session.Settings.Snap = 1 - w.session.Settings.Snap
		w.showOn(snap, w.session.Settings.Snap == session.SnapOn)
		w.session.Touch()
	}
	w.showOn(snap, w.session.Settings.Snap == session.SnapOn)
	return bar("Table", []fyne.CanvasObject{w.tools.box},
		snap, quiet("gallery", "Shapes", w.openShapes), quiet("fit", "", func() { w.editor.Key(fyne.KeyF) }), quiet("grow", "", func() { w.grow(0) }))
}

// showOn marks a button as on or off.
func (w *Window) showOn(b *widget.Button, on bool) {
	b.Importance = widget.LowImportance
	if on {
		b.Importance = widget.MediumImportance
	}
	b.Refresh()
}

// raysBar is the header of the rays: what a pull launches, and the motion.
func (w *Window) raysBar() fyne.CanvasObject {
	patterns := []table.Pattern{table.Single, table.Fan, table.Beam}
	w.bundle = newChoice([]string{"single", "fan", "beam"}, []string{"Ray", "Fan", "Beam"}, func(i int) {
		w.session.Settings.Bundle.Pattern = patterns[i]
	})
	w.play = quiet("pause", "", nil)
	w.play.OnTapped = w.toggleMotion
	pace := widget.NewSlider(0.05, 3)
	pace.Step = 0
	pace.Value = w.session.Settings.Pace
	pace.OnChanged = func(v float64) {
		w.session.Settings.Pace = v
		w.show()
	}
	return bar("Rays", []fyne.CanvasObject{w.bundle.box},
		w.play, container.NewGridWrap(fyne.NewSize(90, 30), pace),
		quiet("clear", "Clear", func() { _ = tool.ClearLaunches(w.session) }),
		quiet("fit", "", func() { w.rays.Key(fyne.KeyF) }), quiet("grow", "", func() { w.grow(1) }))
}

func (w *Window) toggleMotion() {
	w.session.Settings.Motion = 1 - w.session.Settings.Motion
	name := "pause"
	if w.session.Settings.Motion == session.Paused {
		name = "run"
	}
	w.play.SetIcon(icon(name))
	w.show()
}

// portraitBar is the header of the portrait: seeding, bounces and the axes.
func (w *Window) portraitBar() fyne.CanvasObject {
	counts := []string{"200", "1000", "5000", "20000", "100000"}
	bounces := widget.NewSelect(counts, nil)
	bounces.Selected = strconv.Itoa(w.session.Table().Design().Study.Bounces)
	bounces.OnChanged = func(s string) {
		n, err := strconv.Atoi(s)
		if study := w.session.Table().Design().Study; err == nil && n != study.Bounces {
			study.Bounces = n
			_ = w.session.Do(edit.SetStudy{Study: study, Name: "number of bounces"})
		}
	}
	w.head.bounces = bounces
	w.filling = quiet("stop", "", w.toggleFilling)
	return bar("Portrait", []fyne.CanvasObject{quiet("seed", "Seed evenly", func() { w.sayErr(tool.SeedEvenly(w.session)) }), w.layerChoice()},
		widget.NewLabel("bounces"), bounces, w.filling,
		quiet("fit", "", func() { w.portrait.Key(fyne.KeyF) }), quiet("grow", "", func() { w.grow(2) }))
}

func (w *Window) toggleFilling() {
	if w.foot.held == live.Fills {
		w.foot.held = live.Stands
		w.filling.SetIcon(icon("run"))
	} else {
		w.foot.held = live.Fills
		w.filling.SetIcon(icon("stop"))
	}
	w.engine.Fill(w.foot.held)
}

func (w *Window) sayErr(err error) {
	if err != nil {
		w.foot.say(err.Error())
	}
}
