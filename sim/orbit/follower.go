package orbit

import (
	"math"

	"cavitywright/sim"
)

// follower follows a family both ways from a member.
type follower struct {
	b       *book
	from    *chain
	lo, hi  []float64 // displacement of each bounce from that of the member
	members []member
	family  *Family
}

// member is an orbit of the family with the displacement of its bounces.
type member struct {
	o  Orbit
	at []float64
}

func (f *follower) follow(o *Orbit) {
	n := len(f.from.s)
	f.members = []member{{*o, make([]float64, n)}}
	e, ok := f.from.eigen()
	if !ok {
		return
	}
	d, ok := e.null(nil)
	if !ok {
		return
	}
	ahead := f.walk(d)
	if !f.family.Closed {
		for i := range d {
			d[i] = -d[i]
		}
		behind := f.walk(d)
		for i, j := 0, len(behind)-1; i < j; i, j = i+1, j-1 {
			behind[i], behind[j] = behind[j], behind[i]
		}
		f.members = append(behind, f.members...)
	}
	f.members = append(f.members, ahead...)
}

// walk follows the family along d.
func (f *follower) walk(d []float64) (found []member) {
	length := f.b.mirror.Length()
	cur, at := f.from, make([]float64, len(d))
	first := append([]float64(nil), d...)
	h, easy := familyStep*length, false
	for h > familyEnd*length {
		if len(found) > mostMembers {
			f.family.Broken = true
			return found
		}
		next, o, ok := f.b.moved(cur, d, h)
		var turned []float64
		if ok {
			if e, good := next.eigen(); good {
				turned, ok = e.null(d)
			}
		}
		if !ok || turned == nil {
			h, easy = 0.5*h, false
			continue
		}
		step := h
		if easy {
			h = math.Min(2*h, familyStep*length)
		}
		easy = true
		at = append([]float64(nil), at...)
		for i := range at {
			at[i] += apart(&f.b.mirror.Loops()[cur.loop[i]], cur.s[i], next.s[i])
			f.lo[i], f.hi[i] = math.Min(f.lo[i], at[i]), math.Max(f.hi[i], at[i])
		}
		cur, d = next, turned
		found = append(found, member{o, at})
		if len(found) > 3 && f.home(cur, d, first, step) {
			f.family.Closed = true
			return found
		}
	}
	return found
}

// home reports whether the walk is back where it began, going the same way.
func (f *follower) home(c *chain, d, first []float64, h float64) bool {
	way := 0.0
	for i := range d {
		if math.Abs(apart(&f.b.mirror.Loops()[c.loop[i]], c.s[i], f.from.s[i])) > h {
			return false
		}
		way += d[i] * first[i]
	}
	return way > 0
}

// representative is the prime member nearest to the middle of a family with
// ends, or the member first found of a closed one.
func (f *follower) representative() *Orbit {
	middle := len(f.members) / 2
	if f.family.Closed {
		middle = 0
	}
	for k := range f.members {
		for _, i := range []int{middle + k, middle - k} {
			if i >= 0 && i < len(f.members) && f.b.prime(&f.members[i].o) {
				o := f.members[i].o
				return &o
			}
		}
	}
	o := f.members[middle].o
	return &o
}

// ranges fills what each bounce sweeps over.
func (f *follower) ranges(rep *Orbit) {
	f.family.Ranges = make([]Range, len(f.from.s))
	for i, s := range f.from.s {
		l := &f.b.mirror.Loops()[f.from.loop[i]]
		if turn := l.S1 - l.S0; f.hi[i]-f.lo[i] >= turn*(1-2*familyStep) {
			f.family.Ranges[i] = Range{l.S0, l.S1}
			continue
		}
		r := Range{f.b.snapped(wrap(l, s+f.lo[i])), f.b.snapped(wrap(l, s+f.hi[i]))}
		if r.To == l.S0 {
			r.To = l.S1
		}
		if r.From == l.S1 {
			r.From = l.S0
		}
		f.family.Ranges[i] = r
	}
}

// snapped is s, or the joint nearer than snapTol.
func (p *prover) snapped(s float64) float64 {
	for _, j := range p.joints {
		if math.Abs(math.Remainder(j-s, p.mirror.Length())) <= snapTol*p.mirror.Length() {
			return j
		}
	}
	return s
}

func (f *follower) states() []sim.State {
	var all []sim.State
	for i := range f.members {
		for _, b := range f.members[i].o.Bounces {
			all = append(all, b.State)
		}
	}
	return all
}
