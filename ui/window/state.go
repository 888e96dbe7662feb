package window

import (
	"time"

	"cavitywright/ui/live"
	"cavitywright/ui/pane"

	"fyne.io/fyne/v2"
)

// State is what the window shows, for tests that drive it from outside: where
// things are on the screen and how far the work is.
type State struct {
	Revision  uint64            `json:"revision"`
	Name      string            `json:"name"`
	Path      string            `json:"path"`
	Unsaved   bool              `json:"unsaved"`
	Said      string            `json:"said"`
	Length    float64           `json:"length"`
	Status    live.Status       `json:"status"`
	Handles   [][2]float32      `json:"handles"` // in pixels of the window
	Panes     map[string][4]int `json:"panes"`   // x, y, width, height in pixels of the window
	FrameRate float64           `json:"frame_rate"`
	Asks      bool              `json:"asks"`   // a question or another dialog stands in the window
	Sheet     string            `json:"sheet"`  // the page of the drawer that is open
	Beats     int               `json:"beats"`  // answers of the window's goroutine to a call that comes again and again
	Stalls    []live.Stall      `json:"stalls"` // the calls that waited too long, the latest only
}

const (
	// beatsToTell is the number of answers from one report to the next.
	beatsToTell = 8
	// mostStalls is the number of stalls that are kept.
	mostStalls = 40
)

// beat counts an answer of the window's goroutine.
func (w *Window) beat(_ time.Duration, s *live.Stall) {
	w.beats++
	if s != nil {
		w.stalls = append(w.stalls, *s)
		w.stalls = w.stalls[max(0, len(w.stalls)-mostStalls):]
	}
	if s != nil || w.beats%beatsToTell == 0 {
		w.watch(w.state(w.last))
	}
}

func (w *Window) state(s live.Status) State {
	t := w.session.Table()
	st := State{
		Revision: w.session.Revision(), Name: t.Design().Name, Path: w.session.Path(), Unsaved: w.session.Unsaved(),
		Said: w.foot.standing, Length: t.Length(), Status: s, Panes: map[string][4]int{}, FrameRate: w.rate.PerSecond,
		Asks: w.win.Canvas().Overlays().Top() != nil, Beats: w.beats, Stalls: w.stalls,
	}
	if i := w.drawer.open; i >= 0 {
		st.Sheet = w.drawer.sheets[i].Name()
	}
	k := w.win.Canvas().Scale()
	for _, p := range w.editor.HandlePlaces() {
		at := fyne.CurrentApp().Driver().AbsolutePositionForObject(w.editor.Surface).Add(p)
		st.Handles = append(st.Handles, [2]float32{at.X * k, at.Y * k})
	}
	for name, p := range map[string]*pane.Surface{"table": w.editor.Surface, "rays": w.rays.Surface, "portrait": w.portrait.Surface} {
		at := fyne.CurrentApp().Driver().AbsolutePositionForObject(p)
		st.Panes[name] = [4]int{int(at.X * k), int(at.Y * k), p.Pixels().X, p.Pixels().Y}
	}
	return st
}
