package survey

import (
	"math"

	"cavitywright/table"
	"cavitywright/table/curve"

	"gonum.org/v1/gonum/spatial/r2"
)

// Tool is where a round tool that works inside the table does not reach the
// wall.
type Tool struct {
	Radius  float64
	Beyond  []Beyond
	Length  float64 // of all those stretches
	Checked bool    // a tool was stated
}

// Beyond is a stretch of wall that the tool does not touch, and why not. Left
// is, at a corner between straight sides, how far the tool's edge stays from
// it; else NaN.
type Beyond struct {
	Stretch
	At   r2.Vec
	Why  Obstruction
	Left float64
}

// Obstruction is what keeps a tool from the wall.
type Obstruction uint8

// The obstructions: a corner; a bend of smaller radius than the tool; another
// stretch of wall too near.
const (
	AtCorner Obstruction = iota
	TightBend
	Narrow
)

func (o Obstruction) String() string { return [...]string{"corner", "tight bend", "narrow place"}[o] }

const (
	// toolFit is the part of its radius by which the tool may cut into other
	// wall: rounding where it just fits.
	toolFit = 1e-6
	// toolSamples is the least number of places tried, toolEach that a piece.
	toolSamples = 512
	toolEach    = 12
)

func toolOf(t *table.Table, n *net, radius float64) Tool {
	tool := Tool{Radius: radius, Checked: true}
	each := max(toolEach, toolSamples/len(t.Pieces()))
	for _, l := range t.Loops() {
		var open []Stretch
		for i := l.First; i < l.Last; i++ {
			open = append(open, unreached(t, n, i, radius, each)...)
		}
		for _, s := range around(joined(open), l) {
			b := reason(t, s, radius, l)
			tool.Beyond = append(tool.Beyond, b)
			tool.Length += lengthOf(s, l)
		}
	}
	return tool
}

// reaches reports whether the tool can lie against the wall at the length x
// from the start of the piece without cutting into wall.
func reaches(p *table.Piece, n *net, x, radius float64) bool {
	f := p.FrameAt(p.T(x))
	if f.Curvature*radius > 1+toolFit {
		return false
	}
	centre := r2.Add(f.Point, r2.Scale(radius, f.Normal()))
	return !n.within(centre, radius*(1-toolFit), 1e-3*toolFit*radius)
}

// unreached are the stretches of piece i that the tool does not touch: tried
// at each+1 places, the ends between them by halving. A stretch between two
// places that are both reached is not seen.
func unreached(t *table.Table, n *net, i int, radius float64, each int) []Stretch {
	p := &t.Pieces()[i]
	tried := func(x float64) bool { return reaches(p, n, x, radius) }
	place := func(k int) float64 {
		return p.Length * math.Min(math.Max(float64(k)/float64(each), nearEnd), 1-nearEnd)
	}
	var list []Stretch
	was := true
	for k := range each + 1 {
		now := tried(place(k))
		switch {
		case was && !now && k == 0:
			list = append(list, Stretch{p.S0, p.S0 + p.Length})
		case was && !now:
			list = append(list, Stretch{p.S0 + halved(tried, place(k-1), place(k)), p.S0 + p.Length})
		case !was && now:
			list[len(list)-1].S1 = p.S0 + halved(tried, place(k), place(k-1))
		}
		was = now
	}
	return list
}

// nearEnd is the distance from the ends of a piece, relative to its length, of
// the first and last place tried: at a corner the place belongs to two sides.
const nearEnd = 1e-9

// halved is the place between in, which ok accepts, and out, which it does not,
// at which that changes.
func halved(ok func(x float64) bool, in, out float64) float64 {
	for range 40 { // to 1e-12 of the distance
		if mid := 0.5 * (in + out); ok(mid) {
			in = mid
		} else {
			out = mid
		}
	}
	return out
}

// around are the stretches of a loop with the last joined to the first where
// they meet at its start.
func around(list []Stretch, l table.Loop) []Stretch {
	if k := len(list) - 1; k > 0 && list[0].S0 == l.S0 && list[k].S1 >= l.S1*(1-1e-15) {
		list[0].S0 = list[k].S0
		return list[:k]
	}
	return list
}

func lengthOf(s Stretch, l table.Loop) float64 {
	if s.S1 < s.S0 {
		return s.S1 - s.S0 + l.S1 - l.S0
	}
	return s.S1 - s.S0
}

// reason says why the tool does not touch a stretch of the loop.
func reason(t *table.Table, s Stretch, radius float64, l table.Loop) Beyond {
	mid := s.S0 + 0.5*lengthOf(s, l)
	if mid >= l.S1 {
		mid -= l.S1 - l.S0
	}
	b := Beyond{Stretch: s, At: t.At(mid).Point, Why: Narrow, Left: math.NaN()}
	for _, j := range t.Joints() {
		if j.Continuity == table.Corner && j.Turn > 0 && holds(s, j.S, l) {
			b.Why, b.At = AtCorner, j.At
			p := &t.Pieces()[j.Piece]
			if p.Kind == curve.Segment && t.Pieces()[p.Prev].Kind == curve.Segment {
				b.Left = radius * (1/math.Sin(j.InteriorAngle()/2) - 1)
			}
			return b
		}
	}
	for k := range toolEach + 1 {
		s := s.S0 + lengthOf(s, l)*float64(k)/toolEach
		if s >= l.S1 {
			s -= l.S1 - l.S0
		}
		if t.At(s).Curvature*radius > 1+toolFit {
			b.Why = TightBend
		}
	}
	return b
}

// holds reports whether s lies on the stretch, its ends included.
func holds(in Stretch, s float64, l table.Loop) bool {
	if in.S0 <= in.S1 {
		return s >= in.S0 && s <= in.S1 || s == l.S0 && in.S1 >= l.S1*(1-1e-15)
	}
	return s >= in.S0 || s <= in.S1
}
