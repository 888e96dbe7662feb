package outline

import (
	"math"
	"math/rand/v2"
	"testing"

	"cavitywright/table"
	"cavitywright/table/plane"
	"cavitywright/table/shape"

	"gonum.org/v1/gonum/spatial/r2"
)

// TestBiasSteiner: outward by b a convex wall has the area A + L b + pi b² and
// the perimeter L + 2 pi b (Steiner 1840); inward by b, for a wall that bends
// nowhere tighter, A - L b + pi b² and L - 2 pi b.
func TestBiasSteiner(t *testing.T) {
	const b = 0.05
	for _, name := range []string{"disc", "ellipse", "stadium", "rectangle", "cut-disc", "quarter-stadium", "triangle", "limacon"} {
		tab := figured(t, name)
		a, l := tab.Area(), tab.Length()
		o, err := Trace(tab, Options{Form: Curves, ChordError: 1e-9, Bias: b})
		if err != nil {
			t.Errorf("%s: %v", name, err)
			continue
		}
		if d := o.Area - (a + l*b + math.Pi*b*b); math.Abs(d) > 1e-9 {
			t.Errorf("%s: area off by %g", name, d)
		}
		if d := o.Perimeter - (l + 2*math.Pi*b); math.Abs(d) > 1e-9 {
			t.Errorf("%s: perimeter off by %g", name, d)
		}
		if math.Abs(o.AreaOff) > 1e-8*l || math.Abs(o.Longer) > 1e-7 {
			t.Errorf("%s: the outline is off by %g, %g", name, o.AreaOff, o.Longer)
		}
	}
	for _, name := range []string{"disc", "ellipse", "stadium", "limacon"} {
		tab := figured(t, name)
		o, err := Trace(tab, Options{Form: Curves, ChordError: 1e-9, Bias: -b})
		if err != nil {
			t.Errorf("%s: %v", name, err)
			continue
		}
		if d := o.Area - (tab.Area() - tab.Length()*b + math.Pi*b*b); math.Abs(d) > 1e-9 {
			t.Errorf("%s inward: area off by %g", name, d)
		}
	}
	// A rectangle inward stays one; the sides are cut where they cross.
	tab := figured(t, "rectangle", 3, 2)
	o, err := Trace(tab, Options{Form: Arcs, ChordError: 1e-9, Bias: -b})
	if err != nil {
		t.Fatal(err)
	}
	if math.Abs(o.Area-(3-2*b)*(2-2*b)) > 1e-12 || o.Steps != 4 {
		t.Errorf("a rectangle inward: area %g, %d steps", o.Area, o.Steps)
	}
	// An obstacle shrinks where the table grows.
	tab = figured(t, "square-with-disc", 4, 1)
	o, err = Trace(tab, Options{Form: Arcs, ChordError: 1e-9, Bias: b})
	if err != nil {
		t.Fatal(err)
	}
	want := 16 + 16*b + math.Pi*b*b - math.Pi*(1-b)*(1-b)
	if math.Abs(o.Area-want) > 1e-12 {
		t.Errorf("a square with a disc outward: area %.12g, want %.12g", o.Area, want)
	}
}

// TestBiasOfReflexCorners: at a corner into the table the moved sides are
// trimmed outward and rounded inward; the area follows from the figure.
func TestBiasOfReflexCorners(t *testing.T) {
	points := []r2.Vec{{}, {X: 4}, {X: 4, Y: 1}, {X: 1, Y: 1}, {X: 1, Y: 3}, {Y: 3}}
	tab := compiled(t, table.Item{Shape: shape.NewPolygonal(points), Place: plane.Identity()})
	const b = 0.1
	for _, bias := range []float64{b, -b} {
		o, err := Trace(tab, Options{Form: Arcs, ChordError: 1e-9, Bias: bias})
		if err != nil {
			t.Fatal(err)
		}
		// Five corners turn left and one right, each by a quarter turn. A
		// rounded corner has pi/4 of its square, a trimmed one all of it.
		want := tab.Area() + tab.Length()*bias
		if bias > 0 {
			want += b * b * (5*math.Pi/4 - 1)
		} else {
			want += b * b * (5 - math.Pi/4)
		}
		if math.Abs(o.Area-want) > 1e-12 {
			t.Errorf("bias %g: area %.12g, want %.12g", bias, o.Area, want)
		}
	}
}

// TestBiasRefused: a bias that the wall does not survive is one sentence with
// its place.
func TestBiasRefused(t *testing.T) {
	for _, c := range []struct {
		tab  *table.Table
		bias float64
		says string
	}{
		{figured(t, "ellipse", 2, 1), -0.6, "The wall has a radius of 0.5 mm at (2, 0) mm, which a bias of -0.6 mm would use up; choose a smaller bias, or widen the bend."},
		{figured(t, "rectangle", 3, 2), -1.1, "A bias of -1.1 mm uses up a side at (1.5, -1) mm; choose a smaller bias."},
		{figured(t, "square-with-disc", 4, 1), -0.6, "With a bias of -0.6 mm the wall meets itself at"},
		{figured(t, "disc", 1), math.NaN(), "The bias is NaN mm; it must be less than the size of the table, 2.83 mm."},
	} {
		_, err := Trace(c.tab, Options{Form: Curves, ChordError: 1e-3, Bias: c.bias})
		if err == nil || len(err.Error()) < len(c.says) || err.Error()[:len(c.says)] != c.says {
			t.Errorf("bias %g: %v, want %s", c.bias, err, c.says)
		}
	}
}

// TestBiasDistance: every point of a wall after a bias is as far from the wall
// before as the bias, and none is nearer: by an independent search.
func TestBiasDistance(t *testing.T) {
	for _, k := range shape.Catalogue() {
		tab := figured(t, k.Name)
		wall := newRuler(tab)
		size := plane.Diagonal(tab.Bounds())
		for _, bias := range []float64{0.004 * size, -0.004 * size} {
			o, err := Trace(tab, Options{Form: Chords, ChordError: 1e-4 * size, Bias: bias})
			if err != nil {
				t.Errorf("%s, bias %g: %v", k.Name, bias, err)
				continue
			}
			for _, p := range o.Paths {
				points := p.Points()
				for i := 0; i < len(points); i += 1 + len(points)/25 {
					if d := wall.distance(points[i]); math.Abs(d-math.Abs(bias)) > 1e-8*size {
						t.Errorf("%s, bias %g: %v is %g from the wall", k.Name, bias, points[i], d)
						break
					}
				}
			}
		}
	}
}

// ruler measures distances from a wall: places on every piece, and a search
// between those that are near enough to hold the nearest point.
type ruler struct {
	tab    *table.Table
	places [][]r2.Vec // of each piece, evenly in the length
}

const rulerSteps = 40

func newRuler(tab *table.Table) ruler {
	r := ruler{tab: tab}
	for i := range tab.Pieces() {
		p := &tab.Pieces()[i]
		var row []r2.Vec
		for k := range rulerSteps + 1 {
			row = append(row, p.FrameAt(p.T(p.Length*float64(k)/rulerSteps)).Point)
		}
		r.places = append(r.places, row)
	}
	return r
}

func (r *ruler) distance(x r2.Vec) float64 {
	best := math.Inf(1)
	for _, row := range r.places {
		for _, p := range row {
			best = math.Min(best, r2.Norm(r2.Sub(p, x)))
		}
	}
	coarse := best
	for i, row := range r.places {
		p := &r.tab.Pieces()[i]
		step := p.Length / rulerSteps
		away := func(l float64) float64 { return r2.Norm(r2.Sub(x, p.FrameAt(p.T(l)).Point)) }
		for k := range rulerSteps {
			if math.Min(r2.Norm(r2.Sub(row[k], x)), r2.Norm(r2.Sub(row[k+1], x))) > coarse+step {
				continue
			}
			lo, hi := step*float64(k), step*float64(k+1)
			for hi-lo > 1e-7*step {
				const shrink = 0.6180339887498949
				if a, b := hi-shrink*(hi-lo), lo+shrink*(hi-lo); away(a) < away(b) {
					hi = b
				} else {
					lo = a
				}
			}
			best = math.Min(best, away(0.5*(lo+hi)))
		}
	}
	return best
}

// TestCrossing: polygons that cross nowhere are told from those that do,
// against all pairs; too many long edges side by side are not gone through.
func TestCrossing(t *testing.T) {
	random := rand.New(rand.NewPCG(7, 8))
	seen := [2]int{}
	for range 400 {
		loop := make([]r2.Vec, 3+random.IntN(9))
		for i := range loop {
			loop[i] = r2.Scale(0.5+random.Float64(), plane.Polar(2*math.Pi*(float64(i)+2.5*random.Float64())/float64(len(loop))))
		}
		want := Apart
		for i := range loop {
			for j := range i {
				if _, met := crossed(loop[i], loop[(i+1)%len(loop)], loop[j], loop[(j+1)%len(loop)]); met {
					want = Met
				}
			}
		}
		if _, got := Crossing([][]r2.Vec{loop}); got != want {
			t.Fatalf("%v: %d, want %d", loop, got, want)
		}
		seen[want]++
	}
	if seen[0] < 40 || seen[1] < 40 {
		t.Errorf("the polygons are one-sided: %v", seen)
	}
	var comb []r2.Vec
	for i := range 20000 {
		x := float64(i)
		comb = append(comb, r2.Vec{X: x}, r2.Vec{X: x, Y: 20000}, r2.Vec{X: x + 0.5, Y: 20000}, r2.Vec{X: x + 0.5})
	}
	comb = append(comb, r2.Vec{X: 20000, Y: -1}, r2.Vec{Y: -1})
	if _, met := Crossing([][]r2.Vec{comb}); met != Untold {
		t.Errorf("a comb of 20000 teeth: %d", met)
	}
}
