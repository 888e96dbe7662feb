package window

import (
	"context"
	"errors"
	"fmt"
	"math"
	"strings"
	"time"

	"cavitywright/sim/study"
	"cavitywright/sim/study/film"
	"cavitywright/table"
	"cavitywright/table/dial"
	"cavitywright/table/param"
	"cavitywright/ui/live"
	"cavitywright/ui/tool"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/layout"
	"fyne.io/fyne/v2/widget"
)

// filmSheet turns a number of the table from one value to another while one
// looks, and writes that as a film. What is watched is a gesture: the table is
// as before at its end, unless it is kept where it stands.
type filmSheet struct {
	w       *Window
	row     *turnRow
	watch   *widget.Button
	stop    *widget.Button
	keep    *widget.Button
	write   *widget.Button
	state   *caption
	offered *table.Table

	dial    dial.Dial
	values  []float64
	label   string
	at      int
	gesture int // the session's, while it is watched; 0 else
	timer   *time.Timer
}

func newFilmSheet(w *Window) *filmSheet {
	return &filmSheet{w: w, state: newCaption(fyne.TextAlignLeading, 120)}
}

// Name is "Film".
func (s *filmSheet) Name() string { return "Film" }

const (
	// filmEvery is the time from frame to frame: slow enough that the portrait
	// shows each wall, fast enough to move.
	filmEvery = 90 * time.Millisecond
	// filmRest is how long the last frame stays.
	filmRest = 900 * time.Millisecond
	// filmRate is the frames a second of a film that is written.
	filmRate = 12
	// filmFrames is the number of frames that is offered.
	filmFrames = 60
)

// View is the form and what can be done with it.
func (s *filmSheet) View() fyne.CanvasObject {
	s.row = newTurnRow(s.chosen, func() {}, filmFrames)
	s.watch = quiet("run", "Watch", s.begin)
	s.stop = quiet("stop", "Stop", s.end)
	s.keep = quiet("", "Keep this wall", s.keepIt)
	s.write = quiet("save", "Write", s.askWrite)
	head := bar("Film", nil, s.keep, s.watch, s.stop, s.write)
	word := container.NewGridWrap(fyne.NewSize(72, 34), widget.NewLabel("Turn"))
	about := widget.NewLabel("Watch lets the number run while rays and portrait follow; the wall is back at the end. Write makes a GIF, or numbered PNGs of which each opens as its table.")
	about.Wrapping = fyne.TextWrapWord
	s.show()
	return container.NewVBox(head, container.New(layout.NewCustomPaddedLayout(0, 4, 10, 10), s.state),
		container.NewBorder(nil, nil, word, nil, s.row.which), s.row.box, about)
}

// Changed offers the numbers of another table, and ends what is watched where
// something else was done.
func (s *filmSheet) Changed() {
	if s.gesture != 0 {
		if s.w.session.Gesture() != s.gesture {
			s.over("Stopped: the table was changed otherwise.")
		}
		return
	}
	s.offer()
}

// Closed ends it.
func (s *filmSheet) Closed() { s.end() }

// offer lists the numbers of the table.
func (s *filmSheet) offer() {
	t := s.w.session.Table()
	if s.row == nil || s.offered != nil && s.offered.SameWall(t) {
		return
	}
	s.offered = t
	d := t.Design()
	var dials []dial.Dial
	var labels []string
	for _, x := range dial.All(d) {
		dials, labels = append(dials, x), append(labels, study.Label(d, x))
	}
	s.row.offer(dials, labels)
	if s.row.which.SelectedIndex() < 0 && len(dials) > 0 {
		s.row.which.SetSelectedIndex(shaping(d, dials))
	}
}

// chosen fills in a range about the number's value.
func (s *filmSheet) chosen() {
	k := s.row.which.SelectedIndex()
	if k < 0 {
		return
	}
	s.row.suggest(s.w.session.Table().Design(), s.row.dials[k])
}

// show brings the buttons in step.
func (s *filmSheet) show() {
	watching := s.gesture != 0
	visible(s.watch, !watching)
	visible(s.stop, watching)
	visible(s.keep, watching)
	able(s.write, !watching)
}

// turn is what the form says.
func (s *filmSheet) turn() (table.Turn, error) {
	if s.row.which.SelectedIndex() < 0 {
		return table.Turn{}, errors.New("choose the number that is turned first")
	}
	return s.row.turn(s.w.session.Table().Design())
}

// begin lets the number run.
func (s *filmSheet) begin() {
	turn, err := s.turn()
	if err == nil {
		s.dial, err = dial.Find(s.w.session.Table().Design(), turn.Dial)
	}
	if err != nil {
		s.state.set(sentence(err.Error()))
		return
	}
	s.values, s.at, s.label = turn.All(), 0, s.row.which.Selected
	s.w.session.Begin()
	s.gesture = s.w.session.Gesture()
	s.show()
	s.step()
}

// step shows the next value.
func (s *filmSheet) step() {
	if s.gesture == 0 {
		return
	}
	if s.w.session.Gesture() != s.gesture {
		s.over("Stopped: the table was changed otherwise.")
		return
	}
	if s.at >= len(s.values) {
		s.end()
		return
	}
	v := s.values[s.at]
	s.at++
	said := fmt.Sprintf("Frame %d of %d: %s = %s.", s.at, len(s.values), s.label, s.shown(v))
	if err := s.w.session.Amend(tool.Turn{Dial: s.dial, Value: v}); err != nil {
		said = fmt.Sprintf("Frame %d of %d is left out: %s", s.at, len(s.values), sentence(err.Error()))
	}
	s.state.set(said)
	wait := filmEvery
	if s.at == len(s.values) {
		wait = filmRest
	}
	s.timer = time.AfterFunc(wait, func() { s.w.post(s.step) })
}

// shown is a value as forms show it, with its unit.
func (s *filmSheet) shown(v float64) string {
	d := s.w.session.Table().Design()
	spec, err := s.dial.Spec(d)
	switch {
	case err == nil && spec.Unit == param.Angle:
		return fmt.Sprintf("%.4g°", v*180/math.Pi)
	case err == nil && spec.Unit == param.Length:
		return fmt.Sprintf("%.4g %s", v, d.Unit)
	}
	return fmt.Sprintf("%.4g", v)
}

// end brings the wall back.
func (s *filmSheet) end() { s.close("", s.w.session.Cancel) }

// keepIt leaves the wall as it stands now, as one step.
func (s *filmSheet) keepIt() { s.close("Kept; undo brings the wall back.", s.w.session.End) }

// close ends what is watched, and its gesture if that is still the one.
func (s *filmSheet) close(said string, gesture func()) {
	if s.gesture == 0 {
		return
	}
	mine := s.w.session.Gesture() == s.gesture
	s.over(said)
	if mine {
		gesture()
	}
}

// over forgets what is watched.
func (s *filmSheet) over(said string) {
	if s.timer != nil {
		s.timer.Stop()
	}
	s.gesture = 0
	s.state.set(said)
	s.show()
}

// askWrite asks for the film's file.
func (s *filmSheet) askWrite() {
	turn, err := s.turn()
	if err != nil {
		s.state.set(sentence(err.Error()))
		return
	}
	name := strings.TrimSuffix(s.w.fileName(), ".cavity.json") + "-film.gif"
	s.w.askPath(question{what: "Write the film as a GIF, or as numbered PNGs", folder: s.w.folder(), name: name}, func(path string) error {
		return s.w.WriteFilm(path, turn)
	})
}

// WriteFilm writes the film of a turn to a file, beside the window. The error
// says why it was not begun.
func (w *Window) WriteFilm(path string, turn table.Turn) error {
	pictures := strings.HasSuffix(strings.ToLower(path), ".png")
	if !pictures && !strings.HasSuffix(strings.ToLower(path), ".gif") {
		return errors.New("the name of a film ends in .gif, or in .png for numbered pictures; change its ending")
	}
	if w.task != nil {
		return errors.New("another figure is being written; stop it, or wait until it is done")
	}
	t := w.session.Table()
	w.foot.busy("Making the film", 0)
	w.task = live.Start(w.post, func(ctx context.Context, share func(float64)) error {
		k, err := take(ctx, share, t, turn, path)
		if err != nil {
			return err
		}
		if pictures {
			return k.pictures()
		}
		return k.gif()
	}, func(x float64) { w.foot.busy("Making the film", x) }, func(err error) {
		w.task = nil
		w.foot.idle()
		switch {
		case errors.Is(err, context.Canceled):
			w.say("Stopped; the film was not written.")
		case err != nil:
			w.foot.say(sentence(err.Error()))
		case pictures:
			w.say("Written: %s and those that follow it.", film.Numbered(path, 0, len(turn.All())))
		default:
			w.say("Written: %s.", path)
		}
	})
	return nil
}
