package sim_test

import (
	"fmt"
	"math"
	"sync"
	"testing"

	"cavitywright/sim"
	"cavitywright/table"
	"cavitywright/table/curve"
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// aim is a ray to be traced, with the way it was drawn.
type aim struct {
	how     string
	state   sim.State
	inside  bool
	at, dir r2.Vec
}

func (a aim) String() string {
	if a.inside {
		return fmt.Sprintf("%s: from (%v, %v) along (%v, %v)", a.how, a.at.X, a.at.Y, a.dir.X, a.dir.Y)
	}
	return fmt.Sprintf("%s: S %v P %v", a.how, a.state.S, a.state.P)
}

func (a aim) open(w *sim.Walker) sim.Bounce {
	if a.inside {
		return w.StartInside(a.at, a.dir)
	}
	return w.Start(a.state)
}

// aim draws a ray, half of the time at the hard places.
func (r *drawing) aim(tab *table.Table) aim {
	s, joints, size := r.Float64()*tab.Length(), tab.Joints(), plane.Diagonal(tab.Bounds())
	switch r.IntN(12) {
	case 0:
		return aim{how: "along the wall", state: sim.State{S: s, P: r.sign() * (1 - r.power(-6, -2))}}
	case 1:
		return aim{how: "square", state: sim.State{S: s}}
	case 2:
		if len(joints) > 0 {
			j := joints[r.IntN(len(joints))]
			return aim{how: "from beside a joint", state: sim.State{S: tab.Wrap(j.S + r.sign()*tab.Length()*r.power(-13, -3)), P: r.between(-1, 1)}}
		}
	case 3, 4:
		if len(joints) > 0 {
			j := joints[r.IntN(len(joints))]
			off := r2.Scale(size*r.power(-14, -3), plane.Polar(r.between(0, 2*math.Pi)))
			if r.odds(0.1) {
				off = r2.Vec{}
			}
			return r.towards("at a joint", tab, r2.Add(j.At, off))
		}
	case 5, 6:
		f := tab.At(s)
		off := size * r.sign() * r.power(-15, -2)
		if f.Curvature != 0 {
			return r.alongTangent(tab, r2.Add(f.Point, r2.Scale(off, f.Normal())), r2.Scale(r.sign(), f.Tangent))
		}
	case 7:
		x := r.within(tab)
		return aim{how: "from inside", inside: true, at: x, dir: plane.Polar(r.between(0, 2*math.Pi))}
	case 8:
		// At a place of the wall, by which what is near to it is aimed at too.
		return r.towards("at the wall", tab, tab.At(s).Point)
	}
	return aim{how: "even", state: sim.State{S: s, P: r.between(-1, 1)}}
}

// towards is a ray at the point x, from the wall where the wall looks towards
// it, else from inside.
func (r *drawing) towards(how string, tab *table.Table, x r2.Vec) aim {
	if r.odds(0.5) {
		for range 8 {
			s := r.Float64() * tab.Length()
			f := tab.At(s)
			if d := r2.Sub(x, f.Point); plane.Dot(d, f.Normal()) > 0.01*r2.Norm(d) {
				return aim{how: how, state: sim.State{S: s, P: plane.Dot(plane.Unit(d), f.Tangent)}}
			}
		}
	}
	for {
		at := r.within(tab)
		if d := r2.Sub(x, at); d != (r2.Vec{}) {
			return aim{how: how + " from inside", inside: true, at: at, dir: plane.Unit(d)}
		}
	}
}

// alongTangent is a ray through x in the direction dir from somewhere inside
// the table on that line.
func (r *drawing) alongTangent(tab *table.Table, x, dir r2.Vec) aim {
	size := plane.Diagonal(tab.Bounds())
	for range 20 {
		at := r2.Sub(x, r2.Scale(size*r.power(-3, 0), dir))
		// On the wall itself Contains may say either.
		clear := r2.Scale(1e-8*size, plane.Left(dir))
		if tab.Contains(r2.Add(at, clear)) && tab.Contains(r2.Sub(at, clear)) {
			return aim{how: "near a tangent", inside: true, at: at, dir: dir}
		}
	}
	return aim{how: "even", state: sim.State{S: r.Float64() * tab.Length(), P: r.between(-1, 1)}}
}

// agreement holds a tracer's bounces to a scan.
type agreement struct {
	c *scan
	tally
}

// tally counts what was compared.
type tally struct {
	tables, refused, failures int // failures are tables with a wrong flight
	compared                  int
	undecided                 int     // the scan left it open; the tracer gave one of its answers
	near                      int     // nothing could be said: too near to the start
	worst                     float64 // error of a place, in units of the one expected from rounding
	stops                     [sim.Stops]int
}

func (a *tally) add(b tally) {
	a.tables += b.tables
	a.refused += b.refused
	a.failures += b.failures
	a.compared += b.compared
	a.undecided += b.undecided
	a.near += b.near
	a.worst = math.Max(a.worst, b.worst)
	for i, n := range b.stops {
		a.stops[i] += n
	}
}

// check compares the bounce that followed from before with the scan. It returns
// what is wrong, or nothing.
func (g *agreement) check(before, b sim.Bounce) string {
	q := ray{from: before.Point, dir: before.Dir, origin: math.NaN()}
	if before.Piece >= 0 {
		q.origin = before.S
	}
	if b.Stop == sim.Lost {
		return "the ray is lost"
	}
	a := g.c.firstHit(q)
	if a.near {
		g.near++
		return ""
	}
	want, certain := a.first()
	says := fmt.Sprintf("tracer: %v, flight %v, S %v, piece %d, at (%v, %v); scan: %+v; from (%v, %v) along (%v, %v)",
		b.Stop, b.Flight, b.S, b.Piece, b.Point.X, b.Point.Y, a.events, q.from.X, q.from.Y, q.dir.X, q.dir.Y)
	if len(a.events) == 1 && certain && want.wide == 0 || len(a.events) == 0 {
		g.compared++
	} else {
		g.undecided++
	}
	switch b.Stop {
	case sim.Escaped:
		if certain || !g.c.tab.Open() {
			return "not escaped: " + says
		}
		return ""
	case sim.Corner:
		for _, e := range a.events {
			if e.kind == atCorner {
				return ""
			}
		}
		return "no corner there: " + says
	case sim.Grazing:
		for _, e := range a.events {
			if e.kind == touch || e.wide > 0 || e.kind == crossing && e.cos < grazing {
				return ""
			}
		}
		return "not grazing: " + says
	}
	for _, e := range a.events {
		if g.same(q, e, b) {
			return ""
		}
	}
	return "another place: " + says
}

// grazing is the sine of the angle to the wall below which a tracer may say
// that it cannot decide: three times the constant of its documentation.
const grazing = 3e-7

// same reports whether the bounce is the event. A crossing's place is known to
// the rounding of the distance over the sine of the angle to the wall, and to
// the 1e-12 of the length that At promises.
func (g *agreement) same(q ray, e event, b sim.Bounce) bool {
	ds := math.Abs(b.S - e.s)
	if l := g.c.tab.Loops()[g.c.tab.LoopAt(e.s)]; ds > 0.5*(l.S1-l.S0) {
		ds = math.Abs(l.S1 - l.S0 - ds)
	}
	du := math.Abs(b.Flight - e.u)
	onLine := math.Abs(q.left(b.Point)) < g.c.corner
	if e.wide > 0 || e.kind == atCorner {
		wide := math.Max(e.wide, 100*g.c.corner)
		return onLine && ds < wide && du < wide
	}
	rounding := g.eps(b)/e.cos + 1e-13*g.c.tab.Length()
	g.worst = math.Max(g.worst, math.Min(math.Max(ds, du)/rounding, 1e6))
	tol := 4 * rounding
	return onLine && ds <= tol && du <= tol
}

// eps is the rounding of a distance from a line at the bounce: an arc is known
// to the rounding of its centre and its radius.
func (g *agreement) eps(b sim.Bounce) float64 {
	if p := &g.c.tab.Pieces()[b.Piece]; p.Kind == curve.Circle {
		return math.Max(g.c.eps, 0x1p-51*p.Radius)
	}
	return g.c.eps
}

// TestFirstHitAgainstScan holds single flights at the hard places, and orbits
// of 20 bounces, on random tables to the scan (properties N1 to N4).
func TestFirstHitAgainstScan(t *testing.T) {
	seed, flights := seedOf(t), 100_000
	if testing.Short() {
		flights = 3_000
	}
	const shards, perTable, orbits = 4, 160, 3
	var all sync.Mutex
	var sum tally
	t.Run("shards", func(t *testing.T) {
		for shard := range shards {
			t.Run(fmt.Sprint(shard), func(t *testing.T) {
				t.Parallel()
				var own tally
				for number := uint64(shard); own.compared+own.undecided < flights/shards && own.failures < 5; number += shards {
					r := draw(seed, number)
					tab := r.table()
					f := follower{t: t, about: fmt.Sprintf("seed %d table %d", seed, number), w: sim.Compile(tab).Walker()}
					f.c = newScan(tab)
					f.follow(r, tab, perTable, orbits)
					own.add(f.tally)
					own.refused += r.refused
					own.tables++
				}
				all.Lock()
				defer all.Unlock()
				sum.add(own)
			})
		}
	})
	t.Logf("%d tables (%d designs refused): %d flights compared, %d undecided by the scan, %d too near to the start; worst error %.3g of rounding; stops %v",
		sum.tables, sum.refused, sum.compared, sum.undecided, sum.near, sum.worst, sum.stops)
	if sum.undecided+sum.near > sum.compared/10 {
		t.Error("the scan leaves too much undecided to be a check")
	}
}

// follower traces on one table and holds every flight to the scan.
type follower struct {
	t     *testing.T
	about string
	w     *sim.Walker
	agreement
}

func (f *follower) follow(r *drawing, tab *table.Table, singles, orbits int) {
	wrongs := 0
	flight := func(a aim, before sim.Bounce) sim.Bounce {
		b := f.w.Next(0)
		f.stops[b.Stop]++
		if wrong := f.check(before, b); wrong != "" {
			if wrongs++; wrongs == 1 {
				f.t.Errorf("%s, ray %v\n  %s%s", f.about, a, wrong, dump(tab.Design()))
			}
		}
		return b
	}
	for range singles {
		a := r.aim(tab)
		flight(a, a.open(f.w))
	}
	for range orbits {
		a := r.aim(tab)
		for b := a.open(f.w); b.N < 20 && b.Stop == sim.Going; {
			b = flight(a, b)
		}
	}
	if wrongs > 0 {
		f.failures++
		f.t.Errorf("%s: %d flights are wrong", f.about, wrongs)
	}
}
