package live

import (
	"image"
	"sync"
)

// Frames hands finished pictures from the engine to a pane. Three pictures go
// round: the one shown, the newest finished, and the one being drawn; each is
// touched by one side at a time.
type Frames struct {
	mu      sync.Mutex
	shown   *image.RGBA
	ready   *image.RGBA
	spare   *image.RGBA
	taken   int
	pending bool // a post to the window is under way
}

// Take is the newest finished picture, nil before the first. It belongs to the
// caller until the next Take.
func (f *Frames) Take() *image.RGBA {
	f.mu.Lock()
	defer f.mu.Unlock()
	if f.ready != nil {
		f.spare, f.shown, f.ready = f.shown, f.ready, nil
		f.taken++
	}
	return f.shown
}

// Taken is how many pictures Take has handed out.
func (f *Frames) Taken() int {
	f.mu.Lock()
	defer f.mu.Unlock()
	return f.taken
}

// Fresh reports whether a picture is finished that Take has not handed out.
func (f *Frames) Fresh() bool {
	f.mu.Lock()
	defer f.mu.Unlock()
	return f.ready != nil
}

// publish draws the next picture. draw gets the spare one, which may be nil or
// of another size, and returns the one it drew on; nil draws nothing.
func (f *Frames) publish(draw func(*image.RGBA) *image.RGBA) {
	f.mu.Lock()
	img := f.spare
	f.spare = nil
	f.mu.Unlock()
	img = draw(img)
	if img == nil {
		return
	}
	f.mu.Lock()
	if f.ready != nil {
		f.spare = f.ready
	}
	f.ready = img
	f.mu.Unlock()
}

// claim reports whether a post may be made: none is under way.
func (f *Frames) claim() bool {
	f.mu.Lock()
	defer f.mu.Unlock()
	if f.pending {
		return false
	}
	f.pending = true
	return true
}

func (f *Frames) release() {
	f.mu.Lock()
	f.pending = false
	f.mu.Unlock()
}

// sized is img where it has the size, else a new picture.
func sized(img *image.RGBA, size image.Point) *image.RGBA {
	if img != nil && img.Rect.Size() == size {
		return img
	}
	return image.NewRGBA(image.Rectangle{Max: size})
}
