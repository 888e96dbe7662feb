package orbit

import (
	"cmp"
	"math"
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
}

// Complete reports whether the list holds all orbits, on the ground given in
// the package's comment.
func (l *List) Complete() bool { return l.Words > 0 && !slices.Contains(l.Settled, false) }

// Count is the number of orbits of a period, those that differ when run
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

// Find searches the table for its orbits of at most upTo bounces. watch, which
// may be nil, is told now and then, and ends the search with the error that it
// returns. The error is a *Limit where upTo is out of range.
func Find(t *table.Table, upTo int, watch func() error) (*List, error) {
	if watch == nil {
		watch = func() error { return nil }
	}
	dispersing := Posts(t)
	greatest := MostBounces
	if dispersing {
		greatest = mostLetters(len(t.Loops()))
	}
	if upTo < Least || upTo > greatest {
		return nil, &Limit{upTo, greatest}
	}
	p, err := newProver(t)
	if err != nil {
		return nil, err
	}
	b := book{prover: p, of: make([][]Orbit, upTo+1)}
	list := &List{UpTo: upTo, Settled: make([]bool, upTo+1)}
	if dispersing {
		err = b.spell(list, watch)
	} else {
		err = b.refine(list, watch)
	}
	if err != nil {
		return nil, err
	}
	for _, of := range b.of {
		for i := range of {
			p.finish(&of[i])
		}
		list.Orbits = append(list.Orbits, of...)
	}
	list.sort()
	return list, nil
}

// sort orders by period, length, trace, and place.
func (l *List) sort() {
	const lengthTol = 1e-10 // relative: symmetric copies stand together
	slices.SortStableFunc(l.Orbits, func(a, b Orbit) int {
		if c := cmp.Compare(a.Period(), b.Period()); c != 0 {
			return c
		}
		if math.Abs(a.Length-b.Length) > lengthTol*a.Length {
			return cmp.Compare(a.Length, b.Length)
		}
		if math.Abs(a.Trace()-b.Trace()) > lengthTol*(10+math.Abs(a.Trace())) {
			return cmp.Compare(a.Trace(), b.Trace())
		}
		return cmp.Compare(a.Bounces[0].S, b.Bounces[0].S)
	})
}

// book holds the orbits found so far, by period.
type book struct {
	*prover
	of [][]Orbit
	// threads are the members of the families found, by period.
	threads [][]thread
}

// add takes a polished chain into the book, if it is an orbit, prime, and new.
func (b *book) add(c *chain) bool {
	o, ok := b.prove(c)
	if !ok {
		return false
	}
	n := o.Period()
	for i := range b.of[n] {
		if b.same(&b.of[n][i], &o) {
			return false
		}
	}
	if !b.marginal(c) {
		if !b.prime(&o) {
			return false
		}
		b.of[n] = append(b.of[n], o)
		return true
	}
	return b.addFamily(c, &o)
}
