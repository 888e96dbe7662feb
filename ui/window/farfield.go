package window

import (
	"math"
	"strings"

	"cavitywright/sim/figure"
	"cavitywright/sim/measure/leak"
	"cavitywright/table"
	"cavitywright/table/wall"
	"cavitywright/ui/pane"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"
)

// farFieldSheet shows in which direction, and from where on the wall, what
// leaves goes, and keeps up with the wall.
type farFieldSheet struct {
	w       *Window
	rounds  *rounds
	starts  *startPicker
	which   *choice // polarisation
	kind    *choice
	norm    *choice
	towards *widget.Entry
	half    *widget.Entry
	skip    *widget.Entry
	plate   *plate
	lines   *widget.Label
	list    *readout
	shown   []fieldShown
}

// fieldShown is a far field with its polarisation.
type fieldShown struct {
	polarisation
	far *leak.FarField
}

func newFarFieldSheet(w *Window) *farFieldSheet {
	return &farFieldSheet{w: w, rounds: newRounds(w)}
}

// Name is "Far field".
func (s *farFieldSheet) Name() string { return "Far field" }

// View is the far field, its numbers, and what has to be said of it.
func (s *farFieldSheet) View() fyne.CanvasObject {
	s.starts = newStartPicker(s.begin)
	s.which = newChoice(nil, []string{"as drawn", "TM", "TE", "both"}, func(int) { s.begin() })
	s.kind = newChoice(nil, []string{"polar", "angle", "wall"}, func(int) { s.draw() })
	s.norm = newChoice(nil, []string{"peak", "area"}, func(int) { s.draw() })
	s.towards, s.half, s.skip = numberField("0", s.draw), numberField("30", s.draw), numberField("0", s.begin)
	s.plate = newPlate(s.w, "What leaves", sheetFigure, func() *table.Table { return s.rounds.work.on }, s.kind.box, s.norm.box)
	s.plate.pane.Hinted = "Far field against the angle counter-clockwise from +x, or what leaves along the wall."
	s.plate.pane.Pointed = func(x, _ float64) {
		if s.kind.at == byWall {
			s.w.point(pane.Place{Shown: pane.Visible, S: x})
		}
	}
	s.lines = widget.NewLabel("")
	s.lines.Wrapping = fyne.TextWrapWord
	s.list = newReadout()
	small := func(e *widget.Entry) fyne.CanvasObject { return container.NewGridWrap(fyne.NewSize(64, 34), e) }
	head := bar("Far field", nil, widget.NewLabel("start"), s.starts.box)
	options := container.NewHBox(s.which.box, widget.NewLabel("window at"), small(s.towards), widget.NewLabel("° ±"), small(s.half), widget.NewLabel("°"))
	transient := container.NewHBox(widget.NewLabel("count what leaves after path"), small(s.skip))
	return page(head, s.rounds.line, s.plate.pane.Scrolls, options, transient, s.plate.box, s.list.box, s.lines)
}

// The kinds of figure.
const (
	polarKind = iota
	byAngle
	byWall
)

// numberField is a field for a number; entered is called when it is entered.
func numberField(text string, entered func()) *widget.Entry {
	e := widget.NewEntry()
	e.SetText(text)
	e.OnSubmitted = func(string) { entered() }
	return e
}

// number is what a field says, or else what it stands for by itself.
func number(e *widget.Entry, unit table.Unit, otherwise float64) float64 {
	x, err := pane.Evaluate(strings.TrimSpace(e.Text), unit)
	if err != nil || math.IsNaN(x) {
		return otherwise
	}
	return x
}

// Changed measures anew where the wall is another one.
func (s *farFieldSheet) Changed() {
	if s.rounds.Fits() {
		s.plate.pane.Redraw()
		return
	}
	s.begin()
}

// Closed ends the work.
func (s *farFieldSheet) Closed() { s.rounds.Drop() }

// farFieldRays are the rays of the rounds; the first takes some 0.1 s.
var farFieldRays = []float64{1800, leak.EmissionRays, 8 * leak.EmissionRays}

func (s *farFieldSheet) begin() {
	s.shown = nil
	s.draw()
	t := s.w.session.Table()
	from, err := s.starts.seeding(t)
	if err != nil {
		s.rounds.Drop()
		s.rounds.state.set(sentence(err.Error()))
		return
	}
	which, skip := s.which.at, math.Max(0, number(s.skip, t.Design().Unit, 0))
	s.rounds.Begin(func(d desk, rays float64) (func(), error) {
		var all []fieldShown
		pols := polarisations(which)
		for i, p := range pols {
			n := float64(len(pols))
			f, err := p.field(d.part(float64(i)/n, float64(i+1)/n), from, leak.EmissionPlan{Rays: int(rays), Skip: skip})
			if err != nil {
				return nil, err
			}
			all = append(all, fieldShown{p, f})
		}
		return func() { s.shown = all; s.draw() }, nil
	}, farFieldRays...)
}

// polarisation is one of those that are measured: as the wall is drawn, or of
// a kind.
type polarisation struct {
	name  string // "" as drawn
	short string // the name in a list of numbers
	is    wall.Polarisation
}

func polarisations(which int) []polarisation {
	tm, te := polarisation{leak.Words(wall.TM), "TM", wall.TM}, polarisation{leak.Words(wall.TE), "TE", wall.TE}
	return [][]polarisation{{{}}, {tm}, {te}, {tm, te}}[which]
}

// field measures one.
func (p polarisation) field(d desk, from leak.Seeding, plan leak.EmissionPlan) (*leak.FarField, error) {
	if p.name == "" {
		return leak.MeasureEmission(d.tracer, d.runner, from, plan)
	}
	t, err := table.New(leak.Polarised(d.tracer.Table().Design(), p.is))
	if err != nil {
		return nil, err
	}
	tr, run := d.on(t)
	return leak.MeasureEmission(tr, run, from, plan)
}

// draw shows what is measured.
func (s *farFieldSheet) draw() {
	if len(s.shown) == 0 {
		s.plate.set(nil)
		s.lines.SetText("")
		s.list.Set(nil)
		return
	}
	const deg = math.Pi / 180
	unit := s.w.session.Table().Design().Unit
	towards, half := number(s.towards, unit, 0), number(s.half, unit, 30)
	if !(half > 0 && half <= 180) {
		half = 30
	}
	var f figure.Figure
	var rows []figure.Scalar
	for _, one := range s.shown {
		f = leak.Overlaid(f, s.figure(one))
		rows = append(rows, one.far.Scalars(one.short, s.w.session.Table().Design().Study.Seed, towards*deg, half*deg)...)
	}
	s.plate.set(f)
	s.list.Set(readoutRows(rows))
	s.lines.SetText(strings.Join(s.shown[0].far.Lines(), " "))
}

func (s *farFieldSheet) figure(one fieldShown) figure.Figure {
	norm := leak.Norm(s.norm.at)
	switch s.kind.at {
	case byAngle:
		return one.far.Cartesian(norm, one.name, program)
	case byWall:
		return one.far.ByPlace(one.name, program)
	}
	return one.far.Polar(norm, one.name, program)
}
