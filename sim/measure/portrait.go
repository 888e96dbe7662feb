package measure

import (
	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/table"
)

// Portrait follows the launches of the study and keeps their points on the
// section: the Birkhoff portrait.
type Portrait struct {
	Each   int // bounces an orbit
	starts []sim.Start
	hues   []int
}

// Coloured is the portrait without the orbits of the sea.
func (p Portrait) Coloured() Portrait {
	own := Portrait{Each: p.Each}
	for i, h := range p.hues {
		if h != Sea {
			own.starts, own.hues = append(own.starts, p.starts[i]), append(own.hues, h)
		}
	}
	return own
}

// Continued is the portrait of the same orbits from where they ended, each
// bounces more; those that stopped are left out.
func (p Portrait) Continued(ends []sim.Bounce, each int) Portrait {
	next := Portrait{Each: each}
	for i, b := range ends {
		if b.Stop == sim.Going && b.Piece >= 0 {
			next.starts = append(next.starts, sim.Start{State: b.State})
			next.hues = append(next.hues, p.hues[i])
		}
	}
	return next
}

// Sea is the hue of the orbits of an even seeding: the background, no orbit of
// its own.
const Sea = -1

// NewPortrait is the portrait of the launches. Each orbit has a hue of its own,
// except that those of an even seeding are the sea.
func NewPortrait(tr *sim.Tracer, launches []table.Launch, each int) Portrait {
	p := Portrait{Each: each}
	next := 0
	for _, l := range launches {
		for _, s := range tr.Launched(l) {
			hue := Sea
			if l.Pattern != table.Even {
				hue = next
				next++
			}
			p.starts = append(p.starts, s)
			p.hues = append(p.hues, hue)
		}
	}
	return p
}

// Orbits is the number of orbits launched.
func (p Portrait) Orbits() int { return len(p.starts) }

// Bounces is Each.
func (p Portrait) Bounces() int { return p.Each }

// Start is launch i.
func (p Portrait) Start(i int, _ func() float64) sim.Start { return p.starts[i] }

// Hue is the colour of orbit i, or Sea.
func (p Portrait) Hue(i int) int { return p.hues[i] }

// Tally is a *PortraitTally.
func (p Portrait) Tally() Tally { return &PortraitTally{of: p} }

// PortraitTally is the points of each orbit.
type PortraitTally struct {
	Stops Stops
	of    Portrait
	sets  []figure.DotSet
	ends  []sim.Bounce
}

// Open begins orbit i.
func (t *PortraitTally) Open(i int) {
	t.sets = append(t.sets, figure.DotSet{Hue: t.of.hues[i]})
	t.ends = append(t.ends, sim.Bounce{})
}

// Add keeps a bounce on the wall.
func (t *PortraitTally) Add(b *sim.Bounce) {
	t.ends[len(t.ends)-1] = *b
	if b.Stop != sim.Going {
		t.Stops[b.Stop]++
	}
	if b.Piece < 0 || b.Stop == sim.Corner || b.Stop == sim.Lost {
		return
	}
	s := &t.sets[len(t.sets)-1]
	s.X, s.Y = append(s.X, b.S), append(s.Y, b.P)
}

// Close does nothing.
func (t *PortraitTally) Close() {}

// Merge appends the next orbits.
func (t *PortraitTally) Merge(next Tally) {
	o := next.(*PortraitTally)
	t.sets = append(t.sets, o.sets...)
	t.ends = append(t.ends, o.ends...)
	t.Stops.Add(o.Stops)
}

// Ends are the last bounces of the orbits.
func (t *PortraitTally) Ends() []sim.Bounce { return t.ends }

// Sets are the orbits' points, s in the table's unit and p = sin chi.
func (t *PortraitTally) Sets() []figure.DotSet { return t.sets }
