package window

import (
	"image/color"
	"sort"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/layout"
	"fyne.io/fyne/v2/theme"
	"fyne.io/fyne/v2/widget"
)

// choice is a row of buttons of which one is chosen.
type choice struct {
	buttons []*widget.Button
	box     *fyne.Container
	at      int
}

func newChoice(icons, names []string, chosen func(int)) *choice {
	c := &choice{box: container.NewHBox()}
	c.box.Layout = layout.NewCustomPaddedHBoxLayout(1)
	for i, n := range names {
		b := quiet("", n, nil)
		if icons != nil {
			b.Icon = icon(icons[i])
		}
		b.OnTapped = func() {
			c.show(i)
			chosen(i)
		}
		c.buttons = append(c.buttons, b)
		c.box.Add(b)
	}
	c.at = -1
	c.show(0)
	return c
}

// show marks the chosen button without acting on it.
func (c *choice) show(i int) {
	if i == c.at {
		return
	}
	c.at = i
	for k, b := range c.buttons {
		b.Importance = widget.LowImportance
		if k == i {
			b.Importance = widget.MediumImportance
		}
		b.Refresh()
	}
}

// quiet is a button that shows its name and icon without a frame.
func quiet(iconName, name string, tapped func()) *widget.Button {
	b := &widget.Button{Text: name, OnTapped: tapped, Importance: widget.LowImportance}
	if iconName != "" {
		b.Icon = icon(iconName)
	}
	b.ExtendBaseWidget(b)
	return b
}

// title is the name of a pane.
func title(s string) fyne.CanvasObject {
	t := widget.NewLabel(s)
	t.TextStyle.Bold = true
	return t
}

// caption is one line of small text that is cut off where it does not fit.
type caption struct {
	widget.BaseWidget
	text  *canvas.Text
	full  string // what is cut where it does not fit
	brief string // what stands for it there; empty for none
	align fyne.TextAlign
	min   float32
}

func newCaption(align fyne.TextAlign, min float32) *caption {
	c := &caption{text: canvas.NewText("", color.Black), align: align, min: min}
	c.text.TextSize = 12
	c.text.Alignment = align
	c.ExtendBaseWidget(c)
	return c
}

func (c *caption) set(s string) {
	if s == c.full {
		return
	}
	c.full = s
	c.fit()
	c.text.Refresh()
}

// setBrief is set with a shorter text, for where the first does not fit.
func (c *caption) setBrief(s, brief string) {
	c.brief = brief
	c.set(s)
}

// wide is the width of the whole text.
func (c *caption) wide() float32 {
	return fyne.MeasureText(c.full, c.text.TextSize, c.text.TextStyle).Width
}

// fit cuts the text to the width with an ellipsis.
func (c *caption) fit() {
	w := c.Size().Width
	c.text.Text = c.full
	if w <= 0 {
		return
	}
	fits := func(s string) bool { return fyne.MeasureText(s, c.text.TextSize, c.text.TextStyle).Width <= w }
	if fits(c.full) {
		return
	}
	say := c.full
	if c.brief != "" {
		if say = c.brief; fits(say) {
			c.text.Text = say
			return
		}
	}
	// Measuring costs more than all else: halve instead of trying each length.
	r := []rune(say)
	n := sort.Search(len(r), func(n int) bool { return !fits(string(r[:n]) + "…") })
	c.text.Text = string(r[:max(n-1, 0)]) + "…"
}

func (c *caption) CreateRenderer() fyne.WidgetRenderer {
	c.text.Color = theme.Color(theme.ColorNameForeground)
	return &captionRenderer{c}
}

type captionRenderer struct{ c *caption }

func (r *captionRenderer) Layout(s fyne.Size) {
	r.c.fit()
	r.c.text.Move(fyne.NewPos(0, (s.Height-r.c.text.MinSize().Height)/2))
	r.c.text.Resize(fyne.NewSize(s.Width, r.c.text.MinSize().Height))
}
func (r *captionRenderer) MinSize() fyne.Size { return fyne.NewSize(r.c.min, 20) }
func (r *captionRenderer) Refresh() {
	r.c.text.Color = theme.Color(theme.ColorNameForeground)
	r.c.text.Refresh()
}
func (r *captionRenderer) Objects() []fyne.CanvasObject { return []fyne.CanvasObject{r.c.text} }
func (r *captionRenderer) Destroy()                     {}
