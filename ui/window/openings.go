package window

import (
	"fmt"
	"math"

	"cavitywright/sim/figure"
	"cavitywright/sim/measure/leak"
	"cavitywright/table"
	"cavitywright/table/edit"
	"cavitywright/ui/pane"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"
)

// openingsSheet shows where along the wall an opening lets most or least out,
// and how rays pass between the openings that are there; it keeps up with the
// wall.
type openingsSheet struct {
	w      *Window
	rounds *rounds
	width  *widget.Entry
	kind   *choice
	places *plate
	best   *readout
	dwell  *plate
	matrix *readout
	none   *widget.Label
	rates  *leak.Places     // what is shown; nil for none
	grid   *leak.Places     // the same for several widths, where a map is shown
	passed *leak.Scattering // nil where there is no opening
}

func newOpeningsSheet(w *Window) *openingsSheet {
	return &openingsSheet{w: w, rounds: newRounds(w)}
}

// Name is "Openings".
func (s *openingsSheet) Name() string { return "Openings" }

// View is the rate against the place, and the matrix of the openings.
func (s *openingsSheet) View() fyne.CanvasObject {
	s.width = numberField("", s.begin)
	s.width.SetPlaceHolder("as it is")
	s.kind = newChoice(nil, []string{"curve", "map"}, func(int) { s.begin() })
	on := func() *table.Table { return s.rounds.work.on }
	s.places = newPlate(s.w, "Rate by place", sheetFigure, on, s.kind.box)
	s.places.pane.Hinted = "Press to put the opening at this place, instead of the openings that the wall has."
	s.places.pane.Pointed = func(x, _ float64) { s.w.point(pane.Place{Shown: pane.Visible, S: x}) }
	s.places.pane.Picked = s.put
	s.dwell = newPlate(s.w, "Path from entering to leaving", 220, on)
	s.best, s.matrix = newReadout(), newReadout()
	s.none = widget.NewLabel("")
	s.none.Wrapping = fyne.TextWrapWord
	head := bar("Openings", nil, widget.NewLabel("width"), container.NewGridWrap(fyne.NewSize(96, 34), s.width))
	return page(head, s.rounds.line, s.places.pane.Scrolls, s.places.box, s.best.box, title("Between the openings"), s.none, s.matrix.box, s.dwell.box)
}

// Changed measures anew where the wall is another one.
func (s *openingsSheet) Changed() {
	if s.rounds.Fits() {
		s.places.pane.Redraw()
		s.dwell.pane.Redraw()
		return
	}
	s.begin()
}

// Closed ends the work.
func (s *openingsSheet) Closed() { s.rounds.Drop() }

var openingEfforts = []float64{0.1, 1, 3}

const (
	placesShown = 160
	widthsShown = 10
	// newWidth is the width of an opening where the wall has none to take it
	// from, as a share of the wall.
	newWidth = 0.05
)

// asked is the width that is looked at: what the field says, or that of the
// first opening.
func (s *openingsSheet) asked(t *table.Table) float64 {
	own := newWidth * t.Length()
	if ports := leak.PortsOf(t); len(ports) > 0 {
		own = ports[0].Width
	}
	return number(s.width, t.Design().Unit, own)
}

func (s *openingsSheet) begin() {
	s.rates, s.grid, s.passed = nil, nil, nil
	s.draw()
	t := s.w.session.Table()
	width := s.asked(t)
	if !(width > 0 && width < t.Length()) {
		s.rounds.Drop()
		s.rounds.state.set(fmt.Sprintf("The width must be above 0 and below the length of the wall, %.4g %s.", t.Length(), t.Design().Unit))
		return
	}
	mapped := s.kind.at == 1
	s.rounds.Begin(func(d desk, effort float64) (func(), error) {
		var passed *leak.Scattering
		var err error
		if len(leak.PortsOf(t)) > 0 && !t.Open() {
			if passed, err = leak.MeasureScattering(d.tracer, d.runner, effort/10); err != nil {
				return nil, err
			}
		}
		rates, err := placesOf(d, t, []float64{width}, effort)
		if err != nil {
			return nil, err
		}
		var grid *leak.Places
		if mapped {
			var widths []float64
			for k := range widthsShown {
				widths = append(widths, math.Min(width*(0.4+0.2*float64(k)), 0.9*t.Length()))
			}
			if grid, err = placesOf(d, t, widths, effort); err != nil {
				return nil, err
			}
		}
		return func() { s.rates, s.grid, s.passed = rates, grid, passed; s.draw() }, nil
	}, openingEfforts...)
}

// placesOf measures on the table with its openings closed.
func placesOf(d desk, t *table.Table, widths []float64, effort float64) (*leak.Places, error) {
	shut, err := table.New(leak.Unopened(t.Design()))
	if err != nil {
		return nil, err
	}
	tr, run := d.on(shut)
	return leak.MeasurePlaces(tr, run, leak.PlacementPlan{Widths: widths, Places: placesShown, Effort: effort})
}

// draw shows what is measured.
func (s *openingsSheet) draw() {
	if s.rates == nil {
		s.places.set(nil)
		s.dwell.set(nil)
		s.best.Set(nil)
		s.matrix.Set(nil)
		s.none.SetText("")
		s.dwell.box.Hide()
		return
	}
	seed := s.w.session.Table().Design().Study.Seed
	var f figure.Figure = s.rates.Curve(program)
	if s.grid != nil {
		f = s.grid.Map(program)
	}
	s.places.set(f)
	s.best.Set(readoutRows(s.rates.Scalars(seed)))
	if s.passed == nil {
		s.none.SetText("The wall has no opening.")
		s.matrix.Set(nil)
		s.dwell.box.Hide()
		return
	}
	s.none.SetText("Each row of the matrix is what comes in through one opening by the cosine law; it adds up to 1.")
	s.matrix.Set(readoutRows(s.passed.Matrix(seed).Rows))
	s.dwell.set(s.passed.Dwells(program))
	s.dwell.box.Show()
}

// put lays the opening at a place of the curve, or at a place and of a width
// of the map, in one step.
func (s *openingsSheet) put(at, y float64) {
	t := s.w.session.Table()
	if s.rates == nil || !s.rounds.Fits() || !(at >= 0 && at < t.Length()) {
		return
	}
	width := s.rates.Widths[0]
	if s.grid != nil {
		width = y
	}
	d := leak.OpeningAt(t, at, width)
	s.w.sayErr(s.w.session.Do(edit.SetCoats{Coats: d.Coats}))
}
