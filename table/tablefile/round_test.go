package tablefile

import (
	"bytes"
	"math"
	"testing"

	"cavitywright/table"
	"cavitywright/table/param"
	"cavitywright/table/plane"
	"cavitywright/table/shape"
	"cavitywright/table/wall"

	"github.com/google/go-cmp/cmp"
	"gonum.org/v1/gonum/spatial/r2"
	"pgregory.net/rapid"
)

// real draws numbers of all lengths: round ones and ones with all bits in use.
func real(t *rapid.T, lo, hi float64, name string) float64 {
	if rapid.Bool().Draw(t, name+" round") {
		return math.Max(lo, math.Min(hi, math.Round(100*rapid.Float64Range(lo, hi).Draw(t, name))/100))
	}
	return rapid.Float64Range(lo, hi).Draw(t, name)
}

func pick[T any](t *rapid.T, name string, from ...T) T { return rapid.SampledFrom(from).Draw(t, name) }

// drawFigure varies the defaults of a shape, which always go together.
func drawFigure(t *rapid.T) shape.Shape {
	k := pick(t, "kind", shape.Catalogue()...)
	v := param.Defaults(k.Specs)
	for i, s := range k.Specs {
		switch s.Unit {
		case param.Count:
			v[i] = s.Clamp(float64(rapid.IntRange(1, 30).Draw(t, s.Name)))
		default:
			v[i] = s.Clamp(v[i] * real(t, 0.9, 1.1, s.Name))
		}
	}
	f, err := shape.New(k.Name, v)
	if err != nil {
		t.Fatal(err)
	}
	return f
}

// drawFree is a free wall about the origin, most of them without a crossing,
// after a few of the edits that a person makes.
func drawFree(t *rapid.T) shape.Shape {
	n := rapid.IntRange(3, 8).Draw(t, "nodes")
	nodes := make([]shape.Node, n)
	for i := range nodes {
		k := &nodes[i]
		k.At = r2.Scale(real(t, 0.8, 1.2, "r"), plane.Polar(2*math.Pi*float64(i)/float64(n)))
		k.Joint = pick(t, "joint", shape.Corner, shape.Smooth, shape.Fair)
		k.Span = pick(t, "span", shape.Straight, shape.Bowed, shape.Curved, shape.Elliptic)
		if k.Span == shape.Elliptic {
			k.Ratio, k.Tilt = real(t, 0.5, 2, "ratio"), real(t, -4, 4, "tilt")
		}
		if k.Joint == shape.Corner && rapid.Bool().Draw(t, "filleted") {
			k.Fillet = real(t, 0.01, 0.1, "fillet")
		}
		if k.Span == shape.Bowed || k.Span == shape.Elliptic {
			k.Bulge = real(t, -0.1, 0.6, "bulge")
		}
	}
	for i := range nodes {
		if nodes[i].Span == shape.Curved && rapid.Bool().Draw(t, "handles") {
			chord := r2.Sub(nodes[(i+1)%n].At, nodes[i].At)
			nodes[i].Out = r2.Scale(real(t, 0.1, 0.3, "out"), chord)
			nodes[(i+1)%n].In = r2.Scale(-real(t, 0.1, 0.3, "in"), chord)
		}
	}
	f := shape.NewFreeform(nodes)
	if rapid.Bool().Draw(t, "symmetric") {
		if g, err := f.WithSymmetry(shape.Symmetry{Fold: rapid.IntRange(1, 3).Draw(t, "fold"), Mirror: true, Axis: real(t, -1, 1, "axis")}); err == nil {
			f = g
		}
	}
	var s shape.Shape = f
	for range rapid.IntRange(0, 2).Draw(t, "drags") {
		h := s.Handles()
		i := rapid.IntRange(0, len(h)-1).Draw(t, "handle")
		s = s.Moved(i, r2.Add(h[i].At, r2.Vec{X: real(t, -0.1, 0.1, "dx"), Y: real(t, -0.1, 0.1, "dy")}))
	}
	return s
}

func drawLaw(t *rapid.T) wall.Law {
	k := pick(t, "law", wall.Kinds()...)
	v := param.Defaults(k.Specs)
	for i, s := range k.Specs {
		if s.Unit != param.Count {
			v[i] = real(t, s.Lo, s.Hi, s.Name)
		}
	}
	l, err := wall.Make(k.Name, v)
	if err != nil {
		t.Fatal(err)
	}
	return l
}

// drawLaunch sets just what matters to the launch, as a file does.
func drawLaunch(t *rapid.T) table.Launch {
	l := table.Launch{Count: 1, Pattern: pick(t, "pattern", table.Single, table.Fan, table.Beam, table.Sweep, table.Even)}
	if l.Pattern != table.Single {
		l.Count = rapid.IntRange(1, mostOrbits).Draw(t, "count")
	}
	if l.Pattern == table.Sweep || l.Pattern == table.Even {
		l.Region = table.Region{S0: real(t, 0, 1, "s0"), S1: real(t, 0, 1, "s1"), P0: real(t, -1, 1, "p0"), P1: real(t, -1, 1, "p1")}
		return l
	}
	if l.Pattern != table.Single {
		l.Spread = real(t, 0, 3, "spread")
	}
	if l.From = pick(t, "origin", table.OnWall, table.Inside); l.From == table.Inside {
		l.Point, l.Angle = r2.Vec{X: real(t, -1, 1, "x"), Y: real(t, -1, 1, "y")}, real(t, -7, 7, "angle")
		return l
	}
	l.S, l.P = real(t, 0, 0.99, "s"), real(t, -0.99, 0.99, "p")
	return l
}

func drawDesign(t *rapid.T) table.Design {
	shapeOf := rapid.Custom(func(t *rapid.T) shape.Shape {
		if rapid.Bool().Draw(t, "free") {
			return drawFree(t)
		}
		return drawFigure(t)
	})
	d := table.Design{
		Name: rapid.String().Draw(t, "name"), Notes: rapid.String().Draw(t, "notes"),
		Unit: pick(t, "unit", table.Units()...),
		Items: []table.Item{{Shape: shapeOf.Draw(t, "shape"), Place: plane.Similarity{
			Shift: r2.Vec{X: real(t, -9, 9, "x"), Y: real(t, -9, 9, "y")}, Angle: real(t, -4, 4, "turn"), Scale: real(t, 0.01, 50, "scale")}}},
		Study: table.Study{Seed: rapid.Uint64().Draw(t, "seed"), Bounces: rapid.IntRange(0, mostBounces).Draw(t, "bounces"),
			Display: table.Display{Sense: pick(t, "sense", table.CounterClockwise, table.Clockwise),
				Position: pick(t, "position", table.Arclength, table.Fraction), Momentum: pick(t, "momentum", table.Sine, table.Angle)}},
	}
	if rapid.Bool().Draw(t, "coated") {
		d.Bare = drawLaw(t)
	}
	for range rapid.IntRange(0, 2).Draw(t, "posts") {
		d.Items = append(d.Items, table.Item{Role: table.Post, Shape: shapeOf.Draw(t, "post"),
			Place: plane.Similarity{Shift: r2.Vec{X: 100 * real(t, 1, 9, "px"), Y: real(t, -9, 9, "py")}, Scale: 1}})
	}
	if len(d.Items) > 1 { // posts in the open plane
		d.Items[0].Role = table.Post
	}
	for range rapid.IntRange(0, 3).Draw(t, "coats") {
		d.Coats = append(d.Coats, table.Coat{Item: rapid.IntRange(0, len(d.Items)-1).Draw(t, "item"), Side: rapid.IntRange(-1, 0).Draw(t, "side"),
			From: real(t, 0, 0.4, "from"), To: real(t, 0.5, 1, "to"), Law: drawLaw(t)})
	}
	for range rapid.IntRange(0, 3).Draw(t, "launches") {
		d.Study.Launches = append(d.Study.Launches, drawLaunch(t))
	}
	d.Study.Sweeps = drawSweeps(t)
	d.Study.Tolerances, d.Study.Wishes = drawTolerances(t), drawWishes(t)
	return d
}

// runsForward turns the nodes of free walls that a drag has turned clockwise,
// as a file does.
func runsForward(d table.Design) table.Design {
	items := append([]table.Item(nil), d.Items...)
	for i, it := range items {
		if f, ok := it.Shape.(shape.Freeform); ok {
			items[i].Shape = f.Forward()
		}
	}
	d.Items = items
	return d
}

func TestRoundTrip(t *testing.T) {
	taken, refused := 0, 0
	rapid.Check(t, func(t *rapid.T) {
		d := drawDesign(t)
		var first, second bytes.Buffer
		if err := Write(&first, d); err != nil {
			t.Fatal(err)
		}
		back, err := Read(bytes.NewReader(first.Bytes()))
		if err != nil {
			if _, refusal := table.New(runsForward(d)); refusal == nil || refusal.Error() != err.Error() {
				t.Fatalf("not read: %v; but compiling it says: %v; in\n%s", err, refusal, first.Bytes())
			}
			refused++
			return
		}
		taken++
		if diff := cmp.Diff(runsForward(d), back, same); diff != "" {
			t.Fatalf("(-design +read):\n%s", diff)
		}
		if err := Write(&second, back); err != nil {
			t.Fatal(err)
		}
		if diff := cmp.Diff(first.String(), second.String()); diff != "" {
			t.Fatalf("written again:\n%s", diff)
		}
		sameTable(t, d, back)
	})
	if taken < refused {
		t.Errorf("only %d of %d designs were tables", taken, taken+refused)
	}
	t.Logf("%d round trips, %d refusals", taken, refused)
}

// sameTable holds the two designs to the same wall, to the last bit.
func sameTable(t *rapid.T, a, b table.Design) {
	p, err := table.New(a)
	if err != nil {
		t.Fatalf("what was read compiles, what was written does not: %v", err)
	}
	q, err := table.New(b)
	if err != nil {
		t.Fatal(err)
	}
	if p.Length() != q.Length() || p.Area() != q.Area() || len(p.Pieces()) != len(q.Pieces()) {
		t.Fatalf("length, area and pieces are %v, %v, %d and then %v, %v, %d",
			p.Length(), p.Area(), len(p.Pieces()), q.Length(), q.Area(), len(q.Pieces()))
	}
	for i := range 64 {
		s := p.Length() * (float64(i) + 0.5) / 64
		if p.At(s) != q.At(s) {
			t.Fatalf("at s = %v the wall is %v and then %v", s, p.At(s), q.At(s))
		}
	}
}

// Fields of a launch that do not matter to it are dropped, once for all.
func TestSurplusOfLaunch(t *testing.T) {
	d := onlyWall(figure(t, "disc", nil))
	d.Study.Launches = []table.Launch{{S: 0.5, Pattern: table.Even, From: table.Inside, Angle: 2, Spread: 3, Region: table.WholeSection()}}
	back, err := Read(bytes.NewReader(written(t, d)))
	if err != nil {
		t.Fatal(err)
	}
	want := table.Launch{Pattern: table.Even, Count: 1, Region: table.WholeSection()}
	if diff := cmp.Diff(want, back.Study.Launches[0], same); diff != "" {
		t.Error(diff)
	}
}

// Each of these reads back to the same bits.
func TestNumbers(t *testing.T) {
	for _, x := range []float64{0, math.Copysign(0, -1), 0.1, 1.0 / 3, 1e-6, 1e-7, 1e15, 1e21, 123456789.123456789,
		math.SmallestNonzeroFloat64, 0x1p-1022, math.Nextafter(1, 2)} {
		d := onlyWall(figure(t, "disc", nil))
		d.Study.Launches = []table.Launch{{From: table.Inside, Point: r2.Vec{X: x, Y: -x}, Count: 1}}
		back, err := Read(bytes.NewReader(written(t, d)))
		if err != nil {
			t.Fatal(err)
		}
		if diff := cmp.Diff(d, back, same); diff != "" {
			t.Errorf("%v: %s", x, diff)
		}
	}
	for want, x := range map[string]float64{"1": 1, "0.1": 0.1, "-2500000": -2.5e6, "1e-7": 1e-7, "0.3333333333333333": 1.0 / 3} {
		if got := string(appendNumber(nil, x)); got != want {
			t.Errorf("%v is written %s, not %s", x, got, want)
		}
	}
}
