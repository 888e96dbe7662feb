package outline

import (
	"math"
	"testing"

	"cavitywright/table"
	"cavitywright/table/param"
	"cavitywright/table/plane"
	"cavitywright/table/shape"
)

// figured is the table of one figure; missing parameters have their defaults.
func figured(t testing.TB, name string, v ...float64) *table.Table {
	t.Helper()
	k := shape.Find(name)
	values := param.Defaults(k.Specs)
	copy(values, v)
	f, err := shape.New(name, values)
	if err != nil {
		t.Fatal(err)
	}
	return compiled(t, table.Item{Shape: f, Place: plane.Identity()})
}

func compiled(t testing.TB, items ...table.Item) *table.Table {
	t.Helper()
	tab, err := table.New(table.Design{Unit: table.Millimetre, Study: table.DefaultStudy(), Items: items})
	if err != nil {
		t.Fatal(err)
	}
	return tab
}

// TestTraceLadder: for every figure and every form, the error achieved falls
// below the one asked for, and area and perimeter differ by no more than it
// allows.
func TestTraceLadder(t *testing.T) {
	for _, k := range shape.Catalogue() {
		tab := figured(t, k.Name)
		size := plane.Diagonal(tab.Bounds())
		for _, form := range []Form{Curves, Arcs, Chords} {
			for _, share := range []float64{1e-2, 1e-4, 1e-6} {
				e := share * size
				o, err := Trace(tab, Options{Form: form, ChordError: e})
				if err != nil {
					t.Errorf("%s, form %d, error %g: %v", k.Name, form, e, err)
					continue
				}
				if o.Achieved > e*(1+1e-9) {
					t.Errorf("%s, form %d: achieved %g of %g", k.Name, form, o.Achieved, e)
				}
				slip := o.Achieved + 1e-11*size
				if math.Abs(o.AreaOff) > tab.Length()*slip {
					t.Errorf("%s, form %d, error %g: area off by %g", k.Name, form, e, o.AreaOff)
				}
				if math.Abs(o.Longer) > 2*math.Pi*float64(len(tab.Loops())+4)*slip {
					t.Errorf("%s, form %d, error %g: longer by %g", k.Name, form, e, o.Longer)
				}
				if math.Abs(o.Area-tab.Area()) > 1e-9*size*size || math.Abs(o.Perimeter-tab.Length()) > 1e-9*size {
					t.Errorf("%s: area %g, perimeter %g against %g, %g", k.Name, o.Area, o.Perimeter, tab.Area(), tab.Length())
				}
			}
		}
	}
}

// TestSagitta: the number of corners is that of the sagitta of a circle,
// sqrt(8 rho e) apart (needs of a mask: R = 5 um at 1 nm takes some 160, R = 30
// mm at 1 um some 390; common practice).
func TestSagitta(t *testing.T) {
	for _, c := range []struct {
		radius, e float64
		want      int
	}{{5, 0.001, 158}, {30, 0.001, 385}} {
		o, err := Trace(figured(t, "disc", c.radius), Options{Form: Chords, ChordError: c.e})
		if err != nil {
			t.Fatal(err)
		}
		if o.Steps < c.want-2 || o.Steps > c.want+2 {
			t.Errorf("a disc of %g at %g: %d corners, want %d", c.radius, c.e, o.Steps, c.want)
		}
		sagitta := c.radius * (1 - math.Cos(math.Pi/float64(o.Steps)))
		if math.Abs(o.Achieved-sagitta) > 1e-12*c.radius {
			t.Errorf("achieved %g, the sagitta is %g", o.Achieved, sagitta)
		}
	}
}

// TestAchievedIsMeasured: the error that is reported is that of the points
// written, by an independent search over the wall.
func TestAchievedIsMeasured(t *testing.T) {
	for _, name := range []string{"limacon", "stadium", "ellipse", "mushroom", "quadrupole"} {
		tab := figured(t, name)
		for _, grid := range []float64{0, 0.003, 0.02} {
			o, err := Trace(tab, Options{Form: Chords, ChordError: 0.01, Grid: grid})
			if err != nil {
				t.Fatal(err)
			}
			points := o.Paths[0].Points()
			worst := 0.0
			const n = 6000
			for k := range n {
				p := tab.At(tab.Length() * float64(k) / n).Point
				least := math.Inf(1)
				for i := range points {
					least = math.Min(least, distance(p, points[i], points[(i+1)%len(points)]))
				}
				worst = math.Max(worst, least)
			}
			if worst > o.Achieved*(1+1e-9) || worst < 0.98*o.Achieved && grid == 0 || worst < 0.5*o.Achieved {
				t.Errorf("%s, grid %g: reported %g, found %g", name, grid, o.Achieved, worst)
			}
			for _, p := range points {
				if grid > 0 && math.Abs(p.X/grid-math.Round(p.X/grid))+math.Abs(p.Y/grid-math.Round(p.Y/grid)) > 1e-9 {
					t.Fatalf("%s: %v is off the grid %g", name, p, grid)
				}
			}
		}
	}
}
