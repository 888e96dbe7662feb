package window

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
)

// brisk is a column of large things that scrolls by a good part of one of them
// a notch of the wheel.
type brisk struct{ container.Scroll }

// briskNotch is how many of the toolkit's steps, which are made for lines of
// text, one notch goes.
const briskNotch = 5

func newBrisk(content fyne.CanvasObject) *brisk {
	b := &brisk{}
	b.Direction, b.Content = container.ScrollVerticalOnly, content
	b.ExtendBaseWidget(b)
	return b
}

// Scrolled goes further than the toolkit would.
func (b *brisk) Scrolled(e *fyne.ScrollEvent) {
	far := *e
	far.Scrolled.DX, far.Scrolled.DY = briskNotch*e.Scrolled.DX, briskNotch*e.Scrolled.DY
	b.Scroll.Scrolled(&far)
}
