package shape

import (
	"math"

	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// locateSteps is the number of stretches of each piece of a span in which the
// nearest place is looked for.
const locateSteps = 24

// NearestSpan is the span that comes nearest to p, fillets left aside, and the
// fraction of it there, as InsertNode takes it. ok is false where the wall
// cannot be built.
func (f Freeform) NearestSpan(p r2.Vec) (span int, share float64, ok bool) {
	if f.nodes.fault() != nil {
		return 0, 0, false
	}
	best := math.Inf(1)
	for i, c := range f.nodes.curves() {
		away := func(s float64) float64 { return r2.Norm(r2.Sub(c.At(s).Point, p)) }
		step := c.Length() / float64(locateSteps*len(c.Spans()))
		at, least := 0.0, math.Inf(1)
		for k := range locateSteps*len(c.Spans()) + 1 {
			if d := away(float64(k) * step); d < least {
				at, least = float64(k)*step, d
			}
		}
		lo, hi := math.Max(0, at-step), math.Min(c.Length(), at+step)
		for hi-lo > 1e-10*c.Length() {
			a, b := lo+(hi-lo)/3, hi-(hi-lo)/3
			if away(a) < away(b) {
				hi = b
			} else {
				lo = a
			}
		}
		if d := away(0.5 * (lo + hi)); d < best {
			best, span, share = d, i, f.nodes.share(i, c, 0.5*(lo+hi))
		}
	}
	return span, share, true
}

// SpanPath are count+1 points along span i, equal steps of its length apart;
// its chord where the wall cannot be built.
func (f Freeform) SpanPath(i, count int) []r2.Vec {
	if f.nodes.fault() != nil {
		return []r2.Vec{f.nodes.at(i).At, f.nodes.at(i + 1).At}
	}
	c := f.nodes.curve(f.nodes.wrap(i))
	out := make([]r2.Vec, count+1)
	for k := range out {
		out[k] = c.At(c.Length() * float64(k) / float64(count)).Point
	}
	return out
}

// Bulge is that of an arc from a through p to b: the tangent of a quarter of
// its sweep, positive when it turns left.
func Bulge(a, p, b r2.Vec) float64 {
	return math.Tan(0.5 * plane.Angle(r2.Sub(p, a), r2.Sub(b, p)))
}
