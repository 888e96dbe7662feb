package render

import (
	"testing"

	"cavitywright/sim/figure"
)

// TestSheet lays out a page: everything stays on it, rows do not run into one
// another, and title, headings and foot are there in this order.
func TestSheet(t *testing.T) {
	f := figure.Sheet{
		Title: "Plate 7", Head: []string{"Drawn in millimetres."}, Foot: []string{"Mind the edge."},
		Rows: []figure.SheetRow{
			{Height: 2, Blocks: []figure.Block{
				{Heading: "First", Width: 1, Show: figure.Scalars{Rows: []figure.Scalar{{Name: "area", Value: 1, Unit: "mm²"}}}},
				{Heading: "Second", Width: 1, Show: scatter()},
			}},
			{Height: 3, Blocks: []figure.Block{{Heading: "Third", Width: 1, Show: scatter()}}},
		},
	}
	look := Paper(1)
	page := NewBox(0, 0, 210, Height(f, 210, look))
	if page.H() < 296 || page.H() > 298 {
		t.Errorf("a page 210 wide is %g high", page.H())
	}
	var c record
	Draw(&c, f, page, look)
	at := map[string]Box{}
	for _, text := range c.texts {
		b := textBox(text)
		if !holds(page, b) {
			t.Errorf("%q leaves the page: %v", text.String, b)
		}
		for other, o := range at {
			if overlap(b, o) && text.Turn == Level {
				t.Errorf("%q lies on %q", text.String, other)
			}
		}
		at[text.String] = b
	}
	order := []string{"Plate 7", "Drawn in millimetres.", "First", "Third", "Mind the edge."}
	for i := 1; i < len(order); i++ {
		if !(at[order[i]].Min.Y > at[order[i-1]].Max.Y) {
			t.Errorf("%q is not below %q", order[i], order[i-1])
		}
	}
	if at["First"].Max.Y != at["Second"].Max.Y || at["Second"].Min.X < at["First"].Max.X {
		t.Error("the blocks of a row do not stand side by side")
	}
}
