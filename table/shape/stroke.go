package shape

import (
	"math"
	"slices"

	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

const (
	// leastPoints is the number of points, closer ones taken as one, below
	// which a stroke says too little.
	leastPoints = 8
	// leastSize is the size of a stroke in tolerances below which every wall
	// would do.
	leastSize = 10
	// widestGap is the part of a stroke's length that may be missing between
	// its end and its start.
	widestGap = 1.0 / 3
	// overlapZone is the part of the length, at either end, in which an end
	// drawn over the start is looked for; overlapWidth how far beside it.
	overlapZone, overlapWidth = 0.2, 0.04
	// sampleCount is the number of equal steps of arclength that a closed
	// stroke is cut into; bridgeWeight the weight of those in its gap, which
	// only guide the wall.
	sampleCount, bridgeWeight = 240, 0.3
)

// samples are the means of the points of a closed stroke in equal steps of its
// arclength, each with its weight and its parameter u,
// ascending in [0, 1). raw are the stroke's points themselves, and home the
// sample that each belongs to.
type samples struct {
	at     []r2.Vec
	weight []float64
	u      []float64
	raw    []r2.Vec
	home   []int
}

// trail is an open stroke: all its points, and the indices of those that make
// its path, each at least a step from the one before.
type trail struct {
	raw  []r2.Vec
	kept []int
}

func (t trail) path() []r2.Vec {
	path := make([]r2.Vec, len(t.kept))
	for i, k := range t.kept {
		path[i] = t.raw[k]
	}
	return path
}

// cleaned is the stroke without the end that was drawn over the start. The
// error is a *Fault.
func cleaned(stroke []r2.Vec, tol float64) (trail, error) {
	t := trail{raw: slices.DeleteFunc(slices.Clone(stroke), func(p r2.Vec) bool { return !plane.Finite(p) })}
	size := plane.Diagonal(plane.Around(t.raw...))
	if len(t.raw) == 0 || size < leastSize*tol {
		return t, misfit("the stroke is too small for the tolerance; draw it larger")
	}
	t.thin(math.Max(tol/2, coincident*size))
	lo, hi := 0, len(t.kept)-1
	path := t.path()
	if len(path) >= leastPoints {
		lo, hi = withoutOverlap(path)
	}
	if hi-lo+1 < leastPoints {
		return t, misfit("the stroke is too short; draw a longer one")
	}
	path = path[lo : hi+1]
	s := lengths(path)
	if gap := r2.Norm(r2.Sub(path[0], path[len(path)-1])); gap > widestGap*s[len(s)-1] {
		return t, misfit("the stroke ends far from where it began; draw all the way round")
	}
	if math.Abs(swept(path)) < tol*s[len(s)-1] {
		return t, misfit("the stroke crosses itself or encloses nothing; draw once all the way round")
	}
	t.raw = t.raw[t.kept[lo] : t.kept[hi]+1]
	t.thin(math.Max(tol/2, coincident*size))
	return t, nil
}

// thin picks the path, by its step.
func (t *trail) thin(step float64) {
	t.kept = []int{0}
	for i, p := range t.raw {
		if r2.Norm(r2.Sub(p, t.raw[t.kept[len(t.kept)-1]])) >= step {
			t.kept = append(t.kept, i)
		}
	}
}

// lengths are the arclengths of the points of an open path.
func lengths(path []r2.Vec) []float64 {
	s := make([]float64, len(path))
	for i := 1; i < len(path); i++ {
		s[i] = s[i-1] + r2.Norm(r2.Sub(path[i], path[i-1]))
	}
	return s
}

// swept is twice the signed area of the closed polygon.
func swept(path []r2.Vec) float64 {
	sum := 0.0
	for i, p := range path {
		q := path[(i+1)%len(path)]
		sum += plane.Cross(r2.Sub(p, path[0]), r2.Sub(q, path[0]))
	}
	return sum
}

// withoutOverlap are the first and the last point of the path without an end
// that crosses its start, or runs on beside it.
func withoutOverlap(path []r2.Vec) (lo, hi int) {
	s := lengths(path)
	n, total := len(path), s[len(s)-1]
	head, tail := 0, n-1
	for s[head+1] < overlapZone*total {
		head++
	}
	for s[tail-1] > (1-overlapZone)*total {
		tail--
	}
	for j := tail; j+1 < n; j++ {
		for i := range head {
			if crosses(path[i], path[i+1], path[j], path[j+1]) {
				return i + 1, j
			}
		}
	}
	i, d := nearest(path[:head+1], path[n-1])
	j, _ := nearest(path[tail:], path[0])
	j += tail
	beside := d < overlapWidth*total && s[i] > d && j < n-1
	if !beside || plane.Dot(r2.Sub(path[i], path[0]), r2.Sub(path[n-1], path[j])) <= 0 {
		return 0, n - 1
	}
	// Room for the closing stretch to change over.
	lo, hi = 0, j
	for s[lo] < 1.5*d {
		lo++
	}
	for s[hi] > s[j]-1.5*d {
		hi--
	}
	return lo, hi
}

func nearest(path []r2.Vec, p r2.Vec) (at int, dist float64) {
	dist = math.Inf(1)
	for i, q := range path {
		if d := r2.Norm(r2.Sub(p, q)); d < dist {
			at, dist = i, d
		}
	}
	return at, dist
}

// crosses reports whether the segments ab and cd cross at a point inside both.
func crosses(a, b, c, d r2.Vec) bool {
	ab, cd := r2.Sub(b, a), r2.Sub(d, c)
	return plane.Cross(ab, r2.Sub(c, a))*plane.Cross(ab, r2.Sub(d, a)) < 0 &&
		plane.Cross(cd, r2.Sub(a, c))*plane.Cross(cd, r2.Sub(b, c)) < 0
}

// sampled closes the stroke by a cubic along its ends' directions, and takes
// the mean of its points step by step; where a step holds none, the path's.
func (t trail) sampled() samples {
	path := t.path()
	closed := append(append(slices.Clone(path), bridged(path)...), path[0])
	s := lengths(closed)
	total, ends := s[len(s)-1], s[len(path)-1]
	c := samples{raw: t.raw, home: make([]int, len(t.raw))}
	c.at, c.u, c.weight = make([]r2.Vec, sampleCount), make([]float64, sampleCount), make([]float64, sampleCount)
	k := 0
	for i, p := range t.raw {
		if k+1 < len(t.kept) && i >= t.kept[k+1] {
			k++
		}
		d := r2.Sub(closed[k+1], closed[k])
		f := plane.Dot(r2.Sub(p, closed[k]), d) / plane.Dot(d, d)
		u := math.Min(s[k]+math.Min(math.Max(f, 0), 1)*(s[k+1]-s[k]), ends) / total
		j := min(int(u*sampleCount), sampleCount-1)
		c.home[i] = j
		c.at[j], c.u[j] = r2.Add(c.at[j], p), c.u[j]+u
		c.weight[j]++
	}
	k = 0
	for j, w := range c.weight {
		if w > 0 {
			c.at[j], c.u[j], c.weight[j] = r2.Scale(1/w, c.at[j]), c.u[j]/w, 1
			continue
		}
		u := (float64(j) + 0.5) / sampleCount
		for s[k+1] < u*total {
			k++
		}
		c.at[j], c.u[j], c.weight[j] = plane.Lerp(closed[k], closed[k+1], (u*total-s[k])/(s[k+1]-s[k])), u, 1
		if k >= len(path)-1 {
			c.weight[j] = bridgeWeight
		}
	}
	return c
}

// bridged are points in the gap between the end of the path and its start.
func bridged(path []r2.Vec) []r2.Vec {
	n := len(path)
	s := lengths(path)
	end, start := path[n-1], path[0]
	gap := r2.Norm(r2.Sub(start, end))
	if gap < s[n-1]/sampleCount {
		return nil
	}
	// Directions over a stretch as long as the gap, so that tremor counts
	// little.
	reach := math.Max(gap, 0.04*s[n-1])
	i, j := 1, n-2
	for s[i] < reach && i < n/4 {
		i++
	}
	for s[n-1]-s[j] < reach && j > n-1-n/4 {
		j--
	}
	out := r2.Scale(gap*third, plane.Unit(r2.Sub(end, path[j])))
	in := r2.Scale(-gap*third, plane.Unit(r2.Sub(path[i], start)))
	chain := nodes{{At: end, Out: out}, {At: start, In: in}}
	c := chain.controls(0)
	points := make([]r2.Vec, 15)
	for k := range points {
		t := float64(k+1) / 16
		u := 1 - t
		points[k] = r2.Add(
			r2.Add(r2.Scale(u*u*u, c[0]), r2.Scale(3*u*u*t, c[1])),
			r2.Add(r2.Scale(3*u*t*t, c[2]), r2.Scale(t*t*t, c[3])))
	}
	return points
}
