package tablefile

import (
	"bytes"
	"flag"
	"math"
	"os"
	"path/filepath"
	"testing"

	"cavitywright/table"
	"cavitywright/table/param"
	"cavitywright/table/plane"
	"cavitywright/table/shape"
	"cavitywright/table/wall"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"
	"gonum.org/v1/gonum/spatial/r2"
)

var update = flag.Bool("update", false, "write the files in testdata anew")

const samples = "../../testdata/tablefile"

// same compares designs to the last bit of their numbers; shapes by what files
// hold of them.
var same = cmp.Options{
	cmpopts.EquateEmpty(),
	cmp.Comparer(func(a, b float64) bool { return math.Float64bits(a) == math.Float64bits(b) }),
	cmp.Transformer("figure", func(f shape.Figure) map[string]any {
		return map[string]any{"kind": f.Kind(), "values": f.Values()}
	}),
	cmp.Transformer("freeform", func(f shape.Freeform) freeWall {
		return freeWall{nodes: f.Nodes(), symmetry: f.Symmetry()}
	}),
	cmp.AllowUnexported(freeWall{}),
	cmpopts.IgnoreFields(freeWall{}, "fold"),
}

func at(x, y float64) plane.Similarity {
	return plane.Similarity{Shift: r2.Vec{X: x, Y: y}, Scale: 1}
}

// figure is the shape with the values of the parameters named, the others at
// their defaults.
func figure(t testing.TB, kind string, set map[string]float64) shape.Figure {
	t.Helper()
	specs := shape.Find(kind).Specs
	v := param.Defaults(specs)
	for name, x := range set {
		v[param.Index(specs, name)] = x
	}
	f, err := shape.New(kind, v)
	if err != nil {
		t.Fatal(err)
	}
	return f
}

func onlyWall(s shape.Shape) table.Design {
	return table.Design{Unit: table.Millimetre, Study: table.DefaultStudy(),
		Items: []table.Item{{Shape: s, Place: plane.Identity()}}}
}

// features are designs that between them use all that a file can say, one for
// each file in testdata. The workshop in them, Larkmoor Cavities, is invented.
func features(t testing.TB) map[string]table.Design {
	all := map[string]table.Design{}
	for _, k := range shape.Catalogue() {
		d := onlyWall(figure(t, k.Name, nil))
		if k.Name == "three-posts" {
			d.Items[0].Role = table.Post
		}
		all["shape-"+k.Name] = d
	}

	d := onlyWall(figure(t, "stadium", nil))
	d.Name, d.Notes = "Larkmoor Cavities plate 7", "An invented test plate.\nQuarter \"A\", κ > 0 — to be milled."
	d.Unit = table.Micrometre
	all["head"] = d

	d = onlyWall(figure(t, "rectangle", map[string]float64{"width": 6, "height": 4}))
	d.Items[0].Place = plane.Similarity{Shift: r2.Vec{X: 1e-7, Y: -0.1}, Angle: math.Pi / 7, Scale: 1.0 / 3}
	d.Items = append(d.Items, table.Item{Shape: figure(t, "disc", map[string]float64{"radius": 0.1}), Role: table.Post, Place: at(0.25, 0)})
	all["placed"] = d

	d = onlyWall(shape.NewFreeform([]shape.Node{
		{At: r2.Vec{X: -2, Y: -1}},
		{At: r2.Vec{X: 2, Y: -1}, Span: shape.Bowed, Bulge: 0.4},
		{At: r2.Vec{X: 2, Y: 1}, Span: shape.Curved, Out: r2.Vec{X: -0.5, Y: 0.75}},
		{At: r2.Vec{X: 0, Y: 1.5}, Joint: shape.Smooth, Span: shape.Curved, In: r2.Vec{X: 0.5, Y: 0}, Out: r2.Vec{X: -0.7, Y: 0}},
		{At: r2.Vec{X: -2, Y: 1}, In: r2.Vec{X: 0.25, Y: 0.5}},
	}))
	all["freeform"] = d

	d = onlyWall(shape.NewFreeform([]shape.Node{
		{At: r2.Vec{X: -2, Y: -1}, Fillet: 0.25},
		{At: r2.Vec{X: 2, Y: -1}, Span: shape.Elliptic, Bulge: 0.8, Ratio: 1.5, Tilt: 0.125},
		// Both curvatures at the fair node are 8/9: 2/3 of 0.75 over 0.75².
		{At: r2.Vec{X: 2, Y: 1}, Span: shape.Curved, Out: r2.Vec{X: -0.5, Y: -0.25}},
		{At: r2.Vec{X: 0, Y: 1.5}, Joint: shape.Fair, Span: shape.Curved, In: r2.Vec{X: 0.75, Y: 0}, Out: r2.Vec{X: -0.75, Y: 0}},
		{At: r2.Vec{X: -2, Y: 1}, In: r2.Vec{X: 0.5, Y: -0.25}},
	}))
	all["freeform-fair"] = d

	var plate []shape.Node
	for _, p := range []r2.Vec{{X: 2}, {X: 2.5, Y: 1.5}, {X: -2, Y: 1.5}, {X: -1.5}, {X: -2, Y: -1.5}, {X: 2.5, Y: -1.5}} {
		plate = append(plate, shape.Node{At: p})
	}
	plate[0].Fillet, plate[3].Fillet = 0.5, 0.5
	f, ok := shape.Symmetric(plate, shape.Symmetry{Fold: 2, Mirror: true, Centre: r2.Vec{X: 0.25}})
	if !ok {
		t.Fatal("the plate is not symmetric")
	}
	all["freeform-symmetric"] = onlyWall(f)

	d = onlyWall(figure(t, "rectangle", nil))
	d.Bare = wall.Lossy{Reflectivity: 0.995}
	d.Coats = []table.Coat{
		{Item: 0, Side: 0, From: 0.25, To: 0.5, Law: wall.Opening{}},
		{Item: 0, Side: 1, From: 0, To: 1, Law: wall.Dielectric{Index: 3.3, Outside: 1, Polarisation: wall.TE}},
		{Item: 0, Side: 2, From: 0, To: 0.1, Law: wall.Rough{Share: 0.5}},
		{Item: 0, Side: table.AllSides, From: 0.9, To: 1, Law: wall.Mirror{}},
	}
	all["coats"] = d

	d = onlyWall(figure(t, "disc", nil))
	d.Study = table.Study{Seed: math.MaxUint64, Bounces: 500,
		Launches: []table.Launch{
			{S: 0.125, P: -0.3, Count: 1},
			{From: table.Inside, Point: r2.Vec{X: 0.1, Y: 0.2}, Angle: 1, Count: 1},
			{Pattern: table.Fan, S: 0.5, Count: 11, Spread: 0.5},
			{Pattern: table.Beam, From: table.Inside, Angle: -2, Count: 7, Spread: 0.2},
			{Pattern: table.Sweep, Count: 40, Region: table.Region{S0: 0.9, S1: 0.1, P0: -0.5, P1: 0.5}},
			{Pattern: table.Even, Count: 100, Region: table.WholeSection()},
		},
		Display: table.Display{Sense: table.Clockwise, Position: table.Fraction, Momentum: table.Angle}}
	all["study"] = d
	all["sweeps"] = swept(t)
	return all
}

func written(t testing.TB, d table.Design) []byte {
	t.Helper()
	var b bytes.Buffer
	if err := Write(&b, d); err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}

func TestGoldens(t *testing.T) {
	for name, d := range features(t) {
		t.Run(name, func(t *testing.T) {
			path := filepath.Join(samples, name+".cavity.json")
			got := written(t, d)
			if *update {
				if err := os.WriteFile(path, got, 0o644); err != nil {
					t.Fatal(err)
				}
			}
			want, err := os.ReadFile(path)
			if err != nil {
				t.Fatal(err)
			}
			if diff := cmp.Diff(string(want), string(got)); diff != "" {
				t.Errorf("written (-file +got):\n%s", diff)
			}
			back, err := Read(bytes.NewReader(want))
			if err != nil {
				t.Fatal(err)
			}
			if diff := cmp.Diff(d, back, same); diff != "" {
				t.Errorf("read back (-design +read):\n%s", diff)
			}
		})
	}
}

// Every file in testdata is one of the features: none is left over.
func TestNoStrayGoldens(t *testing.T) {
	files, err := filepath.Glob(filepath.Join(samples, "*.cavity.json"))
	if err != nil {
		t.Fatal(err)
	}
	all := features(t)
	if len(files) != len(all) {
		t.Errorf("%d files for %d features", len(files), len(all))
	}
}

// By hand, in another order, with all that may be left out left out.
func TestDefaults(t *testing.T) {
	const text = `{"items":[{"parameters":{"radius":2},"shape":"disc","role":"wall"}],"unit":"mm","version":1,"format":"cavity"}`
	got, err := Read(bytes.NewReader([]byte("\ufeff" + text)))
	if err != nil {
		t.Fatal(err)
	}
	want := onlyWall(figure(t, "disc", map[string]float64{"radius": 2}))
	if diff := cmp.Diff(want, got, same); diff != "" {
		t.Error(diff)
	}
}
