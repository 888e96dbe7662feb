package sim

// Walkers follow several orbits at once on a shared Tracer, one a lane: a
// processor works on one ray while another's square root is still under way.
// Each orbit is to the last bit what a Walker would make of it. One goroutine
// uses them.
type Walkers struct {
	tr    *Tracer
	lanes []lane
	marks marks
}

// Walkers are n lanes at rest, 1 to 16.
func (tr *Tracer) Walkers(n int) *Walkers {
	if n < 1 || n > maxLanes {
		panic("sim: no such number of lanes")
	}
	w := &Walkers{tr: tr, lanes: make([]lane, n)}
	for i := range w.lanes {
		w.lanes[i].last.Stop = Spent
	}
	return w
}

// Open opens an orbit in a lane.
func (w *Walkers) Open(lane int, s Start) { w.tr.openLane(&w.lanes[lane], s) }

// Rest leaves a lane out until the next orbit is opened in it.
func (w *Walkers) Rest(lane int) { w.lanes[lane].last.Stop = Spent }

// Last is the bounce at which a lane stands. It is changed by Next.
func (w *Walkers) Last(lane int) *Bounce { return &w.lanes[lane].last }

// Jacobian is Walker.Jacobian of a lane.
func (w *Walkers) Jacobian(lane int) Jacobian { return w.lanes[lane].jacobian() }

// Next takes every orbit that goes on to its next bounce. u holds a number a
// lane, as for Walker.Next.
func (w *Walkers) Next(u []float64) {
	w.tr.advance(w.lanes, &w.marks)
	if w.tr.mirrors {
		return
	}
	for i := range w.lanes {
		// A lane that stopped some time ago has met no wall now.
		if l := &w.lanes[i]; l.last.Stop == Going {
			w.tr.bounce(l, u[i])
		}
	}
}
