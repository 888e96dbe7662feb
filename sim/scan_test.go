package sim_test

import (
	"math"
	"sort"

	"cavitywright/table"
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// scan is a slow and independent answer to where a ray meets the wall first. It
// knows the wall as the function s -> At(s).Point alone, with the places of the
// joints: it samples the wall so densely that it turns by less than sampleTurn
// from one sample to the next, looks at the signed distance of the samples from
// the ray's line, and halves every interval on which it cannot say from its
// ends how often the line is crossed. Tangents are used only to say how well a
// crossing is conditioned.
type scan struct {
	tab     *table.Table
	size    float64 // diagonal of the wall's box
	eps     float64 // rounding of a distance from a line
	touch   float64 // height over the line that is not told from none
	corner  float64 // distance of a corner from the line that is not told from none
	runs    []run
	corners []corner
	found   []bracket
	zones   []zone
}

// run is a stretch of wall between two joints with its samples; the last one is
// the start of what follows.
type run struct {
	s0, s1 float64
	s      []float64
	at     []r2.Vec
	turn   []float64 // by how much the wall turns at most since the sample before
}

type corner struct {
	s  float64
	at r2.Vec
}

// bracket is an interval of a run in which the line is crossed once.
type bracket struct {
	r      *run
	a, b   float64
	left   bool // the wall at a lies to the left of the ray
	lowest float64
}

// zone is an interval of a run along which the wall is too near to the line to
// say whether they meet. If it is on different sides before and after, they do.
type zone struct {
	a, b, u float64
	crossed bool
}

const (
	// samplesPerLoop is the number of even samples of a loop.
	samplesPerLoop, samplesPerRun = 1200, 24
	// sampleSag is the height of the curve over a chord, relative to it, at
	// which the chord is halved: an arc has it when it turns by 0.048 rad.
	sampleSag = 0.006
	// sampleTurn bounds the turn between two samples (radians), with a margin
	// for curves that turn unevenly; where the height over the chord is less
	// than sampleSag it is taken as turnPerSag of it and leastTurn. Where the distances a and b at the ends
	// of an interval of length h have one sign and are greater than turn h/2,
	// the wall does not reach the line between them; where they differ in sign
	// and by more than 2 turn h, it crosses once.
	sampleTurn = 0.08
	turnPerSag = 40
	leastTurn  = 1e-7
	// touchTol is the height over the ray's line, relative to the size of the
	// table, within which the scan does not say whether the wall is touched:
	// some thousand roundings. It is a ray that meets a wall of that size at
	// 1.5e-6 rad, fifteen times the angle at which the tracer gives up.
	touchTol = 1e-12
	// cornerTol is the distance of a corner from the line, relative to the
	// size, within which the scan does not say on which side it passes. Both are
	// larger where the table is small and far from the origin.
	cornerTol = 1e-11
	// slant is the inverse sine of the least angle at which a wall next to
	// such a corner is met.
	slant = 1e3
)

func newScan(tab *table.Table) *scan {
	b := tab.Bounds()
	far := math.Max(math.Max(math.Abs(b.Min.X), math.Abs(b.Max.X)), math.Max(math.Abs(b.Min.Y), math.Abs(b.Max.Y)))
	c := &scan{tab: tab, size: plane.Diagonal(b)}
	c.eps = 0x1p-51 * math.Max(far, c.size)
	c.touch = math.Max(touchTol*c.size, 256*c.eps)
	c.corner = math.Max(cornerTol*c.size, 1024*c.eps)
	joints := tab.Joints()
	for _, j := range joints {
		if j.Continuity == table.Corner {
			c.corners = append(c.corners, corner{j.S, tab.At(j.S).Point})
		}
	}
	for _, l := range tab.Loops() {
		cuts := []float64{l.S0}
		for _, j := range joints {
			if j.S > l.S0 && j.S < l.S1 {
				cuts = append(cuts, j.S)
			}
		}
		for i, s0 := range cuts {
			end, next := l.S1, l.S0
			if i+1 < len(cuts) {
				end, next = cuts[i+1], cuts[i+1]
			}
			c.runs = append(c.runs, c.sampled(s0, end, tab.At(next).Point, l.S1-l.S0))
		}
	}
	return c
}

// sampled takes even samples, geometric ones towards both ends, and more where
// the curve needs them.
func (c *scan) sampled(s0, s1 float64, end r2.Vec, loop float64) run {
	r := run{s0: s0, s1: s1}
	n := max(samplesPerRun, int(samplesPerLoop*(s1-s0)/loop))
	var at []float64
	for i := 0; i <= n; i++ {
		at = append(at, s0+(s1-s0)*float64(i)/float64(n))
	}
	at[n] = s1
	for h := (s1 - s0) / float64(2*n); h > 1e-10*(s1-s0); h /= 2 {
		at = append(at, s0+h, s1-h)
	}
	sort.Float64s(at)
	point := func(s float64) r2.Vec {
		if s >= s1 {
			return end
		}
		return c.tab.At(s).Point
	}
	var add func(a, b float64, pa, pb r2.Vec)
	add = func(a, b float64, pa, pb r2.Vec) {
		chord := r2.Sub(pb, pa)
		long := r2.Norm2(chord)
		sag := 0.0
		for _, f := range []float64{0.37, 0.71} {
			sag = math.Max(sag, math.Abs(plane.Cross(chord, r2.Sub(point(a+f*(b-a)), pa)))/long)
		}
		if (!(sag <= sampleSag) || b-a > 1.2*math.Sqrt(long)) && b-a > 1e-11*(s1-s0) && b-a > 64*c.eps {
			m := a + 0.5*(b-a)
			pm := point(m)
			add(a, m, pa, pm)
			add(m, b, pm, pb)
			return
		}
		turn := math.Min(sampleTurn, turnPerSag*sag+leastTurn)
		r.s, r.at, r.turn = append(r.s, b), append(r.at, pb), append(r.turn, turn)
	}
	r.s, r.at, r.turn = append(r.s, s0), append(r.at, point(s0)), append(r.turn, 0)
	for i := range at[1:] {
		add(at[i], at[i+1], point(at[i]), point(at[i+1]))
	}
	return r
}

// point is a point of a run.
func (c *scan) point(r *run, s float64) r2.Vec {
	if s >= r.s1 {
		return r.at[len(r.at)-1]
	}
	return c.tab.At(s).Point
}

// event is a meeting of the line with the wall at the flight u. A certain one
// is a crossing; the others are a corner or a tangency too near to be decided.
type event struct {
	kind eventKind
	s, u float64
	cos  float64 // sine of the angle between ray and wall
	wide float64 // by how much s and u may be off, beyond rounding
}

type eventKind uint8

const (
	crossing eventKind = iota
	touch
	atCorner
)

// answer is what the scan says: the undecided events before the first certain
// crossing, and that crossing, last, unless there is none.
type answer struct {
	events []event
	near   bool // undecided right at the start
}

func (a answer) first() (event, bool) {
	if n := len(a.events); n > 0 && a.events[n-1].kind == crossing {
		return a.events[n-1], true
	}
	return event{}, false
}

// ray is a half line. Origin is the s where it starts on the wall, NaN inside.
type ray struct {
	from, dir r2.Vec
	origin    float64
}

func (q ray) left(p r2.Vec) float64  { return plane.Cross(q.dir, r2.Sub(p, q.from)) }
func (q ray) along(p r2.Vec) float64 { return plane.Dot(q.dir, r2.Sub(p, q.from)) }

// sample is a place of the wall as the ray sees it.
type sample struct{ s, d, u float64 }

func (q ray) sample(s float64, p r2.Vec) sample { return sample{s, q.left(p), q.along(p)} }

// firstHit scans the wall for the ray.
func (c *scan) firstHit(q ray) answer {
	c.found, c.zones = c.found[:0], c.zones[:0]
	var a answer
	for i := range c.runs {
		r := &c.runs[i]
		own := q.origin >= r.s0 && q.origin < r.s1
		before := q.sample(r.s[0], r.at[0])
		for k := 1; k < len(r.s); k++ {
			after := q.sample(r.s[k], r.at[k])
			if own && q.origin >= before.s && q.origin < after.s {
				a.near = c.aroundOrigin(r, q, before, after, r.turn[k])
			} else {
				c.look(r, q, before, after, r.turn[k])
			}
			before = after
		}
	}
	for _, k := range c.corners {
		if d, u := math.Abs(q.left(k.at)), q.along(k.at); d <= c.corner && u > -slant*c.corner && k.s != q.origin {
			a.events = append(a.events, event{kind: atCorner, s: k.s, u: u})
		}
	}
	best := event{u: math.Inf(1)}
	meet := func(e event) {
		switch {
		case e.u+e.wide < -c.touch:
		case e.u-e.wide < c.touch:
			a.near = true
		case e.kind == touch:
			a.events = append(a.events, e)
		case e.u < best.u:
			best = e
		}
	}
	for _, z := range c.zones {
		e := event{kind: touch, s: 0.5 * (z.a + z.b), u: z.u, wide: 2*(z.b-z.a) + c.corner}
		if z.crossed {
			e.kind = crossing
		}
		meet(e)
	}
	sort.Slice(c.found, func(i, j int) bool { return c.found[i].lowest < c.found[j].lowest })
	for _, b := range c.found {
		if b.lowest > best.u {
			break
		}
		meet(c.refine(b, q))
	}
	events := a.events[:0]
	for _, e := range a.events {
		late := c.touch
		if e.kind == atCorner {
			// The wall before a corner is met at a slant.
			late = slant * c.corner
		}
		if e.u-e.wide <= best.u+best.wide+late {
			events = append(events, e)
		}
	}
	if !math.IsInf(best.u, 1) {
		events = append(events, best)
	}
	a.events = events
	return a
}

// aroundOrigin looks at the interval that the ray leaves. The start is a root
// of the distance, which is left out by looking at what lies before and after
// it, in steps that approach it geometrically; the sign next to it is known
// from the direction of the wall there. It reports whether the start is too
// near to something to be told from it.
func (c *scan) aroundOrigin(r *run, q ray, before, after sample, turn float64) bool {
	f := c.tab.At(q.origin)
	slope := plane.Cross(q.dir, f.Tangent)
	least := 64*c.eps/math.Abs(slope) + 4*r2.Norm(r2.Sub(f.Point, q.from))
	near := false
	for _, end := range []sample{before, after} {
		side := math.Copysign(1, end.s-q.origin)
		room := math.Abs(end.s - q.origin)
		if room <= 2*least {
			near = near || end.s == r.s0 && room > 0 || end.s == r.s1
			continue
		}
		at := func(h float64) sample {
			if h > 0.7*room {
				return end
			}
			return q.sample(q.origin+side*h, c.point(r, q.origin+side*h))
		}
		inner := at(least)
		near = near || (inner.d > 0) != (slope*side > 0)
		for h := least; inner != end; h *= 2 {
			outer := at(2 * h)
			turn := turn * math.Min(1, 2*h/(after.s-before.s))
			if side > 0 {
				c.look(r, q, inner, outer, turn)
			} else {
				c.look(r, q, outer, inner, turn)
			}
			inner = outer
		}
	}
	return near
}

// look collects where the wall meets the line between two samples, between
// which it turns by at most turn.
func (c *scan) look(r *run, q ray, a, b sample, turn float64) {
	h := b.s - a.s
	// A chord is no longer than its arc.
	if math.Max(a.u, b.u)+h < -c.touch {
		return
	}
	da, db := math.Abs(a.d), math.Abs(b.d)
	parted := (a.d >= 0) != (b.d >= 0)
	switch tiny := c.touch; {
	case !parted && math.Min(da, db) > 0.5*turn*h:
	case parted && da+db > 2*turn*h:
		c.found = append(c.found, bracket{r, a.s, b.s, a.d >= 0, math.Min(a.u, b.u) - h})
	case da <= tiny && db <= tiny && turn*h <= tiny || h <= 64*0x1p-52*c.tab.Length():
		n := len(c.zones)
		if n == 0 || c.zones[n-1].b != a.s {
			c.zones, n = append(c.zones, zone{a: a.s}), n+1
		}
		z := &c.zones[n-1]
		z.b, z.u, z.crossed = b.s, 0.5*(a.u+b.u), z.crossed != parted
	default:
		m := a.s + 0.5*h
		mid := q.sample(m, c.point(r, m))
		c.look(r, q, a, mid, 0.5*turn)
		c.look(r, q, mid, b, 0.5*turn)
	}
}

// refine halves the bracket to the last bits.
func (c *scan) refine(k bracket, q ray) event {
	a, b := k.a, k.b
	for {
		m := a + 0.5*(b-a)
		if m <= a || m >= b {
			break
		}
		if d := q.left(c.point(k.r, m)); (d >= 0) == k.left {
			a = m
		} else {
			b = m
		}
	}
	f := c.tab.At(math.Min(a, math.Nextafter(k.r.s1, 0)))
	return event{kind: crossing, s: a, u: q.along(c.point(k.r, a)), cos: math.Abs(plane.Cross(q.dir, f.Tangent))}
}
