package window

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/widget"
)

// answer is a button of a question: Enter presses it where it has the
// keyboard, and Escape takes the question back, which a plain button would
// swallow.
type answer struct {
	widget.Button
	escape func()
}

// newAnswer makes one; the first of a question is the one that is expected.
func (w *Window) newAnswer(name string, tapped func()) *answer {
	a := &answer{escape: func() { w.loose(fyne.KeyEscape) }}
	a.Text, a.OnTapped = name, tapped
	a.ExtendBaseWidget(a)
	return a
}

// TypedKey takes Enter and Escape.
func (a *answer) TypedKey(e *fyne.KeyEvent) {
	switch e.Name {
	case fyne.KeyEscape:
		a.escape()
	case fyne.KeyReturn, fyne.KeyEnter:
		a.Tapped(&fyne.PointEvent{})
	default:
		a.Button.TypedKey(e)
	}
}
