package orbit

import (
	"cmp"
	"errors"
	"fmt"
	"math"
	"slices"
	"strconv"
	"sync"

	"cavitywright/table"
)

// Course is what Follow is asked: a wall that depends on a number.
type Course struct {
	// Table is the table at a value from From to To. It is called from any
	// goroutine of Search.Spread.
	Table    func(v float64) (*table.Table, error)
	From, To float64
	Steps    int // the steps in which the range is sampled, MinSteps to MaxSteps
	// Search says up to which period, and how the work is watched and spread.
	Search
}

// Bounds of Course.Steps.
const (
	MinSteps = 4
	MaxSteps = 2000
)

// Branch is an isolated orbit while the number moves: one for all copies by
// symmetry. V ascends; the orbit stands at each.
type Branch struct {
	Period int
	V      []float64
	Orbits []Orbit
	// Start and End say how it begins and ends, Passed what happens between.
	Start, End Event
	Passed     []Event
}

// Event is a change of the orbits at the value V, good to LocatedTo of the
// range, ten times that at a joint, where a chord shrinks to leastChord first. Other is the period of the other orbits that take part, 0 where there
// are none.
type Event struct {
	V     float64
	What  What
	Other int
}

// What happens.
type What uint8

// The events. By the trace of the orbit's monodromy matrix (K. R. Meyer, Trans.
// Amer. Math. Soc. 149, 95, 1970, from memory): at 2 two orbits are born, or
// meet and vanish (Fold), or copies by symmetry split off (Split); at -2 orbits
// of twice the period split off (Doubling), and at 2 cos(2 pi j/m) of m times
// the period (Multiple). An orbit that splits off another one ends there
// (Joined).
const (
	AtEdge   What = iota // the range ends, nothing happens
	Fold                 // two orbits are born or vanish
	Split                // trace 2 on the way: symmetric copies split off, or two orbits exchange their stability
	Doubling             // trace -2 on the way: orbits of twice the period split off
	Multiple             // trace 2 cos(2 pi j/m): orbits of m times the period split off
	Joined               // the end on a more symmetric or shorter orbit, from which it splits off
	Blocked              // a wall comes in the way
	AtJoint              // a bounce reaches a joint of the wall
	Unclear              // the orbit could not be followed
)

func (w What) String() string {
	return [...]string{"edge of the range", "fold", "split", "period doubling", "resonance", "joined", "blocked", "at a joint", "not followed"}[w]
}

// Sentence says what happens to an orbit of so many bounces, where start is the
// lower end of its branch or the upper one.
func (e Event) Sentence(period int, start bool) string {
	switch e.What {
	case Fold:
		if start {
			return fmt.Sprintf("two orbits of %d bounces are born", period)
		}
		return fmt.Sprintf("two orbits of %d bounces meet and vanish", period)
	case Split:
		return fmt.Sprintf("the trace of an orbit of %d bounces passes 2: copies split off or orbits exchange stability", period)
	case Doubling:
		return fmt.Sprintf("the trace of an orbit of %d bounces comes to −2: the period doubles", period)
	case Multiple:
		return fmt.Sprintf("orbits of %d bounces split off one of %d", e.Other, period)
	case Joined:
		if e.Other == period {
			return fmt.Sprintf("an orbit of %d bounces splits off a more symmetric one", period)
		}
		return fmt.Sprintf("an orbit of %d bounces splits off one of %d", period, e.Other)
	case Blocked:
		return fmt.Sprintf("a wall cuts off an orbit of %d bounces", period)
	case AtJoint:
		return fmt.Sprintf("an orbit of %d bounces meets a joint of the wall", period)
	case Unclear:
		return fmt.Sprintf("an orbit of %d bounces could not be followed further", period)
	}
	return "the range ends"
}

// short is a word for a mark.
func (e Event) short(period int) string {
	switch {
	case e.What == Joined:
		return fmt.Sprintf("%d:%d", e.Other, period)
	case e.Other > 0:
		return fmt.Sprintf("%d:%d", period, e.Other)
	}
	return strconv.Itoa(period)
}

// Followed is what Follow found.
type Followed struct {
	From, To float64
	UpTo     int
	Branches []Branch
	// Families is the number of marginal families met in the censuses; they are
	// not followed.
	Families int
}

const (
	// LocatedTo is how well events are located, relative to the range: ends to
	// smallestStep, where a Newton step still tells two orbits apart, the rest
	// far better.
	LocatedTo    = 1e-6
	smallestStep = 1e-9
	// censuses is the number of values at which all orbits are searched for. An
	// orbit that is born and vanishes between two of them is not seen.
	censuses = 5
)

// Follow searches for the orbits at some values of the number and follows each
// both ways as far as it goes. The error is a *Limit, one of the table at a
// value, or that of Watch.
func Follow(c Course) (*Followed, error) {
	c.Search = c.Search.ready()
	switch {
	case !(c.From < c.To) || math.IsInf(c.To-c.From, 0):
		return nil, errors.New("the range to follow over is empty; give a lower and a higher value")
	case c.Steps < MinSteps || c.Steps > MaxSteps:
		return nil, fmt.Errorf("%d steps; an orbit is followed in %d to %d", c.Steps, MinSteps, MaxSteps)
	}
	f := course{Course: c, grid: make([]*prover, c.Steps+1), keep: map[float64]*prover{}}
	err := c.Spread(len(f.grid), func(k int) (err error) {
		f.grid[k], err = f.prover(f.at(k))
		return err
	})
	if err == nil {
		err = f.generic()
	}
	if err != nil {
		return nil, err
	}
	found := &Followed{From: c.From, To: c.To, UpTo: c.UpTo}
	var tracks []*track
	for i := range censuses {
		k := i * c.Steps / (censuses - 1)
		fresh, families, err := f.census(k, tracks, i)
		if err != nil {
			return nil, err
		}
		found.Families = max(found.Families, families)
		err = c.Spread(len(fresh), func(j int) error { return f.run(fresh[j]) })
		if err != nil {
			return nil, err
		}
		tracks = append(tracks, fresh...)
		c.Told(float64(i+1)/censuses, len(tracks))
	}
	for _, t := range tracks {
		found.Branches = append(found.Branches, t.branch())
	}
	settle(found)
	return found, nil
}

// course is a Follow at work.
type course struct {
	Course
	grid []*prover
	// group are the symmetries of the wall at any value, as model has them.
	group []isometry
	model *prover
	mu    sync.Mutex
	keep  map[float64]*prover // at the values between, tried by several orbits
}

// at is the value number k of the grid.
func (f *course) at(k int) float64 {
	if k == f.Steps {
		return f.To
	}
	return f.From + (f.To-f.From)*float64(k)/float64(f.Steps)
}

// prover is one of the wall at a value.
func (f *course) prover(v float64) (*prover, error) {
	if err := f.Watch(); err != nil {
		return nil, err
	}
	t, err := f.Table(v)
	if err != nil {
		return nil, fmt.Errorf("at %.9g: %w", v, err)
	}
	return newProver(t)
}

// census searches for the orbits at grid value k, and opens a track for each
// that none passes through.
func (f *course) census(k int, tracks []*track, number int) (fresh []*track, families int, err error) {
	ask := f.Search
	ask.Told = func(x float64, _ int) { f.Told((float64(number)+0.5*x)/censuses, len(tracks)) }
	p := f.grid[k].another()
	if greatest := Greatest(p.t); ask.UpTo < Least || ask.UpTo > greatest {
		return nil, 0, &Limit{ask.UpTo, greatest}
	}
	list, b, err := find(p, ask)
	if err != nil {
		return nil, 0, err
	}
	met := map[int]bool{} // the classes that a track passes through
	for _, t := range tracks {
		for i, at := range t.k {
			if at != k {
				continue
			}
			if n := b.number(&t.orbits[i]); n >= 0 {
				met[b.of[t.orbits[i].Period()][n].Class] = true
			}
		}
	}
	for i := range list.Orbits {
		o := &list.Orbits[i]
		if o.Family != nil {
			families++
			continue
		}
		if !met[o.Class] {
			met[o.Class] = true
			fresh = append(fresh, newTrack(*o, f.at(k), k))
		}
	}
	return fresh, families, nil
}

// track is a branch in the making. The orbit at which it was opened says what
// the symmetries make of all of them.
type track struct {
	v          []float64
	k          []int // the number in the grid, -1 between
	orbits     []Orbit
	opened     Orbit
	start, end Event
	passed     []Event
}

func newTrack(o Orbit, v float64, k int) *track {
	return &track{v: []float64{v}, k: []int{k}, orbits: []Orbit{o}, opened: o}
}

func (t *track) branch() Branch {
	for i := range t.orbits {
		o := &t.orbits[i]
		o.Copies, o.Mirrored, o.Turned = t.opened.Copies, t.opened.Mirrored, t.opened.Turned
	}
	return Branch{Period: t.orbits[0].Period(), V: t.v, Orbits: t.orbits, Start: t.start, End: t.end, Passed: t.passed}
}

// settle sorts the branches, and takes the value of an end on another orbit
// from that orbit, where it is known better.
func settle(found *Followed) {
	slices.SortStableFunc(found.Branches, func(a, b Branch) int {
		if a.Period != b.Period {
			return a.Period - b.Period
		}
		switch d := a.Orbits[0].Length - b.Orbits[0].Length; {
		case d < 0:
			return -1
		case d > 0:
			return 1
		}
		return 0
	})
	near := 10 * LocatedTo * (found.To - found.From)
	for i := range found.Branches {
		b := &found.Branches[i]
		for _, e := range []*Event{&b.Start, &b.End} {
			switch e.What {
			case Joined:
				found.locate(b.Period, e, near)
			case Fold, Unclear:
				// So near to the orbit that it splits off, the two cannot always be
				// told apart.
				joined := Event{V: e.V, What: Joined, Other: b.Period}
				if found.locate(b.Period, &joined, near) {
					*e = joined
				}
			}
		}
		b.trim()
	}
}

// trim takes away what was followed beyond the branch's ends, where the orbit
// could not be told from the one that it splits off.
func (b *Branch) trim() {
	lo, hi := 0, len(b.V)
	for lo < hi-1 && b.V[lo] < b.Start.V {
		lo++
	}
	for hi > lo+1 && b.V[hi-1] > b.End.V {
		hi--
	}
	b.V, b.Orbits = b.V[lo:hi], b.Orbits[lo:hi]
}

// locate takes the value of an end on another orbit from that orbit's event.
func (f *Followed) locate(period int, e *Event, near float64) bool {
	for i := range f.Branches {
		o := &f.Branches[i]
		for _, x := range o.Passed {
			if o.Period == e.Other && x.Other == period && math.Abs(x.V-e.V) < near {
				e.V = x.V
				return true
			}
		}
	}
	return false
}

// Change is one event of all branches.
type Change struct {
	V    float64
	Text string // what happens, in a few words
	// Short is a word for a mark: the numbers of bounces of those that part.
	Short string
}

// Changes are the events in the order of V, each once.
func (f *Followed) Changes() (all []Change) {
	near := LocatedTo * (f.To - f.From)
	add := func(e Event, period int, start bool) {
		if e.What == AtEdge {
			return
		}
		c := Change{e.V, e.Sentence(period, start), e.short(period)}
		for _, x := range all {
			if math.Abs(x.V-c.V) < near && x.Text == c.Text {
				return
			}
		}
		all = append(all, c)
	}
	for i := range f.Branches {
		b := &f.Branches[i]
		add(b.Start, b.Period, true)
		for _, e := range b.Passed {
			add(e, b.Period, false)
		}
		add(b.End, b.Period, false)
	}
	slices.SortStableFunc(all, func(a, b Change) int { return cmp.Compare(a.V, b.V) })
	return all
}

// Series is a branch as curves: the trace at each value, and the length.
func (b *Branch) Series() (trace, length []float64) {
	for i := range b.Orbits {
		trace, length = append(trace, b.Orbits[i].Trace()), append(length, b.Orbits[i].Length)
	}
	return trace, length
}
