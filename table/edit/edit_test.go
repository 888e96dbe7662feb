package edit

import (
	"testing"

	"cavitywright/table"
	"cavitywright/table/param"
	"cavitywright/table/plane"
	"cavitywright/table/shape"
	"cavitywright/table/wall"

	"gonum.org/v1/gonum/spatial/r2"
	"pgregory.net/rapid"
)

func item(t interface{ Fatal(...any) }, role table.Role, x float64, kind string, v ...float64) table.Item {
	f, err := shape.New(kind, param.Values(v))
	if err != nil {
		t.Fatal(err)
	}
	return table.Item{Shape: f, Role: role, Place: plane.Similarity{Shift: r2.Vec{X: x}, Scale: 1}}
}

func begun(t interface{ Fatal(...any) }) *table.Table {
	tab, err := table.New(table.Design{
		Unit: table.Millimetre, Study: table.DefaultStudy(),
		Items: []table.Item{item(t, table.Wall, 0, "disc", 10), item(t, table.Post, 3, "disc", 1)},
		Coats: []table.Coat{{Item: 1, Side: 0, From: 0, To: 0.5, Law: wall.Opening{}}},
	})
	if err != nil {
		t.Fatal(err)
	}
	return tab
}

// TestCoatsFollowTheirItems: a coat stays on its item when others come and go.
func TestCoatsFollowTheirItems(t *testing.T) {
	tab := begun(t)
	next, err := Place{item(t, table.Wall, 0, "rectangle", 40, 30)}.Apply(tab)
	if err != nil {
		t.Fatal(err)
	}
	d := next.Design()
	if len(d.Items) != 2 || d.Items[0].Shape.Kind() != "rectangle" || len(d.Coats) != 1 || d.Coats[0].Item != 1 {
		t.Fatalf("after another wall: %d items, coats %+v", len(d.Items), d.Coats)
	}
	next, err = Remove{1}.Apply(next)
	if err != nil {
		t.Fatal(err)
	}
	if d := next.Design(); len(d.Items) != 1 || len(d.Coats) != 0 {
		t.Errorf("after taking the post out: %d items, coats %+v", len(d.Items), d.Coats)
	}
	if _, err := (Remove{0}).Apply(next); err == nil {
		t.Error("the last item can be taken out")
	}
}

// TestRefusedChangesNothing: a refused command leaves the table and the lines
// of history as they were.
func TestRefusedChangesNothing(t *testing.T) {
	h := NewHistory(begun(t))
	was := h.Now()
	for _, c := range []Command{
		SetValue{1, 0, 50},                         // the obstacle through the wall
		SetValue{0, 0, -1},                         // out of range
		Shift{1, plane.Similarity{Scale: 0}},       // no size
		Remove{7},                                  // no such item
		SetHead{Unit: "furlong"},                   // no such unit
		Launch{[]table.Launch{{S: 2}}},             // off the section
		Place{item(t, table.Post, 30, "disc", 1)},  // outside
		SetCoats{[]table.Coat{{Item: 5, To: 0.5}}}, // on no item
	} {
		if err := h.Do(c); err == nil {
			t.Errorf("%T %+v was taken", c, c)
		}
		if h.Now() != was {
			t.Fatalf("%T changed the table", c)
		}
	}
	if undo, _ := h.Next(); undo != "" {
		t.Error("a refused command can be undone")
	}
}

// TestHistory draws commands, gestures, undos and redos, and holds the history
// to a plain list of tables.
func TestHistory(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		first := begun(t)
		h := NewHistory(first)
		model, at := []*table.Table{first}, 0
		push := func() {
			if h.Now() != model[at] {
				model = append(model[:at+1:at+1], h.Now())
				at++
			}
		}
		for range rapid.IntRange(1, 30).Draw(t, "steps") {
			move := func(name string) Command {
				return Shift{1, plane.Similarity{Shift: r2.Vec{X: rapid.Float64Range(-14, 14).Draw(t, name)}, Scale: 1}}
			}
			switch rapid.IntRange(0, 4).Draw(t, "kind") {
			case 0:
				_ = h.Do(move("x"))
				push()
			case 1: // a gesture of some moves is one step
				h.Begin()
				for range rapid.IntRange(0, 4).Draw(t, "moves") {
					_ = h.Amend(move("g"))
				}
				h.End()
				push()
			case 2:
				h.Begin()
				_ = h.Amend(move("c"))
				h.Cancel()
			case 3:
				if h.Undo() != (at > 0) {
					t.Fatal("undo at the beginning, or none where there should be")
				}
				at = max(0, at-1)
			case 4:
				if h.Redo() != (at < len(model)-1) {
					t.Fatal("redo at the end, or none where there should be")
				}
				at = min(len(model)-1, at+1)
			}
			if h.Now() != model[at] {
				t.Fatalf("the history stands at another table than step %d", at)
			}
		}
	})
}
