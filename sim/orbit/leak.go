package orbit

import (
	"math"

	"cavitywright/sim"
	"cavitywright/table"
	"cavitywright/table/wall"
)

// held reports whether nothing leaves at the bounce.
func (p *prover) held(st sim.State) bool {
	law := p.t.Law()
	for _, x := range p.t.Stretches() {
		if st.S >= x.S0 && st.S <= x.S1 {
			law = x.Law
		}
	}
	switch law := law.(type) {
	case wall.Opening:
		return false
	case wall.Dielectric:
		return math.Abs(st.P) > law.Critical()
	}
	return true
}

// Leaks reports whether the table has openings or dielectric walls, so that
// Orbit.Confined says something.
func Leaks(t *table.Table) bool {
	leaks := func(l wall.Law) bool {
		switch l := l.(type) {
		case wall.Opening:
			return true
		case wall.Dielectric:
			return l.Critical() < 1
		}
		return false
	}
	if leaks(t.Law()) {
		return true
	}
	for _, x := range t.Stretches() {
		if leaks(x.Law) {
			return true
		}
	}
	return false
}
