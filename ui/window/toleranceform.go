package window

import (
	"fmt"
	"math"
	"strconv"
	"strings"

	"cavitywright/sim/measure/reading"
	"cavitywright/sim/study"
	"cavitywright/sim/study/tolerance"
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
	reads      *readList
	copies     *widget.Entry
	effort     *widget.Select
	wavelength *widget.Entry
	says       *widget.Label // the errors in words, with their units
	kinds      []flawKind    // what a row may be, on the table at hand
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
	f := &toleranceForm{w: w, list: container.NewVBox(), reads: newReadList(), copies: numberField("100", nil)}
	f.copies.OnSubmitted = nil
	f.effort = widget.NewSelect([]string{"0.03", "0.1", "0.3", "1", "4"}, nil)
	f.effort.Selected = "0.1"
	f.wavelength = widget.NewEntry()
	f.wavelength.SetPlaceHolder("not given")
	f.says = widget.NewLabel("")
	f.says.Wrapping = fyne.TextWrapWord
	add := quiet("", "Add an error", func() { f.add() })
	f.box = container.NewVBox(f.list, f.says, container.NewHBox(add),
		f.reads.list, container.NewHBox(quiet("", "Add a reading", func() { f.reads.add() })),
		container.NewHBox(wordBox("copies", 72), boxed(72, f.copies), widget.NewLabel("effort"), boxed(84, f.effort)),
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
	f.reads.offer(names)
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
	r.law.OnChanged = func(string) { f.tell() }
	r.width.OnChanged, r.second.OnChanged = r.law.OnChanged, r.law.OnChanged
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
	f.tell()
}

// tell says in words what the rows come to, or what is wrong with them.
func (f *toleranceForm) tell() {
	if f.offered == nil {
		return
	}
	flaws, _, err := f.flaws()
	var t *tolerance.Tolerance
	if err == nil {
		t, err = tolerance.New(f.offered, table.Tolerance{Name: "the form", Flaws: flaws, Copies: 2, Readings: []string{"perimeter"}, Effort: 1})
	}
	if err != nil {
		f.says.SetText(sentence(err.Error()))
		return
	}
	var words []string
	for k := range flaws {
		words = append(words, t.Words(k))
	}
	f.says.SetText(sentence(strings.Join(words, "; ")))
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
	f.tell()
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

// flaws are the errors of the rows, with their names.
func (f *toleranceForm) flaws() (all []table.Flaw, names []string, err error) {
	for _, r := range f.rows {
		k := f.kind(r)
		flaw := table.Flaw{Kind: k.kind, Dial: k.dial, Law: table.Spread(max(0, r.law.SelectedIndex()))}
		if flaw.Width, err = f.entered(r.width, k.label, 0); err != nil {
			return nil, nil, err
		}
		second, err := f.entered(r.second, k.label, 0)
		if err != nil {
			return nil, nil, err
		}
		switch k.kind {
		case table.RoughFlaw:
			flaw.Length, flaw.Law = second, table.Normal
		case table.SizeFlaw:
			flaw.Width, flaw.Mean = flaw.Width/100, second/100
		default:
			flaw.Mean = second
		}
		all, names = append(all, flaw), append(names, k.label)
	}
	return all, names, nil
}

// plan is what the form describes.
func (f *toleranceForm) plan() (table.Tolerance, error) {
	p := table.Tolerance{Effort: 0.1}
	flaws, names, err := f.flaws()
	if err != nil {
		return p, err
	}
	p.Flaws, p.Name = flaws, strings.Join(names, ", ")
	if p.Copies, err = strconv.Atoi(strings.TrimSpace(f.copies.Text)); err != nil {
		return p, fmt.Errorf("the number of copies is %q; write a whole number", f.copies.Text)
	}
	if e, err := strconv.ParseFloat(f.effort.Selected, 64); err == nil {
		p.Effort = e
	}
	if p.Wavelength, err = f.entered(f.wavelength, "wavelength", 0); err != nil {
		return p, err
	}
	return p, f.reads.fill(&p, f.w.session.Table().Design().Unit)
}
