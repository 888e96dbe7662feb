package window

import (
	"fmt"
	"math"
	"strings"

	"cavitywright/sim/measure"
	"cavitywright/table/survey"
	"cavitywright/ui/pane"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"
)

// wallSheet says what the wall is, and keeps up with it while it is dragged:
// its size, how it bends, its corners, how smooth, convex and symmetric it is,
// where a tool does not reach, and what may be trusted.
type wallSheet struct {
	w     *Window
	work  *work
	list  *readout
	bend  *pane.Figure
	words *widget.Label
	tool  *widget.Entry
	asked float64 // the tool's radius that the report at hand is for
}

func newWallSheet(w *Window) *wallSheet { return &wallSheet{w: w, work: newWork(w)} }

// Name is "Wall".
func (s *wallSheet) Name() string { return "Wall" }

// bendHeight is the height of the plot of the curvature.
const bendHeight = 190

// View is the list, the curvature and the sentences.
func (s *wallSheet) View() fyne.CanvasObject {
	s.list, s.bend = newReadout(), pane.NewFigure(s.w.desk)
	s.bend.Pointed = func(x, _ float64) { s.w.point(pane.Place{Shown: pane.Visible, S: x}) }
	s.bend.Hinted = "Curvature along the wall: the pointer shows the place in all panes."
	s.words = widget.NewLabel("")
	s.words.Wrapping = fyne.TextWrapWord
	s.tool = widget.NewEntry()
	s.tool.SetPlaceHolder("none")
	s.tool.OnSubmitted = func(string) { s.survey() }
	head := bar("Wall", nil, widget.NewLabel("tool radius"), container.NewGridWrap(fyne.NewSize(96, 34), s.tool))
	body := container.NewVBox(s.list.box, title("Curvature along s"), container.New(tall(bendHeight), s.bend.Surface), title("What to know"), s.words)
	return container.NewBorder(head, nil, nil, nil, container.NewVScroll(body))
}

// tall lays its objects over one another, at least so high.
type tall float32

// MinSize is the height, and no width.
func (t tall) MinSize([]fyne.CanvasObject) fyne.Size { return fyne.NewSize(64, float32(t)) }

// Layout gives all the room.
func (t tall) Layout(objects []fyne.CanvasObject, size fyne.Size) {
	for _, o := range objects {
		o.Move(fyne.NewPos(0, 0))
		o.Resize(size)
	}
}

// Changed asks for a new report where the wall is another one.
func (s *wallSheet) Changed() {
	if !s.work.Fits() {
		s.survey()
		return
	}
	s.bend.Redraw()
}

// Closed ends the work.
func (s *wallSheet) Closed() { s.work.Drop() }

// survey makes the report beside the window.
func (s *wallSheet) survey() {
	radius, ok := s.radius()
	if !ok {
		s.w.say("The radius of the tool must be a length; try 3 mm.")
		return
	}
	var report *survey.Report
	s.work.Follow(func(d desk) error {
		report = survey.Of(d.tracer.Table(), radius)
		return nil
	}, func(error) {
		s.asked = radius
		s.show(report)
	})
}

// radius is what the field says, in the table's unit; 0 for nothing.
func (s *wallSheet) radius() (float64, bool) {
	text := strings.TrimSpace(s.tool.Text)
	if text == "" {
		return 0, true
	}
	x, err := pane.Evaluate(text, s.w.session.Table().Design().Unit)
	return x, err == nil && x > 0
}

// show writes the report.
func (s *wallSheet) show(r *survey.Report) {
	u := s.w.session.Table().Design().Unit.String()
	length := func(x float64) string { return fmt.Sprintf("%.8g %s", x, u) }
	radius := func(e survey.Extreme) string {
		if !e.Known() {
			return "none"
		}
		return fmt.Sprintf("%.6g %s, at s = %.5g %s", e.Radius, u, e.Place.S, u)
	}
	rows := []readoutRow{{"Perimeter L", length(r.Perimeter), "Length of all walls, those of obstacles included. Exact to 1e-12 of itself."}}
	if !math.IsNaN(r.Area) {
		rows = append(rows,
			readoutRow{"Area A", fmt.Sprintf("%.8g %s²", r.Area, u), "Area of the table without its obstacles. Exact to 1e-12 of itself."},
			readoutRow{"Mean chord πA/L", length(r.MeanChord), "Mean flight between bounces over starts even in ds dp (Santaló 1976). Exact."})
	}
	rows = append(rows,
		readoutRow{"Smallest focusing radius", radius(r.Bend.Focusing), "The smallest radius of curvature where the wall bends towards the inside, and where."},
		readoutRow{"Smallest dispersing radius", radius(r.Bend.Dispersing), "The smallest radius of curvature where the wall bends away from the inside, and where."},
		readoutRow{"Corners", fmt.Sprint(len(r.Corners)), "Places where the tangent jumps. A ray that meets one within the tracer's tolerance stops and is counted."},
		readoutRow{"Jumps of curvature", fmt.Sprint(len(r.Jumps)), "Places where the tangent is continuous and the curvature is not."},
		readoutRow{"Smoothness", r.Class.String(), "The class of the wall at its least smooth place: C0 has corners, C1 a continuous tangent, C2 a continuous curvature; analytic: every loop is one analytic curve."},
		readoutRow{"Convex", convexity(r), "Whether the outer wall turns one way everywhere; strictly, if its curvature vanishes nowhere."},
		readoutRow{"Symmetry group", symmetry(r), "The group of rotations and mirror lines that map the wall onto itself, in Schoenflies' notation; coats are not looked at."})
	s.list.Set(rows)
	f := measure.CurvatureFigure(s.w.session.Table(), r)
	f.Caption = nil
	s.bend.Set(f)
	s.words.SetText("• " + strings.Join(r.Sentences(), "\n• "))
}

// symmetry is the group in words where its sign might be taken for a class of
// smoothness.
func symmetry(r *survey.Report) string {
	if name := r.Symmetry.Name(); name != "C1" {
		return name
	}
	return "none"
}

func convexity(r *survey.Report) string {
	switch c := r.Convexity; {
	case c.Open:
		return "no outer wall"
	case c.Strict && c.Posts == 0:
		return "strictly"
	case c.Convex && c.Posts == 0:
		return "yes, not strictly"
	case c.Convex:
		return "the outer wall; obstacles inside"
	}
	return "no"
}
