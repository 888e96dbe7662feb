package curve

import (
	"math"
	"testing"

	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// kinds is one curve or more of every kind; a new kind is one line here.
func kinds() map[string]Curve {
	return map[string]Curve{
		"line":        NewLine(r2.Vec{X: 1, Y: 2}, r2.Vec{X: 4, Y: -2}),
		"arc":         NewArc(r2.Vec{X: 3, Y: 1}, 2, 0.3, 1.4),
		"arc back":    NewArc(r2.Vec{X: 3, Y: 1}, 2, 0.3, -2.4),
		"arc long":    NewArc(r2.Vec{X: -1, Y: 1}, 0.7, 2, 5),
		"circle":      NewArc(r2.Vec{}, 1, 0, 2*math.Pi),
		"bulge":       ArcThrough(r2.Vec{X: 1}, r2.Vec{Y: 1}, 0.3),
		"flat bulge":  ArcThrough(r2.Vec{X: 1}, r2.Vec{Y: 1}, 4e-4),
		"ellipse":     NewOval(Arc{Major: 2, Minor: 1, Sweep: 2 * math.Pi}),
		"ellipse arc": NewOval(Arc{Centre: r2.Vec{X: 1}, Major: 3, Minor: 0.2, Tilt: 0.4, From: 1, Sweep: -4}),
		"cubic":       NewCubic([4]r2.Vec{{}, {X: 1, Y: 2}, {X: 3, Y: 2}, {X: 4}}),
		"cubic s":     NewCubic([4]r2.Vec{{}, {X: 3, Y: 2}, {X: 1, Y: -2}, {X: 4, Y: 1}}),
		"cubic stub":  NewCubic([4]r2.Vec{{}, {}, {X: 3, Y: 1}, {X: 4, Y: 3}}),
		"limaçon":     NewPolar(Polar{Form: &Form{Mean: 1, Cos: []float64{0.43}, Sin: []float64{0}}, Sweep: 2 * math.Pi}),
		"cardioid":    NewPolar(Polar{Form: &Form{Mean: 1, Cos: []float64{1}, Sin: []float64{0}}, Sweep: 2 * math.Pi}),
		"harmonics": NewPolar(Polar{Tilt: 1, Form: &Form{Mean: 2, Cos: []float64{0.1, 0, 0.3, 0, 0.1}, Sin: []float64{0, 0.2, 0, 0.1, 0}},
			From: 1, Sweep: -3}),
		"flattened":      NewPolar(Polar{Form: &Form{Of: Square, Mean: 1, Cos: []float64{0, 0.6}, Sin: []float64{0, 0}}, Sweep: 2 * math.Pi}),
		"flattened back": NewPolar(Polar{Tilt: 1, Form: &Form{Of: Square, Mean: 4, Cos: []float64{0, 0, 1.5}, Sin: []float64{0.1, 0, 0}}, From: 1, Sweep: -4}),
		"spiral":         NewPolar(Polar{Form: &Form{Mean: 1, Slope: 0.1}, Sweep: 2 * math.Pi}),
		"spiral in":      NewPolar(Polar{Tilt: 2, Form: &Form{Mean: 1, Slope: -0.3, Cos: []float64{0, 0.2}, Sin: []float64{0.1, 0}}, From: -0.5, Sweep: 3}),
	}
}

func TestSpansAreJoinedAndTurnOneWay(t *testing.T) {
	for name, c := range kinds() {
		spans := c.Spans()
		for i := range spans {
			s := &spans[i]
			if i > 0 && s.A != spans[i-1].B {
				t.Errorf("%s: span %d does not begin where the one before ends", name, i)
			}
			if s.Kind == Bezier || s.Kind == Harmonic {
				if math.Abs(s.Turn) > math.Pi/2 {
					t.Errorf("%s: span %d turns by %g", name, i, s.Turn)
				}
				last := 0.0
				a, _ := s.Ends()
				for k := 1; k < 200; k++ {
					f := s.FrameAt(s.T0 + (s.T1-s.T0)*float64(k)/200)
					turn := plane.Angle(a, f.Tangent) * math.Copysign(1, s.Turn)
					if turn < last-1e-9 {
						t.Errorf("%s: span %d turns back at %d", name, i, k)
						break
					}
					last = turn
				}
			}
		}
	}
}

// TestArclength holds At against the derivative: the frame moves by the
// tangent, turns by the curvature, and T inverts S.
func TestArclength(t *testing.T) {
	for name, c := range kinds() {
		l := c.Length()
		for k := 0; k <= 400; k++ {
			s := l * float64(k) / 400
			f := c.At(s)
			if d := math.Abs(math.Hypot(f.Tangent.X, f.Tangent.Y) - 1); d > 1e-12 {
				t.Fatalf("%s: tangent at %g has length off by %g", name, s, d)
			}
			h := 1e-5 * l
			if s < 2*h || s > l-2*h || math.IsInf(f.Curvature, 0) || math.Abs(f.Curvature) > 50 {
				continue
			}
			a, b := c.At(s-h), c.At(s+h)
			v := r2.Scale(1/(2*h), r2.Sub(b.Point, a.Point))
			if d := r2.Norm(r2.Sub(v, f.Tangent)); d > 1e-7*(1+f.Curvature*f.Curvature) {
				t.Errorf("%s: at %g the point moves %g off the tangent", name, s, d)
			}
			if near(c, s, 2*h) {
				continue
			}
			if d := math.Abs(plane.Angle(a.Tangent, b.Tangent)/(2*h) - f.Curvature); d > 1e-5*(1+f.Curvature*f.Curvature) {
				t.Errorf("%s: at %g the tangent turns %g off the curvature %g", name, s, d, f.Curvature)
			}
		}
		spans := c.Spans()
		for i := range spans {
			sp := &spans[i]
			for k := 0; k <= 50; k++ {
				x := sp.Length * float64(k) / 50
				if d := math.Abs(sp.S(sp.T(x)) - x); d > 1e-12*l {
					t.Errorf("%s: span %d: arclength %g comes back off by %g", name, i, x, d)
				}
			}
		}
	}
}

// near reports whether s is within h of an end of a span.
func near(c Curve, s, h float64) bool {
	at := 0.0
	for _, sp := range c.Spans() {
		if math.Abs(s-at) < h {
			return true
		}
		at += sp.Length
	}
	return math.Abs(s-at) < h
}

func TestReversedAndPlaced(t *testing.T) {
	m := plane.Similarity{Shift: r2.Vec{X: 3, Y: -2}, Angle: 0.7, Scale: 1.5}
	for name, c := range kinds() {
		l := c.Length()
		r, p := c.Reversed(), c.Placed(m)
		if d := math.Abs(r.Length() - l); d > 1e-12*l {
			t.Errorf("%s reversed is %g longer", name, d)
		}
		if d := math.Abs(p.Length() - 1.5*l); d > 1e-12*l {
			t.Errorf("%s placed is %g longer", name, d)
		}
		for k := 0; k <= 20; k++ {
			s := l * float64(k) / 20
			f, g, q := c.At(s), r.At(l-s), p.At(1.5*s)
			if d := r2.Norm(r2.Sub(f.Point, g.Point)); d > 1e-11*l {
				t.Errorf("%s reversed at %g: off by %g", name, s, d)
			}
			if d := r2.Norm(r2.Sub(m.Apply(f.Point), q.Point)); d > 1e-11*l {
				t.Errorf("%s placed at %g: off by %g", name, s, d)
			}
		}
	}
}

func TestKnownLengthsAndAreas(t *testing.T) {
	// Ellipse 2:1: 8 E(3/4) = 9.6884482205476762 (check value, complete elliptic integral);
	// cardioid r = 1 + cos phi: length 8, area 3 pi/2 (closed forms); limaçon 0.43: area
	// pi (1 + eps^2/2), length 6.5771494381548584 (check value, closed form by E).
	for _, c := range []struct {
		name         string
		length, area float64
	}{
		{"ellipse", 9.6884482205476762, 2 * math.Pi},
		{"cardioid", 8, 1.5 * math.Pi},
		{"limaçon", 6.5771494381548584, math.Pi * (1 + 0.43*0.43/2)},
		{"circle", 2 * math.Pi, math.Pi},
		// r^2 = 1 + 0.6 cos 2 phi: half the mean of r^2; length by 4000 trapezia
		// of the periodic integrand in 40 digits, apart from this project.
		{"flattened", 6.7635329212172344, math.Pi},
		// r = 1 + 0.1 phi with its notch left out: integral of sqrt(r^2 + 0.01), closed
		// by the inverse hyperbolic sine. It is no closed curve.
		{"spiral", 8.2814447883786386, 0},
	} {
		k := kinds()[c.name]
		if d := math.Abs(k.Length() - c.length); d > 1e-12*c.length {
			t.Errorf("%s: length %.16g, want %.16g", c.name, k.Length(), c.length)
		}
		area, turn := 0.0, 0.0
		for _, s := range k.Spans() {
			area += s.Swept(r2.Vec{X: 0.3, Y: 5})
			turn += s.Turn
		}
		if c.area == 0 {
			continue // not closed
		}
		if d := math.Abs(area - c.area); d > 1e-12*c.area {
			t.Errorf("%s: area %.16g, want %.16g", c.name, area, c.area)
		}
		if c.name != "cardioid" && math.Abs(turn-2*math.Pi) > 1e-12 {
			t.Errorf("%s turns by %g", c.name, turn)
		}
	}
}

func TestBoundsHold(t *testing.T) {
	for name, c := range kinds() {
		b := Bounds(c.Spans())
		for k := 0; k <= 300; k++ {
			p := c.At(c.Length() * float64(k) / 300).Point
			if p.X < b.Min.X-1e-12 || p.X > b.Max.X+1e-12 || p.Y < b.Min.Y-1e-12 || p.Y > b.Max.Y+1e-12 {
				t.Errorf("%s: %v lies outside %v", name, p, b)
			}
		}
	}
}

// TestFlatArc: either side of the change of formula the arc has its length,
// its sagitta and its curvature.
func TestFlatArc(t *testing.T) {
	a, b := r2.Vec{X: 0.3, Y: -0.2}, r2.Vec{X: 1.7, Y: 0.9}
	chord := math.Hypot(b.X-a.X, b.Y-a.Y)
	for _, sweep := range []float64{1e-9, 1e-6, 0.9 * flatSweep, 1.1 * flatSweep, 0.1} {
		for _, sign := range []float64{1, -1} {
			c := ArcThrough(a, b, sign*math.Tan(sweep/4))
			length := chord * (sweep / 2) / math.Sin(sweep/2)
			// The centre's rounding is that of the radius, chord / sweep.
			tol := 4e-15 * chord
			if sweep > flatSweep {
				tol = 1e-15 * chord / sweep
			}
			if d := math.Abs(c.Length() - length); d > tol {
				t.Errorf("sweep %g: length off by %g", sweep, d)
			}
			mid := c.At(c.Length() / 2)
			sagitta := sign * chord / 2 * math.Tan(sweep/4)
			n := plane.Unit(plane.Left(r2.Sub(b, a)))
			if d := math.Abs(plane.Dot(r2.Sub(mid.Point, a), n) + sagitta); d > tol {
				t.Errorf("sweep %g: sagitta off by %g", sweep, d)
			}
			if want := sign * sweep / length; math.Abs(mid.Curvature-want) > 1e-9*math.Abs(want)+1e-15 {
				t.Errorf("sweep %g: curvature %g, want %g", sweep, mid.Curvature, want)
			}
		}
	}
}

// TestDegenerate: curves that a hand can draw but no table takes must be
// answered in good time, with finite spans.
func TestDegenerate(t *testing.T) {
	o := r2.Vec{}
	for _, p := range [][4]r2.Vec{
		{o, o, o, o},
		{o, {X: 1}, {X: -1}, {X: 0.5}},
		{o, {X: 2, Y: 1}, {X: -2, Y: -1}, o},
		{o, {X: 1e-9, Y: 1}, {X: -1e-9, Y: -1}, {X: 1}},
		{o, {X: 1, Y: 1}, {X: 0, Y: 1}, {X: 1}}, // a cusp
		{{X: math.Float64frombits(0x3fef34f0fb840000)}, // short handles whose terms cancel
			{X: math.Float64frombits(0x3fead958347884d7), Y: math.Float64frombits(0x3fd7bece6036a032)},
			{X: math.Float64frombits(0x3fd49173aa08de2a), Y: math.Float64frombits(0x3fefa6b27a70067a)},
			{X: math.Float64frombits(0x3fd49173aa08de2a), Y: math.Float64frombits(0x3fefa6b27a70067a)}},
		{{X: 1e6}, {X: 1e6, Y: 1e-6}, {X: 1e6, Y: 2e-6}, {X: 1e6, Y: 3e-6}},
	} {
		panels := 0
		for _, s := range NewCubic(p).Spans() {
			if math.IsNaN(s.Length) || math.IsNaN(s.Turn) {
				t.Errorf("%v: span %+v", p, s)
			}
			panels += len(s.chart.panels)
		}
		if panels > 200 {
			t.Errorf("%v takes %d panels of arclength", p, panels)
		}
	}
}
