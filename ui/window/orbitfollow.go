package window

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"math"
	"path/filepath"
	"slices"
	"strconv"
	"strings"

	"cavitywright/sim/orbit"
	"cavitywright/sim/run"
	"cavitywright/table"
	"cavitywright/table/dial"
	"cavitywright/table/param"
	"cavitywright/ui/pane"
	"cavitywright/ui/store"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/layout"
	"fyne.io/fyne/v2/widget"
)

// orbitFollow follows the orbits while one number of the table moves, and shows
// the trace of each with the changes.
type orbitFollow struct {
	w        *Window
	work     *work
	followed *orbit.Followed // nil until it is done
	number   orbit.Number
	pane     *pane.Figure
	state    *caption
	words    *widget.Label
	dial     *widget.Select
	from, to *field
	upTo     *widget.Select
	run      *widget.Button
	stop     *widget.Button
	write    *widget.Button
}

const (
	// followSteps is the steps in which a range is followed.
	followSteps = 60
	// mostFollowed is the greatest number of bounces that is offered.
	mostFollowed = 8
	// followFirst is the one that is offered first, and followSpan the half of
	// the range about the number's value, relative to it.
	followFirst = 4
	followSpan  = 0.2
)

func newOrbitFollow(w *Window) *orbitFollow { return &orbitFollow{w: w, work: newWork(w)} }

func (s *orbitFollow) view() fyne.CanvasObject {
	s.state, s.words = newCaption(fyne.TextAlignLeading, 120), widget.NewLabel("")
	s.words.Wrapping = fyne.TextWrapWord
	s.pane = pane.NewFigure(s.w.desk)
	s.pane.Hinted = "The trace of each orbit while the number moves: stable between −2 and 2; a dashed line stands at each change."
	s.dial = widget.NewSelect(nil, func(string) { s.suggest() })
	s.from, s.to = newField(""), newField("")
	s.upTo = widget.NewSelect(nil, nil)
	for n := orbit.Least; n <= mostFollowed; n++ {
		s.upTo.Options = append(s.upTo.Options, fmt.Sprintf("%d bounces", n))
	}
	s.upTo.SetSelectedIndex(followFirst - orbit.Least)
	s.run = quiet("run", "Follow", s.follow)
	s.stop = quiet("stop", "Stop", s.work.Stop)
	s.write = quiet("save", "Write", s.askWrite)
	s.stop.Hide()
	s.write.Disable()
	size := func(w float32, o fyne.CanvasObject) fyne.CanvasObject {
		return container.NewGridWrap(fyne.NewSize(w, 34), o)
	}
	what := container.NewHBox(size(128, s.dial), widget.NewLabel("from"), size(84, s.from), widget.NewLabel("to"), size(84, s.to))
	head := container.NewHBox(widget.NewLabel("up to"), size(132, s.upTo), s.run, s.stop, layout.NewSpacer(), s.write)
	top := container.NewVBox(what, head, container.New(layout.NewCustomPaddedLayout(0, 4, 10, 10), s.state))
	words := container.New(tall(followWords), container.NewVScroll(s.words))
	return container.NewBorder(top, words, nil, nil, s.pane.Surface)
}

// followWords is the room for the list of changes.
const followWords = 190

// changed clears what belongs to another wall.
func (s *orbitFollow) changed() {
	s.offer()
	if s.work.Fits() {
		s.pane.Redraw()
		return
	}
	s.work.Drop()
	s.forget()
	s.stop.Hide()
	s.run.Enable()
	s.state.set("Choose a number and its range; the orbits are followed over it.")
}

func (s *orbitFollow) forget() {
	s.followed = nil
	s.pane.Set(nil)
	s.words.SetText("")
	s.write.Disable()
}

// offer lists the numbers that change the wall.
func (s *orbitFollow) offer() {
	d := s.w.session.Table().Design()
	var names []string
	for _, x := range dial.All(d) {
		moves := x.Part == dial.Node
		if x.Part == dial.Item {
			lone := len(d.Items) == 1 && slices.Contains([]string{"x", "y", "turn", "scale"}, x.Name)
			spec, err := x.Spec(d)
			moves = err == nil && !lone && spec.Unit != param.Count
		}
		if moves {
			names = append(names, x.String())
		}
	}
	if slices.Equal(names, s.dial.Options) {
		return
	}
	s.dial.Options = names
	if len(names) > 0 && !slices.Contains(names, s.dial.Selected) {
		s.dial.SetSelected(names[min(1, len(names)-1)]) // the first is a radius as a rule, which only scales
	}
	s.dial.Refresh()
}

// suggest fills in a range about the number's value.
func (s *orbitFollow) suggest() {
	d := s.w.session.Table().Design()
	x, err := dial.Find(d, s.dial.Selected)
	if err != nil {
		return
	}
	v, err1 := x.Value(d)
	spec, err2 := x.Spec(d)
	if err1 != nil || err2 != nil {
		return
	}
	half := math.Abs(v) * followSpan
	if half == 0 {
		half = followSpan / 2
	}
	write := func(v float64) string { return strconv.FormatFloat(spec.Clamp(v), 'g', 6, 64) }
	s.from.SetText(write(v - half))
	s.to.SetText(write(v + half))
}

// follow follows beside the window.
func (s *orbitFollow) follow() {
	t := s.w.session.Table()
	d := t.Design()
	x, err := dial.Find(d, s.dial.Selected)
	if err != nil {
		s.state.set(sentence(err.Error()))
		return
	}
	from, err1 := strconv.ParseFloat(strings.TrimSpace(s.from.Text), 64)
	to, err2 := strconv.ParseFloat(strings.TrimSpace(s.to.Text), 64)
	if err1 != nil || err2 != nil {
		s.state.set("The range is not understood; write two numbers, the lower one first.")
		return
	}
	spec, err := x.Spec(d)
	if err != nil {
		s.state.set(sentence(err.Error()))
		return
	}
	s.forget()
	s.number = orbit.Number{Name: x.Name, Unit: map[param.Unit]string{param.Length: d.Unit.String(), param.Angle: "rad"}[spec.Unit]}
	course := orbit.Course{From: from, To: to, Steps: followSteps, Table: func(v float64) (*table.Table, error) {
		turned, err := x.Turned(d, v)
		if err != nil {
			return nil, err
		}
		return table.New(turned)
	}}
	course.UpTo = s.upTo.SelectedIndex() + orbit.Least
	s.run.Disable()
	s.stop.Show()
	s.state.set("Following…")
	var found *orbit.Followed
	s.work.Start(func(d desk) (err error) {
		course.Watch, course.Spread = d.ctx.Err, run.Spread(d.ctx, 0)
		course.Told = seldom(d, func(share float64, n int) {
			s.state.set(fmt.Sprintf("Following; %d orbits so far, %.0f %%.", n, 100*share))
		})
		found, err = orbit.Follow(course)
		return err
	}, nil, func(err error) {
		s.stop.Hide()
		s.run.Enable()
		switch {
		case errors.Is(err, context.Canceled):
			s.state.set("Stopped; what is not finished shows nothing.")
		case err != nil:
			s.state.set(sentence(err.Error()))
		default:
			s.show(found)
		}
	})
}

func (s *orbitFollow) show(found *orbit.Followed) {
	s.followed = found
	s.pane.Set(found.Figure(s.number, nil))
	s.state.set(fmt.Sprintf("%d orbits, %d changes; one orbit of each set of copies.", len(found.Branches), len(found.Changes())))
	s.words.SetText(strings.Join(found.Standing(s.number), "\n"))
	s.write.Enable()
}

// askWrite asks for a file for the traces.
func (s *orbitFollow) askWrite() {
	name := strings.TrimSuffix(s.w.fileName(), ".cavity.json") + "-followed.csv"
	s.w.askPath(question{what: "Write the traces (.csv) or the figure (.png, .svg, .pdf) as", folder: s.w.folder(), name: name}, func(path string) error {
		if err := s.writeTo(path); err != nil {
			return err
		}
		s.w.say("Written: %s.", path)
		return nil
	})
}

func (s *orbitFollow) writeTo(path string) error {
	t, f := s.work.on, s.followed
	if f == nil {
		return errors.New("the wall has changed since; follow the orbits again")
	}
	if !strings.EqualFold(filepath.Ext(path), ".csv") {
		return writeFigure(path, t, f.Figure(s.number, f.Caption(t, program)), 85)
	}
	var out bytes.Buffer
	_ = f.WriteCSV(&out, t, s.number, program) // a buffer takes all
	return store.WriteFile(path, out.Bytes())
}
