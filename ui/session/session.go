// Package session is what the designer is at work on: the document with its
// history, the selection, the views and the settings. It knows no window
// toolkit; panes read it and tools change it, always through commands.
//
// Selection, views and settings are no part of the document: undo does not
// move them.
package session

import (
	"cavitywright/render"
	"cavitywright/table"
	"cavitywright/table/edit"

	"gonum.org/v1/gonum/spatial/r2"
)

// Session is one open document.
type Session struct {
	history *edit.History
	saved   *table.Table
	path    string

	Selection Selection
	Coat      int          // the coat that is selected, NoCoat for none
	Editor    render.View  // what the editor shows; one of no Scale fits the table
	Section   table.Region // what the portrait shows
	Settings  Settings
	Reference *table.Table // kept to compare with; nil for none
	Refusal   error        // why the last command was refused; nil after one that was not

	revision  uint64
	documents int // number of the document at work
	gesture   int // number of the last gesture
	changed   func()
}

// Selection is what the values strip shows and Delete takes out.
type Selection struct {
	Item   int // -1 for none
	Handle int // -1 for the whole item
}

// New is a session on a table that was read from path, or that is new where
// path is empty.
func New(t *table.Table, path string) *Session {
	s := &Session{Settings: DefaultSettings()}
	s.Open(t, path)
	return s
}

// OnChange sets the function that is called after each change of the document
// or of what is selected or shown.
func (s *Session) OnChange(f func()) { s.changed = f }

// Open replaces the document. The history begins anew.
func (s *Session) Open(t *table.Table, path string) {
	s.history, s.saved, s.path = edit.NewHistory(t), t, path
	s.documents++
	s.Selection, s.Editor, s.Section, s.Refusal = Selection{0, -1}, render.View{}, table.WholeSection(), nil
	s.Coat = NoCoat
	s.Touch()
}

// Adopt replaces the document by one that counts as not saved: a recovered
// one.
func (s *Session) Adopt(t *table.Table, path string) {
	s.Open(t, path)
	s.saved = nil
	s.Touch()
}

// Table is the document.
func (s *Session) Table() *table.Table { return s.history.Now() }

// Revision counts the changes.
func (s *Session) Revision() uint64 { return s.revision }

// Document is the number of the document, counted from when the program began.
func (s *Session) Document() int { return s.documents }

// Path is the document's file, empty for a new one.
func (s *Session) Path() string { return s.path }

// Unsaved reports whether the document differs from its file.
func (s *Session) Unsaved() bool { return s.saved != s.Table() }

// Saved notes that the document was written to path.
func (s *Session) Saved(path string) {
	s.path, s.saved = path, s.Table()
	s.Touch()
}

// Touch tells the panes that something changed.
func (s *Session) Touch() {
	s.revision++
	s.hold()
	if s.changed != nil {
		s.changed()
	}
}

// hold keeps the selection within the document.
func (s *Session) hold() {
	if s.Coat >= len(s.Table().Design().Coats) {
		s.Coat = NoCoat
	}
	items := s.Table().Design().Items
	if s.Selection.Item >= len(items) {
		s.Selection = Selection{-1, -1}
	}
	if i := s.Selection.Item; i >= 0 && s.Selection.Handle >= len(items[i].Shape.Handles()) {
		s.Selection.Handle = -1
	}
}

// Do applies a command. A refused one changes nothing but Refusal.
func (s *Session) Do(c edit.Command) error {
	s.Refusal = s.history.Do(c)
	s.Touch()
	return s.Refusal
}

// Begin opens a gesture.
func (s *Session) Begin() {
	s.gesture++
	s.history.Begin()
}

// Gesture is the number of the gesture that is open, 0 for none. Who began one
// can tell by it whether it is still the one: undo, a command or another
// document end it.
func (s *Session) Gesture() int {
	if !s.history.InGesture() {
		return 0
	}
	return s.gesture
}

// Amend replaces what the gesture did so far.
func (s *Session) Amend(c edit.Command) error {
	s.Refusal = s.history.Amend(c)
	s.Touch()
	return s.Refusal
}

// End closes the gesture; a refusal on the way is forgotten.
func (s *Session) End() {
	s.history.End()
	s.Refusal = nil
	s.Touch()
}

// Cancel closes the gesture as if it had not happened.
func (s *Session) Cancel() {
	s.history.Cancel()
	s.Refusal = nil
	s.Touch()
}

// InGesture reports whether a gesture is open.
func (s *Session) InGesture() bool { return s.history.InGesture() }

// Undo goes back one step.
func (s *Session) Undo() {
	if s.history.Undo() {
		s.Refusal = nil
		s.Touch()
	}
}

// Redo goes forward one step.
func (s *Session) Redo() {
	if s.history.Redo() {
		s.Refusal = nil
		s.Touch()
	}
}

// Steps are the titles of what Undo and Redo would do, empty where nothing.
func (s *Session) Steps() (undo, redo string) { return s.history.Next() }

// Select selects an item and one of its handles (-1 for none).
func (s *Session) Select(item, handle int) {
	next := Selection{item, handle}
	if next != s.Selection {
		s.Selection = next
		s.Touch()
	}
}

// Handle is a handle of the document in table coordinates.
type Handle struct {
	Item, Index int
	At          r2.Vec
}

// Handles are the handles of every item, the selected item's last, so that
// they lie on top.
func (s *Session) Handles() []Handle {
	var all, top []Handle
	for i, it := range s.Table().Design().Items {
		for k, h := range it.Shape.Handles() {
			h := Handle{i, k, it.Place.Apply(h.At)}
			if i == s.Selection.Item {
				top = append(top, h)
			} else {
				all = append(all, h)
			}
		}
	}
	return append(all, top...)
}
