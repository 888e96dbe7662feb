package tool

import (
	"slices"

	"cavitywright/table"
	"cavitywright/table/wall"
	"cavitywright/ui/session"

	"gonum.org/v1/gonum/spatial/r2"
)

// Coats is the pointer that lays coats: a pull along the bare wall lays one,
// one that is there is selected, its ends slide along the wall, and what is
// between them slides it whole.
type Coats struct {
	s     *session.Session
	held  coatGrip
	run   CoatRun      // the one held; what is being laid has no place in the list yet
	coats []table.Coat // those of the table at the press
	reach float64
	last  float64 // the arclength of the pointer, and
	at    float64 // how far it went since the press, over as many turns
	moved bool

	gesture int // the session's, of what is held
}

// coatGrip is what the pointer holds of a coat.
type coatGrip uint8

const (
	holdsNoCoat coatGrip = iota
	holdsStart
	holdsEnd
	holdsMiddle
	laysCoat
)

// CoatHandle is what can be taken hold of of the selected coat.
type CoatHandle struct {
	At   r2.Vec
	grip coatGrip
}

// middleOut is how far outside the wall the handle of the whole coat stands, in
// reaches: clear of the ends of a narrow coat.
const middleOut = 1.7

// Handles are the ends of the selected coat on the wall, and the middle a
// little outside of it.
func (c *Coats) Handles(reach float64) []CoatHandle {
	r, ok := SelectedCoat(c.s)
	if !ok || r.Loop < 0 {
		return nil
	}
	t := c.s.Table()
	if r.whole(t) {
		return nil // there are no ends, and nowhere to slide
	}
	mid := t.At(onLoop(t, r.Loop, r.From+r.Width/2))
	return []CoatHandle{
		{r2.Sub(mid.Point, r2.Scale(middleOut*reach, mid.Normal())), holdsMiddle},
		{t.At(onLoop(t, r.Loop, r.From)).Point, holdsStart},
		{t.At(onLoop(t, r.Loop, r.From+r.Width)).Point, holdsEnd},
	}
}

// onLoop is an arclength brought into the range of a loop.
func onLoop(t *table.Table, loop int, s float64) float64 {
	l := t.Loops()[loop]
	return l.S0 + wrapped(s-l.S0, l.S1-l.S0)
}

// whole reports whether the coat goes around its loop.
func (r CoatRun) whole(t *table.Table) bool {
	l := t.Loops()[r.Loop]
	return r.Width >= (l.S1-l.S0)*(1-leastCoat)
}

// HandleAt is the handle of the selected coat within reach of p.
func (c *Coats) HandleAt(p r2.Vec, reach float64) (CoatHandle, bool) {
	best, found, near := CoatHandle{}, false, reach
	for _, h := range c.Handles(reach) {
		if d := r2.Norm(r2.Sub(h.At, p)); d <= near {
			best, near, found = h, d, true
		}
	}
	return best, found
}

// CoatAt is the coat of the design that acts at s; NoCoat where the wall is
// bare.
func CoatAt(t *table.Table, s float64) int {
	for _, x := range slices.Backward(t.Stretches()) {
		if x.S0 <= s && s <= x.S1 {
			return x.Coat
		}
	}
	return session.NoCoat
}

// Press takes hold of a handle or a coat, or begins to lay one.
func (c *Coats) Press(p r2.Vec, reach float64, k Keys) {
	t := c.s.Table()
	c.held, c.reach, c.moved, c.at = holdsNoCoat, reach, false, 0
	if h, ok := c.HandleAt(p, reach); ok {
		c.run, _ = SelectedCoat(c.s)
		c.begin(h.grip, p)
		return
	}
	s, d := t.Nearest(p)
	if d > reach {
		c.s.SelectCoat(session.NoCoat)
		return
	}
	if i := CoatAt(t, s); i >= 0 && !k.Has(Free) {
		c.run = RunOf(t, i)
		c.s.SelectCoat(c.run.First)
		if c.run.Loop >= 0 && !c.run.whole(t) {
			c.begin(holdsMiddle, p)
			return
		}
	} else {
		c.s.SelectCoat(session.NoCoat)
	}
	n := len(t.Design().Coats)
	c.run = CoatRun{First: n, Last: n - 1, Law: c.s.Settings.Laid(), Loop: t.LoopAt(s), From: s}
	c.begin(laysCoat, p)
}

func (c *Coats) begin(g coatGrip, p r2.Vec) {
	c.held = g
	c.last, _ = c.s.Table().NearestOn(c.run.Loop, p)
	c.coats = c.s.Table().Design().Coats
	c.s.Begin()
	c.gesture = c.s.Gesture()
}

// heed lets go where the gesture is over: undo, a command or another document
// came between.
func (c *Coats) heed() {
	if c.gesture != c.s.Gesture() {
		c.held = holdsNoCoat
	}
}

// Drag follows the pointer along the wall; step is the grid's, 0 for none.
func (c *Coats) Drag(p r2.Vec, step float64, k Keys) {
	if c.heed(); c.held == holdsNoCoat {
		return
	}
	t := c.s.Table()
	l := t.Loops()[c.run.Loop]
	round := l.S1 - l.S0
	s, _ := t.NearestOn(c.run.Loop, p)
	d := wrapped(s-c.last, round)
	if d > round/2 {
		d -= round
	}
	c.last, c.at = s, c.at+d
	from, width := c.pulled(step, k, round)
	if width < leastCoat*round {
		if c.held == laysCoat && c.moved {
			c.moved = false
			c.s.Cancel()
			c.s.Begin()
			c.gesture = c.s.Gesture()
			c.s.SelectCoat(session.NoCoat)
		}
		return
	}
	// Coats move no wall: the table now has the loops of the one at the press.
	coats := replaced(c.coats, c.run.First, c.run.Last, lay(t, c.run.Loop, from, width, c.run.Law))
	name := "slide a coat"
	if c.held == laysCoat {
		name = "lay a coat: " + wall.Title(c.run.Law)
	}
	if c.s.Amend(coating(t, coats, name)) == nil {
		c.moved = true
		c.s.SelectCoat(c.run.First)
	}
}
