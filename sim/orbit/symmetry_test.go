package orbit

import (
	"slices"
	"testing"
)

// TestGroups: the symmetries of walls whose groups are plain from their shapes.
func TestGroups(t *testing.T) {
	for _, c := range []struct {
		kind           string
		v              []float64
		turns, mirrors int
	}{
		{"limacon", []float64{1, 0.43}, 1, 1}, {"quadrupole", []float64{1, 0.1}, 2, 2}, {"stadium", []float64{1, 1}, 2, 2},
		{"three-posts", []float64{1, 6}, 3, 3}, {"polygon", []float64{5, 1}, 5, 5}, {"square-with-disc", []float64{1, 0.3}, 4, 4},
		{"triangle", []float64{13, 14, 15}, 1, 0}, {"triangle", []float64{1, 1, 1.3}, 1, 1}, {"disc", []float64{1}, 1, 0},
	} {
		l := found(t, drawn(t, nil, c.kind, c.v...), 2)
		if l.Turns != c.turns || l.Mirrors != c.mirrors {
			t.Errorf("%s %v: %d turns and %d mirrors, want %d and %d", c.kind, c.v, l.Turns, l.Mirrors, c.turns, c.mirrors)
		}
	}
}

// TestCopies: sets of copies in the stadium, by eye on the closed forms: the
// diameters, diamond, rectangle and bow-tie are their own images; of the
// triangles there are two.
func TestCopies(t *testing.T) {
	l := found(t, drawn(t, nil, "stadium", 1, 1), 4)
	for _, c := range []struct {
		known
		words []string
		label string
	}{
		{known{2, 4, 2, 1, true}, []string{"13"}, "its own mirror image"},
		{known{2, 8, 34, 1, false}, []string{"24"}, "its own mirror image"},
		{known{3, 8.6019519928479649, -46.055019249287666, 2, false}, []string{"124", "234"}, "one of 2 copies, its own mirror image"},
		{known{4, 8.9442719099991588, 62, 1, false}, []string{"1234"}, "its own mirror image"},
		{known{4, 9.6568542494923802, 175.25483399593904, 1, false}, []string{"2244"}, "its own mirror image"},
	} {
		for _, o := range l.alike(c.known) {
			if o.Copies != c.copies || o.Symmetry() != c.label || !slices.Contains(c.words, o.Word) {
				t.Errorf("%d bounces, length %.9g: %d copies, %q, word %q; want %d, %q, %v", o.Period(), o.Length, o.Copies, o.Symmetry(), o.Word, c.copies, c.label, c.words)
			}
		}
	}
	for i := range l.Orbits {
		o := &l.Orbits[i]
		n := 0
		for k := range l.Orbits {
			if l.Orbits[k].Class == o.Class {
				n++
			}
		}
		if n != o.Copies {
			t.Errorf("class %d has %d orbits and says %d", o.Class, n, o.Copies)
		}
	}
	if first := l.Firsts(); len(first) != l.Orbits[len(l.Orbits)-1].Class {
		t.Errorf("%d firsts of %d classes", len(first), l.Orbits[len(l.Orbits)-1].Class)
	}
	// Of three posts each cycle of two bounces is one of 3 copies, the triangle is
	// its own image, and of 1213 there are 3 (by hand from the words).
	posts := found(t, drawn(t, nil, "three-posts", 1, 6), 4)
	var copies []int
	for _, o := range posts.Firsts() {
		copies = append(copies, o.Copies)
	}
	if !slices.Equal(copies, []int{3, 1, 3}) {
		t.Errorf("the words 12, 123 and 1213 have %v copies, want 3, 1, 3", copies)
	}
}

// TestWithoutSymmetry searches a second time as if nothing were known of the
// wall's symmetries, and wants the same orbits.
func TestWithoutSymmetry(t *testing.T) {
	for _, c := range []struct {
		kind string
		v    []float64
		upTo int
	}{{"quadrupole", []float64{1, 0.12}, 6}, {"stadium", []float64{1, 1}, 5}, {"limacon", []float64{1, 0.43}, 5}, {"square-with-disc", []float64{1, 0.3}, 4}} {
		tab := drawn(t, nil, c.kind, c.v...)
		l := found(t, tab, c.upTo)
		p, err := newProver(tab)
		if err != nil {
			t.Fatal(err)
		}
		plain := newBook(p, c.upTo)
		if err := plain.refine(&List{UpTo: c.upTo, Settled: make([]bool, c.upTo+1)}, Search{}.ready()); err != nil {
			t.Fatal(err)
		}
		n := 0
		for i := range l.Orbits {
			if o := &l.Orbits[i]; plain.number(o) < 0 {
				t.Errorf("%s: %d bounces, length %.12g, first at s = %.6g, found by symmetry only", c.kind, o.Period(), o.Length, o.Bounces[0].S)
			}
			n++
		}
		if n != plain.count() {
			t.Errorf("%s: %d orbits with symmetries, %d without", c.kind, n, plain.count())
		}
	}
}

// TestPostsTwoWays finds the cycles of posts by words and by grids.
func TestPostsTwoWays(t *testing.T) {
	const upTo = 4
	tab := drawn(t, nil, "three-posts", 1, 2.5)
	p, err := newProver(tab)
	if err != nil {
		t.Fatal(err)
	}
	byGrids := newBook(p, upTo)
	for _, side := range []int{200, 287} {
		if err := byGrids.scan(upTo, side, byGrids.columns(side), Search{}.ready(), func(float64) {}); err != nil {
			t.Fatal(err)
		}
	}
	l := found(t, tab, upTo)
	for i := range l.Orbits {
		if byGrids.number(&l.Orbits[i]) < 0 {
			t.Errorf("the cycle %s is not found by grids", l.Orbits[i].Word)
		}
	}
	if len(l.Orbits) != byGrids.count() {
		t.Errorf("%d cycles by words, %d by grids", len(l.Orbits), byGrids.count())
	}
}

// TestMany: generic tables to ten bounces, settled, within a bound of the work
// (nodes of the grids) that two processors do in some seconds.
func TestMany(t *testing.T) {
	if testing.Short() {
		t.Skip("long")
	}
	for _, c := range []struct {
		kind string
		v    []float64
	}{{"limacon", []float64{1, 0.43}}, {"quadrupole", []float64{1, 0.1}}} {
		tab := drawn(t, nil, c.kind, c.v...)
		l, err := Find(tab, Search{UpTo: 10, Spread: spreadOn(4)})
		if err != nil {
			t.Fatal(err)
		}
		if slices.Contains(l.Settled[2:], false) {
			t.Errorf("%s: not settled at %v", c.kind, l.Settled)
		}
		hold(t, l)
		// Two twist orbits at least for each m/n (Birkhoff 1927); an orbit of n
		// bounces and winding m for each m/n in lowest terms.
		for n := 2; n <= 10; n++ {
			for m := 1; 2*m <= n; m++ {
				if gcd(m, n) == 1 {
					if all := windings(l, n, m); all < 2 {
						t.Errorf("%s: %d orbits of winding %d/%d", c.kind, all, m, n)
					}
				}
			}
		}
	}
}

func windings(l *List, n, m int) (count int) {
	for i := range l.Orbits {
		if o := &l.Orbits[i]; o.Period() == n && o.Winding == m {
			count++
		}
	}
	return count
}
