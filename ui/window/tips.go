package window

import (
	"time"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/driver/desktop"
	"fyne.io/fyne/v2/theme"
	"fyne.io/fyne/v2/widget"
)

// tipSentences say what a button does and its key. They are found by the name
// of the line that the button stands in with the button's word, or its icon's
// name where it has none; a line without a name of its own is "".
var tipSentences = map[string]string{
	"Table/Reshape":  "Drag handles, nodes and shapes. V",
	"Table/Nodes":    "Click a wall node by node. N",
	"Table/Freehand": "Draw a wall in one stroke. D",
	"Table/Coats":    "Pull along the wall to lay what it does to rays. O",
	"Table/Measure":  "Read off distances, angles and radii. X",
	"Table/Grid":     "Nodes and shapes go to the grid, or pass it. G",
	"Table/Shapes":   "Place a shape of the catalogue. A",
	"Table/fit":      "Show the whole table. F",
	"Table/grow":     "Let the table fill the window, and back. 1",

	"Rays/Ray":   "A pull launches one ray.",
	"Rays/Fan":   "A pull launches a fan of rays from one point. B sets its angle.",
	"Rays/Beam":  "A pull launches parallel rays. B sets their width.",
	"Rays/pause": "Let the balls stand. P",
	"Rays/run":   "Let the balls run. P",
	"Rays/Clear": "Take out all launches. C",
	"Rays/fit":   "Show the whole table. F",
	"Rays/grow":  "Let the rays fill the window, and back. 2",

	"Portrait/Seed evenly": "Launch orbits evenly in ds dp over what is shown. E",
	"Portrait/stop":        "Stop filling the portrait. S",
	"Portrait/run":         "Go on filling the portrait. S",
	"Portrait/fit":         "Show the whole section. F",
	"Portrait/grow":        "Let the portrait fill the window, and back. 3",

	"/Gallery": "Begin with a table of the gallery. Ctrl+N",
	"/Undo":    "Take the last change back. Ctrl+Z",
	"/Redo":    "Make the change again that was taken back. Ctrl+Y",
	"/Open":    "Open a table file, or a figure that carries one. Ctrl+O",
	"/Save":    "Save the table to its file. Ctrl+S",
	"/Figure":  "Write a figure for a paper. Ctrl+E",
	"/stop":    "Stop what is being written.",

	"Sheets/Wall":      "What the wall is: joints, radii, symmetry and problems. W",
	"Sheets/Readings":  "Measured numbers with their errors. R",
	"Sheets/Orbits":    "Search periodic orbits.",
	"Sheets/Survival":  "How long rays stay in a table that leaks. T",
	"Sheets/Far field": "In which directions rays leave. I",
	"Sheets/Openings":  "Where to put an opening, and how rays pass between them. Q",
	"Sheets/Modes":     "How many modes lie below a frequency.",
	"Sheets/Outline":   "Write the wall for a workshop, or bring in an outline.",
	"Sheets/Studies":   "Turn a number and read off others at each step.",
	"Sheets/Tolerance": "What of the readings survives the workshop's errors.",
	"Sheets/Wish":      "Seek the wall whose readings are as wished.",
	"Sheets/Film":      "Let a number run from one value to another and watch.",

	"Film/Watch":          "Let the number run; the wall is back at the end.",
	"Film/Stop":           "Stop, and bring the wall back.",
	"Film/Keep this wall": "Stop, and leave the wall as it stands now.",
	"Film/Write":          "Write the film as a GIF, or as numbered pictures.",

	"any/run":   "Begin to measure.",
	"any/stop":  "Stop it; what is known so far stays.",
	"any/save":  "Write this to a file.",
	"any/clear": "Take this out.",
	"any/Write": "Write this to a file.",
	"any/Stop":  "Stop it; what is known so far stays.",
}

// tipOf is the sentence for a button, "" for none.
func tipOf(line string, b *widget.Button) string {
	name := b.Text
	if name == "" && b.Icon != nil {
		if g, own := b.Icon.(glyph); own {
			name = string(g)
		}
	}
	if s, ok := tipSentences[line+"/"+name]; ok {
		return s
	}
	return tipSentences["any/"+name]
}

// tipped is the button under a shade that waits for the pointer to rest.
func tipped(line string, b *widget.Button) fyne.CanvasObject {
	s := &shade{button: b, line: line, word: b.Text}
	s.ExtendBaseWidget(s)
	return container.NewStack(b, s)
}

// tippedAll puts shades over the buttons of a row.
func tippedAll(line string, row []fyne.CanvasObject) []fyne.CanvasObject {
	var all []fyne.CanvasObject
	for _, o := range row {
		switch o := o.(type) {
		case *widget.Button:
			all = append(all, tipped(line, o))
		case *fyne.Container:
			o.Objects = tippedAll(line, o.Objects)
			all = append(all, o)
		default:
			all = append(all, o)
		}
	}
	return all
}

// shade lies over a button and takes the moves of the pointer alone, which it
// hands on; a press goes through to the button.
type shade struct {
	widget.BaseWidget
	button *widget.Button
	line   string
	word   string // the button's, also where it has gone for want of room
}

// MouseIn begins to wait.
func (s *shade) MouseIn(e *desktop.MouseEvent) {
	s.button.MouseIn(e)
	if l := tipsOver(s); l != nil && s.button.Visible() {
		l.wait(s)
	}
}

// MouseMoved hands the move on.
func (s *shade) MouseMoved(e *desktop.MouseEvent) { s.button.MouseMoved(e) }

// MouseOut takes the tip away.
func (s *shade) MouseOut() {
	s.button.MouseOut()
	if l := tipsOver(s); l != nil {
		l.hide()
	}
}

// sentence is what the tip says.
func (s *shade) sentence() string {
	if s.button.Text == "" && s.word != "" {
		if t, ok := tipSentences[s.line+"/"+s.word]; ok {
			return t
		}
	}
	return tipOf(s.line, s.button)
}

// CreateRenderer shows nothing.
func (s *shade) CreateRenderer() fyne.WidgetRenderer {
	return widget.NewSimpleRenderer(container.NewWithoutLayout())
}

// tips is the layer over the whole window in which a tip is drawn. It takes no
// events. It is the last of the window's content.
type tips struct {
	widget.BaseWidget
	post  func(func())
	paper *canvas.Rectangle
	text  *canvas.Text
	over  *shade
	timer *time.Timer
}

const (
	// tipAfter is how long the pointer must rest on a button.
	tipAfter = 500 * time.Millisecond
	// tipSize is the size of a tip's text, tipInset the room around it.
	tipSize, tipInset = 12, 6
	// tipFoot is the height of the last line of the window, which no tip covers.
	tipFoot = 30
)

func newTips(post func(func())) *tips {
	t := &tips{post: post, paper: canvas.NewRectangle(nil), text: canvas.NewText("", nil)}
	t.text.TextSize = tipSize
	t.paper.CornerRadius = 4
	t.paper.Hide()
	t.text.Hide()
	t.ExtendBaseWidget(t)
	return t
}

// CreateRenderer draws the two where show puts them.
func (t *tips) CreateRenderer() fyne.WidgetRenderer {
	return widget.NewSimpleRenderer(container.NewWithoutLayout(t.paper, t.text))
}

// tipsOver is the layer of the window that an object is in, nil for none.
func tipsOver(o fyne.CanvasObject) *tips {
	c := fyne.CurrentApp().Driver().CanvasForObject(o)
	if c == nil {
		return nil
	}
	root, ok := c.Content().(*fyne.Container)
	if !ok || len(root.Objects) == 0 {
		return nil
	}
	t, _ := root.Objects[len(root.Objects)-1].(*tips)
	return t
}

// wait shows the shade's tip if the pointer stays.
func (t *tips) wait(s *shade) {
	t.hide()
	t.over = s
	t.timer = time.AfterFunc(tipAfter, func() { t.post(func() { t.show(s) }) })
}

// hide takes the tip away.
func (t *tips) hide() {
	if t.timer != nil {
		t.timer.Stop()
		t.timer = nil
	}
	t.over = nil
	if t.paper.Visible() {
		t.paper.Hide()
		t.text.Hide()
	}
}

// show draws the tip under the button, or over it where there is no room.
func (t *tips) show(s *shade) {
	if t.over != s || !s.button.Visible() {
		return
	}
	say := s.sentence()
	if say == "" {
		return
	}
	d := fyne.CurrentApp().Driver()
	window := t.Size()
	t.text.Text = say
	t.text.Color = theme.Color(theme.ColorNameBackground)
	t.paper.FillColor = theme.Color(theme.ColorNameForeground)
	line := fyne.MeasureText(say, tipSize, t.text.TextStyle)
	size := line.AddWidthHeight(2*tipInset, 2*tipInset-4)
	at := d.AbsolutePositionForObject(s).Subtract(d.AbsolutePositionForObject(t))
	below := at.Y + s.Size().Height + 3
	if below+size.Height > window.Height-tipFoot {
		below = at.Y - size.Height - 3
	}
	at = fyne.NewPos(max(2, min(at.X, window.Width-size.Width-2)), below)
	t.paper.Move(at)
	t.paper.Resize(size)
	t.text.Move(at.AddXY(tipInset, tipInset-2))
	t.text.Resize(line)
	t.paper.Show()
	t.text.Show()
	t.Refresh()
}
