package survey

import (
	"math"

	"cavitywright/table"
	"cavitywright/table/curve"
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// Flatness is where the curvature vanishes, and what bounces to and fro there.
type Flatness struct {
	Flats     []Stretch // straight stretches, in the order of s
	Length    float64   // of all of them
	Zeros     []Place   // places on curved wall where the curvature vanishes
	Strips    []Strip
	Diameters []Arc // arcs whose diameters are a family
}

// Strip is a pair of parallel straight stretches that face each other over a
// free width: rays across it bounce to and fro for ever, and rays nearly across
// it for long.
type Strip struct {
	A, B   Stretch
	Across float64 // distance of the two
	Along  float64 // length over which they face each other with nothing between
}

// Arc is an arc of a circle that turns by more than half a turn, with its
// radius: its diameters are a family of two-bounce orbits.
type Arc struct {
	Stretch
	Radius, Sweep float64
}

func flatnessOf(t *table.Table, n *net) Flatness {
	var f Flatness
	pieces := t.Pieces()
	var flat []int
	for i := range pieces {
		p := &pieces[i]
		if p.Kind == curve.Segment {
			flat = append(flat, i)
			f.Flats = append(f.Flats, Stretch{p.S0, p.S0 + p.Length})
			f.Length += p.Length
			continue
		}
		if !p.Whole() && !p.Corner && pieces[p.Prev].Kind != curve.Segment && vanishes(t, p, 0) {
			f.Zeros = append(f.Zeros, placeAt(t, i, 0))
		}
	}
	for k, i := range flat {
		for _, j := range flat[k+1:] {
			if s, ok := strip(&pieces[i], &pieces[j], n); ok {
				f.Strips = append(f.Strips, s)
			}
		}
	}
	f.Diameters = diameters(t, n)
	return f
}

const (
	// parallel is the angle (radians) between sides that counts as none: over
	// the 1e5 bounces of a long orbit it turns a ray by 1e-4.
	parallel = 1e-9
	// probes is the number of diameters of an arc that are tried.
	probes = 64
)

// strip is what p and q, straight, have of a strip between them.
func strip(p, q *table.Piece, n *net) (Strip, bool) {
	along := plane.Unit(r2.Sub(p.B, p.A))
	back := plane.Unit(r2.Sub(q.A, q.B)) // the inside is on the left of both
	if math.Abs(plane.Cross(along, back)) > parallel || plane.Dot(along, back) < 0 {
		return Strip{}, false
	}
	across := plane.Dot(plane.Left(along), r2.Sub(q.A, p.A))
	lo := math.Max(0, plane.Dot(along, r2.Sub(q.B, p.A)))
	hi := math.Min(p.Length, plane.Dot(along, r2.Sub(q.A, p.A)))
	if across <= 0 || hi-lo <= 1e-9*n.size {
		return Strip{}, false
	}
	free := hi - lo - n.shadow(band{from: p.A, along: along, lo: lo, hi: hi, high: across})
	s := Strip{Stretch{p.S0, p.S0 + p.Length}, Stretch{q.S0, q.S0 + q.Length}, across, free}
	return s, free > 1e-9*n.size
}

// diameters are the arcs of circle of the outer wall that turn by more than
// half a turn, of which some diameter meets nothing on its way; probes are tried.
func diameters(t *table.Table, n *net) []Arc {
	var arcs []Arc
	pieces := t.Pieces()
	for i := range pieces {
		p := &pieces[i]
		if p.Kind != curve.Circle || p.Turn < 0 || !outer(t, p) {
			continue
		}
		if k := len(arcs) - 1; k >= 0 && i > 0 && pieces[i-1].Side == p.Side && arcs[k].S1 == p.S0 {
			arcs[k].S1, arcs[k].Sweep = p.S0+p.Length, arcs[k].Sweep+p.Turn
			continue
		}
		arcs = append(arcs, Arc{Stretch{p.S0, p.S0 + p.Length}, p.Radius, p.Turn})
	}
	var out []Arc
	for _, a := range arcs {
		if a.Sweep > math.Pi*(1+1e-9) && someDiameter(t, n, a) {
			out = append(out, a)
		}
	}
	return out
}

func someDiameter(t *table.Table, n *net, a Arc) bool {
	half := math.Pi * a.Radius
	for k := range probes {
		s := a.S0 + (a.S1-a.S0-half)*(float64(k)+0.5)/probes
		if n.clear(t.At(s).Point, t.At(s+half).Point) {
			return true
		}
	}
	return false
}
