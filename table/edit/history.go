package edit

import "cavitywright/table"

// History is the line of tables that a person has made, with the one that
// stands. It has no limit: tables share what did not change. Within one
// gesture commands amend each other, always from the table at the gesture's
// start.
type History struct {
	past, future []step
	now          *table.Table
	base         *table.Table // at the start of the gesture; nil outside one
	title        string
}

type step struct {
	table *table.Table
	title string // of the change that led away from (past) or to (future) it
}

// NewHistory begins with a table.
func NewHistory(t *table.Table) *History { return &History{now: t} }

// Now is the table that stands.
func (h *History) Now() *table.Table { return h.now }

// Do applies a command as a step of its own.
func (h *History) Do(c Command) error {
	h.End()
	next, err := c.Apply(h.now)
	if err != nil {
		return err
	}
	h.past = append(h.past, step{h.now, c.Title()})
	h.future = nil
	h.now = next
	return nil
}

// Begin opens a gesture.
func (h *History) Begin() {
	h.End()
	h.base, h.title = h.now, ""
}

// Amend replaces what the gesture has done so far by the command, applied to
// the table at its start. Outside a gesture it is Do. A refused command leaves
// what the gesture had reached.
func (h *History) Amend(c Command) error {
	if h.base == nil {
		return h.Do(c)
	}
	next, err := c.Apply(h.base)
	if err != nil {
		return err
	}
	h.now, h.title = next, c.Title()
	return nil
}

// End closes the gesture: one step, if it changed anything.
func (h *History) End() {
	if h.base != nil && h.base != h.now {
		h.past = append(h.past, step{h.base, h.title})
		h.future = nil
	}
	h.base = nil
}

// Cancel closes the gesture as if it had not happened.
func (h *History) Cancel() {
	if h.base != nil {
		h.now, h.base = h.base, nil
	}
}

// InGesture reports whether a gesture is open.
func (h *History) InGesture() bool { return h.base != nil }

// Undo goes a step back; false at the beginning.
func (h *History) Undo() bool {
	h.End()
	n := len(h.past)
	if n == 0 {
		return false
	}
	s := h.past[n-1]
	h.past = h.past[:n-1]
	h.future = append(h.future, step{h.now, s.title})
	h.now = s.table
	return true
}

// Redo goes a step forward again; false at the end.
func (h *History) Redo() bool {
	h.End()
	n := len(h.future)
	if n == 0 {
		return false
	}
	s := h.future[n-1]
	h.future = h.future[:n-1]
	h.past = append(h.past, step{h.now, s.title})
	h.now = s.table
	return true
}

// Next are the titles of the changes that Undo and Redo would make; empty where
// there are none.
func (h *History) Next() (undo, redo string) {
	if n := len(h.past); n > 0 {
		undo = h.past[n-1].title
	}
	if n := len(h.future); n > 0 {
		redo = h.future[n-1].title
	}
	return undo, redo
}
