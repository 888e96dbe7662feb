package shape

import (
	"errors"
	"math"
	"strings"
	"testing"

	"cavitywright/table/curve"
	"cavitywright/table/param"
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
	"pgregory.net/rapid"
)

// drawFigure is a figure that fits: its values on the way from the defaults to
// drawn ones, lengths by their logarithm.
func drawFigure(t *rapid.T, k *Kind) Figure {
	return drawNear(t, k, param.Defaults(k.Specs), "figure")
}

func drawNear(t *rapid.T, k *Kind, from param.Values, label string) Figure {
	v := make(param.Values, len(k.Specs))
	for i, s := range k.Specs {
		v[i] = drawValue(t, s, label)
	}
	if k.Fits != nil {
		for range 60 {
			if k.Fits(v) == nil {
				break
			}
			for i, s := range k.Specs {
				v[i] = s.Clamp(0.5 * (v[i] + from[i]))
			}
		}
	}
	f, err := New(k.Name, v)
	if err != nil {
		t.Fatal(err)
	}
	return f
}

func drawValue(t *rapid.T, s param.Spec, label string) float64 {
	switch s.Unit {
	case param.Length:
		return s.Clamp(math.Pow(10, rapid.Float64Range(-2, 2).Draw(t, label+" log "+s.Name)))
	case param.Count:
		return float64(rapid.IntRange(int(s.Lo), int(math.Min(s.Hi, 200))).Draw(t, label+" "+s.Name))
	}
	return rapid.Float64Range(s.Lo, s.Hi).Draw(t, label+" "+s.Name)
}

func eachKind(t *testing.T, check func(t *rapid.T, k *Kind)) {
	for _, k := range Catalogue() {
		t.Run(k.Name, rapid.MakeCheck(func(t *rapid.T) { check(t, k) }))
	}
}

// checkLoops holds loops to the contract of Shape.
func checkLoops(t failer, loops []Loop) {
	t.Helper()
	for li, l := range loops {
		area, box := 0.0, plane.Around()
		var spans []curve.Span
		for _, c := range l.Curves {
			spans = append(spans, c.Spans()...)
			box = plane.Join(box, curve.Bounds(c.Spans()))
		}
		size := plane.Diagonal(box)
		for i := range spans {
			a, b := &spans[i], &spans[(i+1)%len(spans)]
			if gap := r2.Norm(r2.Sub(b.A, a.B)); !(gap <= 1e-12*size) {
				t.Fatal("loop", li, "has a gap, in its sizes, of", gap/size, "after span", i)
			}
			if !(a.Length > 0) {
				t.Fatal("loop", li, "span", i, "has the length", a.Length)
			}
			area += a.Swept(spans[0].A)
		}
		if (area > 0) != (l.Side == Outer) {
			t.Fatal("loop", li, "of side", l.Side, "has the area", area)
		}
	}
}

func TestLoopsCloseWithTheTableOnTheLeft(t *testing.T) {
	eachKind(t, func(t *rapid.T, k *Kind) {
		f := drawFigure(t, k)
		loops, err := f.Loops()
		if err != nil || len(loops) == 0 {
			t.Fatalf("%v of %v: %v", k.Name, f.Values(), err)
		}
		checkLoops(t, loops)
		for i, l := range loops {
			if l.Side == Outer && i > 0 {
				t.Fatal("an outer loop that is not the first")
			}
		}
	})
}

func TestGripsKeepStill(t *testing.T) {
	eachKind(t, func(t *rapid.T, k *Kind) {
		f := drawFigure(t, k)
		for i, h := range f.Handles() {
			if h.Role != Grip || h.Of != -1 || param.Index(k.Specs, h.Name) < 0 || !plane.Finite(h.At) {
				t.Fatalf("grip %d is %+v", i, h)
			}
			same := f.Moved(i, h.At).(Figure)
			for j, x := range same.Values() {
				if x != f.Values()[j] {
					t.Fatalf("%s: dragged to where it is, %s changes", h.Name, k.Specs[j].Name)
				}
			}
			// Not only by being told apart: the pull itself is the inverse.
			pulled := k.Pull(f.Values().With(0, f.Values()[0]), i, h.At)
			for j, x := range pulled {
				scale := math.Abs(f.Values()[j]) + r2.Norm(h.At)
				if k.Specs[j].Unit == param.Pure {
					scale = 1
				}
				if d := math.Abs(x - f.Values()[j]); d > 1e-9*scale {
					t.Fatalf("%s: pulled to where it is, %s moves by %g", h.Name, k.Specs[j].Name, d)
				}
			}
		}
	})
}

func TestGripsFollowThePointer(t *testing.T) {
	eachKind(t, func(t *rapid.T, k *Kind) {
		f := drawFigure(t, k)
		for i, h := range f.Handles() {
			p := param.Index(k.Specs, h.Name)
			g, err := f.With(p, drawValue(t, k.Specs[p], "to"))
			if err != nil || k.Fits != nil && k.Fits(g.Values()) != nil {
				continue
			}
			to := g.Handles()[i].At
			at := f.Moved(i, to).Handles()[i].At
			size := r2.Norm(to) + r2.Norm(h.At)
			for _, v := range f.Values() {
				size = math.Max(size, v)
			}
			if d := r2.Norm(r2.Sub(at, to)); d > 1e-6*size {
				t.Fatalf("%s dragged to %v of %v stays at %v", h.Name, to, f.Values(), at)
			}
		}
	})
}

func TestDragsStayWithinTheRange(t *testing.T) {
	eachKind(t, func(t *rapid.T, k *Kind) {
		f := drawFigure(t, k)
		far := rapid.OneOf(rapid.Float64Range(-3, 3), rapid.Float64Range(-1e9, 1e9))
		i := rapid.IntRange(0, len(f.Handles())-1).Draw(t, "grip")
		to := r2.Vec{X: far.Draw(t, "x"), Y: far.Draw(t, "y")}
		g := f.Moved(i, to).(Figure)
		if err := g.Values().Check(k.Specs); err != nil {
			t.Fatal(err)
		}
		loops, err := g.Loops()
		if err != nil {
			t.Fatalf("grip %d to %v: %v", i, to, err)
		}
		checkLoops(t, loops)
		if same := f.Moved(i, r2.Vec{X: math.NaN()}).(Figure); same.Handles()[i] != f.Handles()[i] {
			t.Fatal("a place that is no number moves a grip")
		}
	})
}

// TestDragStopsAtTheLimit: a drag beyond what goes together stops just there.
func TestDragStopsAtTheLimit(t *testing.T) {
	for _, c := range []struct {
		kind  string
		v     param.Values
		grip  int
		to    r2.Vec
		index int
		want  float64
	}{
		{"mushroom", param.Values{1, 0.5, 1}, 1, r2.Vec{X: 7, Y: -0.5}, 1, 1},
		{"mushroom", param.Values{1, 0.5, 1}, 0, r2.Vec{Y: 0.1}, 0, 0.5},
		{"cut-disc", param.Values{1, 0.5}, 1, r2.Vec{Y: -3}, 1, 1},
		{"cut-disc", param.Values{1, 0.5}, 1, r2.Vec{Y: 3}, 1, 0},
		{"lemon", param.Values{1, 1}, 1, r2.Vec{X: -2}, 1, 2},
		{"three-posts", param.Values{1, 6}, 1, r2.Vec{}, 1, 2},
		{"square-with-disc", param.Values{2, 0.5}, 1, r2.Vec{Y: 9}, 1, 1},
		{"box-of-posts", param.Values{10, 16, 0.5}, 1, r2.Vec{Y: 9}, 2, 1.25},
		{"limacon", param.Values{1, 0.43}, 1, r2.Vec{X: 1}, 1, 1},
		{"stadium", param.Values{1, 1}, 0, r2.Vec{X: -1}, 0, 1e-6},
		{"flattened-quadrupole", param.Values{1, 0.1}, 1, r2.Vec{Y: -1}, 1, 0.49},
		{"spiral", param.Values{1, 0.1}, 1, r2.Vec{X: 9}, 1, 2},
		{"notched-ellipse", param.Values{2, 1, 0.1, 0.1}, 3, r2.Vec{X: -9}, 3, 4},
		{"belt", param.Values{1, 0.5, 2}, 2, r2.Vec{X: -1}, 2, 0.5},
		{"truncated-ellipse", param.Values{1.3, 1, 0.8}, 2, r2.Vec{X: 4}, 2, 1.3},
		{"tilted-mushroom", param.Values{1, 0.4, 1, 0.25}, 3, r2.Vec{Y: 1}, 3, 1.1592794807274085},
		{"ring", param.Values{1, 0.4, 0.3}, 2, r2.Vec{X: 3}, 2, 0.6},
		{"ring", param.Values{1, 0.4, 0.3}, 2, r2.Vec{X: -3}, 2, 0},
		{"capped-rectangle", param.Values{2, 1, 0.2}, 2, r2.Vec{X: 3}, 2, 0.5},
		{"bow-tie", param.Values{2, 1.2, 0.5}, 2, r2.Vec{Y: 3}, 2, 1.2},
		{"l-shape", param.Values{2, 2, 0.8, 0.7}, 3, r2.Vec{Y: 3}, 3, 2},
		{"drop", param.Values{1, 2}, 1, r2.Vec{}, 1, 1},
		{"ring-of-posts", param.Values{6, 1, 4}, 1, r2.Vec{}, 2, 2},
		{"posts", param.Values{4, 3, 1, 3, 2.6, 0.5}, 1, r2.Vec{}, 3, 2},
	} {
		f, err := New(c.kind, c.v)
		if err != nil {
			t.Fatal(err)
		}
		got := f.Moved(c.grip, c.to).(Figure).Values()[c.index]
		if math.Abs(got-c.want) > 2*slack*math.Max(c.want, 1e-3) {
			t.Errorf("%s stops at %v, want %v", c.kind, got, c.want)
		}
	}
}

func TestRangesAreHeld(t *testing.T) {
	for _, k := range Catalogue() {
		if k.Title == "" || k.About == "" || !strings.Contains(k.Formula, "s starts") && !strings.Contains(k.Formula, "s runs") {
			t.Errorf("%s: title, about or the start of s is missing", k.Name)
		}
		def := param.Defaults(k.Specs)
		if _, err := New(k.Name, def[:len(def)-1]); err == nil {
			t.Errorf("%s takes too few values", k.Name)
		}
		for i, s := range k.Specs {
			if s.Description == "" {
				t.Errorf("%s: %s has no description", k.Name, s.Name)
			}
			for _, bad := range []float64{s.Lo - 1, s.Hi * 1.01, math.NaN(), math.Inf(1)} {
				_, err := New(k.Name, def.With(i, bad))
				var re *param.RangeError
				if !errors.As(err, &re) || re.Spec.Name != s.Name {
					t.Errorf("%s takes %s = %v: %v", k.Name, s.Name, bad, err)
				}
			}
		}
	}
	if _, err := New("blob", nil); err == nil {
		t.Error("an unknown kind is built")
	}
}

// TestNamesThatScriptsRelyOn holds names and order of the parameters.
func TestNamesThatScriptsRelyOn(t *testing.T) {
	for name, params := range map[string]string{
		"disc": "radius", "ellipse": "a, b", "rectangle": "width, height", "stadium": "half-length, radius",
		"limacon": "radius, eps", "quadrupole": "radius, eps",
		"harmonics": "radius, a1, b1, a2, b2, a3, b3, a4, b4, a5, b5, a6, b6, a7, b7, a8, b8",
		"mushroom":  "radius, stem-half-width, stem-length", "cut-disc": "radius, distance", "lemon": "radius, separation",
		"three-posts": "radius, separation", "square-with-disc": "side, radius", "box-of-posts": "side, count, radius",
		"polygon": "sides, radius", "triangle": "a, b, c",
		"flattened-quadrupole": "radius, eps", "oval": "lobes, radius, eps", "spiral": "radius, eps",
		"harmonics-by-area": "radius, a1, b1, a2, b2, a3, b3, a4, b4, a5, b5, a6, b6, a7, b7, a8, b8",
		"notched-ellipse":   "a, b, notch-width, notch-depth", "half-disc": "radius", "half-ellipse": "a, b",
		"rounded-triangle": "side, radius", "quarter-stadium": "straight, radius", "elliptic-stadium": "half-length, a, b",
		"belt": "left-radius, right-radius, separation", "truncated-ellipse": "a, b, cut",
		"tilted-mushroom": "radius, stem-half-width, stem-length, tilt", "ring": "radius, inner-radius, offset",
		"capped-rectangle": "width, height, sagitta", "bow-tie": "width, height, waist", "wedge": "length, wide, narrow",
		"l-shape": "width, height, stem, foot", "drop": "radius, tip",
		"posts": "columns, rows, radius, separation, row-separation, shift", "ring-of-posts": "count, radius, distance",
	} {
		k := Find(name)
		if k == nil {
			t.Errorf("there is no %s", name)
		} else if got := param.Names(k.Specs); got != params {
			t.Errorf("%s has %s, want %s", name, got, params)
		}
	}
}

func TestMisfitsSayWhatToDo(t *testing.T) {
	for _, c := range []struct {
		kind string
		v    param.Values
		says string
	}{
		{"mushroom", param.Values{1, 1, 1}, "make stem-half-width smaller than radius"},
		{"cut-disc", param.Values{1, 1}, "make distance smaller than radius"},
		{"lemon", param.Values{1, 2}, "make separation smaller than 2 radius"},
		{"three-posts", param.Values{1, 2}, "make separation greater than 2 radius"},
		{"square-with-disc", param.Values{2, 1}, "make radius smaller than side/2"},
		{"box-of-posts", param.Values{10, 17, 1}, "make radius smaller than side/10"},
		{"notched-ellipse", param.Values{1, 0.5, 1, 0.5}, "make notch-width smaller than 2 b"},
		// Half the notch is 0.6 wide at b = 1: its edges are at x = 0.8 (3, 4, 5).
		{"notched-ellipse", param.Values{1, 1, 1.2, 0.2}, "make notch-depth greater"},
		{"notched-ellipse", param.Values{1, 1, 0.1, 2}, "make notch-depth smaller than 2 a"},
		{"belt", param.Values{2, 0.5, 1.5}, "make separation greater than the difference"},
		{"truncated-ellipse", param.Values{1, 1, 1}, "make cut smaller than a"},
		{"truncated-ellipse", param.Values{5000, 1, 1}, "make cut at least a/1000"},
		{"tilted-mushroom", param.Values{1, 0.5, 1, math.Acos(0.5)}, "make stem-half-width smaller"},
		{"tilted-mushroom", param.Values{1, 0.5, 0.5, -math.Pi / 4}, "make stem-length greater"},
		{"ring", param.Values{1, 0.5, 0.5}, "make inner-radius + offset smaller than radius"},
		{"capped-rectangle", param.Values{2, 1, 0.51}, "make sagitta at most height/2"},
		{"bow-tie", param.Values{2, 1, 1}, "make waist smaller than height"},
		{"bow-tie", param.Values{1, 2, 1}, "make waist greater than height - 0.98 width"},
		{"l-shape", param.Values{1, 2, 1, 1}, "make stem smaller than width"},
		{"l-shape", param.Values{2, 1, 1, 1}, "make foot smaller than height"},
		{"drop", param.Values{1, 1}, "make tip greater than radius"},
		{"posts", param.Values{2, 1, 1, 2, 1, 0}, "make separation greater than 2 radius"},
		{"posts", param.Values{1, 2, 1, 5, 2, 0}, "make row-separation greater"},
		// Two rows away the posts stand above each other again.
		{"posts", param.Values{2, 3, 1, 6, 1, 0.5}, "make row-separation greater"},
		{"ring-of-posts", param.Values{6, 1, 2}, "make distance greater"},
		{"triangle", param.Values{1, 2, 3}, "side c is as long as the two others"},
		{"triangle", param.Values{5, 2, 1}, "side a is as long as the two others"},
		// cos φ = -1 at 180 degrees (closed form).
		{"harmonics", param.Values{1, 1, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0}, "reaches its centre at 180.0 deg"},
		// sin 3φ = -1 at 90 degrees.
		{"harmonics", param.Values{1, 0, 0, 0, 0, 0, 0.5, 0, 0, 0, 0, 0, 0, 0, 0.6, 0, 0}, "reaches its centre"},
	} {
		f, err := New(c.kind, c.v)
		if err != nil {
			t.Fatal(err)
		}
		_, err = f.Loops()
		var fault *Fault
		if !errors.As(err, &fault) || fault.Node != -1 || !strings.Contains(fault.Error(), c.says) {
			t.Errorf("%s %v: %v", c.kind, c.v, err)
		}
		for i, h := range f.Handles() {
			if !plane.Finite(h.At) || !plane.Finite(f.Moved(i, r2.Vec{X: 0.3, Y: 0.2}).Handles()[i].At) {
				t.Errorf("%s %v: a grip is nowhere", c.kind, c.v)
			}
		}
	}
}

// TestSinkMissesNothing holds the search for r <= 0 against a fine scan.
func TestSinkMissesNothing(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		f := &curve.Form{Mean: 1}
		for range harmonicCount {
			f.Cos = append(f.Cos, rapid.Float64Range(-0.3, 0.3).Draw(t, "cos"))
			f.Sin = append(f.Sin, rapid.Float64Range(-0.3, 0.3).Draw(t, "sin"))
		}
		phi, sinks := sink(f)
		least := math.Inf(1)
		for i := range 20000 {
			r, _, _, _, _ := f.Eval(fullTurn * float64(i) / 20000)
			least = math.Min(least, r)
		}
		if r, _, _, _, _ := f.Eval(phi); sinks && r > 1e-11 {
			t.Fatalf("r = %g at the place found", r)
		}
		if least <= 0 && !sinks {
			t.Fatalf("r = %g is not found", least)
		}
	})
}
