package sim_test

import (
	"fmt"
	"math"
	"math/rand/v2"
	"os"
	"runtime"
	"strconv"
	"strings"
	"sync"
	"testing"
	"time"

	"cavitywright/table"
	"cavitywright/table/curve"
	"cavitywright/table/param"
	"cavitywright/table/plane"
	"cavitywright/table/shape"

	"gonum.org/v1/gonum/spatial/r2"
)

// seedOf is the seed of all that a test draws: 1, or the environment's
// CAVITY_SEED. Table number n of a test comes from PCG(seed, n) alone, so that
// one case can be drawn again by itself.
func seedOf(t testing.TB) uint64 {
	seed := uint64(1)
	if text := os.Getenv("CAVITY_SEED"); text != "" {
		var err error
		if seed, err = strconv.ParseUint(text, 10, 64); err != nil {
			t.Fatalf("CAVITY_SEED is %q; it must be a whole number", text)
		}
	}
	t.Logf("seed %d", seed)
	watch.Do(watchMemory)
	return seed
}

// mostMemory is far above what any table needs. A curve that is cut up without
// end would otherwise take the whole machine along.
const mostMemory = 1 << 30

var watch sync.Once

func watchMemory() {
	var s runtime.MemStats
	runtime.ReadMemStats(&s)
	if s.HeapAlloc > mostMemory {
		fmt.Fprintln(os.Stderr, "FAIL: the test holds more than 1 GiB; some curve is cut up without end")
		os.Exit(1)
	}
	time.AfterFunc(50*time.Millisecond, watchMemory)
}

// drawing draws random tables and counts how many designs were no table.
type drawing struct {
	*rand.Rand
	refused int
}

func draw(seed, number uint64) *drawing {
	return &drawing{Rand: rand.New(rand.NewPCG(seed, number))}
}

func (r *drawing) between(lo, hi float64) float64 { return lo + (hi-lo)*r.Float64() }

// power is 10 to a power drawn evenly.
func (r *drawing) power(lo, hi float64) float64 { return math.Pow(10, r.between(lo, hi)) }

func (r *drawing) sign() float64 { return float64(1 - 2*r.IntN(2)) }

func (r *drawing) odds(p float64) bool { return r.Float64() < p }

// table is a random table: any wall, or none, with up to four obstacles.
func (r *drawing) table() *table.Table {
	for {
		d := table.Design{Unit: table.Millimetre, Items: []table.Item{{Shape: r.wall(), Place: r.place()}}}
		if r.odds(0.07) {
			d.Items[0].Role = table.Post
		}
		tab, err := table.New(d)
		if err != nil {
			r.refused++
			continue
		}
		for n := r.IntN(5); n > 0; n-- {
			tab = r.withPost(tab)
		}
		return tab
	}
}

// closed is a random table with an outer wall.
func (r *drawing) closed() *table.Table {
	for {
		if tab := r.table(); !tab.Open() {
			return tab
		}
	}
}

// withPost is the table with one more obstacle, or the table itself after
// three designs that were refused.
func (r *drawing) withPost(tab *table.Table) *table.Table {
	for range 3 {
		d := tab.Design()
		d.Items = append(append([]table.Item(nil), d.Items...), r.post(tab))
		more, err := table.New(d)
		if err == nil {
			return more
		}
		r.refused++
	}
	return tab
}

func (r *drawing) post(tab *table.Table) table.Item {
	size := plane.Diagonal(tab.Bounds())
	radius := size * r.power(-2, -0.7)
	if r.odds(0.15) {
		radius = size * r.power(-5, -2)
	}
	if r.odds(0.25) {
		// A disc that nearly touches what is there.
		f := tab.At(r.Float64() * tab.Length())
		gap := size * r.power(-6, -2)
		at := r2.Add(f.Point, r2.Scale(radius+gap, f.Normal()))
		disc, _ := shape.New("disc", param.Values{1})
		return table.Item{Shape: disc, Role: table.Post, Place: plane.Similarity{Shift: at, Scale: radius}}
	}
	at := r.within(tab)
	place := plane.Similarity{Shift: at, Angle: r.between(0, 2*math.Pi), Scale: radius}
	var s shape.Shape
	switch r.IntN(5) {
	case 0:
		s = r.figure("disc")
	case 1:
		s = r.figure("ellipse")
	case 2:
		s = r.figure("limacon")
	case 3:
		s = r.freeform()
	default:
		s = r.wall()
	}
	return table.Item{Shape: s, Role: table.Post, Place: place}
}

// within is a random point of the table; for an open table, of the box around
// it, half as large again.
func (r *drawing) within(tab *table.Table) r2.Vec {
	b := tab.Bounds()
	grow := 0.0
	if tab.Open() {
		grow = 0.5
	}
	w, h := b.Max.X-b.Min.X, b.Max.Y-b.Min.Y
	for {
		x := r2.Vec{X: r.between(b.Min.X-grow*w, b.Max.X+grow*w), Y: r.between(b.Min.Y-grow*h, b.Max.Y+grow*h)}
		if tab.Contains(x) {
			return x
		}
	}
}

func (r *drawing) place() plane.Similarity {
	m := plane.Identity()
	if r.odds(0.4) {
		m.Angle = r.between(0, 2*math.Pi)
	}
	if r.odds(0.3) {
		m.Shift = r2.Vec{X: r.between(-8, 8), Y: r.between(-8, 8)}
	}
	if r.odds(0.2) {
		m.Scale = r.power(-2, 2)
		m.Shift = r2.Scale(m.Scale, m.Shift)
	}
	return m
}

// wall is any shape.
func (r *drawing) wall() shape.Shape {
	switch k := r.IntN(10); {
	case k < 4:
		kinds := shape.Catalogue()
		return r.figure(kinds[r.IntN(len(kinds))].Name)
	case k < 6:
		return r.freeform()
	case k == 6:
		return shape.Smoothed(r.star(3+r.IntN(7), 0.45))
	case k == 7:
		return shape.NewPolygonal(r.star(3+r.IntN(7), 0.3))
	default:
		return r.sketch()
	}
}

// figure is a figure of the catalogue with parameters about their defaults,
// some far from them.
func (r *drawing) figure(name string) shape.Shape {
	specs := shape.Find(name).Specs
	for {
		v := param.Defaults(specs)
		quiet := r.odds(0.5)
		for i, s := range specs {
			v[i] = s.Clamp(r.value(s, quiet))
		}
		f, err := shape.New(name, v)
		if err == nil {
			if _, err = f.Loops(); err == nil {
				return f
			}
		}
		r.refused++
	}
}

func (r *drawing) value(s param.Spec, quiet bool) float64 {
	switch {
	case s.Unit == param.Count:
		return math.Round(s.Lo + float64(r.IntN(12)))
	case s.Unit == param.Pure && s.Lo == -s.Hi: // an amplitude
		if quiet || r.odds(0.6) {
			return s.Default
		}
		return s.Hi * r.sign() * r.power(-5, -0.8)
	case s.Unit == param.Pure:
		switch {
		case r.odds(0.1):
			return s.Hi
		case r.odds(0.1):
			return s.Lo + (s.Hi-s.Lo)*r.power(-9, -2)
		}
		return r.between(s.Lo, s.Hi)
	case s.Default == 0:
		return r.between(-0.5, 0.5)
	case !quiet && r.odds(0.2):
		return s.Default * r.power(-4, -1)
	}
	return s.Default * math.Exp(r.between(-0.7, 0.7))
}

// star are the corners of a polygon that runs counter-clockwise about the
// origin.
func (r *drawing) star(n int, least float64) []r2.Vec {
	points := make([]r2.Vec, n)
	phi := r.between(0, 2*math.Pi)
	for i := range points {
		points[i] = r2.Scale(r.between(least, 1.2), plane.Polar(phi+2*math.Pi*(float64(i)+r.between(-0.35, 0.35))/float64(n)))
	}
	return points
}

// freeform is a wall of straight, bowed and curved spans with corner and
// smooth joints; some arcs are nearly straight, some spans short.
func (r *drawing) freeform() shape.Shape {
	points := r.star(3+r.IntN(7), 0.4)
	if r.odds(0.15) {
		i := r.IntN(len(points))
		points[i] = r2.Add(points[(i+1)%len(points)], r2.Scale(r.power(-5, -1), plane.Polar(r.between(0, 2*math.Pi))))
	}
	list := make([]shape.Node, len(points))
	for i, p := range points {
		chord := r2.Sub(points[(i+1)%len(points)], p)
		n := &list[i]
		n.At, n.Span, n.Joint = p, shape.SpanKind(r.IntN(3)), shape.Joint(r.IntN(2))
		switch n.Span {
		case shape.Bowed:
			n.Bulge = r.between(-0.5, 0.9)
			if r.odds(0.2) {
				n.Bulge = r.sign() * r.power(-10, -2)
			}
		case shape.Curved:
			n.Out = r.handle(chord)
			list[(i+1)%len(list)].In = r2.Scale(-1, r.handle(chord))
		}
	}
	return shape.NewFreeform(list)
}

func (r *drawing) handle(chord r2.Vec) r2.Vec {
	f, a := r.between(0.05, 0.9), r.between(-0.9, 0.9)
	if r.odds(0.1) {
		a *= r.power(-9, -2)
	}
	return r2.Scale(f, r2.Rotate(chord, a, r2.Vec{}))
}

// sketch is a shape that the catalogue lacks: curves as they come, so that all
// kinds of curve occur in part and in whole.
type sketch []curve.Curve

func (s sketch) Kind() string                  { return "sketch" }
func (s sketch) Loops() ([]shape.Loop, error)  { return []shape.Loop{{Curves: s}}, nil }
func (s sketch) Handles() []shape.Handle       { return nil }
func (s sketch) Moved(int, r2.Vec) shape.Shape { return s }
func (s sketch) first() r2.Vec                 { return s[0].At(0).Point }
func (s sketch) last() r2.Vec                  { c := s[len(s)-1]; return c.At(c.Length()).Point }
func (s sketch) closedBy(bulge float64) sketch {
	return append(s, curve.ArcThrough(s.last(), s.first(), bulge))
}
func (s sketch) closedThrough(via r2.Vec) sketch {
	return append(s, curve.NewLine(s.last(), via), curve.NewLine(via, s.first()))
}

func (r *drawing) sketch() shape.Shape {
	var s sketch
	from, sweep := r.between(0, 2*math.Pi), r.between(0.3, 6)
	switch r.IntN(3) {
	case 0:
		s = sketch{curve.NewOval(curve.Arc{Major: r.between(0.3, 2), Minor: r.between(0.3, 2) * r.power(-1, 0), Tilt: r.between(0, 6), From: from, Sweep: sweep})}
	case 1:
		s = sketch{curve.NewArc(r2.Vec{}, r.between(0.3, 2), from, sweep)}
	default:
		f := curve.Form{Mean: 1, Cos: make([]float64, 5), Sin: make([]float64, 5)}
		for i := range f.Cos {
			f.Cos[i], f.Sin[i] = r.between(-0.15, 0.15), r.between(-0.15, 0.15)
		}
		s = sketch{curve.NewPolar(curve.Polar{Tilt: r.between(0, 6), Form: &f, From: from, Sweep: sweep})}
	}
	switch r.IntN(4) {
	case 0:
		return s.closedThrough(r2.Vec{X: r.between(-0.1, 0.1), Y: r.between(-0.1, 0.1)})
	case 1:
		return s.closedBy(r.sign() * r.power(-10, -2))
	}
	return s.closedBy(r.between(-0.4, 0.9))
}

// dump is a design as text, with every digit.
func dump(d table.Design) string {
	var b strings.Builder
	for i, it := range d.Items {
		fmt.Fprintf(&b, "\n  item %d: %s", i, [...]string{"wall", "post"}[it.Role])
		if it.Place != plane.Identity() {
			fmt.Fprintf(&b, " shift (%v, %v) angle %v scale %v", it.Place.Shift.X, it.Place.Shift.Y, it.Place.Angle, it.Place.Scale)
		}
		switch s := it.Shape.(type) {
		case shape.Figure:
			fmt.Fprintf(&b, " %s %v", s.Kind(), s.Values())
		case shape.Freeform:
			fmt.Fprintf(&b, " freeform")
			for _, n := range s.Nodes() {
				fmt.Fprintf(&b, "\n    %v %v at (%v, %v)", n.Joint, n.Span, n.At.X, n.At.Y)
				if n.Span == shape.Bowed {
					fmt.Fprintf(&b, " bulge %v", n.Bulge)
				}
				if n.In != (r2.Vec{}) || n.Out != (r2.Vec{}) {
					fmt.Fprintf(&b, " in (%v, %v) out (%v, %v)", n.In.X, n.In.Y, n.Out.X, n.Out.Y)
				}
			}
		case sketch:
			for _, c := range s {
				switch c := c.(type) {
				case curve.Polar:
					fmt.Fprintf(&b, "\n    polar from %v sweep %v tilt %v form %+v", c.From, c.Sweep, c.Tilt, *c.Form)
				case curve.Line:
					fmt.Fprintf(&b, "\n    line (%v, %v) to (%v, %v)", c.A.X, c.A.Y, c.B.X, c.B.Y)
				case curve.Arc:
					fmt.Fprintf(&b, "\n    arc centre (%v, %v) axes %v %v tilt %v from %v sweep %v", c.Centre.X, c.Centre.Y, c.Major, c.Minor, c.Tilt, c.From, c.Sweep)
				case curve.Cubic:
					fmt.Fprintf(&b, "\n    cubic %v", c.P)
				}
			}
		default:
			fmt.Fprintf(&b, " %#v", s)
		}
	}
	return b.String()
}
