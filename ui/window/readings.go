package window

import (
	"cavitywright/sim/measure/reading"
	"bytes"
	"context"
	"errors"
	"fmt"
	"strings"

	"cavitywright/render"
	"cavitywright/render/export"
	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/sim/run"
	"cavitywright/table"
	"cavitywright/ui/live"
	"cavitywright/ui/store"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/dialog"
	"fyne.io/fyne/v2/layout"
	"fyne.io/fyne/v2/widget"
)

// readingsSheet shows the numbers of a table as they are measured, each with
// its error, its definition and what has to be said about it. The table cannot
// change while the sheet is open, so no number ever stands beside another wall.
type readingsSheet struct {
	w     *Window
	rows  []figure.Scalar
	list  *fyne.Container
	state *widget.Label
	stop  *widget.Button
	write *widget.Button
}

// openReadings measures the table and shows the numbers.
func (w *Window) openReadings() {
	if w.task != nil {
		w.say("A figure is being written; stop it, or wait until it is done.")
		return
	}
	t := w.session.Table()
	wanted, err := reading.Wanted(t, nil)
	if err != nil {
		w.foot.say(err.Error())
		return
	}
	s := &readingsSheet{w: w, list: container.NewVBox(), state: widget.NewLabel("")}
	s.stop = quiet("stop", "Stop", w.stopTask)
	s.write = quiet("save", "Write as CSV", func() { s.askWrite(t) })
	s.write.Disable()
	foot := container.NewHBox(s.state, layout.NewSpacer(), s.stop, s.write)
	d := dialog.NewCustom("Readings", "Close", container.NewBorder(nil, foot, nil, nil, container.NewVScroll(s.list)), w.win)
	d.SetOnClosed(w.stopTask)
	d.Resize(fyne.NewSize(900, 620))
	d.Show()
	s.measure(t, wanted)
}

// measure takes the readings one by one beside the window.
func (s *readingsSheet) measure(t *table.Table, wanted []reading.Reading) {
	seed := t.Design().Study.Seed
	tr := sim.Compile(t)
	at := ""
	s.w.task = live.Start(s.w.post, func(ctx context.Context, share func(float64)) error {
		runner := func(m measure.Measurement) (measure.Tally, error) {
			return run.Run(ctx, run.Job{Tracer: tr, Measure: m, Seed: seed,
				Progress: func(done, total int, _ measure.Tally) { share(float64(done) / float64(total)) }})
		}
		for _, r := range wanted {
			s.w.post(func() { at = r.Name; s.state.SetText(at) })
			row, err := r.Take(tr, runner, 1, seed)
			if no := (*measure.NotMeasured)(nil); errors.As(err, &no) {
				s.w.post(func() { s.addLine(r.Name, "", err.Error()) })
				continue
			}
			if err != nil {
				return err
			}
			s.w.post(func() { s.add(r, row) })
		}
		return nil
	}, func(x float64) {
		s.state.SetText(fmt.Sprintf("%s, %.0f %%", at, 100*x))
	}, func(err error) {
		s.w.task = nil
		s.stop.Hide()
		switch {
		case errors.Is(err, context.Canceled):
			s.state.SetText("Stopped; what stands above was measured.")
		case err != nil:
			s.state.SetText(sentence(err.Error()))
		default:
			s.state.SetText("All measured.")
		}
		if len(s.rows) > 0 {
			s.write.Enable()
		}
	})
}

// add shows a reading.
func (s *readingsSheet) add(r reading.Reading, row figure.Scalar) {
	s.rows = append(s.rows, row)
	unit := row.Unit
	if unit == "1" {
		unit = ""
	}
	note := sentence(r.About)
	if row.Note != "" {
		note += " " + sentence(row.Note)
	}
	if row.Bounces > 0 {
		note += fmt.Sprintf(" %s bounces, seed %d.", count(row.Bounces), row.Seed)
	}
	s.addLine(row.Name, strings.TrimSpace(fmt.Sprint(render.Written(row), " ", unit)), note)
}

func (s *readingsSheet) addLine(name, value, note string) {
	n, v, about := widget.NewLabel(name), widget.NewLabel(value), widget.NewLabel(note)
	v.TextStyle.Bold = true
	about.Wrapping = fyne.TextWrapWord
	s.list.Add(container.NewBorder(nil, nil, container.NewHBox(
		container.NewGridWrap(fyne.NewSize(170, 34), n), container.NewGridWrap(fyne.NewSize(215, 34), v)), nil, about))
	s.list.Add(widget.NewSeparator())
}

// askWrite writes the rows as CSV.
func (s *readingsSheet) askWrite(t *table.Table) {
	name := strings.TrimSuffix(s.w.fileName(), ".cavity.json") + "-readings.csv"
	s.w.askPath(question{what: "Write the readings as", folder: s.w.folder(), name: name}, func(path string) error {
		var out bytes.Buffer
		head := []string{t.Design().Name, fmt.Sprintf("seed %d", t.Design().Study.Seed)}
		if err := export.Write(&out, export.CSV, figure.Scalars{Rows: s.rows}, export.Options{Header: head}); err != nil {
			return err
		}
		if err := store.WriteFile(path, out.Bytes()); err != nil {
			return err
		}
		s.w.say("Written: %s.", path)
		return nil
	})
}
