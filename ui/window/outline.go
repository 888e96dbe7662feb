package window

import (
	"bytes"
	"errors"
	"fmt"
	"strings"

	"cavitywright/assets"
	"cavitywright/render"
	"cavitywright/render/export"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/table"
	"cavitywright/table/outline"
	"cavitywright/table/outline/intake"
	"cavitywright/table/tablefile"
	"cavitywright/ui/pane"
	"cavitywright/ui/store"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/layout"
	"fyne.io/fyne/v2/widget"
)

// outlineSheet hands the wall to a workshop, and lays a wall along an outline
// that was drawn or measured elsewhere.
type outlineSheet struct {
	w    *Window
	work *work

	// What was brought in, and how it is laid.
	drawing           *intake.Drawing // nil before an outline is read
	document          int             // the document that was made of it
	account           intake.Account
	named             string
	unit              *widget.Select
	height, tolerance *widget.Entry
	fit, plain        *widget.Button
	found             *readout
	told              *widget.Label

	// What goes out.
	format            *choice
	chord, bias, grid *widget.Entry
	gridRow           fyne.CanvasObject
	achieved          *readout
	trouble           *widget.Label
	write             *widget.Button
	asked             measure.Handover
}

// wallFormats are the formats in the order of the sheet's buttons, with what
// each is made for.
var wallFormats = []struct {
	format export.WallFormat
	made   measure.Recipient
}{{export.WallSVG, measure.Drawing}, {export.WallDXF, measure.Machine}, {export.WallGDS, measure.Mask}, {export.WallCSV, measure.PointTable}}

func newOutlineSheet(w *Window) *outlineSheet { return &outlineSheet{w: w, work: newWork(w)} }

// Name is "Outline".
func (s *outlineSheet) Name() string { return "Outline" }

// entryRow is a name with a field for a length.
func entryRow(name string, e *widget.Entry, more ...fyne.CanvasObject) fyne.CanvasObject {
	l := widget.NewLabel(name)
	row := container.NewHBox(more...)
	return container.NewBorder(nil, nil, container.NewGridWrap(fyne.NewSize(130, 34), l), row, e)
}

// View is the way out above, the way in below.
func (s *outlineSheet) View() fyne.CanvasObject {
	field := func(hint string, submitted func()) *widget.Entry {
		e := widget.NewEntry()
		e.SetPlaceHolder(hint)
		e.OnSubmitted = func(string) { submitted() }
		return e
	}
	s.format = newChoice(nil, []string{"svg", "dxf", "gds", "csv"}, func(int) { s.formatChosen(); s.trace() })
	s.chord, s.bias, s.grid = field("usual", s.trace), field("none", s.trace), field("1 nm", s.trace)
	s.gridRow = entryRow("Grid", s.grid)
	s.gridRow.Hide()
	s.achieved = newReadout()
	s.trouble = widget.NewLabel("")
	s.trouble.Wrapping = fyne.TextWrapWord
	s.write = quiet("save", "Write the wall…", s.askWrite)
	out := container.NewVBox(
		bar("To the workshop", []fyne.CanvasObject{s.format.box}, s.write),
		entryRow("Chord error", s.chord), entryRow("Bias, outward +", s.bias), s.gridRow, s.achieved.box, s.trouble)

	s.unit = widget.NewSelect([]string{"as stated", "m", "cm", "mm", "um", "nm"}, nil)
	s.unit.SetSelectedIndex(0)
	s.height, s.tolerance = field("as stated", s.layAsAsked), field("", s.layFitted)
	s.fit, s.plain = quiet("stroke", "Fit", s.layFitted), quiet("chain", "As drawn", s.layPlain)
	s.found = newReadout()
	s.told = widget.NewLabel("")
	s.told.Wrapping = fyne.TextWrapWord
	in := container.NewVBox(
		bar("From a drawing or points", nil, quiet("open", "Import an outline…", s.w.askOutline)),
		entryRow("Height in y", s.height, s.unit),
		entryRow("Fit within", s.tolerance, s.fit, s.plain), s.found.box, s.told)
	s.showDrawing()
	return container.NewVScroll(container.New(layout.NewCustomPaddedLayout(0, 4, 0, 8), container.NewVBox(out, widget.NewSeparator(), in)))
}

func (s *outlineSheet) formatChosen() {
	if wallFormats[s.format.at].made == measure.Mask {
		s.gridRow.Show()
	} else {
		s.gridRow.Hide()
	}
}

// Changed measures the outline anew where the wall is another one.
func (s *outlineSheet) Changed() {
	if !s.work.Fits() {
		s.trace()
	}
	if s.drawing != nil && s.document != s.w.session.Document() {
		s.drawing, s.account, s.named = nil, intake.Account{}, ""
		s.showDrawing()
	}
}

// Closed ends the work.
func (s *outlineSheet) Closed() { s.work.Drop() }

// handover is what the fields ask for.
func (s *outlineSheet) handover() (measure.Handover, error) {
	t := s.w.session.Table()
	h := measure.Handover{For: wallFormats[max(s.format.at, 0)].made}
	for _, f := range []struct {
		entry *widget.Entry
		to    *float64
		name  string
	}{{s.chord, &h.ChordError, "chord error"}, {s.bias, &h.Bias, "bias"}, {s.grid, &h.Grid, "grid"}} {
		if strings.TrimSpace(f.entry.Text) == "" {
			continue
		}
		x, err := pane.Evaluate(f.entry.Text, t.Design().Unit)
		if err != nil {
			return h, fmt.Errorf("the %s %q is no length; try 0.001 mm", f.name, f.entry.Text)
		}
		*f.to = x
	}
	if h.ChordError < 0 || h.Grid < 0 {
		return h, errors.New("the chord error and the grid must be above 0; try 0.001 mm")
	}
	h.Options = measure.HandoverDefaults(t, h)
	return h, nil
}

// trace makes the outline beside the window and says what it differs by.
func (s *outlineSheet) trace() {
	h, err := s.handover()
	if err != nil {
		s.work.Drop()
		s.refused(err)
		return
	}
	var a outline.Account
	t := s.w.session.Table()
	usual := measure.HandoverDefaults(t, measure.Handover{For: h.For})
	s.chord.SetPlaceHolder(fmt.Sprintf("%.2g %s", usual.ChordError, t.Design().Unit))
	s.work.Follow(func(d desk) error {
		var err error
		_, a, err = measure.HandedOver(d.tracer.Table(), h, assets.Program)
		return err
	}, func(err error) {
		if err != nil {
			s.refused(err)
			return
		}
		s.asked = h
		s.trouble.SetText("")
		s.trouble.Hide()
		s.write.Enable()
		s.achieved.Set(achievedRows(t, h, a))
	})
}

func (s *outlineSheet) refused(err error) {
	s.achieved.Set(nil)
	s.trouble.SetText(sentence(err.Error()))
	s.trouble.Show()
	s.write.Disable()
}

// achievedRows are what an outline differs by.
func achievedRows(t *table.Table, h measure.Handover, a outline.Account) []readoutRow {
	u := t.Design().Unit.String()
	reached := fmt.Sprintf("%.3g %s", a.Achieved, u)
	if a.Achieved == 0 {
		reached = "exact"
	}
	rows := []readoutRow{
		{"Error achieved", reached, fmt.Sprintf("The greatest distance of the outline from the wall, measured on it; asked for was %.3g %s. Lines and circular arcs stay what they are where the format has them.", h.ChordError, u)},
		{"Corners and curves", fmt.Sprint(a.Steps), "The number of steps of the outline."},
	}
	if !t.Open() {
		rows = append(rows,
			readoutRow{"Area", fmt.Sprintf("%.7g %s²", a.Area, u), "Area of the wall after the bias."},
			readoutRow{"Area, outline − wall", render.Proper(fmt.Sprintf("%+.2g %s²", a.AreaOff, u)), "What the outline has more of it."})
	}
	return append(rows, readoutRow{"Length, outline − wall", render.Proper(fmt.Sprintf("%+.2g %s", a.Longer, u)), fmt.Sprintf("What the outline is longer than the wall after the bias, %.7g %s.", a.Perimeter, u)})
}

// askWrite asks for the file.
func (s *outlineSheet) askWrite() {
	h, err := s.handover()
	if err != nil {
		s.refused(err)
		return
	}
	name := strings.TrimSuffix(s.w.fileName(), ".cavity.json") + "-wall." + wallFormats[max(s.format.at, 0)].format.String()
	s.w.askPath(question{what: "Write the wall as", folder: s.w.folder(), name: name}, func(path string) error {
		return s.w.WriteWall(path, h)
	})
}

// WriteWall writes the wall to a file in the format of its ending, with the
// chord error, bias and grid of h, and says what was achieved.
func (w *Window) WriteWall(path string, h measure.Handover) error {
	format, err := export.WallFormatOf(path)
	if err != nil {
		return err
	}
	h.For = wallFormats[format].made
	t := w.session.Table()
	h.Options = measure.HandoverDefaults(t, h)
	f, a, err := measure.HandedOver(t, h, assets.Program)
	if err != nil {
		return err
	}
	content, err := wallFile(t, f, format, h)
	if err != nil {
		return err
	}
	if err := store.WriteFile(path, content); err != nil {
		return err
	}
	w.say("Written: %s, %s.", path, measure.HandoverSentence(t, a, h.Bias))
	return nil
}

// wallFile is an outline as a file. As drawn, without a bias, a drawing carries
// the table; after a bias it would open as another wall than it shows.
func wallFile(t *table.Table, f figure.Outline, format export.WallFormat, h measure.Handover) ([]byte, error) {
	o := export.WallOptions{Grid: h.Grid}
	if format == export.WallSVG && h.Bias == 0 {
		var file bytes.Buffer
		if err := tablefile.Write(&file, t.Design()); err != nil {
			return nil, err
		}
		o.Table = file.Bytes()
	}
	var out bytes.Buffer
	err := export.WriteWall(&out, format, f, o)
	return out.Bytes(), err
}
