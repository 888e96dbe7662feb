package leak

import (
	"cavitywright/table"
)

// Port is one opening of the wall: stretches without a gap between them.
type Port struct {
	Doors []table.Stretch
	Width float64
}

// S0 is where the port begins, S1 where it ends along s; S1 < S0 for one that
// runs over the start of its loop.
func (p Port) S0() float64 { return p.Doors[0].S0 }

// S1 is the end.
func (p Port) S1() float64 { return p.Doors[len(p.Doors)-1].S1 }

// touching is the gap between two stretches, relative to the table's length,
// below which they are one opening: far above the rounding of a place on the
// wall, far below any opening that is made.
const touching = 1e-9

// PortsOf are the openings of a table in the order of s.
func PortsOf(t *table.Table) []Port {
	doors, _ := Openings(t)
	near := func(a, b float64) bool { d := a - b; return d < touching*t.Length() && -d < touching*t.Length() }
	loop := func(d table.Stretch) int { return t.Pieces()[d.Piece].Loop }
	var ports []Port
	first := 0 // the first port of the loop at hand
	for i, d := range doors {
		if i > 0 && loop(d) != loop(doors[i-1]) {
			ports = joined(t, ports, first, near)
			first = len(ports)
		}
		if n := len(ports); n > first && near(ports[n-1].S1(), d.S0) {
			ports[n-1].Doors = append(ports[n-1].Doors, d)
			ports[n-1].Width += d.S1 - d.S0
			continue
		}
		ports = append(ports, Port{[]table.Stretch{d}, d.S1 - d.S0})
	}
	return joined(t, ports, first, near)
}

// joined makes one port of the last and the first of a loop where they meet
// over its start.
func joined(t *table.Table, ports []Port, first int, near func(a, b float64) bool) []Port {
	n := len(ports)
	if n < first+2 {
		return ports
	}
	a, b := ports[n-1], ports[first]
	l := t.Loops()[t.Pieces()[b.Doors[0].Piece].Loop]
	if !near(a.S1(), l.S1) || !near(b.S0(), l.S0) {
		return ports
	}
	ports[first] = Port{append(a.Doors, b.Doors...), a.Width + b.Width}
	return ports[:n-1]
}

// portAt is the index of the port that holds s, -1 for none.
func portAt(ports []Port, s float64) int {
	for i, p := range ports {
		for _, d := range p.Doors {
			if s >= d.S0 && s <= d.S1 {
				return i
			}
		}
	}
	return -1
}
