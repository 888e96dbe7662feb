package tool

import (
	"fmt"
	"slices"

	"cavitywright/table"
	"cavitywright/table/edit"
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// Copy keeps the shapes that are selected for Paste.
func (e *Editor) Copy() error {
	g := e.Group()
	items := g.Items
	if g.Item >= 0 {
		items = []int{g.Item}
	} else if len(items) == 0 && e.s.Selection.Item >= 0 {
		items = []int{e.s.Selection.Item}
	}
	if len(items) == 0 {
		return fmt.Errorf("nothing is selected; click a shape first")
	}
	e.clip = nil
	t := e.s.Table()
	box := plane.Around()
	for _, i := range items {
		e.clip = append(e.clip, t.Design().Items[i])
		box = plane.Join(box, itemBox(t, i))
	}
	e.clipBox = box
	return nil
}

// Paste places what was copied: with its middle at the pointer where that is
// inside the table, else beside where it was, in the first of eight places that
// has room. What was the wall is an obstacle.
func (e *Editor) Paste() error {
	if len(e.clip) == 0 {
		return fmt.Errorf("nothing was copied yet; select a shape and copy it")
	}
	mid := plane.Lerp(e.clipBox.Min, e.clipBox.Max, 0.5)
	var places []r2.Vec
	if e.s.Table().Contains(e.pointer) {
		places = append(places, r2.Sub(e.pointer, mid))
	}
	return e.placeClip(append(places, e.beside()...))
}

// Duplicate places another one of what is selected beside it.
func (e *Editor) Duplicate() error {
	if err := e.Copy(); err != nil {
		return err
	}
	return e.placeClip(e.beside())
}

// besideGap is the gap between a copy and its original, as a share of its size.
const besideGap = 0.15

// beside are the shifts of a copy to the eight places about the original.
func (e *Editor) beside() []r2.Vec {
	w := (1 + besideGap) * (e.clipBox.Max.X - e.clipBox.Min.X)
	h := (1 + besideGap) * (e.clipBox.Max.Y - e.clipBox.Min.Y)
	if e.Step > 0 {
		w, h = upTo(w, e.Step), upTo(h, e.Step)
	}
	return []r2.Vec{{X: w}, {Y: -h}, {X: -w}, {Y: h}, {X: w, Y: -h}, {X: -w, Y: h}, {X: w, Y: h}, {X: -w, Y: -h}}
}

// upTo is the least multiple of step that is not below x.
func upTo(x, step float64) float64 {
	n := float64(int(x / step))
	if n*step < x {
		n++
	}
	return n * step
}

// placeClip places what was copied by the first shift that makes a table.
func (e *Editor) placeClip(shifts []r2.Vec) error {
	count := len(e.s.Table().Design().Items)
	var first error
	for _, by := range shifts {
		items := slices.Clone(e.clip)
		for i := range items {
			items[i].Place.Shift = r2.Add(items[i].Place.Shift, by)
			items[i].Role = table.Post
		}
		c := edit.Add{Items: items}
		if _, err := c.Apply(e.s.Table()); err != nil {
			if first == nil {
				first = err
			}
			continue
		}
		if err := e.s.Do(c); err != nil {
			return err
		}
		e.alone()
		for i := range items[1:] {
			e.alsoItems = append(e.alsoItems, count+1+i)
		}
		e.s.Select(count, -1)
		return nil
	}
	return fmt.Errorf("there is no room for the copy: %w", first)
}
