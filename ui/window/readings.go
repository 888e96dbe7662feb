package window

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"strings"

	"cavitywright/render"
	"cavitywright/render/export"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/sim/measure/reading"
	"cavitywright/ui/store"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/layout"
	"fyne.io/fyne/v2/widget"
)

// readingsSheet shows the numbers of a table as they are measured, each with
// its error, its definition and what has to be said about it.
type readingsSheet struct {
	w     *Window
	work  *work
	rows  []figure.Scalar // what was measured
	shown []readoutRow
	list  *readout
	state *caption
	run   *widget.Button
	stop  *widget.Button
	write *widget.Button
}

func newReadingsSheet(w *Window) *readingsSheet {
	return &readingsSheet{w: w, work: newWork(w)}
}

// Name is "Readings".
func (s *readingsSheet) Name() string { return "Readings" }

// View is the list with its buttons.
func (s *readingsSheet) View() fyne.CanvasObject {
	s.list, s.state = newReadout(), newCaption(fyne.TextAlignLeading, 120)
	s.run = quiet("run", "Measure", s.measure)
	s.stop = quiet("stop", "Stop", s.work.Stop)
	s.write = quiet("save", "Write as CSV", s.askWrite)
	s.stop.Hide()
	s.write.Disable()
	top := container.NewVBox(bar("Readings", []fyne.CanvasObject{s.run, s.stop}, s.write), container.New(layout.NewCustomPaddedLayout(0, 4, 10, 10), s.state))
	return container.NewBorder(top, nil, nil, nil, container.NewVScroll(s.list.box))
}

// Changed clears what belongs to another wall.
func (s *readingsSheet) Changed() {
	if s.work.Fits() {
		return
	}
	s.work.Drop()
	s.rows, s.shown = nil, nil
	s.list.Set(nil)
	s.stop.Hide()
	s.run.Enable()
	s.write.Disable()
	s.state.set("Not measured yet on this wall.")
}

// Closed lets the work go on: what it brings is seen when the sheet is opened
// again.
func (s *readingsSheet) Closed() {}

// measure takes the readings one by one beside the window.
func (s *readingsSheet) measure() {
	wanted, err := reading.Wanted(s.w.session.Table(), nil)
	if err != nil {
		s.w.foot.say(err.Error())
		return
	}
	s.rows, s.shown = nil, nil
	s.list.Set(nil)
	s.run.Disable()
	s.stop.Show()
	at := ""
	s.work.Start(func(d desk) error {
		for _, r := range wanted {
			d.show(func() { at = r.Name; s.state.set(at) })
			row, err := r.Take(d.tracer, d.runner, 1, d.seed)
			if no := (*measure.NotMeasured)(nil); errors.As(err, &no) {
				d.show(func() { s.addLine(readoutRow{r.Name, "none", err.Error()}) })
				continue
			}
			if err != nil {
				return err
			}
			d.show(func() { s.add(r, row) })
		}
		return nil
	}, func(x float64) {
		s.state.set(fmt.Sprintf("%s, %.0f %%", at, 100*x))
	}, func(err error) {
		s.stop.Hide()
		s.run.Enable()
		switch {
		case errors.Is(err, context.Canceled):
			s.state.set("Stopped; what stands here was measured.")
		case err != nil:
			s.state.set(sentence(err.Error()))
		default:
			s.state.set("All measured.")
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
	s.addLine(readoutRow{row.Name, strings.TrimSpace(fmt.Sprint(render.Written(row), " ", unit)), note})
}

func (s *readingsSheet) addLine(row readoutRow) {
	s.shown = append(s.shown, row)
	s.list.Set(s.shown)
}

// askWrite writes the rows as CSV.
func (s *readingsSheet) askWrite() {
	t := s.work.on
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
