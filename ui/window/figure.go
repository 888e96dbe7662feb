package window

import (
	"bytes"
	"context"
	"errors"
	"strings"

	"cavitywright/assets"
	"cavitywright/render/export"
	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/sim/run"
	"cavitywright/table"
	"cavitywright/table/tablefile"
	"cavitywright/ui/live"
	"cavitywright/ui/pane"
	"cavitywright/ui/store"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/widget"
)

// askFigure asks which figure is to be written, and how.
func (w *Window) askFigure() {
	what := newPick([]string{"portrait", "table with rays", "map under the portrait"}, 0)
	width, dpi := newField("85"), newField("600")
	kind := newPick([]string{"png", "svg", "pdf", "csv"}, 0)
	wide := widget.NewFormItem("Width (mm)", width)
	wide.HintText = "Columns of journals are mostly 85, 120 or 175 mm wide."
	w.askForm("Export a figure", "Choose a file", "Cancel", []*widget.FormItem{
		widget.NewFormItem("Figure", what),
		wide,
		widget.NewFormItem("Resolution (dpi, png)", dpi),
		widget.NewFormItem("Format", kind),
	}, fyne.NewSize(460, 320), func() {
		mm, err1 := pane.Evaluate(width.Text, "mm")
		res, err2 := pane.Evaluate(dpi.Text, "mm")
		if err1 != nil || err2 != nil {
			w.say("The width and the resolution must be numbers; try 85 mm and 600 dpi.")
			return
		}
		o := export.Options{WidthMM: mm, DPI: res}
		chosen := what.SelectedIndex()
		name := strings.TrimSuffix(w.fileName(), ".cavity.json") + []string{"-portrait.", "-rays.", "-map."}[chosen] + kind.Selected
		w.askPath(question{what: "Export the figure as", folder: w.folder(), name: name}, func(path string) error {
			if err := store.CanWrite(path); err != nil {
				return err
			}
			if chosen == 2 {
				return w.ExportMap(path, mapColumns, mapRows, o)
			}
			w.ExportFigure(path, chosen == 1, o)
			return nil
		})
	})
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

// ExportFigure writes the portrait, or the table with its rays, to a file. It
// works beside the window, with progress, and can be stopped.
func (w *Window) ExportFigure(path string, rays bool, o export.Options) {
	t, drawn := w.session.Table(), w.session.Settings.Drawn
	w.export(path, t, o, func(ctx context.Context, share func(float64)) (figure.Figure, error) {
		return studyFigure(ctx, share, t, rays, drawn)
	})
}

// maker computes a figure; share is told how much of it is done.
type maker func(ctx context.Context, share func(float64)) (figure.Figure, error)

// export writes a figure of a table to a file, beside the window.
func (w *Window) export(path string, t *table.Table, o export.Options, make maker) {
	format, err := export.FormatOf(path)
	if err != nil {
		w.foot.say(err.Error())
		return
	}
	if w.task != nil {
		w.say("Another figure is being written; stop it, or wait until it is done.")
		return
	}
	w.foot.busy("Computing the figure", 0)
	w.task = live.Start(w.post, func(ctx context.Context, share func(float64)) error {
		return exportFigure(ctx, share, t, path, format, o, make)
	}, func(x float64) {
		w.foot.busy("Computing the figure", x)
	}, func(err error) {
		w.task = nil
		w.foot.idle()
		switch {
		case errors.Is(err, context.Canceled):
			w.say("Stopped; nothing was written.")
		case err != nil:
			w.foot.say(err.Error())
		default:
			w.say("Written: %s.", path)
		}
	})
}

// stopTask stops the long work, if there is one.
func (w *Window) stopTask() {
	if w.task != nil {
		w.task.Stop()
	}
}

// exportFigure computes the figure from the study alone, as the batch program
// does, and writes it with the table inside.
func exportFigure(ctx context.Context, share func(float64), t *table.Table, path string, format export.Format, o export.Options, make maker) error {
	fig, err := make(ctx, share)
	if err != nil {
		return err
	}
	var file, out bytes.Buffer
	if err := tablefile.Write(&file, t.Design()); err != nil {
		return err
	}
	o.Table = file.Bytes()
	if err := export.Write(&out, format, fig, o); err != nil {
		return err
	}
	return store.WriteFile(path, out.Bytes())
}

func studyFigure(ctx context.Context, share func(float64), t *table.Table, rays bool, drawn int) (figure.Figure, error) {
	tr := sim.Compile(t)
	study := t.Design().Study
	var m measure.Measurement = measure.NewPortrait(tr, study.Launches, study.Bounces)
	if rays {
		m = measure.NewRays(tr, study.Launches, drawn)
	}
	if m.Orbits() == 0 {
		return nil, errors.New("nothing is launched yet; launch a ray or seed the section first")
	}
	tally, err := run.Run(ctx, run.Job{Tracer: tr, Measure: m, Seed: study.Seed,
		Progress: func(done, total int, _ measure.Tally) { share(float64(done) / float64(total)) }})
	if err != nil {
		return nil, err
	}
	if rays {
		return measure.RaysFigure(t, tally.(*measure.RaysTally), assets.Program), nil
	}
	return measure.PortraitFigure(t, tally.(*measure.PortraitTally), assets.Program), nil
}
