package window

import (
	"context"
	"strings"

	"cavitywright/assets"
	"cavitywright/render/export"
	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	designsheet "cavitywright/sim/measure/sheet"
	"cavitywright/sim/run"
	"cavitywright/ui/store"
)

// pageWidth is that of the design sheet, in millimetres (ISO 216, A4), and
// sheetEffort what its readings take of the usual bounces.
const (
	pageWidth   = 210
	sheetEffort = 0.3
)

// askSheet asks for the file of the design sheet and writes it.
func (w *Window) askSheet() {
	name := strings.TrimSuffix(w.fileName(), ".cavity.json") + "-sheet.pdf"
	w.askPath(question{what: "Write the design sheet as", folder: w.folder(), name: name}, func(path string) error {
		if err := store.CanWrite(path); err != nil {
			return err
		}
		w.ExportSheet(path)
		return nil
	})
}

// ExportSheet writes the design sheet, a page with outline, readings, portrait
// and cautions, to a file; its ending says the format.
func (w *Window) ExportSheet(path string) {
	t := w.session.Table()
	w.export(path, t, export.Options{WidthMM: pageWidth}, func(ctx context.Context, share func(float64)) (figure.Figure, error) {
		tr := sim.Compile(t)
		runner := func(m measure.Measurement) (measure.Tally, error) {
			return run.Run(ctx, run.Job{Tracer: tr, Measure: m, Seed: t.Design().Study.Seed,
				Progress: func(done, total int, _ measure.Tally) { share(float64(done) / float64(total)) }})
		}
		return designsheet.Of(designsheet.Job{Tracer: tr, Runner: runner, Effort: sheetEffort, Program: assets.Program})
	})
}
