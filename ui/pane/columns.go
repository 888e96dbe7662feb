package pane

import "fyne.io/fyne/v2"

// columns lays its objects out in as many columns of one width as there is
// room for, at least one.
type columns struct {
	least float32 // width of a column at least
	count int     // of the last layout; 0 before the first
}

func (c *columns) fits(width float32) int { return max(int(width/c.least), 1) }

// MinSize is one column wide, and as high as the columns of the last layout.
func (c *columns) MinSize(objects []fyne.CanvasObject) fyne.Size {
	count := max(c.count, 1)
	if c.count == 0 {
		count = 2
	}
	rows := (len(objects) + count - 1) / count
	return fyne.NewSize(c.least, float32(rows)*c.rowHeight(objects))
}

func (c *columns) rowHeight(objects []fyne.CanvasObject) float32 {
	high := float32(0)
	for _, o := range objects {
		high = max(high, o.MinSize().Height)
	}
	return high + columnGap
}

// columnGap is between two columns, and between two rows.
const columnGap = 4

// Layout fills the rows from the left.
func (c *columns) Layout(objects []fyne.CanvasObject, size fyne.Size) {
	c.count = c.fits(size.Width)
	wide, high := size.Width/float32(c.count), c.rowHeight(objects)
	for i, o := range objects {
		o.Move(fyne.NewPos(float32(i%c.count)*wide, float32(i/c.count)*high))
		o.Resize(fyne.NewSize(wide-columnGap, high-columnGap))
	}
}
