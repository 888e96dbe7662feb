package pane

import "fyne.io/fyne/v2"

// flow lays its objects out from left to right, in a further line where there
// is no room.
type flow struct{ wide float32 } // of the last layout; 0 before the first

// lines calls each with the place of an object, and is the height of all.
func (f *flow) lines(objects []fyne.CanvasObject, wide float32, each func(o fyne.CanvasObject, at fyne.Position, high float32)) float32 {
	x, y := float32(0), float32(0)
	for first := 0; first < len(objects); {
		high, end := float32(0), first
		for x = 0; end < len(objects); end++ {
			m := objects[end].MinSize()
			if end > first && x+m.Width > wide {
				break
			}
			x += m.Width + columnGap
			high = max(high, m.Height)
		}
		x = 0
		for _, o := range objects[first:end] {
			each(o, fyne.NewPos(x, y), high)
			x += o.MinSize().Width + columnGap
		}
		y += high
		first = end
	}
	return y
}

// MinSize is as wide as the widest object, and as high as the lines of the
// last layout; one line before the first.
func (f *flow) MinSize(objects []fyne.CanvasObject) fyne.Size {
	least, sum := float32(0), float32(0)
	for _, o := range objects {
		least = max(least, o.MinSize().Width)
		sum += o.MinSize().Width + columnGap
	}
	wide := f.wide
	if wide == 0 {
		wide = sum
	}
	return fyne.NewSize(least, f.lines(objects, wide, func(fyne.CanvasObject, fyne.Position, float32) {}))
}

// Layout fills the lines.
func (f *flow) Layout(objects []fyne.CanvasObject, size fyne.Size) {
	f.wide = size.Width
	f.lines(objects, size.Width, func(o fyne.CanvasObject, at fyne.Position, high float32) {
		o.Move(at)
		o.Resize(fyne.NewSize(o.MinSize().Width, high))
	})
}

// tower stacks objects whose height depends on the width they get: each is
// given the width before it is asked how high it is.
type tower struct{}

// MinSize is that of the objects as they were laid out last.
func (tower) MinSize(objects []fyne.CanvasObject) fyne.Size {
	size := fyne.NewSize(0, 0)
	for _, o := range objects {
		size.Width = max(size.Width, o.MinSize().Width)
		size.Height += o.MinSize().Height + columnGap
	}
	return size
}

// Layout stacks them.
func (tower) Layout(objects []fyne.CanvasObject, size fyne.Size) {
	y := float32(0)
	for _, o := range objects {
		o.Resize(fyne.NewSize(size.Width, o.MinSize().Height))
		o.Resize(fyne.NewSize(size.Width, o.MinSize().Height))
		o.Move(fyne.NewPos(0, y))
		y += o.Size().Height + columnGap
	}
}
