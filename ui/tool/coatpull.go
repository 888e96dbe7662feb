package tool

import (
	"errors"
	"math"
	"slices"

	"cavitywright/table"
	"cavitywright/table/wall"
	"cavitywright/ui/session"

	"gonum.org/v1/gonum/spatial/r2"
)

// pulled is the stretch that the hand asks for now.
func (c *Coats) pulled(step float64, k Keys, round float64) (from, width float64) {
	from, width = c.run.From, c.run.Width
	to := from + width
	least := 2 * leastCoat * round
	switch c.held {
	case holdsStart:
		from = math.Min(math.Max(c.snapped(from+c.at, step, k), to-round), to-least)
		return from, to - from
	case holdsEnd:
		to = math.Min(math.Max(c.snapped(to+c.at, step, k), from+least), from+round)
		return from, to - from
	case holdsMiddle:
		if end, near := c.atJoint(to+c.at, k); near {
			return end - width, width
		}
		return c.snapped(from+c.at, step, k), width
	}
	a, b := c.snapped(from, step, k), c.snapped(from+c.at, step, k)
	a, b = math.Min(a, b), math.Max(a, b)
	if k.Has(Constrain) {
		a, b = c.sideStart(a), c.sideEnd(b)
	}
	return a, math.Min(b-a, round)
}

// onTurn calls f with an arclength brought into the loop's range, and carries
// its answer back to the turn that s is on.
func (c *Coats) onTurn(s float64, f func(s float64) float64) float64 {
	in := onLoop(c.s.Table(), c.run.Loop, s)
	return s + f(in) - in
}

// atJoint is the joint within reach of s along the wall.
func (c *Coats) atJoint(s float64, k Keys) (at float64, near bool) {
	if k.Has(Free) || c.s.Settings.Snap == session.SnapOff {
		return s, false
	}
	at = c.onTurn(s, func(s float64) float64 {
		best := math.Inf(1)
		for _, x := range sidesOf(c.s.Table(), c.run.Loop) {
			for _, j := range []float64{x.s0, x.s1} {
				if math.Abs(j-s) < math.Abs(best-s) {
					best = j
				}
			}
		}
		return best
	})
	return at, math.Abs(at-s) <= c.reach
}

// snapped is s on a joint, where one is within reach, or on a whole number of
// steps from the start of its side.
func (c *Coats) snapped(s, step float64, k Keys) float64 {
	if at, near := c.atJoint(s, k); near {
		return at
	}
	if step <= 0 || k.Has(Free) || c.s.Settings.Snap == session.SnapOff {
		return s
	}
	return c.onTurn(s, func(s float64) float64 {
		x := c.side(s)
		return math.Min(x.s0+math.Round((s-x.s0)/step)*step, x.s1)
	})
}

// side is the side of the loop that holds s.
func (c *Coats) side(s float64) sideOf {
	sides := sidesOf(c.s.Table(), c.run.Loop)
	i := slices.IndexFunc(sides, func(x sideOf) bool { return s < x.s1 })
	if i < 0 {
		i = len(sides) - 1
	}
	return sides[i]
}

func (c *Coats) sideStart(s float64) float64 {
	return c.onTurn(s, func(s float64) float64 { return c.side(s).s0 })
}

func (c *Coats) sideEnd(s float64) float64 {
	return c.onTurn(s, func(s float64) float64 { return c.side(s).s1 })
}

// Release lets go: what was pulled is one step.
func (c *Coats) Release() {
	c.heed()
	switch {
	case c.held == holdsNoCoat:
		return
	case c.held == laysCoat && !c.moved:
		c.s.Cancel()
	default:
		c.s.End()
	}
	c.held = holdsNoCoat
}

// Cancel takes back what was not released.
func (c *Coats) Cancel() {
	if c.heed(); c.held != holdsNoCoat {
		c.s.Cancel()
	}
	c.held = holdsNoCoat
}

// Double lays a coat on the whole of a bare side.
func (c *Coats) Double(p r2.Vec, reach float64) error {
	t := c.s.Table()
	s, d := t.Nearest(p)
	if d > reach || CoatAt(t, s) >= 0 {
		return nil
	}
	i, _ := t.Locate(s)
	law := c.s.Settings.Laid()
	coats := t.Design().Coats
	laid := table.Coat{Item: t.Pieces()[i].Item, Side: t.Pieces()[i].Side, From: 0, To: 1, Law: law}
	if err := c.s.Do(coating(t, replaced(coats, len(coats), len(coats)-1, []table.Coat{laid}), "lay a coat: "+wall.Title(law))); err != nil {
		return err
	}
	c.s.SelectCoat(len(coats))
	return nil
}

// Delete takes the selected coat off.
func (c *Coats) Delete() error {
	r, ok := SelectedCoat(c.s)
	if !ok {
		return errors.New("no coat is selected; click one on the wall first")
	}
	t := c.s.Table()
	c.s.Coat = session.NoCoat
	return c.s.Do(coating(t, replaced(t.Design().Coats, r.First, r.Last, nil), "take a coat off"))
}

// Duplicate lays the selected coat again, on top and right behind itself.
func (c *Coats) Duplicate() error {
	r, ok := SelectedCoat(c.s)
	if !ok {
		return errors.New("no coat is selected; click one on the wall first")
	}
	t := c.s.Table()
	coats := t.Design().Coats
	again := slices.Clone(coats[r.First : r.Last+1])
	if r.Loop >= 0 {
		again = lay(t, r.Loop, r.From+r.Width, r.Width, r.Law)
	}
	if err := c.s.Do(coating(t, slices.Concat(coats, again), "duplicate a coat")); err != nil {
		return err
	}
	c.s.SelectCoat(len(coats))
	return nil
}

// Hint is what a press at p would do.
func (c *Coats) Hint(p r2.Vec, reach float64) string {
	t := c.s.Table()
	if h, ok := c.HandleAt(p, reach); ok {
		if h.grip == holdsMiddle {
			return "Drag to slide the coat along the wall. Ctrl passes the grid."
		}
		return "Drag this end along the wall, over joints too. Ctrl passes the grid."
	}
	s, d := t.Nearest(p)
	if d > reach {
		return "Press on the wall and pull along it to lay a coat."
	}
	if i := CoatAt(t, s); i >= 0 {
		return "Drag to slide this coat (" + wall.Title(t.Design().Coats[i].Law) + "); Ctrl and pull lays a new one on top."
	}
	return "Pull to lay: " + wall.Title(c.s.Settings.Laid()) + ". Shift takes whole sides, a double click this one."
}
