package pane

import (
	"errors"
	"fmt"
	"math"
	"strconv"
	"strings"

	"cavitywright/table"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/widget"
)

// number is an entry for one value: the wheel nudges it, Enter takes it, and
// leaving it takes it too.
type number struct {
	widget.Entry
	nudge   func(k float64)
	focused bool
	stay    bool // leaving it takes nothing
	before  string
}

func newNumber() *number {
	n := &number{nudge: func(float64) {}}
	n.ExtendBaseWidget(n)
	return n
}

// Inner is the field itself.
func (n *number) Inner() *widget.Entry { return &n.Entry }

// FocusGained remembers the text.
func (n *number) FocusGained() {
	n.focused, n.before = true, n.Text
	n.Entry.FocusGained()
}

// FocusLost takes what was typed.
func (n *number) FocusLost() {
	n.focused = false
	n.Entry.FocusLost()
	if n.Text != n.before && n.OnSubmitted != nil && !n.stay {
		n.OnSubmitted(n.Text)
	}
}

// TypedKey nudges on Up and Down and gives up on Escape.
func (n *number) TypedKey(e *fyne.KeyEvent) {
	switch e.Name {
	case fyne.KeyTab:
		n.pass(heldKeys())
	case fyne.KeyUp:
		n.nudge(1)
	case fyne.KeyDown:
		n.nudge(-1)
	case fyne.KeyEscape:
		n.SetText(n.before)
		n.release()
	case fyne.KeyReturn, fyne.KeyEnter:
		n.Entry.TypedKey(e)
		n.before = n.Text // what stands now is taken
		n.release()
	default:
		n.Entry.TypedKey(e)
	}
}

// AcceptsTab asks for the Tab key.
func (n *number) AcceptsTab() bool { return true }

// mostPassed bounds the sliders that Tab passes by in a row.
const mostPassed = 8

// pass gives the keyboard to the next field, or with Shift to the one before,
// and passes by the sliders: who types goes from number to number.
func (n *number) pass(held fyne.KeyModifier) {
	c := fyne.CurrentApp().Driver().CanvasForObject(n)
	if c == nil {
		return
	}
	for range mostPassed {
		if held&fyne.KeyModifierShift != 0 {
			c.FocusPrevious()
		} else {
			c.FocusNext()
		}
		if _, slides := c.Focused().(*widget.Slider); !slides {
			return
		}
	}
}

// release gives the keyboard back to the window.
func (n *number) release() {
	if c := fyne.CurrentApp().Driver().CanvasForObject(n); c != nil {
		c.Unfocus()
	}
}

// Scrolled nudges by notches.
func (n *number) Scrolled(e *fyne.ScrollEvent) {
	n.nudge(math.Copysign(1, float64(e.Scrolled.DY+e.Scrolled.DX)))
}

// Evaluate reads a typed value: numbers with + - * / and brackets, each number
// with a unit of length, "deg" or "°" behind it where that is wanted. A length
// without a unit is in the given one.
func Evaluate(text string, unit table.Unit) (float64, error) {
	if strings.TrimSpace(text) == "" {
		return 0, errors.New("nothing is typed; type a value such as 1.5, 3 mm or 10/3")
	}
	p := sum{text: strings.NewReplacer("−", "-", "·", "*", "×", "*", ",", ".").Replace(text), unit: unit}
	v, ok := p.sum()
	p.space()
	if !ok || p.at != len(p.text) || math.IsNaN(v) || math.IsInf(v, 0) {
		return 0, fmt.Errorf("%q is not a number; type a value such as 1.5, 3 mm or 10/3", strings.TrimSpace(text))
	}
	return v, nil
}

// sum reads sums of products by recursive descent.
type sum struct {
	text string
	at   int
	unit table.Unit
}

func (p *sum) space() {
	for p.at < len(p.text) && p.text[p.at] == ' ' {
		p.at++
	}
}

func (p *sum) next(set string) byte {
	p.space()
	if p.at < len(p.text) && strings.IndexByte(set, p.text[p.at]) >= 0 {
		p.at++
		return p.text[p.at-1]
	}
	return 0
}

func (p *sum) sum() (float64, bool) {
	v, ok := p.product()
	for ok {
		op := p.next("+-")
		if op == 0 {
			return v, true
		}
		w, good := p.product()
		if op == '-' {
			w = -w
		}
		v, ok = v+w, good
	}
	return v, false
}

func (p *sum) product() (float64, bool) {
	v, ok := p.factor()
	for ok {
		op := p.next("*/")
		if op == 0 {
			return v, true
		}
		w, good := p.factor()
		if op == '/' {
			w = 1 / w
		}
		v, ok = v*w, good
	}
	return v, false
}

func (p *sum) factor() (float64, bool) {
	switch p.next("+-(") {
	case '-':
		v, ok := p.factor()
		return -v, ok
	case '+':
		return p.factor()
	case '(':
		v, ok := p.sum()
		return v, ok && p.next(")") == ')'
	}
	p.space()
	if strings.HasPrefix(p.text[p.at:], "sqrt(") {
		p.at += len("sqrt(")
		v, ok := p.sum()
		return math.Sqrt(v), ok && p.next(")") == ')'
	}
	if strings.HasPrefix(p.text[p.at:], "pi") {
		p.at += len("pi")
		return math.Pi, true
	}
	end := p.at
	for end < len(p.text) && (strings.IndexByte("0123456789.", p.text[end]) >= 0 ||
		(p.text[end] == 'e' || p.text[end] == 'E') && end+1 < len(p.text) && strings.IndexByte("0123456789+-", p.text[end+1]) >= 0 ||
		(p.text[end] == '+' || p.text[end] == '-') && end > p.at && (p.text[end-1] == 'e' || p.text[end-1] == 'E')) {
		end++
	}
	v, err := strconv.ParseFloat(p.text[p.at:end], 64)
	if err != nil {
		return 0, false
	}
	p.at = end
	return v * p.suffix(), true
}

// suffix reads a unit behind a number and is its factor.
func (p *sum) suffix() float64 {
	p.space()
	for _, s := range []struct {
		name string
		k    float64
	}{
		{"deg", 1}, {"°", 1},
		{"nm", table.Nanometre.Metres() / p.unit.Metres()},
		{"um", table.Micrometre.Metres() / p.unit.Metres()}, {"µm", table.Micrometre.Metres() / p.unit.Metres()},
		{"mm", table.Millimetre.Metres() / p.unit.Metres()},
		{"cm", table.Centimetre.Metres() / p.unit.Metres()},
		{"m", table.Metre.Metres() / p.unit.Metres()},
	} {
		if strings.HasPrefix(p.text[p.at:], s.name) {
			p.at += len(s.name)
			return s.k
		}
	}
	return 1
}
