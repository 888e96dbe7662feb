package live

import (
	"testing"

	"cavitywright/table"
	"cavitywright/table/edit"
	"cavitywright/ui/session"
)

// filled lets the portrait of a request and its ghost fill.
func filled(t *testing.T, p *portrait, r Request) {
	t.Helper()
	p.show(&r)
	for fresh := true; fresh || p.filling(Fills); fresh = false {
		if !p.fill(fresh, Fills) && !fresh {
			t.Fatal("the portrait says that it fills, and does not")
		}
	}
}

// hits are the cells of the ghost, and how many of them the portrait has not.
func hits(p *portrait) (all, apart int) {
	w, h := p.density.Size()
	for x := range w {
		for y := range h {
			if p.ghost.density.Count(x, y) == 0 {
				continue
			}
			all++
			if p.density.Count(x, y) == 0 {
				apart++
			}
		}
	}
	return all, apart
}

// The ghost follows the launches of the table at work, with its seed, on the
// wall that was kept: on the same wall it is the portrait itself.
func TestGhost(t *testing.T) {
	s := opened(t, 0)
	study := s.Table().Design().Study
	study.Bounces = 300
	if err := s.Do(edit.SetStudy{Study: study, Name: "fewer bounces"}); err != nil {
		t.Fatal(err)
	}
	kept := s.Table()
	var p portrait
	r := small(s)
	filled(t, &p, r)
	if all, _ := hits(&p); all != 0 {
		t.Fatalf("without a reference the ghost has %d cells", all)
	}
	r.Reference = kept
	filled(t, &p, r)
	if all, apart := hits(&p); all < 500 || apart != 0 {
		t.Errorf("on its own wall the ghost has %d cells, %d of them not of the portrait", all, apart)
	}
	// Another wall: they part, and the ghost stays what it was on axes of the
	// same length.
	if err := s.Do(edit.SetValue{Item: 0, Param: 1, Value: 0.45}); err != nil {
		t.Fatal(err)
	}
	r = small(s)
	r.Reference = kept
	filled(t, &p, r)
	if all, apart := hits(&p); all < 500 || apart < all/10 {
		t.Errorf("on another wall the ghost has %d cells, and only %d of them not of the portrait", all, apart)
	}
	first, _ := hits(&p)
	r.Settings.Layer = session.NoLayer
	p.show(&r)
	if again, _ := hits(&p); again != first {
		t.Errorf("a request for the same clears the ghost: %d cells become %d", first, again)
	}
	r.Reference = nil
	p.show(&r)
	if p.ghost.of != nil {
		t.Error("the ghost stays when the reference is dropped")
	}
}

// A launch that starts outside of the wall that was kept has no ghost.
func TestGhostOutside(t *testing.T) {
	s := opened(t, 0)
	study := s.Table().Design().Study
	study.Launches = nil
	if err := s.Do(edit.SetStudy{Study: study, Name: "no launches"}); err != nil {
		t.Fatal(err)
	}
	kept := s.Table()
	if err := s.Do(edit.SetValue{Item: 0, Param: 0, Value: 50}); err != nil {
		t.Fatal(err)
	}
	at := table.Launch{From: table.Inside, Count: 1}
	at.Point.X = 40 // in the wide wall, outside of the one of radius 5
	if err := s.Do(edit.Launch{New: []table.Launch{at}}); err != nil {
		t.Fatal(err)
	}
	var p portrait
	r := small(s)
	r.Reference = kept
	p.show(&r)
	if n := p.ghost.next.Orbits(); n != 0 {
		t.Errorf("%d orbits start outside of the wall", n)
	}
	if p.ghost.filling() {
		t.Error("a ghost of nothing fills for ever")
	}
}
