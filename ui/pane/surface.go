// Package pane holds the widgets of the designer: three surfaces that show
// finished pictures and turn the pointer into table coordinates, once, for the
// tools; and the strip of values. They compute nothing.
package pane

import (
	"image"
	"math"
	"time"

	"cavitywright/ui/tool"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/driver/desktop"
	"fyne.io/fyne/v2/widget"
)

// Hands is what a pane does with the pointer. Places are in pixels of the
// picture, y down.
type Hands interface {
	Press(x, y float64, k tool.Keys)
	Drag(x, y float64, k tool.Keys)
	Release()
	// Cancel takes back what has not been released.
	Cancel()
	// Hover follows the pointer when no button is held; Leave says it is gone.
	Hover(x, y float64)
	Leave()
	// Double is a second press at the same place.
	Double(x, y float64)
	// Pan moves the picture by dx, dy pixels; Zoom enlarges it by k about a
	// place.
	Pan(dx, dy float64)
	Zoom(x, y, k float64)
	// Key takes a key; false where it does nothing here.
	Key(name fyne.KeyName) bool
}

// Surface is the widget under every pane: one picture, thin marks over it, and
// all pointer events. It is not Tappable: clicks are told apart here, without
// the toolkit's waiting time for double taps.
type Surface struct {
	widget.BaseWidget
	hands   Hands
	picture func() *image.RGBA // the newest finished picture
	resized func(w, h int)     // called when the picture's size in pixels changes
	mods    func() fyne.KeyModifier

	raster *canvas.Raster
	marks  []fyne.CanvasObject
	px     image.Point

	// keysElse takes the keys that mean nothing to the pane.
	keysElse func(fyne.KeyName)
	// wheelElse, if set, takes the wheel instead of a zoom.
	wheelElse func(*fyne.ScrollEvent)

	button  desktop.MouseButton
	space   bool
	last    fyne.Position
	clickAt fyne.Position
	clicked time.Time
	cursor  desktop.StandardCursor
	hover   hover
}

func newSurface(h Hands, picture func() *image.RGBA, resized func(w, h int)) *Surface {
	s := &Surface{hands: h, picture: picture, resized: resized, mods: heldKeys}
	s.raster = canvas.NewRaster(s.generate)
	s.raster.ScaleMode = canvas.ImageScalePixels
	s.ExtendBaseWidget(s)
	return s
}

// heldKeys asks the driver; the test driver has no answer.
func heldKeys() fyne.KeyModifier {
	if d, ok := fyne.CurrentApp().Driver().(desktop.Driver); ok {
		return d.CurrentKeyModifiers()
	}
	return 0
}

func (s *Surface) keys() tool.Keys {
	var k tool.Keys
	m := s.mods()
	if m&fyne.KeyModifierShift != 0 {
		k |= tool.Constrain
	}
	if m&(fyne.KeyModifierControl|fyne.KeyModifierSuper) != 0 {
		k |= tool.Free
	}
	return k
}

// generate hands out the finished picture. The size asked for is corrected to
// the pixels that the widget really covers, so that nothing is resampled.
func (s *Surface) generate(w, h int) image.Image {
	w, h = s.covers(w, h)
	if p := image.Pt(w, h); p != s.px && w > 1 && h > 1 {
		s.px = p
		s.resized(w, h)
	}
	if img := s.picture(); img != nil {
		return img
	}
	return image.NewRGBA(image.Rect(0, 0, 1, 1))
}

func (s *Surface) covers(w, h int) (int, int) {
	d := fyne.CurrentApp().Driver()
	c := d.CanvasForObject(s)
	if c == nil {
		return w, h
	}
	p := d.AbsolutePositionForObject(s)
	x0, y0 := c.PixelCoordinateForPosition(p)
	x1, y1 := c.PixelCoordinateForPosition(p.Add(s.Size()))
	if x1-x0 < 1 || y1-y0 < 1 {
		return w, h
	}
	return x1 - x0, y1 - y0
}

// Pixels is the size of the picture.
func (s *Surface) Pixels() image.Point { return s.px }

// Scale is the number of pixels of the picture to a unit of the window.
func (s *Surface) Scale() float64 {
	if s.Size().Width <= 0 || s.px.X == 0 {
		return 1
	}
	return float64(s.px.X) / float64(s.Size().Width)
}

// Show puts the newest picture on the screen.
func (s *Surface) Show() { s.raster.Refresh() }

// pixel is a place of the window in pixels of the picture.
func (s *Surface) pixel(p fyne.Position) (x, y float64) {
	k := s.Scale()
	return float64(p.X) * k, float64(p.Y) * k
}

// unit is a place in pixels in units of the window.
func (s *Surface) unit(x, y float64) fyne.Position {
	k := s.Scale()
	return fyne.NewPos(float32(x/k), float32(y/k))
}

// MinSize keeps the panes free to shrink.
func (s *Surface) MinSize() fyne.Size { return fyne.NewSize(64, 64) }

// MouseDown begins a gesture: left does, middle or Space with left pans.
func (s *Surface) MouseDown(e *desktop.MouseEvent) {
	if c := fyne.CurrentApp().Driver().CanvasForObject(s); c != nil {
		c.Focus(s)
	}
	s.button, s.last = e.Button, e.Position
	if e.Button != desktop.MouseButtonPrimary || s.space {
		return
	}
	x, y := s.pixel(e.Position)
	if time.Since(s.clicked) < doubleTime && near(e.Position, s.clickAt) {
		s.clicked = time.Time{}
		s.hands.Double(x, y)
		return
	}
	s.clicked, s.clickAt = time.Now(), e.Position
	s.hands.Press(x, y, s.keys())
}

const (
	// doubleTime and doubleReach tell a double click from two clicks.
	doubleTime  = 350 * time.Millisecond
	doubleReach = 4
)

func near(a, b fyne.Position) bool {
	return math.Abs(float64(a.X-b.X)) < doubleReach && math.Abs(float64(a.Y-b.Y)) < doubleReach
}

// MouseUp ends it.
func (s *Surface) MouseUp(e *desktop.MouseEvent) {
	if e.Button == desktop.MouseButtonPrimary {
		s.hands.Release()
	}
	s.button = 0
	s.Again()
}

// Dragged follows the pointer while a button is held, outside the widget too.
func (s *Surface) Dragged(e *fyne.DragEvent) {
	k := s.Scale()
	dx, dy := float64(e.Position.X-s.last.X)*k, float64(e.Position.Y-s.last.Y)*k
	s.last = e.Position
	switch {
	case s.button == desktop.MouseButtonTertiary, s.button == desktop.MouseButtonPrimary && s.space:
		s.hands.Pan(dx, dy)
	case s.button == desktop.MouseButtonPrimary:
		x, y := s.pixel(e.Position)
		s.hover.x, s.hover.y = x, y
		s.hands.Drag(x, y, s.keys())
	}
}

// DragEnd ends a gesture whose release the widget did not see.
func (s *Surface) DragEnd() {
	if s.button == desktop.MouseButtonPrimary {
		s.hands.Release()
	}
	s.button = 0
}

// MouseIn and MouseMoved follow the pointer.
func (s *Surface) MouseIn(e *desktop.MouseEvent) { s.MouseMoved(e) }

// MouseMoved without a button, while one was pressed, is a lost release.
func (s *Surface) MouseMoved(e *desktop.MouseEvent) {
	if s.button != 0 && e.Button == 0 {
		s.DragEnd()
	}
	x, y := s.pixel(e.Position)
	if s.button == 0 {
		s.hover = hover{x: x, y: y, state: Visible}
		s.hands.Hover(x, y)
	}
}

// hover is where the pointer is over the pane, in pixels.
type hover struct {
	x, y  float64
	state Visibility
	again Visibility // while the pane is told again
}

// Again tells the pane anew what the pointer is over: the table under it, or
// the view, has changed.
func (s *Surface) Again() {
	if s.hover.state == Hidden || s.hover.again == Visible || s.button != 0 {
		return
	}
	s.hover.again = Visible
	s.hands.Hover(s.hover.x, s.hover.y)
	s.hover.again = Hidden
}

// MouseOut takes the hover marks away.
func (s *Surface) MouseOut() {
	s.hover.state = Hidden
	s.hands.Leave()
}

// Scrolled zooms about the pointer.
func (s *Surface) Scrolled(e *fyne.ScrollEvent) {
	if s.wheelElse != nil {
		s.wheelElse(e)
		return
	}
	x, y := s.pixel(e.Position)
	d := math.Max(-100, math.Min(100, float64(e.Scrolled.DY+e.Scrolled.DX)))
	s.hands.Zoom(x, y, math.Exp(d*zoomStep))
}

// zoomStep is the logarithm of the zoom for one unit of wheel; a notch of 25
// units is a factor of 1.19.
const zoomStep = 0.007

// FocusGained, FocusLost, TypedRune and TypedKey make the surface reachable by
// keys.
func (s *Surface) FocusGained() {}

// FocusLost forgets keys whose release it will not see.
func (s *Surface) FocusLost() { s.space = false }

// TypedRune does nothing: letters are commands, and come as keys.
func (s *Surface) TypedRune(rune) {}

// TypedKey gives up a gesture on Escape, else asks the pane.
func (s *Surface) TypedKey(e *fyne.KeyEvent) {
	if e.Name == fyne.KeyEscape {
		s.button = 0
		s.hands.Cancel()
		return
	}
	if !s.hands.Key(e.Name) && s.keysElse != nil {
		s.keysElse(e.Name)
	}
}

// KeyDown and KeyUp watch Space, which turns a drag into a pan.
func (s *Surface) KeyDown(e *fyne.KeyEvent) {
	if e.Name == fyne.KeySpace {
		s.space = true
	}
}

// KeyUp lets Space go.
func (s *Surface) KeyUp(e *fyne.KeyEvent) {
	if e.Name == fyne.KeySpace {
		s.space = false
	}
}

// Cursor is a cross-hair over a picture that is worked on.
func (s *Surface) Cursor() desktop.Cursor { return s.cursor }

// CreateRenderer lays the marks over the picture.
func (s *Surface) CreateRenderer() fyne.WidgetRenderer {
	return &surfaceRenderer{s}
}

type surfaceRenderer struct{ s *Surface }

func (r *surfaceRenderer) Layout(size fyne.Size) { r.s.raster.Resize(size) }
func (r *surfaceRenderer) MinSize() fyne.Size    { return r.s.MinSize() }
func (r *surfaceRenderer) Refresh()              { r.s.raster.Refresh() }
func (r *surfaceRenderer) Destroy()              {}
func (r *surfaceRenderer) Objects() []fyne.CanvasObject {
	return append([]fyne.CanvasObject{r.s.raster}, r.s.marks...)
}
