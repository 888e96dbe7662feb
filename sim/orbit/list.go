package orbit

import (
	"slices"
	"strconv"

	"cavitywright/table"
)

// List is what a search found.
type List struct {
	UpTo   int
	Orbits []Orbit // by period, then length
	// Words is the number of words tried, for posts and polygons; 0 where the
	// search was by grids.
	Words int
	// Flats is the greatest period for which every word over straight pieces of
	// wall was tried, so that no orbit that meets these alone is missing.
	Flats int
	// Settled reports for each period (from 0) whether the last grid brought
	// nothing new; for posts and polygons whether every word was decided.
	Settled []bool
	// Turns is the number of rotations that map the wall onto itself, the one by
	// nothing included, and Mirrors that of the lines in which it is its own
	// mirror image. Those of circles about one centre are not counted.
	Turns, Mirrors int
}

// Complete reports whether the list holds all orbits, on the ground given in
// the package's comment.
func (l *List) Complete() bool { return l.Words > 0 && !slices.Contains(l.Settled, false) }

// Count is the number of orbits of a period, symmetric copies counted each, those that differ when run
// backwards counted twice, each family as one orbit.
func (l *List) Count(period int) int {
	n := 0
	for i := range l.Orbits {
		if o := &l.Orbits[i]; o.Period() == period {
			n++
			if o.TwoSenses {
				n++
			}
		}
	}
	return n
}

// Limits of a search.
const (
	// Least is the least period that a search can be asked for.
	Least = 2
	// MostBounces bounds the period of a search by grids: beyond, the cells
	// that would resolve a chaotic table are too many.
	MostBounces = 12
	// MostWords bounds the words of a search among posts, so that it takes
	// minutes at the most.
	MostWords = 2_000_000
)

// Limit is the error of a search that asks for too much or too little: Greatest
// is the greatest period that can be searched for on this table.
type Limit struct{ Asked, Greatest int }

func (e *Limit) Error() string {
	if e.Asked < Least {
		return "an orbit has at least 2 bounces; ask for 2 or more"
	}
	return "the orbits are too many to search for on this table; ask for at most " + strconv.Itoa(e.Greatest) + " bounces"
}

// Search is what a search is asked.
type Search struct {
	UpTo int // the greatest period
	// Watch, which may be nil, is called now and then, from any goroutine of
	// Spread, and ends the search with the error that it returns.
	Watch func() error
	// Spread runs do for each piece from 0 to pieces-1, in any order and on any
	// number of goroutines, and returns an error of one; nil runs one after the
	// other. What is found does not depend on it.
	Spread func(pieces int, do func(piece int) error) error
	// Told, which may be nil, is called now and then, from the goroutine of
	// Find, with the share of the work that was done, if all of it is needed,
	// and the number of orbits found so far.
	Told func(share float64, found int)
}

// serial is a Spread without goroutines.
func serial(pieces int, do func(int) error) error {
	for i := range pieces {
		if err := do(i); err != nil {
			return err
		}
	}
	return nil
}

// ready fills what was left open.
func (s Search) ready() Search {
	if s.Watch == nil {
		s.Watch = func() error { return nil }
	}
	if s.Spread == nil {
		s.Spread = serial
	}
	if s.Told == nil {
		s.Told = func(float64, int) {}
	}
	return s
}

// Greatest is the greatest period that can be searched for on a table.
func Greatest(t *table.Table) int {
	if Posts(t) {
		return mostLetters(len(t.Loops()))
	}
	return MostBounces
}

// Find searches the table for its orbits of at most ask.UpTo bounces. The error
// is a *Limit where that is out of range, or that of Watch.
func Find(t *table.Table, ask Search) (*List, error) {
	ask = ask.ready()
	if greatest := Greatest(t); ask.UpTo < Least || ask.UpTo > greatest {
		return nil, &Limit{ask.UpTo, greatest}
	}
	p, err := newProver(t)
	if err != nil {
		return nil, err
	}
	list, _, err := find(p, ask)
	return list, err
}

// find searches, and answers the book too.
func find(p *prover, ask Search) (*List, *book, error) {
	b := newBook(p, ask.UpTo)
	b.group = symmetries(p.mirror)
	list := &List{UpTo: ask.UpTo, Settled: make([]bool, ask.UpTo+1)}
	search := b.refine
	if Posts(p.t) {
		search = b.spell
	}
	if err := search(list, ask); err != nil {
		return nil, nil, err
	}
	b.gather(list)
	return list, b, nil
}
