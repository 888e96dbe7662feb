package window

import (
	"context"
	"errors"
	"fmt"
	"math"
	"reflect"
	"slices"
	"strings"
	"time"

	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/sim/run"
	"cavitywright/sim/study/wish"
	"cavitywright/table"
	"cavitywright/table/edit"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"
)

// wishSheet seeks a wall for a wish, and shows the best so far over the wall on
// the table with its portrait; a button puts it there, as one step.
type wishSheet struct {
	w      *Window
	work   *work
	form   *wishForm
	found  *wish.Found  // nil for none
	chosen *wish.Try    // the wall that is shown; nil for none
	placed *table.Table // the one that was put on the table; nil for none
	scroll *container.Scroll

	state    *caption
	run      *widget.Button
	stop     *widget.Button
	put      *widget.Button
	wall     *plate
	portrait *plate
	course   *plate
	list     *readout
	words    *widget.Label
}

func newWishSheet(w *Window) *wishSheet { return &wishSheet{w: w, work: newWork(w)} }

// Name is "Wish".
func (s *wishSheet) Name() string { return "Wish" }

// View is the form, the best wall with its portrait, and the course of the
// search.
func (s *wishSheet) View() fyne.CanvasObject {
	s.state = newCaption(fyne.TextAlignLeading, 120)
	s.run = quiet("run", "Seek", s.begin)
	s.stop = quiet("stop", "Stop", s.work.Stop)
	s.put = quiet("", "Put it on the table", s.adopt)
	s.form = newWishForm(s.w)
	on := func() *table.Table {
		if s.chosen == nil {
			return nil
		}
		return s.chosen.Table
	}
	s.wall = newPlate(s.w, "Best wall", sheetFigure, on)
	s.wall.pane.Hinted = "The best wall so far over the wall on the table (dashed)."
	s.portrait = newPlate(s.w, "Its portrait", studyFigureHeight, on)
	s.portrait.pane.Hinted = "The Birkhoff portrait of the wall above."
	s.course = newPlate(s.w, "Walls tried", studyFigureHeight, on)
	s.course.pane.Hinted = "The walls tried; press one to see it."
	s.course.pane.Picked = s.pick
	s.list = newReadout()
	s.words = widget.NewLabel("")
	s.words.Wrapping = fyne.TextWrapWord
	head := bar("Wish", []fyne.CanvasObject{s.run, s.stop}, s.put)
	return page(head, s.state, func(in interface{ Scrolled(*fyne.ScrollEvent) }) {
		s.scroll, _ = in.(*container.Scroll)
		for _, p := range []*plate{s.wall, s.portrait, s.course} {
			p.pane.Scrolls(in)
		}
	}, s.form.box, s.wall.box, s.list.box, s.portrait.box, s.course.box, s.words)
}

// belongs reports whether the wall on the table is the one that the search began
// from, or one that it brought.
func (s *wishSheet) belongs() bool {
	return s.work.Fits() || s.found != nil && s.placed != nil && s.placed.SameWall(s.w.session.Table())
}

// Changed clears what was sought from another wall.
func (s *wishSheet) Changed() {
	s.form.offer()
	if s.belongs() {
		for _, p := range []*plate{s.wall, s.portrait, s.course} {
			p.pane.Redraw()
		}
		return
	}
	s.work.Drop()
	s.clear()
	s.state.set("Say what you wish for and what may be turned, and seek.")
}

// Closed lets the work go on.
func (s *wishSheet) Closed() {}

// clear takes away what was found.
func (s *wishSheet) clear() {
	s.found, s.chosen, s.placed = nil, nil, nil
	s.scroll.ScrollToTop()
	visible(s.stop, false)
	visible(s.run, true)
	s.put.Disable()
	for _, p := range []*plate{s.wall, s.portrait, s.course} {
		p.set(nil)
		visible(p.box, false)
	}
	s.list.Set(nil)
	s.words.SetText("")
}

const (
	// ghostOrbits and ghostBounces are those of the portrait of the best wall.
	ghostOrbits  = 40
	ghostBounces = 300
	// ghostEvery is the time from one portrait of a search to the next.
	ghostEvery = 700 * time.Millisecond
)

// begin seeks what the form describes, and keeps the plan in the study.
func (s *wishSheet) begin() {
	plan, err := s.form.plan()
	if err == nil {
		_, err = wish.New(s.w.session.Table(), plan)
	}
	if err == nil {
		err = s.keep(plan)
	}
	var k *wish.Wish
	if err == nil {
		k, err = wish.New(s.w.session.Table(), plan)
	}
	if err != nil {
		s.state.set(sentence(err.Error()))
		return
	}
	s.clear()
	visible(s.run, false)
	visible(s.stop, true)
	s.work.Start(func(d desk) error {
		var last, ghost time.Time
		var drawn *wish.Try
		tried := 0
		f, err := k.Search(d.kit(func(x float64) {
			s.state.set(fmt.Sprintf("%d of %d walls tried, %.0f %% of the next", tried, plan.Tries, 100*x))
		}), func(f *wish.Found, _ *wish.Try) {
			n := len(f.Tries)
			d.show(func() { tried = n })
			if time.Since(last) < batchEvery {
				return
			}
			last = time.Now()
			now := *f
			now.Tries = slices.Clip(f.Tries)
			var p figure.Figure
			if f.Best != drawn && f.Best != nil && time.Since(ghost) > ghostEvery {
				ghost, drawn = time.Now(), f.Best
				p = ghostPortrait(d.ctx, f.Best.Table)
			}
			d.show(func() { s.took(&now, p) })
		})
		var p figure.Figure
		if f.Best != nil {
			p = ghostPortrait(context.WithoutCancel(d.ctx), f.Best.Table)
		}
		d.show(func() { s.took(f, p) })
		return err
	}, nil, s.ended)
	s.state.set("Measuring the wall as drawn.")
}

// ghostPortrait is a short portrait of a wall; nil where it was stopped.
func ghostPortrait(ctx context.Context, t *table.Table) figure.Figure {
	tr := sim.Compile(t)
	d := t.Design()
	d.Study.Launches = nil
	study := measure.WithLaunches(t, d.Study, ghostOrbits)
	tally, err := run.Run(ctx, run.Job{Tracer: tr, Measure: measure.NewPortrait(tr, study.Launches, ghostBounces), Seed: study.Seed})
	if err != nil {
		return nil
	}
	p := measure.PortraitFigure(t, tally.(*measure.PortraitTally), program)
	p.Caption = nil
	return p
}

// keep puts the plan into the study, in place of one of its name.
func (s *wishSheet) keep(plan table.Wish) error {
	old := s.w.session.Table().Design().Study
	next := old
	next.Wishes = slices.DeleteFunc(slices.Clone(old.Wishes), func(o table.Wish) bool { return o.Name == plan.Name })
	next.Wishes = append(next.Wishes, plan)
	if reflect.DeepEqual(old.Wishes, next.Wishes) {
		return nil
	}
	return s.w.session.Do(edit.SetStudy{Study: next, Name: "wish for " + plan.Name})
}

// took shows what was found so far; p is the portrait of its best, nil for the
// one that is shown.
func (s *wishSheet) took(f *wish.Found, p figure.Figure) {
	s.found = f
	s.state.set(fmt.Sprintf("%d of %d walls tried", len(f.Tries), f.Plan.Tries))
	visible(s.course.box, true)
	s.course.set(f.Course(program))
	if f.Best != nil {
		s.show(f.Best)
	}
	if p != nil {
		visible(s.portrait.box, true)
		s.portrait.set(p)
	}
	s.words.SetText(strings.Join(f.Lines(), "\n"))
}

// show shows a wall that was tried.
func (s *wishSheet) show(y *wish.Try) {
	s.chosen = y
	visible(s.wall.box, true)
	p := s.found.Wall(y, program)
	p.Caption = nil
	s.wall.set(p)
	s.put.Enable()
	var rows []readoutRow
	for _, t := range y.Terms {
		value := fmt.Sprintf("%.5g", t.Value)
		if t.StdErr > 0 {
			value += fmt.Sprintf(" ± %.1g", t.StdErr)
		}
		about := "Of this wall, with the seed of the study."
		if s.found.Plan.Under != "" {
			about = fmt.Sprintf("Over %d copies of this wall by the tolerance %q.", s.found.Plan.Copies, s.found.Plan.Under)
		}
		rows = append(rows, readoutRow{t.Name, strings.TrimSpace(value + " " + t.Unit), about})
	}
	for k, v := range y.At {
		value := fmt.Sprintf("%.6g", v)
		if y == s.found.Best && k < len(s.found.BestErr) && !math.IsNaN(s.found.BestErr[k]) {
			value += fmt.Sprintf(" ± %.1g", s.found.BestErr[k])
		}
		x := s.found.Plan.Free[k]
		rows = append(rows, readoutRow{s.found.Label(k), value, fmt.Sprintf("Turned from %.5g to %.5g.", x.Lo, x.Hi)})
	}
	s.list.Set(rows)
}

// pick shows the wall that was pressed in the course or the front.
func (s *wishSheet) pick(x, y float64) {
	if s.found == nil || s.work.Busy() {
		return
	}
	c := s.found.Course("")
	var best *wish.Try
	least := math.Inf(1)
	for _, t := range s.found.Tries {
		if !t.Sound() {
			continue
		}
		u, v := float64(t.N), math.NaN()
		if s.found.Fronted() {
			u, v = s.found.Heights(t)
		}
		d := math.Abs(u-x) / (c.X.Hi - c.X.Lo)
		if s.found.Fronted() {
			d = math.Hypot(d, (v-y)/(c.Y.Hi-c.Y.Lo))
		}
		if d < least {
			best, least = t, d
		}
	}
	if best == nil {
		return
	}
	s.show(best)
	visible(s.portrait.box, true)
	s.portrait.set(ghostPortrait(context.Background(), best.Table))
	s.state.set(sentence(s.found.Place(best.At)))
}

// adopt puts the wall that is shown on the table, as one step that undo takes
// back.
func (s *wishSheet) adopt() {
	if s.chosen == nil || s.chosen.Table == nil || !s.belongs() {
		return
	}
	f, y := s.found, s.chosen
	d := y.Table.Design()
	now := s.w.session.Table().Design()
	d.Name, d.Notes, d.Study = now.Name, now.Notes, now.Study
	if s.work.Busy() { // a wall that is taken ends the search
		s.work.Stop()
		s.ended(context.Canceled)
	}
	before := s.placed
	// The wall is known for one that was found before the others are told of it.
	c := &putWall{Design: d, Name: "wall for " + f.Plan.Name, made: func(t *table.Table) { s.placed = t }}
	if err := s.w.session.Do(c); err != nil {
		s.placed = before
		s.w.foot.say(err.Error())
		return
	}
	s.w.say("On the table: %s.", f.Place(y.At))
}

// ended says how the search ended.
func (s *wishSheet) ended(err error) {
	visible(s.stop, false)
	visible(s.run, true)
	switch {
	case errors.Is(err, context.Canceled):
		s.state.set("Stopped; the best so far stands here.")
	case err != nil:
		s.state.set(sentence(err.Error()))
	case s.found == nil || s.found.Best == nil:
		s.state.set("Nothing was found; widen the ranges, or demand less.")
	default:
		s.state.set(fmt.Sprintf("Found after %d walls.", len(s.found.Tries)))
	}
}
