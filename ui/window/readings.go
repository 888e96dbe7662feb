package window

import (
	"context"
	"errors"
	"fmt"
	"strconv"
	"strings"

	"cavitywright/render"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/sim/measure/chaos"
	"cavitywright/sim/measure/reading"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/layout"
	"fyne.io/fyne/v2/widget"
)

// readingsSheet shows the numbers of a table as they are measured, each with
// its error, its definition and what has to be said about it; above them what
// they come to in plain sentences, and below how they settle.
type readingsSheet struct {
	w       *Window
	work    *work
	taker   *reading.Taker  // nil until all is measured
	rows    []figure.Scalar // what was measured
	shown   []readoutRow
	list    *readout
	verdict *widget.Label
	state   *caption
	run     *widget.Button
	stop    *widget.Button
	write   *widget.Button
	effort  *widget.Select // multiplies the number of bounces
	speed   *widget.SelectEntry
	figures []*namedFigure
	islands *islandList
	orbits  *launchedList
}

func newReadingsSheet(w *Window) *readingsSheet {
	return &readingsSheet{w: w, work: newWork(w), orbits: newLaunchedList(w)}
}

// Name is "Readings".
func (s *readingsSheet) Name() string { return "Readings" }

// View is the verdict, the list, the figures and the launched orbits.
func (s *readingsSheet) View() fyne.CanvasObject {
	s.list, s.state = newReadout(), newCaption(fyne.TextAlignLeading, 120)
	s.verdict = widget.NewLabel("")
	s.verdict.Wrapping = fyne.TextWrapWord
	s.run = quiet("run", "Measure", s.measure)
	s.stop = quiet("stop", "Stop", s.work.Stop)
	s.write = quiet("save", "Write", s.askWrite)
	s.speed = widget.NewSelectEntry([]string{"light", "sound"})
	s.speed.SetPlaceHolder("m/s")
	s.speed.OnChanged = func(string) { s.perSecond() }
	s.effort = widget.NewSelect([]string{"1", "4", "16", "64"}, nil)
	s.effort.Selected = "1"
	s.stop.Hide()
	s.write.Disable()
	head := bar("Readings", []fyne.CanvasObject{s.run, s.stop}, s.write)
	options := container.NewHBox(widget.NewLabel("effort"), container.NewGridWrap(fyne.NewSize(72, 34), s.effort),
		widget.NewLabel("speed"), container.NewGridWrap(fyne.NewSize(120, 34), s.speed))
	s.islands = newIslandList()
	body := container.NewVBox(s.verdict, s.list.box, s.orbits.view(), s.islands.box)
	for _, name := range []string{"How the exponent settles", "Chaotic share by bounces used", "Flights between bounces", "Correlation of p by the lag"} {
		f := newNamedFigure(s.w, name, s.work)
		s.figures = append(s.figures, f)
		body.Add(f.box)
	}
	top := container.NewVBox(head, options, container.New(layout.NewCustomPaddedLayout(0, 4, 10, 10), s.state))
	scroll := container.NewVScroll(body)
	for _, f := range s.figures {
		f.pane.Scrolls(scroll)
	}
	return container.NewBorder(top, nil, nil, nil, scroll)
}

// Changed clears what belongs to another wall.
func (s *readingsSheet) Changed() {
	s.orbits.changed()
	if s.work.Fits() {
		for _, f := range s.figures {
			f.pane.Redraw()
		}
		return
	}
	s.work.Drop()
	s.clear()
	s.stop.Hide()
	s.run.Enable()
	s.state.set("Not measured yet on this wall.")
}

// clear takes away what was measured.
func (s *readingsSheet) clear() {
	s.taker, s.rows, s.shown = nil, nil, nil
	s.list.Set(nil)
	s.verdict.SetText("")
	s.islands.show(nil)
	s.write.Disable()
	for _, f := range s.figures {
		f.set(nil)
	}
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
	speed, err := reading.ParseSpeed(strings.TrimSpace(s.speed.Text))
	if err != nil {
		s.w.foot.say(err.Error())
		return
	}
	effort, err := strconv.ParseFloat(s.effort.Selected, 64)
	if err != nil {
		effort = 1
	}
	s.clear()
	s.run.Disable()
	s.stop.Show()
	at := ""
	var taker *reading.Taker
	s.work.Start(func(d desk) error {
		taker = reading.NewTaker(d.tracer, d.runner, effort, d.seed, speed)
		return s.take(d, taker, wanted, func(name string) { at = name; s.state.set(name) })
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
			s.taker = taker
			s.perSecond()
		}
		if len(s.rows) > 0 {
			s.write.Enable()
		}
	})
}

// take takes the readings on the work's goroutine: first those that cost
// nothing, then what they come to, then the others.
func (s *readingsSheet) take(d desk, k *reading.Taker, wanted []reading.Reading, begin func(name string)) error {
	judged := chaos.Mirrors(d.tracer.Table()) != ""
	for _, r := range wanted {
		if r.Kind != reading.Exact && !judged {
			judged = true
			d.show(func() { begin("verdict") })
			text, err := k.Verdict()
			if err != nil {
				return err
			}
			var survey *chaos.Survey
			if chaos.Integrable(d.tracer.Table()) == "" {
				if survey, err = k.Survey(); err != nil { // it is kept: the verdict rests on it
					return err
				}
			}
			d.show(func() {
				s.verdict.SetText(text)
				s.islands.show(survey)
			})
		}
		d.show(func() { begin(r.Name) })
		row, err := k.Take(r)
		if no := (*measure.NotMeasured)(nil); errors.As(err, &no) {
			d.show(func() { s.addLine(readoutRow{r.Name, "none", err.Error()}) })
			continue
		}
		if err != nil {
			return err
		}
		d.show(func() { s.add(r, row) })
	}
	return s.draw(d, k)
}

// draw makes the figures of what was measured.
func (s *readingsSheet) draw(d desk, k *reading.Taker) error {
	t := d.tracer.Table()
	if chaos.Mirrors(t) != "" || chaos.Integrable(t) != "" {
		return nil
	}
	rate, err := k.Stretching()
	if err != nil {
		return err
	}
	share, err := k.Sharing()
	if err != nil {
		return err
	}
	flights, err := k.Paths()
	if err != nil {
		return err
	}
	decay, err := k.Momentum()
	if err != nil {
		return err
	}
	d.show(func() {
		if rate.Chaotic >= chaos.StretchOrbits {
			s.figures[0].set(new(rate.Trace(t, program)))
		}
		s.figures[1].set(new(share.Trace(t, program)))
		s.figures[2].set(new(flights.Figure(t, program)))
		s.figures[3].set(new(decay.Figure(t, program)))
	})
	return nil
}

// perSecond shows the exponent per second at the speed in the field, as soon as
// it is known.
func (s *readingsSheet) perSecond() {
	if s.taker == nil || !s.work.Fits() {
		return
	}
	for i, row := range s.shown {
		if row.Name == perSecond {
			s.shown, s.rows = append(s.shown[:i:i], s.shown[i+1:]...), s.rows[:len(s.rows)-1]
			break
		}
	}
	speed, err := reading.ParseSpeed(strings.TrimSpace(s.speed.Text))
	wanted, none := reading.Wanted(s.work.on, []string{perSecond})
	if err != nil || none != nil || speed == 0 {
		s.list.Set(s.shown)
		return
	}
	row, err := s.taker.At(speed).Take(wanted[0])
	if err != nil {
		s.list.Set(s.shown)
		return
	}
	s.add(wanted[0], row)
}

const perSecond = "lyapunov-per-second"

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

// askWrite writes the rows to a file: CSV, JSON, or a page.
func (s *readingsSheet) askWrite() {
	s.w.askFigureFile("Write the readings as", "-readings.csv", s.work.on, figure.Scalars{Rows: s.rows}, 175)
}
