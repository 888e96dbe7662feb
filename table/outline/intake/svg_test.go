package intake

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"cavitywright/table"
	"cavitywright/table/outline"
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// drawn reads a drawing, as a table in mm.
func drawn(t *testing.T, svg string, o Options) *table.Table {
	t.Helper()
	d, err := Read(strings.NewReader(svg))
	if err != nil {
		t.Fatalf("%s: %v", svg, err)
	}
	design, _, err := d.Design(o)
	if err != nil {
		t.Fatalf("%s: %v", svg, err)
	}
	tab, err := table.New(design)
	if err != nil {
		t.Fatal(err)
	}
	return tab
}

// plain is a drawing 100 mm wide and high whose numbers are mm.
func plain(body string) string {
	return `<svg xmlns="http://www.w3.org/2000/svg" width="100mm" height="100mm" viewBox="0 0 100 100">` + body + `</svg>`
}

// TestShapes: every element and every command of a path encloses the area that
// geometry says, with the perimeter where that has a closed form.
func TestShapes(t *testing.T) {
	const quarter = math.Pi / 4
	for _, c := range []struct {
		body            string
		area, perimeter float64 // perimeter 0: not checked
	}{
		{`<rect x="10" y="10" width="30" height="20"/>`, 600, 100},
		{`<rect x="10" y="10" width="30" height="20" rx="5"/>`, 600 - (4-math.Pi)*25, 60 + 10*math.Pi},
		{`<rect width="30" height="20" rx="50" ry="4"/>`, 600 - (4-math.Pi)*15*4, 0},
		{`<circle cx="50" cy="50" r="10"/>`, 100 * math.Pi, 20 * math.Pi},
		{`<ellipse cx="50" cy="50" rx="20" ry="10"/>`, 200 * math.Pi, 0},
		{`<polygon points="0,0 10,0,10 10 0 10"/>`, 100, 40},
		{`<polyline points="0 0 10 0 10 10 0 0"/>`, 50, 20 + 10*math.Sqrt2},
		{`<path d="M0 0H10V10H0Z"/>`, 100, 40},
		{`<path d="m5 5h10v10h-10z"/>`, 100, 40},
		{`<path d="M0 0L10,0 10-10L0-10Z"/>`, 100, 40},
		{`<path d="M 0 0 10 0 10 10 0 10 z"/>`, 100, 40},
		{`<path d="M.5.5l1e1 0 0 10-10 0z"/>`, 100, 40},
		{`<path d="M0,0A10,10 0 0 1 20,0Z"/>`, 50 * math.Pi, 20 + 10*math.Pi},
		{`<path d="M0,0a10 10 0 0020,0z"/>`, 50 * math.Pi, 20 + 10*math.Pi}, // flags without room between
		{`<path d="M20,0 A20 20 0 0 1 0 20 L0 0 Z"/>`, 400 * quarter, 40 + 10*math.Pi},
		{`<path d="M20,0 A20 20 0 1 0 0 20 L0 0 Z"/>`, 300 * math.Pi, 40 + 30*math.Pi}, // the long way round
		{`<path d="M20,0 A20 10 0 0 1 0 10 L0 0 Z"/>`, 200 * quarter, 0},
		{`<path d="M0 0 A1 1 0 0 1 20 0 Z"/>`, 50 * math.Pi, 20 + 10*math.Pi}, // radii that are too small grow
		{`<path d="M0 0Q10 20 20 0Z"/>`, 2.0 / 3 * 20 * 10, 0},                // a parabola has 2/3 of its box
		{`<path d="M0 0Q5 10 10 0T20 0L20 -10 0 -10Z"/>`, 200, 0},             // the mirrored parabola takes back what the first adds
		{`<path d="M0 0C0 10 10 10 10 0Z"/>`, 60, 0},                          // 3/5 of the box of the handles
		{`<path d="M0 0C0 10 10 10 10 0S20-10 20 0L30 0 30-20 0-20Z"/>`, 600, 0},
		{`<path d="M0 0 10 0 10 10 0 10Z M2 2 4 2 4 4 2 4Z"/>`, 96, 48},
		{`<path d="M0 0 10 0 10 10 0 10Z" fill-rule="nonzero"/><path d="M2 2 2 4 4 4 4 2Z"/>`, 96, 48},
		{`<line x1="0" y1="0" x2="10" y2="0"/><path d="M10 10L10 0M10 10H0"/><line x2="0" y2="10"/>`, 100, 40}, // joined end to end
		{`<defs><rect width="90" height="90"/></defs><g display="none"><circle r="40"/></g><rect width="3" height="4"/>`, 12, 14},
		{`<g id="openings"><path d="M1 1 2 2"/></g><rect width="3" height="4"/>`, 12, 14},
		{`<rect width="10mm" height="1in"/>`, 10 * 96 / 25.4 * 96, 0},
	} {
		tab := drawn(t, plain(c.body), Options{Unit: table.Millimetre})
		if math.Abs(tab.Area()-c.area) > 1e-9*c.area {
			t.Errorf("%s: area %.12g, want %.12g", c.body, tab.Area(), c.area)
		}
		if c.perimeter > 0 && math.Abs(tab.Length()-c.perimeter) > 1e-9*c.perimeter {
			t.Errorf("%s: perimeter %.12g, want %.12g", c.body, tab.Length(), c.perimeter)
		}
	}
}

// TestTransforms: transforms, nested ones too, move a shape as their matrices
// say; the box of the wall is compared.
func TestTransforms(t *testing.T) {
	rect := `<rect width="20" height="10"/>`
	for _, c := range []struct {
		body string
		want r2.Box // y up
		area float64
	}{
		{`<g transform="translate(5 7)">` + rect + `</g>`, r2.Box{Min: r2.Vec{X: 5, Y: -17}, Max: r2.Vec{X: 25, Y: -7}}, 200},
		{`<g transform="translate(5,7)"><g transform="scale(2)">` + rect + `</g></g>`, r2.Box{Min: r2.Vec{X: 5, Y: -27}, Max: r2.Vec{X: 45, Y: -7}}, 800},
		{`<g transform="scale(2) translate(5,7)">` + rect + `</g>`, r2.Box{Min: r2.Vec{X: 10, Y: -34}, Max: r2.Vec{X: 50, Y: -14}}, 800},
		{`<rect width="20" height="10" transform="rotate(90)"/>`, r2.Box{Min: r2.Vec{X: -10, Y: -20}, Max: r2.Vec{X: 0, Y: 0}}, 200},
		{`<rect width="20" height="10" transform="rotate(90 20 0)"/>`, r2.Box{Min: r2.Vec{X: 10, Y: 0}, Max: r2.Vec{X: 20, Y: 20}}, 200},
		{`<rect width="20" height="10" transform="matrix(-1 0 0 1 0 0)"/>`, r2.Box{Min: r2.Vec{X: -20, Y: -10}, Max: r2.Vec{X: 0, Y: 0}}, 200},
		{`<rect width="20" height="10" transform="skewX(45)"/>`, r2.Box{Min: r2.Vec{X: 0, Y: -10}, Max: r2.Vec{X: 30, Y: 0}}, 200},
		{`<circle r="10" transform="scale(2 1)"/>`, r2.Box{Min: r2.Vec{X: -20, Y: -10}, Max: r2.Vec{X: 20, Y: 10}}, 200 * math.Pi},
		{`<svg x="5" y="5" width="20" height="20" viewBox="0 0 10 10"><rect width="5" height="5"/></svg>`, r2.Box{Min: r2.Vec{X: 5, Y: -15}, Max: r2.Vec{X: 15, Y: -5}}, 100},
		// An arc sheared is that of an ellipse: its box by its conjugate axes.
		{`<circle r="10" transform="skewX(45)"/>`, r2.Box{Min: r2.Vec{X: -10 * math.Sqrt2, Y: -10}, Max: r2.Vec{X: 10 * math.Sqrt2, Y: 10}}, 100 * math.Pi},
		{`<path transform="skewX(45)" d="M20 0 A20 20 0 0 1 0 20 L0 0Z"/>`, r2.Box{Min: r2.Vec{X: 0, Y: -20}, Max: r2.Vec{X: 20 * math.Sqrt2, Y: 0}}, 100 * math.Pi},
	} {
		tab := drawn(t, plain(c.body), Options{Unit: table.Millimetre})
		b := tab.Bounds()
		if r2.Norm(r2.Sub(b.Min, c.want.Min)) > 1e-8 || r2.Norm(r2.Sub(b.Max, c.want.Max)) > 1e-8 {
			t.Errorf("%s: box %v, want %v", c.body, b, c.want)
		}
		if math.Abs(tab.Area()-c.area) > 1e-9*c.area {
			t.Errorf("%s: area %.12g, want %.12g", c.body, tab.Area(), c.area)
		}
	}
}

// TestUnits: width, height and viewBox say how large a drawing is; 96 px, 72
// pt and 6 pc are an inch of 25.4 mm (CSS Values 3, 6.2).
func TestUnits(t *testing.T) {
	for _, c := range []struct {
		head string
		side float64 // of a square of 10 units
		unit table.Unit
	}{
		{`width="100mm" height="100mm" viewBox="0 0 100 100"`, 10, table.Millimetre},
		{`width="10cm" height="10cm" viewBox="0 0 100 100"`, 10, table.Millimetre},
		{`width="1in" viewBox="0 0 10 10"`, 25.4, table.Millimetre},
		{`height="72pt" viewBox="0 0 10 10"`, 25.4, table.Millimetre},
		{`width="96px" height="96px" viewBox="0 0 10 10"`, 25.4, table.Millimetre},
		{`width="96" height="96"`, 10 * 25.4 / 96, table.Millimetre},
		{`width="6pc" viewBox="0 0 10 10"`, 25.4, table.Millimetre},
		{`width="0.02mm" height="0.02mm" viewBox="0 0 20 20"`, 10, table.Micrometre},
		{`width="20um" height="20um" viewBox="0 0 20 20"`, 10, table.Micrometre},
		{`width="5m" height="5m" viewBox="0 0 10 10"`, 5, table.Metre},
		{`width="100mm" height="50mm" viewBox="0 0 10 10"`, 50, table.Millimetre}, // the smaller scale holds
	} {
		svg := `<svg xmlns="http://www.w3.org/2000/svg" ` + c.head + `><rect width="10" height="10"/></svg>`
		tab := drawn(t, svg, Options{})
		if got := math.Sqrt(tab.Area()); math.Abs(got-c.side) > 1e-12*c.side || tab.Design().Unit != c.unit {
			t.Errorf("%s: a side of %.12g %s, want %g %s", c.head, got, tab.Design().Unit, c.side, c.unit)
		}
	}
	bare := `<svg xmlns="http://www.w3.org/2000/svg"><rect width="10" height="20"/></svg>`
	for _, c := range []struct {
		o    Options
		area float64
	}{
		{Options{Unit: table.Micrometre}, 200},
		{Options{Unit: table.Micrometre, Scale: 2}, 800},
		{Options{Unit: table.Millimetre, Height: 10}, 50},
	} {
		if tab := drawn(t, bare, c.o); math.Abs(tab.Area()-c.area) > 1e-9 || tab.Design().Unit != c.o.Unit {
			t.Errorf("%+v: area %g", c.o, tab.Area())
		}
	}
}

// TestNearlySmooth: the joints of a stadium written with six digits are made
// smooth, and the wall hardly moves.
func TestNearlySmooth(t *testing.T) {
	svg := plain(`<path d="M20.0003 10.0001 C40.1234 10.0052 60.4321 20.0012 60 40 C59.56791 59.99882 40 70 20 60 C0 50 -0.123 9.99488 20.0003 10.0001 Z"/>`)
	d, err := Read(strings.NewReader(svg))
	if err != nil {
		t.Fatal(err)
	}
	design, a, err := d.Design(Options{})
	if err != nil {
		t.Fatal(err)
	}
	tab, err := table.New(design)
	if err != nil {
		t.Fatal(err)
	}
	smooth := 0
	for _, j := range tab.Joints() {
		if j.Continuity != table.Corner {
			smooth++
		}
	}
	if smooth != 3 || a.Moved == 0 || a.Moved > 1e-3 {
		t.Errorf("%d smooth joints, moved by %g", smooth, a.Moved)
	}
}

// TestHugePolygon: 10^5 points are refused as they are, and fitted within
// seconds.
func TestHugePolygon(t *testing.T) {
	const n = 100_000
	var b strings.Builder
	b.WriteString("x [um], y [um]\n")
	for i := range n {
		phi := 2 * math.Pi * float64(i) / n
		p := r2.Scale(5*(1+0.43*math.Cos(phi)), plane.Polar(phi))
		fmt.Fprintf(&b, "%.6f, %.6f\n", p.X, p.Y)
	}
	d, err := Read(strings.NewReader(b.String()))
	if err != nil {
		t.Fatal(err)
	}
	_, _, err = d.Design(Options{})
	if want := "The outline has 100000 corners, and a table holds 5000; fit a smooth wall to it."; err == nil || err.Error() != want {
		t.Errorf("said %v, want %s", err, want)
	}
	design, a, err := d.Design(Options{Fit: outline.Fit{Tolerance: 1e-3}})
	if err != nil {
		t.Fatal(err)
	}
	tab, err := table.New(design)
	if err != nil {
		t.Fatal(err)
	}
	if area := 25 * math.Pi * (1 + 0.43*0.43/2); math.Abs(tab.Area()/area-1) > 1e-4 || tab.Design().Unit != table.Micrometre || a.Residual.Greatest > 1e-3 {
		t.Errorf("area %g, want %g; %+v", tab.Area(), area, a)
	}
}
