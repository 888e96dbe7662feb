package window

import (
	"fmt"
	"slices"

	"cavitywright/table/edit"
	"cavitywright/table/plane"
	"cavitywright/table/shape"
	"cavitywright/ui/tool"

	"fyne.io/fyne/v2"
)

// freeWallCommands are those of free walls and of shapes moved as a whole.
func (w *Window) freeWallCommands() []command {
	pointer := func(f func(*tool.Editor) error) func() {
		return func() { w.sayErr(f(w.editor.Tool())) }
	}
	align := func(how tool.Line) func() {
		return pointer(func(e *tool.Editor) error { return e.Align(how) })
	}
	return []command{
		{"Edit", "Copy", &fyne.ShortcutCopy{}, "", "Ctrl+C", w.copyOf(func() { w.sayErr(w.editor.Tool().Copy()) }, &fyne.ShortcutCopy{}), nil},
		{"Edit", "Paste", &fyne.ShortcutPaste{}, "", "Ctrl+V", w.copyOf(func() { w.sayErr(w.editor.Tool().Paste()) }, &fyne.ShortcutPaste{}), nil},
		{"Edit", "Duplicate", ctrl(fyne.KeyD), "", "Ctrl+D", pointer((*tool.Editor).Duplicate), nil},
		{"Edit", "Make it the wall in place of the one that is there", nil, "", "", w.becomeWall, nil},
		{"Edit", "Make it a free wall", nil, "", "", func() { w.freed(w.session.Selection.Item) }, nil},
		{"Edit", "Mirror the wall in the line through two nodes", nil, "", "", pointer((*tool.Editor).Mirror), nil},
		{"Edit", "Split the span behind a node in the middle", nil, "", "", pointer((*tool.Editor).Split), nil},
		{"Arrange", "Align left edges", nil, "", "", align(tool.LeftEdge), nil},
		{"Arrange", "Align right edges", nil, "", "", align(tool.RightEdge), nil},
		{"Arrange", "Align top edges", nil, "", "", align(tool.TopEdge), nil},
		{"Arrange", "Align bottom edges", nil, "", "", align(tool.BottomEdge), nil},
		{"Arrange", "Align on an upright line", nil, "", "", align(tool.MiddleX), nil},
		{"Arrange", "Align on a level line", nil, "", "", align(tool.MiddleY), nil},
		{"Arrange", "Spread evenly from left to right", nil, "", "", align(tool.SpreadX), nil},
		{"Arrange", "Spread evenly from bottom to top", nil, "", "", align(tool.SpreadY), nil},
	}
}

// withFreeWalls is the list with those commands before the ones that launch.
func (w *Window) withFreeWalls(list []command) []command {
	at := slices.IndexFunc(list, func(c command) bool { return c.menu == "Launch" })
	return slices.Insert(list, max(at, 0), w.freeWallCommands()...)
}

// copyOf acts on the shapes, or on the text of a field that is being typed in.
func (w *Window) copyOf(shapes func(), text fyne.Shortcut) func() {
	return func() {
		if e, ok := w.win.Canvas().Focused().(interface{ TypedShortcut(fyne.Shortcut) }); ok {
			switch s := text.(type) {
			case *fyne.ShortcutCopy:
				s.Clipboard = w.app.Clipboard()
			case *fyne.ShortcutPaste:
				s.Clipboard = w.app.Clipboard()
			}
			e.TypedShortcut(text)
			return
		}
		shapes()
	}
}

func (w *Window) becomeWall() {
	i := w.session.Selection.Item
	if i < 0 {
		w.say("Nothing is selected; click a shape first.")
		return
	}
	w.sayErr(w.session.Do(edit.BecomeWall{Item: i}))
}

// freedWithin is how far a free wall may lie from the shape that it takes the
// place of, as a fraction of the shape's size: far below any tool's accuracy,
// and few nodes.
const freedWithin = 1e-6

// freed turns item i into a free wall, and says how near it lies.
func (w *Window) freed(i int) {
	if i < 0 {
		w.say("Nothing is selected; click a shape first.")
		return
	}
	t := w.session.Table()
	c := edit.Convert{Item: i, Within: freedWithin * plane.Diagonal(t.Bounds())}
	list, err := edit.Converted(t, c)
	if err == nil {
		err = w.session.Do(c)
	}
	if err != nil {
		w.sayErr(err)
		return
	}
	nodes, exact, worst := 0, true, 0.0
	for _, f := range list {
		nodes += len(f.Wall.Nodes())
		exact = exact && f.Exact
		worst = max(worst, f.Error)
	}
	what := t.Design().Items[i].Shape.Kind()
	if k, is := t.Design().Items[i].Shape.(shape.Figure); is {
		what = k.Family().Title
	}
	if exact {
		w.say("%s is a free wall now: %d nodes, the same curves exactly.", what, nodes)
		return
	}
	w.say("%s", fmt.Sprintf("%s is a free wall now: %d nodes, nowhere farther than %.2g %s from what it was.", what, nodes, worst, t.Design().Unit))
}
