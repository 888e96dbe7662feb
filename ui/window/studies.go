package window

import (
	"context"
	"errors"
	"fmt"
	"reflect"
	"time"

	"cavitywright/sim"
	"cavitywright/sim/measure"
	"cavitywright/sim/run"
	"cavitywright/sim/study"
	"cavitywright/table"
	"cavitywright/table/edit"
	"cavitywright/ui/live"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"
)

// studiesSheet carries out sweeps: numbers of the table are turned over values,
// readings are taken at each point, and a point that is picked puts its wall on
// the table. What was found belongs to all walls of the sweep: it stays while
// one of them is on the table, is put away beside any other wall, and comes back
// with an undo. Work goes on meanwhile.
type studiesSheet struct {
	w      *Window
	work   *work
	form   *studyForm
	result *study.Result // nil for none
	put    *table.Table  // the wall of the sweep that was put on the table last
	picked int           // the point that is on the table, or was pressed; -1 for none
	fault  int           // the point without a table that was pressed on the wall put; -1 for none
	pace   pacing

	state  *caption
	run    *widget.Button
	stop   *widget.Button
	goOn   *widget.Button
	write  *widget.Button
	plates []*plate
	body   *fyne.Container
	point  *widget.Label
	list   *readout
	words  *widget.Label
	scroll *container.Scroll
}

func newStudiesSheet(w *Window) *studiesSheet {
	return &studiesSheet{w: w, work: newWork(w), picked: -1, fault: -1}
}

// Name is "Studies".
func (s *studiesSheet) Name() string { return "Studies" }

// View is the form, the figures, and the point that is picked.
func (s *studiesSheet) View() fyne.CanvasObject {
	s.state = newCaption(fyne.TextAlignLeading, 120)
	s.run = quiet("run", "Run", s.begin)
	s.stop = quiet("stop", "Stop", s.work.Stop)
	s.goOn = quiet("run", "Go on", s.resume)
	s.write = quiet("save", "Write", s.askWrite)
	s.form = newStudyForm(s.w)
	s.body = container.NewVBox()
	s.point, s.words = widget.NewLabel(""), widget.NewLabel("")
	s.point.Wrapping, s.words.Wrapping = fyne.TextWrapWord, fyne.TextWrapWord
	s.list = newReadout()
	head := bar("Studies", []fyne.CanvasObject{s.run, s.stop, s.goOn}, s.write)
	return page(head, s.state, func(in interface{ Scrolled(*fyne.ScrollEvent) }) { s.scroll, _ = in.(*container.Scroll) },
		s.form.box, s.body, s.point, s.list.box, s.words)
}

// Changed shows what belongs to the wall as it is now.
func (s *studiesSheet) Changed() {
	s.form.offer()
	s.show()
}

// Closed lets the work go on.
func (s *studiesSheet) Closed() {}

// begin begins the sweep that the form describes, and keeps it in the table's
// study.
func (s *studiesSheet) begin() {
	sweep, err := s.form.sweep()
	if err != nil {
		s.state.set(sentence(err.Error()))
		return
	}
	if _, err := study.New(s.w.session.Table(), sweep); err != nil {
		s.state.set(sentence(err.Error()))
		return
	}
	if err := s.keep(sweep); err != nil {
		s.state.set(sentence(err.Error()))
		return
	}
	st, err := study.New(s.w.session.Table(), sweep)
	if err != nil {
		s.state.set(sentence(err.Error()))
		return
	}
	s.result, s.put, s.picked, s.fault = study.NewResult(st), nil, -1, -1
	s.form.grid.Hide() // the curves have the room
	s.lay()
	s.resume()
}

// keep puts the sweep into the study, in place of one of its name.
func (s *studiesSheet) keep(sweep table.DialSweep) error {
	old := s.w.session.Table().Design().Study
	next := old
	next.Sweeps = nil
	found := false
	for _, o := range old.Sweeps {
		if o.Name == sweep.Name {
			o, found = sweep, true
		}
		next.Sweeps = append(next.Sweeps, o)
	}
	if !found {
		next.Sweeps = append(next.Sweeps, sweep)
	}
	if reflect.DeepEqual(old.Sweeps, next.Sweeps) {
		return nil
	}
	return s.w.session.Do(edit.SetStudy{Study: next, Name: "study of " + sweep.Name})
}

// batchEvery is the time from one batch of rows to the next.
const batchEvery = 150 * time.Millisecond

// resume does the tasks that are still to be done.
func (s *studiesSheet) resume() {
	r := s.result
	if r == nil {
		return
	}
	var have []study.Row // they were brought in the order of the tasks
	for row, done := r.Rows[0]; done; row, done = r.Rows[len(have)] {
		have = append(have, row)
	}
	s.work.Drop()
	turn := s.work.turn
	folder := s.w.recordsFolder()
	s.pace = newPacing(r.Tasks()-len(have), time.Now())
	s.work.task = live.Start(s.w.post, func(ctx context.Context, share func(float64)) error {
		took := func(rows []study.Row) {
			s.w.post(func() {
				if s.work.turn == turn {
					s.took(rows)
				}
			})
		}
		rec, stood := recorded(folder, r.Study)
		defer rec.close()
		for _, row := range have[min(len(stood), len(have)):] {
			rec.add(row)
		}
		if len(stood) > len(have) {
			took(stood)
			have = stood
			s.w.post(func() {
				if s.work.turn == turn {
					s.pace = newPacing(r.Tasks()-len(r.Rows), time.Now()) // what stood says nothing of the pace
				}
			})
		}
		return studyTasks(ctx, r.Study, len(have), share, rec.add, took)
	}, func(x float64) {
		if s.work.turn == turn {
			s.pace.within = x
			s.tell()
		}
	}, func(err error) {
		if s.work.turn == turn {
			s.ended(err)
		}
	})
	s.show()
}

// studyTasks does the tasks from one on in turn, each on all processors, and
// hands each row to done as it comes and to took in batches. share is told how
// far the task at hand is.
func studyTasks(ctx context.Context, st *study.Study, from int, share func(float64), done func(study.Row), took func([]study.Row)) error {
	kit := study.Kit{Spread: run.Spread(ctx, 0), Watch: ctx.Err, Run: func(tr *sim.Tracer, seed uint64) measure.Runner {
		return func(m measure.Measurement) (measure.Tally, error) {
			return run.Run(ctx, run.Job{Tracer: tr, Measure: m, Seed: seed,
				Progress: func(done, total int, _ measure.Tally) { share(float64(done) / float64(total)) }})
		}
	}}
	var batch []study.Row
	last := time.Now()
	for i := from; i < st.Tasks(); i++ {
		row, err := st.Take(i, kit)
		if err == nil {
			err = ctx.Err()
		}
		if err != nil {
			took(batch)
			return err
		}
		done(row)
		batch = append(batch, row)
		if time.Since(last) > batchEvery {
			last = time.Now()
			took(batch)
			batch = nil
		}
	}
	took(batch)
	return nil
}

// took adds rows.
func (s *studiesSheet) took(rows []study.Row) {
	for _, row := range rows {
		s.result.Add(row)
	}
	s.pace.done += len(rows)
	s.pace.within = 0
	s.show()
}

// ended says how the work ended.
func (s *studiesSheet) ended(err error) {
	s.work.task = nil
	s.pace.failed = err
	s.show()
}

// tell writes the line under the header.
func (s *studiesSheet) tell() {
	r := s.result
	switch {
	case r == nil:
		s.state.set("Choose a number and its range, tick readings, and run.")
	case s.work.Busy():
		s.state.set(fmt.Sprintf("%d of %d done, %s", len(r.Rows), r.Tasks(), s.pace.left(time.Now())))
	case s.pace.failed != nil && !errors.Is(s.pace.failed, context.Canceled):
		s.state.set(sentence(s.pace.failed.Error()))
	case !r.Whole():
		s.state.set(fmt.Sprintf("Stopped after %d of %d; it goes on from there.", len(r.Rows), r.Tasks()))
	case !s.belongs():
		s.state.set("The last study is of another wall; undo brings both back.")
	default:
		s.state.set("All done. Press a point, and its wall is on the table.")
	}
}

// pacing is how fast tasks get done.
type pacing struct {
	tasks, done int
	within      float64 // share of the task at hand
	since       time.Time
	failed      error
}

func newPacing(tasks int, now time.Time) pacing { return pacing{tasks: tasks, since: now} }

// left says how long the rest will take at the pace so far.
func (p pacing) left(now time.Time) string {
	done := float64(p.done) + p.within
	if done < 0.05 {
		return "working"
	}
	rest := time.Duration(float64(now.Sub(p.since)) / done * (float64(p.tasks) - done))
	switch {
	case rest < time.Second:
		return "a moment left"
	case rest < 90*time.Second:
		return fmt.Sprintf("%.0f s left", rest.Seconds())
	case rest < 90*time.Minute:
		return fmt.Sprintf("%.0f min left", rest.Minutes())
	}
	return fmt.Sprintf("%.1f h left", rest.Hours())
}
