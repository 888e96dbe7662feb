package window

import (
	"fmt"
	"math"
	"strings"
	"unicode"
	"unicode/utf8"

	"cavitywright/sim"
	"cavitywright/table"
	"cavitywright/ui/live"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/layout"
	"fyne.io/fyne/v2/theme"
	"fyne.io/fyne/v2/widget"
)

// footer is the bottom line, and the line of readings under the portrait.
type footer struct {
	w        *Window
	box      fyne.CanvasObject
	readings fyne.CanvasObject
	left     *caption
	middle   *caption
	right    *caption
	reading  *caption
	readOf   *table.Table // whose readings stand there
	line     *canvas.Rectangle
	rail     *fyne.Container
	cells    *fyne.Container // of the bottom line
	halt     *widget.Button  // stops long work
	held     live.Filling
	standing string // the sentence that stays until the next
	saidAt   uint64 // the revision it was said at
	status   live.Status
}

func newFooter(w *Window) *footer {
	f := &footer{w: w, left: newCaption(fyne.TextAlignLeading, 120), middle: newCaption(fyne.TextAlignLeading, 120), right: newCaption(fyne.TextAlignTrailing, 120), reading: newCaption(fyne.TextAlignLeading, 120)}
	f.line = canvas.NewRectangle(theme.Color(theme.ColorNameForeground))
	f.rail = container.New(&thin{f}, f.line)
	f.cells = container.New(thirds{f}, f.left, f.middle, f.right)
	f.halt = quiet("stop", "Stop", w.stopTask)
	f.halt.Hide()
	f.box = container.New(layout.NewCustomPaddedLayout(1, 4, 10, 10), container.NewBorder(nil, nil, nil, tipped("", f.halt), f.cells))
	f.readings = container.NewVBox(f.rail, container.New(layout.NewCustomPaddedLayout(0, 2, 10, 10), f.reading))
	return f
}

// thirds shares a line between hint, numbers and progress. A long hint takes the
// room that the numbers leave.
type thirds struct{ f *footer }

const (
	// hintPart and progressPart are the shares of the line of those two.
	hintPart, progressPart float32 = 0.46, 0.24
	// cellGap is between two parts of the line.
	cellGap = 12
)

func (thirds) MinSize([]fyne.CanvasObject) fyne.Size { return fyne.NewSize(300, 20) }
func (t thirds) Layout(o []fyne.CanvasObject, s fyne.Size) {
	end := s.Width * (1 - progressPart)
	left := s.Width * hintPart
	if wants := t.f.left.wide() + cellGap + 2; wants > left {
		most := end
		if t.f.middle.full != "" {
			most -= t.f.middle.wide() + cellGap + 2
		}
		left = min(wants, max(left, most))
	}
	for i, x := range []float32{0, left, end, s.Width + cellGap} {
		if i > 0 {
			o[i-1].Resize(fyne.NewSize(x-o[i-1].Position().X-cellGap, s.Height))
		}
		if i < len(o) {
			o[i].Move(fyne.NewPos(x, 0))
		}
	}
}

// tell writes the hint and the numbers and shares the line between them anew.
func (f *footer) tell(c *caption, s string) {
	if s != c.full {
		c.set(s)
		f.cells.Layout.Layout(f.cells.Objects, f.cells.Size())
	}
}

// thin lays the line of progress: its length is the share done.
type thin struct{ f *footer }

func (thin) MinSize([]fyne.CanvasObject) fyne.Size { return fyne.NewSize(10, 2) }
func (t thin) Layout(o []fyne.CanvasObject, s fyne.Size) {
	o[0].Resize(fyne.NewSize(s.Width*float32(t.f.status.Done), s.Height))
	o[0].Move(fyne.NewPos(0, 0))
}

// hint says what the pointer would do; a sentence that was said stays in its
// place until the pointer has something new to say.
func (f *footer) hint(s string) {
	if s == "" {
		s = f.standing
	} else if f.w.session.Refusal == nil {
		f.standing = ""
	}
	if f.standing != "" {
		s = f.standing
	}
	f.tell(f.left, s)
}

func (f *footer) note(s string) { f.tell(f.middle, s) }

func (f *footer) say(s string) {
	f.standing, f.saidAt = sentence(s), f.w.session.Revision()
	f.tell(f.left, f.standing)
}

// sentence begins with a capital and ends with a stop.
func sentence(s string) string {
	if s == "" {
		return s
	}
	if word, _, _ := strings.Cut(s, " "); !strings.ContainsAny(word, "./:\"") { // not the name of a file
		first, size := utf8.DecodeRuneInString(s)
		s = string(unicode.ToUpper(first)) + s[size:]
	}
	if last := s[len(s)-1]; last != '.' && last != '?' && last != '%' {
		s += "."
	}
	return s
}

// busy says how far long work is, with a button that stops it.
func (f *footer) busy(what string, share float64) {
	f.say(fmt.Sprintf("%s, %.0f %%", what, 100*share))
	f.halt.Show()
}

// idle takes the button away.
func (f *footer) idle() { f.halt.Hide() }

// refresh writes the exact readings of the table.
func (f *footer) refresh() {
	if f.standing != "" && f.w.session.Revision() > f.saidAt && f.w.session.Refusal == nil {
		f.standing = "" // what was said is past
		f.tell(f.left, "")
	}
	if t := f.w.session.Table(); t != f.readOf {
		f.readOf = t
		r := t.SmallestRadius() // the one that takes time
		f.reading.setBrief(exactReadings(t, r, "mean chord ", "smallest radius"), exactReadings(t, r, "", "radius ≥"))
	}
	f.line.FillColor = theme.Color(theme.ColorNameForeground)
}

// exactReadings are perimeter, area, mean chord and smallest radius, which is r;
// the words for the last two are given.
func exactReadings(t *table.Table, r float64, chord, radius string) string {
	u := t.Design().Unit
	parts := []string{fmt.Sprintf("L = %.6g %s", t.Length(), u)}
	if !t.Open() {
		parts = append(parts, fmt.Sprintf("A = %.6g %s²", t.Area(), u), fmt.Sprintf("%sπA/L = %.6g %s", chord, sim.MeanChord(t), u))
	} else {
		parts = append(parts, "open plane: rays can escape")
	}
	if !math.IsInf(r, 1) {
		parts = append(parts, fmt.Sprintf("%s %.4g %s", radius, r, u))
	}
	return strings.Join(parts, "  ·  ")
}

// progress writes how far the portrait is.
func (f *footer) progress(s live.Status) {
	f.status = s
	parts := []string{count(s.Bounces) + " bounces"}
	if s.Done < 1 && s.Held == live.Fills && s.PerSecond > 0 {
		parts = append(parts, count(int64(s.PerSecond))+"/s")
	}
	if s.Held == live.Stands {
		parts = append(parts, "stopped")
	}
	if s.Escaped > 0 {
		parts = append(parts, count(s.Escaped)+" escaped")
	}
	if s.Undecided > 0 {
		parts = append(parts, count(s.Undecided)+" ended at a corner or tangent")
	}
	if s.Lost > 0 {
		parts = append(parts, count(s.Lost)+" lost (a fault of the program)")
	}
	f.right.set(strings.Join(parts, " · "))
	if s.Done >= 1 {
		f.line.Hide()
	} else {
		f.line.Show()
		f.rail.Layout.Layout(f.rail.Objects, f.rail.Size())
	}
}

// count writes a number of things with at most three digits and a letter.
func count(n int64) string {
	switch x := float64(n); {
	case x >= 1e9:
		return fmt.Sprintf("%.2f G", x/1e9)
	case x >= 1e6:
		return fmt.Sprintf("%.2f M", x/1e6)
	case x >= 1e4:
		return fmt.Sprintf("%.0f k", x/1e3)
	}
	return fmt.Sprint(n)
}
