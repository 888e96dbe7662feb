package orbit

import (
	"math"
	"slices"

	"cavitywright/table/curve"
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// MostFlatWords bounds the words over straight pieces of wall that are tried.
const MostFlatWords = 300_000

// flat is a straight piece of wall.
type flat struct {
	a, along   r2.Vec
	s0, length float64
}

// unfolded is an image of a flat under reflections at the flats met before; a
// flipped one has the inside on its right.
type unfolded struct {
	a, along r2.Vec
	flipped  bool
}

// level tries every word over the flats: an orbit that meets flats only is a
// straight line through the unfolded table, mapped into itself by the
// reflections of one period (Fox and Kershner, Duke Math. J. 2, 147, 1936, from
// memory). So every marginal family between flats is met, however narrow. Of a
// polygon these are all orbits.
func (b *book) level(list *List, ask Search) error {
	var flats []flat
	pieces := b.mirror.Pieces()
	for i := range pieces {
		if p := &pieces[i]; p.Kind == curve.Segment {
			flats = append(flats, flat{p.A, plane.Unit(r2.Sub(p.B, p.A)), p.S0, p.Length})
		}
	}
	tried, ahead := 0, 0.0
	for n := Least; n <= list.UpTo; n++ {
		if ahead += words(len(flats), n); ahead > MostFlatWords {
			return nil // Flats stays below n, and the grids search on
		}
		err := cyclicWords(len(flats), n, func(w []int) error {
			if tried++; tried%256 == 0 {
				if err := ask.Watch(); err != nil {
					return err
				}
			}
			b.unfold(flats, w)
			if n%2 == 1 && 2*n <= list.UpTo {
				// An orbit of odd period in a polygon lies in a family of twice
				// the period, whose word repeats. No other prime orbit's does: a
				// shift repeated maps the same lines.
				b.unfold(flats, slices.Repeat(w, 2))
			}
			return nil
		})
		if err != nil {
			return err
		}
		list.Flats = n
	}
	if len(flats) == len(pieces) {
		list.Words = tried
		for n := range list.Settled {
			list.Settled[n] = true
		}
	}
	return nil
}

// reflected is x mirrored at the image's line.
func (f *unfolded) reflected(x r2.Vec) r2.Vec {
	off := plane.Cross(f.along, r2.Sub(x, f.a))
	return r2.Sub(x, r2.Scale(2*off, plane.Left(f.along)))
}

// unfold tries one word, run in either sense.
func (b *book) unfold(flats []flat, w []int) {
	n := len(w)
	// The images are built by reflecting all that follows at each in turn.
	images := make([]unfolded, n+1)
	for i := range images {
		f := flats[w[i%n]]
		images[i] = unfolded{f.a, f.along, i%2 == 1}
		tip := r2.Add(f.a, f.along)
		for k := i - 1; k >= 0; k-- {
			at := unfolded{a: flats[w[k]].a, along: flats[w[k]].along}
			images[i].a, tip = at.reflected(images[i].a), at.reflected(tip)
		}
		images[i].along = plane.Unit(r2.Sub(tip, images[i].a))
	}
	shift := r2.Sub(images[n].a, images[0].a)
	if n%2 == 1 {
		// A glide reflection: the axis halves the angle of the two images, and
		// passes through the middle of a point and its image.
		u := r2.Add(images[0].along, images[n].along)
		if r2.Norm(u) < parallelTol {
			u = plane.Left(images[0].along)
		}
		u = plane.Unit(u)
		if plane.Dot(shift, u) < 0 {
			u = r2.Scale(-1, u)
		}
		off := plane.Cross(u, r2.Add(images[0].a, r2.Scale(0.5, shift)))
		b.shoot(flats, w, line{u, images}, off)
		return
	}
	if r2.Norm(r2.Sub(images[n].along, images[0].along)) > parallelTol || r2.Norm(shift) <= parallelTol*b.mirror.Length() {
		return // turned, or nothing moved: no line is mapped into itself
	}
	l := line{plane.Unit(shift), images}
	lo, hi := l.window(flats, w)
	for _, off := range b.between(flats, w, l, lo, hi) {
		b.shoot(flats, w, l, off)
	}
}

// parallelTol (radians, or relative to the length of the wall) is what counts
// as parallel: the rounding of some tens of reflections.
const parallelTol = 1e-11

// line is a direction through the images of a word's flats. A line in it is
// named by its offset, the cross product of the direction with its points.
type line struct {
	u      r2.Vec
	images []unfolded
}

// meets is where the line at the offset meets image i: the length along the
// flat, and along the line. It is linear in the offset.
func (l *line) meets(i int, off float64) (along, far float64) {
	f := &l.images[i]
	along = (off - plane.Cross(l.u, f.a)) / plane.Cross(l.u, f.along)
	return along, plane.Dot(l.u, f.a) + along*plane.Dot(l.u, f.along)
}

// across is the cosine of the angle from the normal at which the line leaves
// the table at image i; negative where it enters.
func (l *line) across(i int) float64 {
	f := &l.images[i]
	if f.flipped {
		return -plane.Cross(l.u, f.along)
	}
	return plane.Cross(l.u, f.along)
}

// window is the range of offsets for which the line crosses every flat between
// its ends and from within.
func (l *line) window(flats []flat, w []int) (lo, hi float64) {
	lo, hi = math.Inf(-1), math.Inf(1)
	for i, k := range w {
		f := &l.images[i]
		if l.across(i) <= parallelTol {
			return 0, 0
		}
		p := plane.Cross(l.u, f.a)
		q := plane.Cross(l.u, r2.Add(f.a, r2.Scale(flats[k].length, f.along)))
		lo, hi = math.Max(lo, math.Min(p, q)), math.Min(hi, math.Max(p, q))
	}
	return lo, hi
}

// between are offsets of the window, one in each gap between the places where a
// chord passes a joint or touches a wall: within a gap all lines are free, or
// none is.
func (b *book) between(flats []flat, w []int, l line, lo, hi float64) (offs []float64) {
	least := sameTol * b.mirror.Length()
	if !(hi-lo > least) {
		return nil
	}
	marks := []float64{lo, hi}
	mid := 0.5 * (lo + hi)
	n := len(w)
	for i := range w {
		// Chord i as it lies in the table, and its neighbour at another offset.
		from, next := flats[w[i]], flats[w[(i+1)%n]]
		x, _ := l.meets(i, mid)
		y, _ := l.meets(i+1, mid)
		z, _ := l.meets(i, hi)
		p := r2.Add(from.a, r2.Scale(x, from.along))
		d := plane.Unit(r2.Sub(r2.Add(next.a, r2.Scale(y, next.along)), p))
		rate := plane.Cross(d, r2.Scale(z-x, from.along)) / (hi - mid) // 1 or -1
		for _, v := range b.edges(d) {
			if off := mid + plane.Cross(d, r2.Sub(v, p))/rate; off > lo && off < hi {
				marks = append(marks, off)
			}
		}
	}
	slices.Sort(marks)
	for i, m := range marks[1:] {
		if m-marks[i] > least {
			offs = append(offs, 0.5*(m+marks[i]))
		}
	}
	return offs
}

// edges are the joints of the wall, and the places where it is parallel to d.
func (b *book) edges(d r2.Vec) (all []r2.Vec) {
	const stretches = 16 // a piece turns by a full turn at most: by 23 degrees each
	pieces := b.mirror.Pieces()
	for i := range pieces {
		p := &pieces[i]
		all = append(all, p.A)
		if p.Kind == curve.Segment {
			continue
		}
		across := func(x float64) float64 { return plane.Cross(d, p.FrameAt(p.T(x)).Tangent) }
		for k := range stretches {
			x, y := p.Length*float64(k)/stretches, p.Length*float64(k+1)/stretches
			if below := across(x) < 0; below != (across(y) < 0) {
				for range 60 {
					if m := 0.5 * (x + y); (across(m) < 0) == below {
						x = m
					} else {
						y = m
					}
				}
				all = append(all, p.FrameAt(p.T(x)).Point)
			}
		}
	}
	return all
}

// shoot enters the orbit at an offset of the line.
func (b *book) shoot(flats []flat, w []int, l line, off float64) {
	s := make([]float64, len(w))
	last := math.Inf(-1)
	for i, k := range w {
		along, far := l.meets(i, off)
		if !(l.across(i) > parallelTol && along > 0 && along < flats[k].length && far > last) {
			return
		}
		s[i], last = flats[k].s0+along, far
	}
	c := newChain(b.mirror, s)
	if c.fill() && c.polish(sameTol*b.mirror.Length()) {
		b.add(c)
	}
}
