package window

import (
	"bytes"
	"context"
	"fmt"
	"strings"

	"cavitywright/render/export"
	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/sim/run"
	"cavitywright/table/tablefile"
	"cavitywright/ui/pane"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/dialog"
	"fyne.io/fyne/v2/widget"
)

// askFigure asks which figure is to be written, and how.
func (w *Window) askFigure() {
	what := widget.NewSelect([]string{"portrait", "table with rays"}, nil)
	what.SetSelectedIndex(0)
	width := widget.NewSelectEntry([]string{"85", "120", "175"})
	width.SetText("85")
	dpi := widget.NewSelectEntry([]string{"300", "600", "1200"})
	dpi.SetText("600")
	kind := widget.NewSelect([]string{"png", "svg", "pdf", "csv"}, nil)
	kind.SetSelectedIndex(0)
	f := dialog.NewForm("Export a figure", "Choose a file", "Cancel", []*widget.FormItem{
		widget.NewFormItem("Figure", what),
		widget.NewFormItem("Width (mm)", width),
		widget.NewFormItem("Resolution (dpi, png)", dpi),
		widget.NewFormItem("Format", kind),
	}, func(ok bool) {
		if !ok {
			return
		}
		mm, err1 := pane.Evaluate(width.Text, "mm")
		res, err2 := pane.Evaluate(dpi.Text, "mm")
		if err1 != nil || err2 != nil {
			w.say("The width and the resolution must be numbers; try 85 mm and 600 dpi.")
			return
		}
		o := export.Options{WidthMM: mm, DPI: res}
		rays := what.SelectedIndex() == 1
		name := strings.TrimSuffix(w.fileName(), ".cavity.json") + map[bool]string{false: "-portrait.", true: "-rays."}[rays] + kind.Selected
		w.askPath("Export the figure as", name, func(path string) { w.ExportFigure(path, rays, o) })
	}, w.win)
	f.Resize(fyne.NewSize(420, 300))
	f.Show()
}

// exportBeside writes the portrait as a PNG for one column of a journal, next
// to the table file and under its name.
func (w *Window) exportBeside() {
	p := w.session.Path()
	if p == "" {
		w.askFigure()
		return
	}
	w.ExportFigure(strings.TrimSuffix(p, ".cavity.json")+"-portrait.png", false, export.Options{WidthMM: 85, DPI: 600})
}

// ExportFigure writes the portrait, or the table with its rays, to a file.
func (w *Window) ExportFigure(path string, rays bool, o export.Options) {
	format, err := export.FormatOf(path)
	if err != nil {
		w.foot.say(err.Error())
		return
	}
	fig, err := w.figure(rays)
	if err != nil {
		w.foot.say(err.Error())
		return
	}
	var file bytes.Buffer
	if err := tablefile.Write(&file, w.session.Table().Design()); err != nil {
		w.foot.say(err.Error())
		return
	}
	o.Table = file.Bytes()
	var out bytes.Buffer
	if err := export.Write(&out, format, fig, o); err != nil {
		w.foot.say(err.Error())
		return
	}
	if err := writeFile(path, out.Bytes()); err != nil {
		w.foot.say(err.Error())
		return
	}
	w.say("Written: %s.", path)
}

// figure computes the figure from the study alone, as the batch program does.
func (w *Window) figure(rays bool) (figure.Figure, error) {
	t := w.session.Table()
	tr := sim.Compile(t)
	study := t.Design().Study
	each := study.Bounces
	if rays {
		each = w.session.Settings.Drawn
	}
	var m measure.Measurement = measure.NewPortrait(tr, study.Launches, each)
	if rays {
		m = measure.NewRays(tr, study.Launches, each)
	}
	if m.Orbits() == 0 {
		return nil, fmt.Errorf("nothing is launched yet; launch a ray or seed the section first")
	}
	tally, err := run.Run(context.Background(), run.Job{Tracer: tr, Measure: m, Seed: study.Seed})
	if err != nil {
		return nil, err
	}
	if rays {
		return measure.RaysFigure(t, tally.(*measure.RaysTally), Program), nil
	}
	return measure.PortraitFigure(t, tally.(*measure.PortraitTally), Program), nil
}

// Program is the name and version that figures carry.
const Program = "Cavitywright 0.1.0"
