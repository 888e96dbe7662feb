package window

import (
	"strings"
	"testing"

	"cavitywright/table"
	"cavitywright/table/plane"
	"cavitywright/table/shape"

	"fyne.io/fyne/v2"
)

// TestModes: the sheet counts a rectangle of 0.40 m by 0.25 m as Weyl's law does
// (76.8 below 5 GHz, closed), and says what it cannot read.
func TestModes(t *testing.T) {
	w, pump := opened(t, 0, fyne.NewSize(1280, 800))
	f, err := shape.New("rectangle", []float64{0.40, 0.25})
	if err != nil {
		t.Fatal(err)
	}
	tab, err := table.New(table.Design{Unit: table.Metre, Items: []table.Item{{Shape: f, Place: plane.Identity()}}})
	if err != nil {
		t.Fatal(err)
	}
	w.openTable(tab, "")
	pump()
	w.drawer.named("Modes")
	s := w.drawer.sheets[w.drawer.open].(*modesSheet)
	s.below.SetText("5 GHz")
	if len(s.list.rows) != 3 || s.list.rows[0].Value != "76.8" {
		t.Errorf("the rows are %v", s.list.rows)
	}
	s.height.SetText("8 mm")
	if len(s.list.rows) != 7 || s.list.rows[3].Value != "18.737 GHz" {
		t.Errorf("with a height the rows are %v", s.list.rows)
	}
	s.height.SetText("high")
	if len(s.list.rows) != 0 || !strings.Contains(s.state.full, `"high"`) {
		t.Errorf("a height that is none leaves %v, and says %q", s.list.rows, s.state.full)
	}
}
