package window

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"
)

// bar is a pane's header: its name, then its controls; what belongs at the
// right end comes last. Where it gets narrow the words of the buttons that have
// an icon go, from the right, and come back when there is room.
func bar(name string, left []fyne.CanvasObject, right ...fyne.CanvasObject) fyne.CanvasObject {
	row := append([]fyne.CanvasObject{title(name)}, left...)
	l := &narrowing{split: len(row)}
	row = tippedAll(name, append(row, right...))
	for _, o := range row {
		l.collect(o)
	}
	return container.New(l, row...)
}

// narrowing lays out a row: the first split objects from the left, the others
// from the right.
type narrowing struct {
	split int
	words []word
}

// word is the text of a button with an icon, which may go.
type word struct {
	button *widget.Button
	text   string
	width  float32
}

// rowGap is between the objects of a row.
const rowGap = 2

// collect finds the words of a control and of those inside it.
func (l *narrowing) collect(o fyne.CanvasObject) {
	switch o := o.(type) {
	case *fyne.Container:
		for _, c := range o.Objects {
			l.collect(c)
		}
	case *widget.Button:
		if o.Icon == nil || o.Text == "" {
			return
		}
		wide := o.MinSize().Width
		w := word{button: o, text: o.Text}
		o.SetText("") // the size is known only after a refresh
		w.width = wide - o.MinSize().Width
		o.SetText(w.text)
		l.words = append(l.words, w)
	}
}

// wanted is the width of the row with all of its words.
func (l *narrowing) wanted(objects []fyne.CanvasObject) float32 {
	sum := float32(rowGap * (len(objects) - 1))
	for _, o := range objects {
		if o.Visible() {
			sum += o.MinSize().Width
		}
	}
	for _, w := range l.words {
		if w.button.Text == "" {
			sum += w.width
		}
	}
	return sum
}

// MinSize is that of the row without words.
func (l *narrowing) MinSize(objects []fyne.CanvasObject) fyne.Size {
	size := fyne.NewSize(l.wanted(objects), 0)
	for _, w := range l.words {
		size.Width -= w.width
	}
	for _, o := range objects {
		size.Height = max(size.Height, o.MinSize().Height)
	}
	return size
}

// Layout drops words until the row fits and lays it out.
func (l *narrowing) Layout(objects []fyne.CanvasObject, size fyne.Size) {
	over := l.wanted(objects) - size.Width
	for i := len(l.words) - 1; i >= 0; i-- {
		w := l.words[i]
		text := w.text
		if over > 0 {
			text = ""
			over -= w.width
		}
		if w.button.Text != text {
			w.button.SetText(text)
		}
	}
	place := func(o fyne.CanvasObject, x float32) {
		m := o.MinSize()
		o.Resize(fyne.NewSize(m.Width, size.Height))
		o.Move(fyne.NewPos(x, 0))
	}
	x := float32(0)
	for _, o := range objects[:l.split] {
		if o.Visible() {
			place(o, x)
			x += o.MinSize().Width + rowGap
		}
	}
	x = size.Width
	for i := len(objects) - 1; i >= l.split; i-- {
		if o := objects[i]; o.Visible() {
			x -= o.MinSize().Width
			place(o, x)
			x -= rowGap
		}
	}
}
