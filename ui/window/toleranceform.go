package window

import (
	"fmt"
	"math"
	"strconv"
	"strings"

	"cavitywright/sim/measure/reading"
	"cavitywright/sim/study"
	"cavitywright/table"
	"cavitywright/table/dial"
	"cavitywright/ui/pane"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"
)

// toleranceForm says what the workshop does, and what is read.
type toleranceForm struct {
	w          *Window
	box        fyne.CanvasObject
	rows       []*flawRow
	list       *fyne.Container
	read       *widget.Select
	copies     *widget.Entry
	effort     *widget.Select
	least      *widget.Entry
	most       *widget.Entry
	wavelength *widget.Entry
	kinds      []flawKind // what a row may be, on the table at hand
	offered    *table.Table
}

// flawKind is an entry of the list of errors.
type flawKind struct {
	label string
	kind  table.FlawKind
	dial  string
}

// flawRow is one error: its kind, its law, and its numbers.
type flawRow struct {
	which  *widget.Select
	law    *widget.Select
	width  *widget.Entry
	second *widget.Entry // the mean, the tool's radius or the correlation length
	box    *fyne.Container
}

func newToleranceForm(w *Window) *toleranceForm {
	f := &toleranceForm{w: w, list: container.NewVBox(), read: widget.NewSelect(nil, nil), copies: numberField("100", nil)}
	f.copies.OnSubmitted = nil
	f.effort = widget.NewSelect([]string{"0.03", "0.1", "0.3", "1", "4"}, nil)
	f.effort.Selected = "0.1"
	f.least, f.most, f.wavelength = widget.NewEntry(), widget.NewEntry(), widget.NewEntry()
	f.least.SetPlaceHolder("none")
	f.most.SetPlaceHolder("none")
	f.wavelength.SetPlaceHolder("not given")
	add := quiet("", "Add an error", func() { f.add() })
	f.box = container.NewVBox(f.list, container.NewHBox(add),
		container.NewBorder(nil, nil, wordBox("Read", 72), nil, f.read),
		container.NewHBox(wordBox("copies", 72), boxed(72, f.copies), widget.NewLabel("effort"), boxed(84, f.effort)),
		container.NewHBox(wordBox("good from", 72), boxed(84, f.least), widget.NewLabel("to"), boxed(84, f.most)),
		container.NewHBox(wordBox("wavelength outside", 150), boxed(110, f.wavelength)))
	return f
}

func wordBox(s string, wide float32) fyne.CanvasObject { return boxed(wide, widget.NewLabel(s)) }

func boxed(wide float32, o fyne.CanvasObject) fyne.CanvasObject {
	return container.NewGridWrap(fyne.NewSize(wide, 34), o)
}

// offer lists what the table at hand may have wrong, and read.
func (f *toleranceForm) offer() {
	t := f.w.session.Table()
	if f.offered != nil && f.offered.SameWall(t) {
		return
	}
	f.offered = t
	d := t.Design()
	f.kinds = []flawKind{{"size", table.SizeFlaw, ""}, {"offset", table.OffsetFlaw, ""}, {"tool radius", table.ToolFlaw, ""}, {"roughness", table.RoughFlaw, ""}}
	indexed := false
	for _, x := range dial.All(d) {
		indexed = indexed || x.Name == "index" && (x.Part == dial.Coat || x.Part == dial.Bare)
	}
	if indexed {
		f.kinds = append(f.kinds, flawKind{"index", table.IndexFlaw, ""})
	}
	for _, x := range dial.All(d) {
		if x.Name != "scale" {
			f.kinds = append(f.kinds, flawKind{study.Label(d, x), table.DialFlaw, x.String()})
		}
	}
	for _, r := range f.rows {
		f.label(r)
	}
	if len(f.rows) == 0 {
		f.fill()
	}
	var names []string
	for _, r := range reading.Readings() {
		if _, err := reading.Wanted(t, []string{r.Name}); err == nil && r.Kind != reading.Asked {
			names = append(names, r.Name)
		}
	}
	before := f.read.Selected
	f.read.SetOptions(names)
	f.read.ClearSelected()
	for _, name := range []string{before, "window-share", "escape-rate", "lyapunov-per-length", "area"} {
		for _, there := range names {
			if f.read.Selected == "" && name == there {
				f.read.SetSelected(name)
			}
		}
	}
}

// label lists the kinds in a row, and keeps its own where it is among them.
func (f *toleranceForm) label(r *flawRow) {
	var names []string
	for _, k := range f.kinds {
		names = append(names, k.label)
	}
	before := r.which.Selected
	r.which.SetOptions(names)
	if r.which.SelectedIndex() < 0 && before != "" {
		r.which.SetSelectedIndex(0)
	}
}

// fill begins with what every workshop has: an error of size, and roughness.
func (f *toleranceForm) fill() {
	size := 0.1 * math.Sqrt(math.Abs(f.offered.Area()))
	if f.offered.Open() {
		size = 0.02 * f.offered.Length()
	}
	r := f.add()
	r.which.SetSelected("size")
	r.width.SetText("0.5")
	r = f.add()
	r.which.SetSelected("roughness")
	r.width.SetText(fmt.Sprintf("%.2g", size/100))
	r.second.SetText(fmt.Sprintf("%.2g", size))
}

// add adds a row.
func (f *toleranceForm) add() *flawRow {
	r := &flawRow{law: widget.NewSelect([]string{"normal", "uniform"}, nil), width: widget.NewEntry(), second: widget.NewEntry()}
	r.law.Selected = "normal"
	r.which = widget.NewSelect(nil, func(string) { f.settle(r) })
	out := quiet("clear", "", func() { f.drop(r) })
	r.box = container.NewBorder(nil, nil, nil, container.NewHBox(boxed(92, r.law), boxed(64, r.width), boxed(64, r.second), out), r.which)
	f.rows = append(f.rows, r)
	f.list.Add(r.box)
	f.label(r)
	if r.which.SelectedIndex() < 0 {
		r.which.SetSelectedIndex(0)
	}
	return r
}

// drop takes a row out.
func (f *toleranceForm) drop(r *flawRow) {
	for i, o := range f.rows {
		if o == r {
			f.rows = append(f.rows[:i:i], f.rows[i+1:]...)
			break
		}
	}
	f.list.Remove(r.box)
}

// settle says in the fields of a row what its numbers are.
func (f *toleranceForm) settle(r *flawRow) {
	k := f.kind(r)
	r.law.Enable()
	r.width.SetPlaceHolder("±")
	r.second.SetPlaceHolder("mean")
	switch k.kind {
	case table.SizeFlaw:
		r.width.SetPlaceHolder("± %")
		r.second.SetPlaceHolder("mean %")
	case table.ToolFlaw:
		r.second.SetPlaceHolder("radius")
	case table.RoughFlaw:
		r.law.SetSelected("normal")
		r.law.Disable()
		r.width.SetPlaceHolder("rms")
		r.second.SetPlaceHolder("length")
	}
}

func (f *toleranceForm) kind(r *flawRow) flawKind {
	if i := r.which.SelectedIndex(); i >= 0 && i < len(f.kinds) {
		return f.kinds[i]
	}
	return flawKind{}
}

// entered is the number in a field; none is what stands for an empty one.
func (f *toleranceForm) entered(e *widget.Entry, what string, none float64) (float64, error) {
	return typed(e, f.w.session.Table().Design().Unit, what, none)
}

// typed is the number in a field; none is what stands for an empty one.
func typed(e *widget.Entry, unit table.Unit, what string, none float64) (float64, error) {
	if strings.TrimSpace(e.Text) == "" {
		return none, nil
	}
	v, err := pane.Evaluate(e.Text, unit)
	if err != nil {
		return 0, fmt.Errorf("%s: %w", what, err)
	}
	return v, nil
}

// plan is what the form describes.
func (f *toleranceForm) plan() (table.Tolerance, error) {
	p := table.Tolerance{Readings: []string{f.read.Selected}, Effort: 0.1}
	var names []string
	for _, r := range f.rows {
		k := f.kind(r)
		flaw := table.Flaw{Kind: k.kind, Dial: k.dial, Law: table.Spread(max(0, r.law.SelectedIndex()))}
		var err error
		if flaw.Width, err = f.entered(r.width, k.label, 0); err != nil {
			return p, err
		}
		second, err := f.entered(r.second, k.label, 0)
		if err != nil {
			return p, err
		}
		switch k.kind {
		case table.RoughFlaw:
			flaw.Length, flaw.Law = second, table.Normal
		case table.SizeFlaw:
			flaw.Width, flaw.Mean = flaw.Width/100, second/100
		default:
			flaw.Mean = second
		}
		p.Flaws, names = append(p.Flaws, flaw), append(names, k.label)
	}
	p.Name = strings.Join(names, ", ")
	if f.read.Selected == "" {
		return p, fmt.Errorf("choose what is to be read")
	}
	var err error
	if p.Copies, err = strconv.Atoi(strings.TrimSpace(f.copies.Text)); err != nil {
		return p, fmt.Errorf("the number of copies is %q; write a whole number", f.copies.Text)
	}
	if e, err := strconv.ParseFloat(f.effort.Selected, 64); err == nil {
		p.Effort = e
	}
	if p.Wavelength, err = f.entered(f.wavelength, "wavelength", 0); err != nil {
		return p, err
	}
	l := table.Limit{Reading: f.read.Selected}
	if l.Lo, err = f.entered(f.least, "good from", math.Inf(-1)); err != nil {
		return p, err
	}
	if l.Hi, err = f.entered(f.most, "good to", math.Inf(1)); err != nil {
		return p, err
	}
	if !math.IsInf(l.Lo, 0) || !math.IsInf(l.Hi, 0) {
		p.Limits = []table.Limit{l}
	}
	return p, nil
}
