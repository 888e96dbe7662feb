package pane

import (
	"cavitywright/render"
	"cavitywright/ui/live"
	"cavitywright/ui/session"
	"cavitywright/ui/tool"

	"fyne.io/fyne/v2"
)

// Desk is what the panes share: the session, the engine, the look, and the
// place that the pointer is at. The window owns it.
type Desk struct {
	Session *session.Session
	Engine  *live.Engine
	Tool    *tool.Editor // the pointer over the table
	Look    render.Look
	// Hint writes what the pointer would do; Note writes the numbers of the
	// place it is at; Say writes one sentence that stays until the next.
	Hint func(string)
	Note func(string)
	Say  func(string)
	// Point shows a place in all panes.
	Point func(Place)
	// Key takes a key that means nothing to the pane it was pressed in.
	Key func(fyne.KeyName)
	// Changed asks for new pictures: a size, a view or a setting changed.
	Changed func()
	// Free turns an item into a free wall and says how near it lies.
	Free func(item int)
}

// drawing reports whether the pointer draws a wall node by node.
func (d *Desk) drawing() bool { return d.Session.Settings.Tool == session.Chain }
