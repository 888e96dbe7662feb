package window

import (
	"cavitywright/sim/figure"
	"cavitywright/sim/measure/leak"
	"cavitywright/table"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/layout"
	"fyne.io/fyne/v2/widget"
)

// survivalSheet shows how what is left of rays falls with the path, and keeps
// up with the wall.
type survivalSheet struct {
	w       *Window
	rounds  *rounds
	starts  *startPicker
	clock   *choice
	scale   *choice
	plate   *plate
	verdict *widget.Label
	list    *readout
	fall    *leak.Fall // what is shown; nil for none
}

func newSurvivalSheet(w *Window) *survivalSheet {
	return &survivalSheet{w: w, rounds: newRounds(w)}
}

// Name is "Survival".
func (s *survivalSheet) Name() string { return "Survival" }

// sheetFigure is the height of the figure at the head of a sheet.
const sheetFigure = 300

// View is the curve, what it says, and its numbers.
func (s *survivalSheet) View() fyne.CanvasObject {
	s.starts = newStartPicker(s.begin)
	s.clock = newChoice(nil, []string{"path", "bounces"}, func(int) { s.draw() })
	s.scale = newChoice(nil, []string{"semi-log", "log-log"}, func(int) { s.draw() })
	s.plate = newPlate(s.w, "What is left", sheetFigure, func() *table.Table { return s.rounds.work.on }, s.clock.box, s.scale.box)
	s.plate.pane.Hinted = "What is left of the rays; dashed: the window in which it falls exponentially."
	s.verdict = widget.NewLabel("")
	s.verdict.Wrapping = fyne.TextWrapWord
	s.list = newReadout()
	head := bar("Survival", nil, widget.NewLabel("start"), s.starts.box)
	return page(head, s.rounds.line, s.plate.pane.Scrolls, s.plate.box, s.verdict, s.list.box)
}

// page is a sheet: its header, a line that says how far the work is, and the
// rest, which scrolls, also with the wheel over its figure.
func page(head fyne.CanvasObject, state fyne.CanvasObject, scrolls func(interface{ Scrolled(*fyne.ScrollEvent) }), rest ...fyne.CanvasObject) fyne.CanvasObject {
	top := container.NewVBox(head, container.New(layout.NewCustomPaddedLayout(0, 4, 10, 10), state))
	scroll := container.NewVScroll(container.NewVBox(rest...))
	scrolls(scroll)
	return container.NewBorder(top, nil, nil, nil, scroll)
}

// Changed measures anew where the wall is another one; what belongs to the old
// wall goes at once.
func (s *survivalSheet) Changed() {
	if s.rounds.Fits() {
		s.plate.pane.Redraw()
		return
	}
	s.begin()
}

// Closed ends the work.
func (s *survivalSheet) Closed() { s.rounds.Drop() }

// The efforts of the rounds: the first takes some 0.1 s.
var survivalEfforts = []float64{0.002, 0.05, 0.3}

func (s *survivalSheet) begin() {
	s.fall = nil
	s.draw()
	from, err := s.starts.seeding(s.w.session.Table())
	if err != nil {
		s.rounds.Drop()
		s.rounds.state.set(sentence(err.Error()))
		return
	}
	s.rounds.Begin(func(d desk, effort float64) (func(), error) {
		f, err := leak.MeasureFall(d.tracer, d.runner, from, 0, effort)
		return func() { s.fall = f; s.draw() }, err
	}, survivalEfforts...)
}

// draw shows what is measured in the clock and the scale that are chosen.
func (s *survivalSheet) draw() {
	if s.fall == nil {
		s.plate.set(nil)
		s.verdict.SetText("")
		s.list.Set(nil)
		return
	}
	s.plate.set(s.fall.Figure(leak.Clock(s.clock.at), figure.Scale(s.scale.at), program))
	s.verdict.SetText(s.fall.Verdict())
	s.list.Set(readoutRows(s.fall.Scalars(s.w.session.Table().Design().Study.Seed)))
}
