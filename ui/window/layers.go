package window

import (
	"context"
	"errors"

	"cavitywright/render/export"
	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/sim/run"
	"cavitywright/ui/live"
	"cavitywright/ui/session"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/widget"
)

// noMap is the choice of no map under the portrait.
const noMap = "No map"

// layerChoice is the list of maps that can lie under the portrait.
func (w *Window) layerChoice() fyne.CanvasObject {
	names := []string{noMap}
	for _, k := range live.Layers() {
		names = append(names, k.Name)
	}
	w.layers = widget.NewSelect(names, func(name string) {
		layer := session.NoLayer
		for _, k := range live.Layers() {
			if k.Name == name {
				layer = k.Layer
				w.desk.Hint(k.About)
			}
		}
		if layer != w.session.Settings.Layer {
			w.session.Settings.Layer = layer
			w.show()
		}
	})
	w.layers.Selected = noMap
	return w.layers
}

// nextLayer puts the next map of the list under the portrait, and none after
// the last.
func (w *Window) nextLayer() {
	w.layers.SetSelectedIndex((w.layers.SelectedIndex() + 1) % len(w.layers.Options))
}

// mapColumns and mapRows are the cells of a map that is written to a file.
const (
	mapColumns = 480
	mapRows    = 320
)

// ExportMap writes the map that lies under the portrait, over the region that
// is shown and of columns by rows cells, to a file.
func (w *Window) ExportMap(path string, columns, rows int, o export.Options) error {
	kind, asked := live.KindOf(w.session.Settings.Layer)
	if !asked {
		return errors.New("there is no map under the portrait yet; choose one in its header first")
	}
	t, g := w.session.Table(), w.session.Section
	if why := kind.Why(t); why != "" {
		return errors.New("there is no map here: " + why)
	}
	w.export(path, t, o, func(ctx context.Context, share func(float64)) (figure.Figure, error) {
		tr := sim.Compile(t)
		field, err := kind.Field(tr)
		if err != nil {
			return nil, err
		}
		m := measure.NewMosaic(t, field, g, columns, rows)
		err = m.Fill(func(next measure.Measurement) (measure.Tally, error) {
			return run.Run(ctx, run.Job{Tracer: tr, Measure: next, Seed: t.Design().Study.Seed,
				Progress: func(done, total int, _ measure.Tally) { share(float64(done) / float64(total)) }})
		})
		if err != nil {
			return nil, err
		}
		return m.Figure([]string{measure.Head(t) + kind.About}, program), nil
	})
	return nil
}
