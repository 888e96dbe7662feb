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
	"fyne.io/fyne/v2/widget"
)

// toleranceSheet makes copies of the wall as a workshop would, and shows how a
// reading lies over them as they are measured.
type toleranceSheet struct {
	w      *Window
	work   *work
	form   *toleranceForm
	result *tolerance.Result // nil for none

	state *caption
	run   *widget.Button
	stop  *widget.Button
	plate *plate
	worst *plate
	list  *readout
	words *widget.Label
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
	s.plate = newPlate(s.w, "Copies", studyFigureHeight, on)
	s.plate.pane.Hinted = "How the reading lies over the copies."
	s.worst = newPlate(s.w, "Worst copies", sheetFigure, on)
	s.worst.pane.Hinted = "The worst copies over the wall as drawn; what they are off is magnified as the words below say."
	s.list = newReadout()
	s.words = widget.NewLabel("")
	s.words.Wrapping = fyne.TextWrapWord
	head := bar("Tolerance", []fyne.CanvasObject{s.run, s.stop})
	return page(head, s.state, func(in interface{ Scrolled(*fyne.ScrollEvent) }) {
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
	s.result = nil
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
	var drawn figure.Figure
	s.work.Start(func(d desk) error {
		last := time.Now()
		kit := d.kit()
		r, err := t.Run(kit, func(done, total int, r *tolerance.Result) {
			if time.Since(last) < batchEvery {
				return
			}
			last = time.Now()
			now := *r
			now.Alone = slices.Clone(r.Alone)
			d.show(func() { s.took(&now, done, total) })
		})
		if len(r.Rows) > 0 {
			if p, e := r.WorstDrawn(0, d.steady(), program); e == nil {
				drawn = p
			}
		}
		d.show(func() { s.took(r, t.Total(), t.Total()) })
		return err
	}, nil, func(err error) { s.ended(err, drawn) })
	s.state.set("Measuring the wall as drawn.")
}

// kit is what copies and walls are made and measured with.
func (d desk) kit() tolerance.Kit {
	return tolerance.Kit{
		Kit: study.Kit{
			Run: func(tr *sim.Tracer, seed uint64) measure.Runner {
				return func(m measure.Measurement) (measure.Tally, error) {
					return run.Run(d.ctx, run.Job{Tracer: tr, Measure: m, Seed: seed})
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
	k := d.kit()
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
	visible(s.plate.box, true)
	s.plate.set(r.Histogram(0, program))
	s.list.Set(s.numbers(r))
	s.words.SetText(strings.Join(r.Lines()[1:], "\n"))
}

// numbers are the rows of the list.
func (s *toleranceSheet) numbers(r *tolerance.Result) (rows []readoutRow) {
	d := r.OfReading(0)
	unit := ""
	if len(r.Nominal.Taken) > 0 && r.Nominal.Taken[0].Unit != "1" {
		unit = " " + r.Nominal.Taken[0].Unit
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
	if len(r.Plan.Limits) > 0 {
		y := r.Yield(tolerance.All)
		rows = append(rows, readoutRow{"Yield", fmt.Sprintf("%.1f ± %.1f %%", 100*y.Share, 100*y.Err), fmt.Sprintf("%d of %d copies keep to the limit; with a confidence of 95 %% the yield lies between %.1f and %.1f %%. The error is binomial.", y.Good, y.Of, 100*y.Lo, 100*y.Hi)})
	}
	for i, p := range r.Parts(0) {
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

// ended says how the work ended, and draws the worst copies.
func (s *toleranceSheet) ended(err error, drawn figure.Figure) {
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
	if p, is := drawn.(figure.Paths); is {
		visible(s.worst.box, true)
		s.worst.set(p)
		s.words.SetText(strings.Join(append(s.result.Lines()[1:], sentence(p.Caption[0])), "\n"))
	}
}
