package window

import (
	"fmt"
	"math"

	"cavitywright/table/edit"
	"cavitywright/ui/pane"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/widget"
)

// askName asks for the name and the notes of the table.
func (w *Window) askName() {
	d := w.session.Table().Design()
	name, notes := newField(d.Name), newField(d.Notes)
	notes.MultiLine = true
	notes.Wrapping = fyne.TextWrapWord
	notes.SetMinRowsVisible(6)
	w.askForm("Name and notes", "Keep", "Leave as it was", []*widget.FormItem{
		widget.NewFormItem("Name", name), widget.NewFormItem("Notes", notes),
	}, fyne.NewSize(520, 340), func() {
		if name.Text != d.Name || notes.Text != d.Notes {
			w.sayErr(w.session.Do(edit.SetHead{Name: name.Text, Notes: notes.Text, Unit: w.session.Table().Design().Unit}))
		}
	})
}

// askBundle asks what one pull launches.
func (w *Window) askBundle() {
	b := w.session.Settings.Bundle
	entry := func(v float64) *field { return newField(fmt.Sprintf("%.6g", v)) }
	n, fan, beam, drawn := entry(float64(b.Count)), entry(b.SpreadDeg), entry(b.Width), entry(float64(w.session.Settings.Drawn))
	w.askForm("What a pull launches", "Keep", "Leave as it was", []*widget.FormItem{
		widget.NewFormItem("Rays of a fan or beam (2 to 200)", n),
		widget.NewFormItem("Angle of a fan (degrees)", fan),
		widget.NewFormItem("Width of a beam (share of the table's size)", beam),
		widget.NewFormItem("Bounces drawn of each ray (0 to 500)", drawn),
	}, fyne.NewSize(560, 280), func() {
		var v [4]float64
		for i, e := range []*field{n, fan, beam, drawn} {
			x, err := pane.Evaluate(e.Text, w.session.Table().Design().Unit)
			if err != nil {
				w.foot.say(err.Error())
				return
			}
			v[i] = x
		}
		s := &w.session.Settings
		s.Bundle.Count = int(math.Min(math.Max(v[0], 2), 200))
		s.Bundle.SpreadDeg = math.Min(math.Max(v[1], 0.001), 180)
		s.Bundle.Width = math.Min(math.Max(v[2], 1e-6), 1)
		s.Drawn = int(math.Min(math.Max(v[3], 0), 500))
		w.session.Touch()
	})
}

// help is one page of what is what.
func (w *Window) help() {
	t := widget.NewRichTextFromMarkdown(helpText)
	t.Wrapping = fyne.TextWrapWord
	w.closable("What is what", widget.NewCard("", "", t), fyne.NewSize(720, 560)).Show()
}

const helpText = `**Table.** The wall, drawn to scale. The coloured band is the arclength s: the same colour stands for the same place in all three panes. Drag what is magenta to reshape the wall; drag the wall to move it. *Nodes* sets a wall click by click, *Freehand* makes one of a stroke. A wall drawn inside the wall becomes an obstacle. Click a free wall twice to add a node.

**Rays.** Press on the wall or inside the table and pull: the pull is the direction of the launch. Fan and Beam launch many at once. Balls fly at constant speed and are mirrored at the wall.

**Portrait.** Each bounce is a point (s, p): s the arclength, p = sin χ with χ the angle of the outgoing ray from the inward normal, positive towards increasing s. Closed curves are regular orbits, scattered points are chaos. Press to launch at a point, pull to sweep a row, wheel to zoom; *Seed evenly* launches orbits evenly in ds dp over what is shown.

**Readings.** L is the length of all walls, A the area of the table, πA/L the mean free path between bounces over the uniform measure ds dp (Santaló 1976). They are exact.

**Where a ray stops.** At a corner or along a tangent a bounce is not decided; the orbit ends there and is counted in the last line.

This program models rays. Where a cavity is built for lasers, radio-frequency power or by machining, follow local rules and ask a licensed practitioner.`
