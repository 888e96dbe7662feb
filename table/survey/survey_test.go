package survey

import (
	"math"
	"strings"
	"testing"

	"cavitywright/table"
	"cavitywright/table/param"
	"cavitywright/table/plane"
	"cavitywright/table/shape"

	"gonum.org/v1/gonum/spatial/r2"
	"pgregory.net/rapid"
)

// failer is what testing.T and rapid.T have in common.
type failer interface {
	Helper()
	Fatal(args ...any)
}

func placed(t failer, m plane.Similarity, kind string, v ...float64) *table.Table {
	t.Helper()
	if len(v) == 0 {
		v = param.Defaults(shape.Find(kind).Specs)
	}
	f, err := shape.New(kind, v)
	if err != nil {
		t.Fatal(err)
	}
	tab, err := table.New(table.Design{Unit: table.Millimetre, Items: []table.Item{{Shape: f, Place: m}}})
	if err != nil {
		t.Fatal(err)
	}
	return tab
}

func of(t failer, tool float64, kind string, v ...float64) *Report {
	t.Helper()
	return Of(placed(t, plane.Identity(), kind, v...), tool)
}

// known is what elementary geometry says of each family at its defaults: the
// symmetry group, the smoothness, and whether the outer wall is convex, or
// strictly.
var known = map[string]struct {
	group  string
	class  Class
	convex string
}{
	"disc": {"O(2)", Analytic, "strictly"}, "ellipse": {"D2", Analytic, "strictly"}, "stadium": {"D2", C1, "yes"},
	"limacon": {"D1", Analytic, "strictly"}, "quadrupole": {"D2", Analytic, "strictly"},
	"flattened-quadrupole": {"D2", Analytic, "strictly"}, "oval": {"D3", Analytic, "strictly"},
	"harmonics": {"C1", Analytic, "no"}, "harmonics-by-area": {"C1", Analytic, "no"}, "spiral": {"C1", C0, "no"},
	"notched-ellipse": {"D1", C0, "no"}, "mushroom": {"D1", C0, "no"}, "tilted-mushroom": {"C1", C0, "no"},
	"cut-disc": {"D1", C0, "yes"}, "half-disc": {"D1", C0, "yes"}, "half-ellipse": {"D1", C0, "yes"},
	"lemon": {"D2", C0, "strictly"}, "drop": {"D1", C0, "yes"}, "quarter-stadium": {"C1", C0, "yes"},
	"elliptic-stadium": {"D2", C1, "yes"}, "belt": {"D1", C1, "yes"}, "truncated-ellipse": {"D2", C0, "yes"},
	"rounded-triangle": {"D3", C1, "yes"}, "capped-rectangle": {"D2", C0, "yes"}, "bow-tie": {"D2", C0, "no"},
	"ring": {"D1", Analytic, "strictly"}, "rectangle": {"D2", C0, "yes"}, "triangle": {"C1", C0, "yes"},
	"wedge": {"D1", C0, "yes"}, "l-shape": {"C1", C0, "no"}, "polygon": {"D6", C0, "yes"},
	"square-with-disc": {"D4", C0, "yes"}, "box-of-posts": {"D4", C0, "yes"},
	"three-posts": {"D3", Analytic, "open"}, "ring-of-posts": {"D5", Analytic, "open"}, "posts": {"D1", Analytic, "open"},
}

func (c Convexity) word() string {
	switch {
	case c.Open:
		return "open"
	case c.Strict:
		return "strictly"
	case c.Convex:
		return "yes"
	}
	return "no"
}

func TestCatalogue(t *testing.T) {
	for _, k := range shape.Catalogue() {
		want, ok := known[k.Name]
		if !ok {
			t.Errorf("nothing is known of the %s", k.Name)
			continue
		}
		r := of(t, 0, k.Name)
		if got := r.Symmetry.Name(); got != want.group || len(r.Symmetry.Mirrors) > 0 && len(r.Symmetry.Mirrors) != r.Symmetry.Order {
			t.Errorf("%s: symmetry %s with %d mirror lines, want %s", k.Name, got, len(r.Symmetry.Mirrors), want.group)
		}
		if r.Class != want.class || r.Convexity.word() != want.convex {
			t.Errorf("%s: %v and convex %s, want %v and %s", k.Name, r.Class, r.Convexity.word(), want.class, want.convex)
		}
		for _, s := range r.Sentences() {
			if !strings.HasSuffix(s, ".") || strings.Contains(s, "NaN") || strings.Contains(s, "Inf") {
				t.Errorf("%s: %q", k.Name, s)
			}
		}
	}
}

// TestSymmetryStays: a wall that is moved, turned and scaled has the group and
// the mirror lines that were moved along.
func TestSymmetryStays(t *testing.T) {
	names := []string{"ellipse", "limacon", "polygon", "lemon", "spiral", "mushroom", "square-with-disc", "three-posts", "oval", "rounded-triangle", "l-shape", "disc"}
	rapid.Check(t, func(t *rapid.T) {
		name := rapid.SampledFrom(names).Draw(t, "name")
		m := plane.Similarity{
			Shift: r2.Vec{X: rapid.Float64Range(-9, 9).Draw(t, "x"), Y: rapid.Float64Range(-9, 9).Draw(t, "y")},
			Angle: rapid.Float64Range(-3, 3).Draw(t, "angle"), Scale: math.Exp(rapid.Float64Range(-2, 3).Draw(t, "log scale")),
		}
		one, two := symmetryAlone(placed(t, plane.Identity(), name)), symmetryAlone(placed(t, m, name))
		if one.Name() != two.Name() {
			t.Fatalf("%s is %s, moved %s", name, one.Name(), two.Name())
		}
		if d := distance(m.Apply(one.Centre), two.Centre); d > 1e-9*m.Scale {
			t.Fatalf("%s: the centre moves by %g", name, d)
		}
		for _, a := range one.Mirrors {
			near := math.Inf(1)
			for _, b := range two.Mirrors {
				near = math.Min(near, math.Abs(math.Sin(a+m.Angle-b)))
			}
			if near > 1e-7 {
				t.Fatalf("%s: the mirror line at %g is %g off", name, a, near)
			}
		}
	})
}

func symmetryAlone(tab *table.Table) Symmetry { return symmetryOf(tab, newNet(tab)) }

// TestSymmetryIsNotGuessed: walls that miss a symmetry by little do not have
// it, those that keep a part of it have that.
func TestSymmetryIsNotGuessed(t *testing.T) {
	wave := func(set map[string]float64) []float64 {
		specs := shape.Find("harmonics").Specs
		v := make([]float64, len(specs))
		v[0] = 1
		for name, x := range set {
			v[param.Index(specs, name)] = x
		}
		return v
	}
	for _, c := range []struct {
		kind string
		v    []float64
		want string
	}{
		{"rectangle", []float64{1, 1}, "D4"},
		{"rectangle", []float64{1, 1 + 1e-7}, "D2"},
		{"ellipse", []float64{1, 1}, "O(2)"},
		{"ellipse", []float64{1, 1 + 1e-7}, "D2"},
		{"ring", []float64{1, 0.4, 0}, "O(2)"},
		{"ring", []float64{1, 0.4, 1e-7}, "D1"},
		{"oval", []float64{24, 1, 0.01}, "D24"},
		{"polygon", []float64{1000, 1}, "D1000"},
		{"polygon", []float64{7, 1}, "D7"},
		{"ring-of-posts", []float64{12, 0.1, 1}, "D12"},
		{"triangle", []float64{1, 1, 1}, "D3"},
		{"triangle", []float64{1, 1, 1.2}, "D1"},
		{"harmonics", wave(map[string]float64{"a4": 0.1}), "D4"},
		// Two multiples of 4, turned against each other: no mirror is left.
		{"harmonics", wave(map[string]float64{"a4": 0.1, "b8": 0.02}), "C4"},
		{"harmonics", wave(map[string]float64{"a4": 0.1, "a6": 0.02}), "D2"},
		{"harmonics", wave(map[string]float64{"a4": 0.1, "b6": 0.02}), "D2"},
		{"harmonics", wave(map[string]float64{"a3": 0.1, "b6": 1e-7}), "C3"},
		{"l-shape", []float64{2, 2, 0.8, 0.8}, "D1"},
		{"posts", []float64{5, 4, 0.2, 1, 1, 0}, "D2"},
		{"posts", []float64{4, 4, 0.2, 1, 1, 0}, "D4"},
		{"posts", []float64{4, 4, 0.2, 1, 1, 0.3}, "C2"},
	} {
		if got := symmetryAlone(placed(t, plane.Identity(), c.kind, c.v...)).Name(); got != c.want {
			t.Errorf("%s %v is %s, want %s", c.kind, c.v, got, c.want)
		}
	}
}

// TestConvexToTheLimit finds the limits of convexity on the wall that was
// built: limaçon 1/2, quadrupole 1/5, an oval 1/(1 + m²) (closed forms:
// r² + 2r'² - r r” vanishes where r is least), the flattened quadrupole 1/6.
func TestConvexToTheLimit(t *testing.T) {
	convex := func(kind string, v ...float64) bool {
		return convexityOf(placed(t, plane.Identity(), kind, v...)).Convex
	}
	for _, c := range []struct {
		name  string
		built func(eps float64) bool
		want  float64
	}{
		{"limaçon", func(e float64) bool { return convex("limacon", 1, e) }, 0.5},
		{"quadrupole", func(e float64) bool { return convex("quadrupole", 1, e) }, 0.2},
		{"flattened quadrupole", func(e float64) bool { return convex("flattened-quadrupole", 1, e) }, 1.0 / 6},
		{"oval of 3", func(e float64) bool { return convex("oval", 3, 1, e) }, 0.1},
		{"oval of 5", func(e float64) bool { return convex("oval", 5, 1, e) }, 1.0 / 26},
		{"oval of 12", func(e float64) bool { return convex("oval", 12, 1, e) }, 1.0 / 145},
	} {
		lo, hi := 0.0, 0.49
		if c.want == 0.5 {
			hi = 1
		}
		if !c.built(lo) || c.built(hi) {
			t.Errorf("%s: convex at %v: %v; at %v: %v", c.name, lo, c.built(lo), hi, c.built(hi))
			continue
		}
		for hi-lo > 1e-12 {
			if mid := 0.5 * (lo + hi); c.built(mid) {
				lo = mid
			} else {
				hi = mid
			}
		}
		if d := math.Abs(lo - c.want); d > 1e-9 {
			t.Errorf("%s: convex to %.12f, want %.12f (off by %g)", c.name, lo, c.want, d)
		}
	}
}

// TestManyPosts: the report of a table of thousands of pieces comes at once.
func TestManyPosts(t *testing.T) {
	r := of(t, 1, "box-of-posts", 1000, 1600, 1)
	if r.Symmetry.Name() != "D4" || r.Convexity.Posts != 1600 || len(r.Tool.Beyond) != 4 {
		t.Errorf("symmetry %s, %d posts, %d places out of reach", r.Symmetry.Name(), r.Convexity.Posts, len(r.Tool.Beyond))
	}
}
