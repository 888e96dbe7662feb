package window

import (
	"fmt"
	"strconv"
	"strings"

	"cavitywright/render"
	"cavitywright/sim/measure/modes"
	"cavitywright/table"
	"cavitywright/ui/pane"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/layout"
	"fyne.io/fyne/v2/widget"
)

// modesSheet counts the modes of the table, and of a cavity of its plan and a
// constant height, by Weyl's law: at once, for it takes no time.
type modesSheet struct {
	w          *Window
	wall       *widget.Select
	speed      *widget.Entry // m/s
	height     *widget.Entry // "" for the plane alone
	heightName *widget.Label // with the table's unit
	below      *widget.Entry // a frequency
	count      *widget.Entry // a number of modes
	list       *readout
	plot       *pane.Figure
	state      *caption
}

func newModesSheet(w *Window) *modesSheet { return &modesSheet{w: w} }

// Name is "Modes".
func (s *modesSheet) Name() string { return "Modes" }

// fields are the choices of what fills the cavity.
var fields = []string{"metal: electric field vanishes at the wall", "sound: rigid wall"}

// View is the form, the numbers and the staircase's smooth law.
func (s *modesSheet) View() fyne.CanvasObject {
	entry := func(text string) *widget.Entry {
		e := widget.NewEntry()
		e.SetText(text)
		e.OnChanged = func(string) { s.Changed() }
		return e
	}
	s.list, s.plot, s.state = newReadout(), pane.NewFigure(s.w.desk), newCaption(fyne.TextAlignLeading, 120)
	s.heightName = widget.NewLabel("")
	s.speed, s.height, s.below, s.count = entry(strconv.Itoa(modes.LightSpeed)), entry(""), entry(""), entry("100")
	s.below.SetPlaceHolder("where there are so many, or 10 GHz")
	s.height.SetPlaceHolder("none: the plane alone")
	s.wall = widget.NewSelect(fields, nil)
	s.wall.SetSelectedIndex(0)
	s.wall.OnChanged = func(string) {
		// The usual speed of the medium; another is typed afterwards.
		s.speed.SetText(strconv.FormatFloat([]float64{modes.LightSpeed, modes.SoundSpeed}[s.wall.SelectedIndex()], 'g', -1, 64))
		s.Changed()
	}
	form := container.New(layout.NewFormLayout(),
		widget.NewLabel("Wall"), s.wall,
		widget.NewLabel("Speed of the waves (m/s)"), s.speed,
		s.heightName, s.height,
		widget.NewLabel("Count below"), s.below,
		widget.NewLabel("Number of modes"), s.count)
	body := container.NewVBox(form, s.list.box, title("Modes below a frequency"), container.New(tall(bendHeight), s.plot.Surface))
	top := container.NewVBox(bar("Modes", nil), container.New(layout.NewCustomPaddedLayout(0, 4, 10, 10), s.state))
	return container.NewBorder(top, nil, nil, nil, container.NewVScroll(body))
}

// Closed has no work to end.
func (s *modesSheet) Closed() {}

// Changed counts anew.
func (s *modesSheet) Changed() {
	if err := s.take(); err != nil {
		s.list.Set(nil)
		s.plot.Set(nil)
		s.state.set(sentence(err.Error()))
	}
}

// take counts; the error says what of the form cannot be read.
func (s *modesSheet) take() error {
	t := s.w.session.Table()
	s.heightName.SetText("Height of the cavity (" + t.Design().Unit.String() + ")")
	wall := []modes.Wall{modes.Dirichlet, modes.Neumann}[s.wall.SelectedIndex()]
	n, err := modes.Of(t, wall)
	if err != nil {
		return err
	}
	speed, err := strconv.ParseFloat(strings.TrimSpace(s.speed.Text), 64)
	if err != nil || !(speed > 0) {
		return fmt.Errorf("the speed must be a number of metres a second, but is %q", s.speed.Text)
	}
	many, err := strconv.ParseFloat(strings.TrimSpace(s.count.Text), 64)
	if err != nil || !(many >= 1) {
		return fmt.Errorf("the number of modes must be a number from 1, but is %q", s.count.Text)
	}
	p, err := s.plate(t)
	if err != nil {
		return err
	}
	m := modes.Medium{Speed: speed, Unit: t.Design().Unit}
	f := m.Hertz(n.At(many))
	if s.below.Text != "" {
		if f, err = hertz(s.below.Text); err != nil {
			return err
		}
	}
	if !(n.Count(m.K(f)) >= 1) || !(n.Density(m.K(f)) > 0) {
		return fmt.Errorf("below %s the law counts no mode of this table; ask above %s", frequency(f), frequency(m.Hertz(n.At(1))))
	}
	s.list.Set(s.rows(n, p, m, f, many))
	fig := modes.Figure(n, p, m, f)
	fig.Caption = nil
	s.plot.Set(fig)
	s.state.set("Smooth counts by Weyl's law; exact ones fluctuate.")
	return nil
}

// plate is the cavity of the height typed, nil where none is.
func (s *modesSheet) plate(t *table.Table) (*modes.Plate, error) {
	if strings.TrimSpace(s.height.Text) == "" {
		return nil, nil
	}
	h, err := pane.Evaluate(s.height.Text, t.Design().Unit)
	if err != nil || !(h > 0) {
		return nil, fmt.Errorf("the height must be a length, 8 mm for example, but is %q", s.height.Text)
	}
	p, err := modes.PlateOf(t, []modes.Field{modes.Metal, modes.Sound}[s.wall.SelectedIndex()], h)
	return &p, err
}

// rows are the numbers.
func (s *modesSheet) rows(n modes.Weyl, p *modes.Plate, m modes.Medium, f, many float64) []readoutRow {
	k := m.K(f)
	u := m.Unit.String()
	law := render.Proper(fmt.Sprintf("Weyl's law A k²/4π ∓ L k/4π + bend + corners (Baltes and Hilf 1976): A = %.6g %s², L = %.6g %s, bend %.4g, corners %.4g. Smooth; the exact number fluctuates about it.", n.Area, u, n.Perimeter, u, n.Bend, n.Corners))
	rows := []readoutRow{
		{"Modes below " + frequency(f), render.Proper(fmt.Sprintf("%.1f", n.Count(k))), law},
		{"Mean spacing there", frequency(1 / (n.Density(k) * m.K(1))), "The inverse of the density of modes of the plane at that frequency."},
		{fmt.Sprintf("Frequency of %g modes", many), frequency(m.Hertz(n.At(many))), "Below this frequency the law counts so many modes of the plane."},
	}
	if p == nil {
		return rows
	}
	return append(rows,
		readoutRow{"Two-dimensional below", frequency(m.Hertz(p.Cutoff())), "c/2h: half a wave fits over the height from there on (common practice)."},
		readoutRow{"Of the cavity, below " + frequency(f), render.Proper(fmt.Sprintf("%.1f", p.Count(k))), "The plane's law summed over the half waves that fit over the height. " + sentence(p.Field.Convention())},
		readoutRow{fmt.Sprintf("Frequency of %g, cavity", many), frequency(m.Hertz(p.At(many))), "Below this frequency the cavity has so many modes by the same sum."},
		readoutRow{"Mean free path 4V/S", fmt.Sprintf("%.6g %s", p.FreePath(), u), "Of rays in the cavity, over uniform places and directions (Kosten 1960)."})
}

// frequency writes hertz in the unit that suits.
func frequency(f float64) string {
	scale, unit := modes.Scale(f)
	return fmt.Sprintf("%.5g %s", f/scale, unit)
}

// hertz reads a frequency with its unit; a bare number is in hertz.
func hertz(text string) (float64, error) {
	s := strings.TrimSpace(text)
	scale := 1.0
	for _, u := range []struct {
		name string
		hz   float64
	}{{"THz", 1e12}, {"GHz", 1e9}, {"MHz", 1e6}, {"kHz", 1e3}, {"Hz", 1}} {
		if rest, is := strings.CutSuffix(s, u.name); is {
			s, scale = strings.TrimSpace(rest), u.hz
			break
		}
	}
	x, err := strconv.ParseFloat(s, 64)
	if err != nil || !(x > 0) {
		return 0, fmt.Errorf("the frequency must be a number with its unit, 10 GHz for example, but is %q", text)
	}
	return x * scale, nil
}
