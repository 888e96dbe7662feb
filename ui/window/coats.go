package window

import (
	"cavitywright/ui/session"
)

// coat takes the coat tool in hand, with a law for the next pull.
func (w *Window) coat(law string) func() {
	return func() {
		l, err := session.Brush(law, w.session.Settings.Law)
		if err != nil {
			w.sayErr(err)
			return
		}
		w.session.Settings.Law = l
		w.session.Settings.Tool = session.Coats
		w.session.Coat = session.NoCoat
		w.editor.Cancel()
	}
}

// bareWall takes the coat tool in hand with no coat selected, so that the strip
// shows the numbers of all of the wall.
func (w *Window) bareWall() {
	w.session.Settings.Tool = session.Coats
	w.session.Coat = session.NoCoat
	w.editor.Cancel()
}

func (w *Window) duplicateCoat() { w.sayErr(w.editor.Tool().Coats().Duplicate()) }

func (w *Window) deleteCoat() { w.sayErr(w.editor.Tool().Coats().Delete()) }
