package window

import (
	"context"
	"errors"
	"fmt"
	"math"
	"math/rand/v2"
	"reflect"
	"slices"
	"strings"
	"time"

	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/sim/run"
	"cavitywright/sim/study"
	"cavitywright/sim/study/tolerance"
	"cavitywright/table"
	"cavitywright/table/edit"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"
)

// toleranceSheet makes copies of the wall as a workshop would, and shows how a
// reading lies over them as they are measured.
type toleranceSheet struct {
	w      *Window
	work   *work
	form   *toleranceForm
	result *tolerance.Result // nil for none
	drawn  []figure.Figure   // the worst copies for each reading, once all is done

	state  *caption
	scroll *container.Scroll
	run    *widget.Button
	stop   *widget.Button
	which  *widget.Select    // the reading that is shown
	choice fyne.CanvasObject // which, of several
	plate  *plate
	worst  *plate
	list   *readout
	words  *widget.Label
}

func newToleranceSheet(w *Window) *toleranceSheet { return &toleranceSheet{w: w, work: newWork(w)} }

// Name is "Tolerance".
func (s *toleranceSheet) Name() string { return "Tolerance" }

// View is the form, the distribution, the worst copies, and what is to be said.
func (s *toleranceSheet) View() fyne.CanvasObject {
	s.state = newCaption(fyne.TextAlignLeading, 120)
	s.run = quiet("run", "Make copies", s.begin)
	s.stop = quiet("stop", "Stop", s.work.Stop)
	s.stop.Hide()
	s.form = newToleranceForm(s.w)
	on := func() *table.Table { return s.work.on }
	s.which = widget.NewSelect(nil, func(string) { s.show() })
	s.choice = boxed(220, s.which)
	s.choice.Hide()
	s.plate = newPlate(s.w, "Copies", studyFigureHeight, on, s.choice)
	s.plate.pane.Hinted = "How the reading lies over the copies."
	s.worst = newPlate(s.w, "Worst copies", sheetFigure, on)
	s.worst.pane.Hinted = "The worst copies over the wall as drawn; what they are off is magnified as the words below say."
	s.list = newReadout()
	s.words = widget.NewLabel("")
	s.words.Wrapping = fyne.TextWrapWord
	head := bar("Tolerance", []fyne.CanvasObject{s.run, s.stop})
	return page(head, s.state, func(in interface{ Scrolled(*fyne.ScrollEvent) }) {
		s.scroll, _ = in.(*container.Scroll)
		s.plate.pane.Scrolls(in)
		s.worst.pane.Scrolls(in)
	}, s.form.box, s.plate.box, s.list.box, s.words, s.worst.box)
}

// Changed clears what belongs to another wall.
func (s *toleranceSheet) Changed() {
	s.form.offer()
	if s.work.Fits() {
		s.plate.pane.Redraw()
		s.worst.pane.Redraw()
		return
	}
	s.work.Drop()
	s.clear()
	s.state.set("Say what the workshop does to the wall, and make copies.")
}

// clear takes away what was measured.
func (s *toleranceSheet) clear() {
	s.result, s.drawn = nil, nil
	s.scroll.ScrollToTop()
	visible(s.stop, false)
	visible(s.run, true)
	s.plate.set(nil)
	s.worst.set(nil)
	s.list.Set(nil)
	s.words.SetText("")
	visible(s.plate.box, false)
	visible(s.worst.box, false)
}

// Closed lets the work go on.
func (s *toleranceSheet) Closed() {}

// begin makes the copies that the form describes, and keeps the plan in the
// study, where a wish can be sought under it.
func (s *toleranceSheet) begin() {
	plan, err := s.form.plan()
	if err == nil {
		_, err = tolerance.New(s.w.session.Table(), plan)
	}
	if err == nil {
		err = s.keep(plan)
	}
	var t *tolerance.Tolerance
	if err == nil {
		t, err = tolerance.New(s.w.session.Table(), plan)
	}
	if err != nil {
		s.state.set(sentence(err.Error()))
		return
	}
	s.clear()
	visible(s.run, false)
	visible(s.stop, true)
	var drawn []figure.Figure
	s.work.Start(func(d desk) error {
		last := time.Now()
		measured := 0
		r, err := t.Run(d.kit(func(x float64) {
			s.state.set(fmt.Sprintf("%d of %d walls measured, %.0f %% of the next", measured, t.Total(), 100*x))
		}), func(done, total int, r *tolerance.Result) {
			d.show(func() { measured = done })
			if time.Since(last) < batchEvery {
				return
			}
			last = time.Now()
			now := *r
			now.Alone = slices.Clone(r.Alone)
			d.show(func() { s.took(&now, done, total) })
		})
		if len(r.Rows) > 0 {
			for k := range plan.Readings {
				p, e := r.WorstDrawn(k, d.steady(), program)
				if e != nil {
					break
				}
				drawn = append(drawn, p)
			}
		}
		d.show(func() { s.took(r, t.Total(), t.Total()) })
		return err
	}, nil, func(err error) { s.ended(err, drawn) })
	s.state.set("Measuring the wall as drawn.")
}

// kit is what copies and walls are made and measured with; within, which may be
// nil, is told on the window's goroutine, now and then, how far the measurement at
// hand is.
func (d desk) kit(within func(share float64)) tolerance.Kit {
	last := time.Now()
	progress := func(done, total int, _ measure.Tally) {
		if within == nil || time.Since(last) < batchEvery {
			return
		}
		last = time.Now()
		share := float64(done) / float64(total)
		d.show(func() { within(share) })
	}
	return tolerance.Kit{
		Kit: study.Kit{
			Run: func(tr *sim.Tracer, seed uint64) measure.Runner {
				return func(m measure.Measurement) (measure.Tally, error) {
					return run.Run(d.ctx, run.Job{Tracer: tr, Measure: m, Seed: seed, Progress: progress})
				}
			},
			Spread: run.Spread(d.ctx, 0),
			Watch:  d.ctx.Err,
		},
		Chance: func(stream uint64) rand.Source { return run.Chance(d.seed, stream) },
	}
}

// steady is a kit for what is drawn after a stop: it makes walls, and measures
// nothing.
func (d desk) steady() tolerance.Kit {
	k := d.kit(nil)
	k.Watch = nil
	return k
}

// keep puts the plan into the study, in place of one of its name.
func (s *toleranceSheet) keep(plan table.Tolerance) error {
	old := s.w.session.Table().Design().Study
	next := old
	next.Tolerances = slices.DeleteFunc(slices.Clone(old.Tolerances), func(o table.Tolerance) bool { return o.Name == plan.Name })
	next.Tolerances = append(next.Tolerances, plan)
	if reflect.DeepEqual(old.Tolerances, next.Tolerances) {
		return nil
	}
	return s.w.session.Do(edit.SetStudy{Study: next, Name: "tolerance of " + plan.Name})
}

// took shows what is measured so far.
func (s *toleranceSheet) took(r *tolerance.Result, done, total int) {
	s.result = r
	if done < total {
		s.state.set(fmt.Sprintf("%d of %d walls measured", done, total))
	}
	if len(r.Rows) == 0 {
		return
	}
	if !slices.Equal(s.which.Options, r.Plan.Readings) {
		s.which.SetOptions(r.Plan.Readings)
		s.which.Selected = r.Plan.Readings[0]
		s.which.Refresh()
	}
	visible(s.choice, len(r.Plan.Readings) > 1)
	s.show()
}

// show shows the reading that is chosen: its distribution, its numbers, its worst
// copies.
func (s *toleranceSheet) show() {
	r := s.result
	if r == nil || len(r.Rows) == 0 {
		return
	}
	k := max(0, s.which.SelectedIndex())
	visible(s.plate.box, true)
	s.plate.set(r.Histogram(k, program))
	s.list.Set(s.numbers(r, k))
	words := r.Lines()[1:]
	if k < len(s.drawn) {
		if p, is := s.drawn[k].(figure.Paths); is {
			visible(s.worst.box, true)
			words = append(words, sentence(p.Caption[0]))
			s.worst.set(p)
			p.Caption = nil // it stands in the words
			s.worst.pane.Set(p)
		}
	}
	s.words.SetText(strings.Join(words, "\n"))
}

// numbers are the rows of the list, for reading k.
func (s *toleranceSheet) numbers(r *tolerance.Result, k int) (rows []readoutRow) {
	d := r.OfReading(k)
	unit := ""
	if k < len(r.Nominal.Taken) && r.Nominal.Taken[k].Unit != "1" {
		unit = " " + r.Nominal.Taken[k].Unit
	}
	add := func(name, about, format string, args ...any) {
		rows = append(rows, readoutRow{name, fmt.Sprintf(format, args...) + unit, about})
	}
	add("As drawn", "The reading of the wall without errors.", "%.5g ± %.1g", d.Nominal, d.NominalErr)
	add("Mean of the copies", fmt.Sprintf("Over %d copies.", len(d.Values)), "%.5g ± %.1g", d.Mean, d.MeanErr)
	add("Half of the copies below", "The median.", "%.5g", d.Quantile(0.5))
	add("5 % below", "The fifth percentile.", "%.5g", d.Quantile(0.05))
	add("95 % below", "The ninety-fifth percentile.", "%.5g", d.Quantile(0.95))
	add("Scatter of the walls", fmt.Sprintf("Standard deviation of the copies, %.2g, without the error of each reading, %.2g.", d.Deviation, d.Noise), "%.2g", d.Wall())
	for i, l := range r.Plan.Limits {
		if l.Reading == r.Plan.Readings[k] {
			rows = append(rows, yieldRow("Yield", r.Yield(i)))
		}
	}
	if len(r.Plan.Limits) > 1 {
		rows = append(rows, yieldRow("Yield, all limits", r.Yield(tolerance.All)))
	}
	for i, p := range r.Parts(k) {
		value := "not measured yet"
		switch {
		case p.Exact == tolerance.Known:
			value = fmt.Sprintf("%.0f %% (exact)", 100*p.Share)
		case !math.IsNaN(p.Share):
			value = fmt.Sprintf("%.0f ± %.0f %%", 100*p.Share, 100*p.Err)
		}
		rows = append(rows, readoutRow{"By " + r.Name(i), value, fmt.Sprintf("Share of this error in the variance, to first order: alone it scatters the copies by %.2g%s. %s.", p.Deviation, unit, sentence(strings.TrimSuffix(r.Words(i), ".")))})
	}
	return rows
}

// yieldRow is a yield in a row of the list.
func yieldRow(name string, y tolerance.Yield) readoutRow {
	value := fmt.Sprintf("%.1f ± %.1f %%", 100*y.Share, 100*y.Err)
	if y.Err == 0 { // none or all: the interval says more
		value = fmt.Sprintf("%.0f %% (%.1f to %.1f %%)", 100*y.Share, 100*y.Lo, 100*y.Hi)
	}
	return readoutRow{name, value, fmt.Sprintf("%d of %d copies keep to it; with a confidence of 95 %% the yield lies between %.1f and %.1f %%. The error is binomial.", y.Good, y.Of, 100*y.Lo, 100*y.Hi)}
}

// ended says how the work ended, and draws the worst copies.
func (s *toleranceSheet) ended(err error, drawn []figure.Figure) {
	visible(s.stop, false)
	visible(s.run, true)
	switch {
	case errors.Is(err, context.Canceled):
		s.state.set("Stopped; what stands here was measured.")
	case err != nil:
		s.state.set(sentence(err.Error()))
	default:
		s.state.set(fmt.Sprintf("All done: %d copies.", len(s.result.Rows)))
	}
	s.drawn = drawn
	s.show()
}
