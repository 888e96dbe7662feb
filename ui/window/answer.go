package window

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/dialog"
	"fyne.io/fyne/v2/layout"
	"fyne.io/fyne/v2/widget"
)

// answer is a button of a question: Enter presses it where it has the
// keyboard, and Escape takes the question back, which a plain button would
// swallow.
type answer struct {
	widget.Button
}

func newAnswer(name string, tapped func()) *answer {
	a := &answer{}
	a.Text, a.OnTapped = name, tapped
	a.ExtendBaseWidget(a)
	return a
}

// TypedKey takes Enter and Escape.
func (a *answer) TypedKey(e *fyne.KeyEvent) {
	switch e.Name {
	case fyne.KeyEscape:
		takeBack(a)
	case fyne.KeyReturn, fyne.KeyEnter:
		a.Tapped(&fyne.PointEvent{})
	default:
		a.Button.TypedKey(e)
	}
}

// takeBack closes the question that an object stands in.
func takeBack(o fyne.CanvasObject) {
	c := fyne.CurrentApp().Driver().CanvasForObject(o)
	if c == nil {
		return
	}
	if top := c.Overlays().Top(); top != nil {
		c.Overlays().Remove(top)
	}
}

// closable is a dialog with one answer that closes it.
func (w *Window) closable(title string, content fyne.CanvasObject, size fyne.Size) *dialog.CustomDialog {
	var d *dialog.CustomDialog
	end := newAnswer("Close", func() { d.Hide() })
	d = dialog.NewCustomWithoutButtons(title, container.NewBorder(nil, container.NewHBox(layout.NewSpacer(), end), nil, nil, content), w.win)
	d.Resize(size)
	return d
}

// askForm asks for the values of a form: yes is what takes them, and done is
// called then, once the form has gone.
func (w *Window) askForm(title, yes, no string, items []*widget.FormItem, size fyne.Size, done func()) {
	var d *dialog.CustomDialog
	take := newAnswer(yes, func() { d.Hide(); done() })
	take.Importance = widget.HighImportance
	drop := newAnswer(no, func() { d.Hide() })
	for _, it := range items {
		if f, is := it.Widget.(*field); is {
			f.escape = func() { d.Hide() }
			f.OnSubmitted = func(string) { take.Tapped(&fyne.PointEvent{}) }
		}
	}
	d = dialog.NewCustomWithoutButtons(title, container.NewBorder(nil, container.NewHBox(layout.NewSpacer(), drop, take), nil, nil, widget.NewForm(items...)), w.win)
	d.Resize(size)
	d.Show()
	for _, it := range items {
		if f, is := it.Widget.(*field); is {
			w.win.Canvas().Focus(f)
			return
		}
	}
	w.win.Canvas().Focus(take)
}

// pick is a list of choices in a question. Like an answer it takes Escape, and
// a press whose release comes when the question has gone does nothing: the
// toolkit would look for a window that is not there.
type pick struct {
	widget.Select
}

func newPick(options []string, at int) *pick {
	p := &pick{}
	p.Options = options
	p.ExtendBaseWidget(p)
	p.SetSelectedIndex(at)
	return p
}

// Tapped opens the list.
func (p *pick) Tapped(e *fyne.PointEvent) {
	if fyne.CurrentApp().Driver().CanvasForObject(p) != nil {
		p.Select.Tapped(e)
	}
}

// TypedKey takes Escape.
func (p *pick) TypedKey(e *fyne.KeyEvent) {
	if e.Name == fyne.KeyEscape {
		takeBack(p)
		return
	}
	p.Select.TypedKey(e)
}
