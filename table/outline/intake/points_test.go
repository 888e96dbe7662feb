package intake

import (
	"math"
	"strconv"
	"strings"
	"testing"

	"cavitywright/table"
)

func number(v float64) string { return strconv.FormatFloat(v, 'g', -1, 64) }

// TestPoints: tables of points with every separator, with and without header,
// unit and remarks, in one loop or more.
func TestPoints(t *testing.T) {
	for _, c := range []struct {
		file  string
		unit  table.Unit
		area  float64
		notes int
	}{
		{"0,0\n3,0\n3,2\n0,2\n", table.Millimetre, 6, 1},
		{"0 0\n3 0\n3 2\n0 2\n0 0\n", table.Millimetre, 6, 1},
		{"x;y\n0;0\n3,5;0\n3,5;2\n0;2\n", table.Millimetre, 7, 1},
		{"x\ty\n0\t0\n3\t0\n3\t2\n0\t2\n", table.Millimetre, 6, 1},
		{"# unit: um\nx,y\n0,0\n3,0\n3,2\n0,2\n", table.Micrometre, 6, 0},
		{"\"x (µm)\",\"y (µm)\"\n0,0\n3,0\n3,2\n0,2\n", table.Micrometre, 6, 0},
		{"Y [m], X [m]\n0,0\n2,0\n2,3\n0,3\n", table.Metre, 6, 0},
		{"x/mm,y/mm,z/mm\n0,0,9\n3,0,9\n3,2,9\n0,2,9\n", table.Millimetre, 6, 0},
		{"% a square with a hole\r\n0 0\r\n4 0\r\n4 4\r\n0 4\r\n\r\n1 1\r\n2 1\r\n2 2\r\n1 2\r\n", table.Millimetre, 15, 1},
		{"loop,x_mm,y_mm\n1,0,0\n1,4,0\n1,4,4\n1,0,4\n2,1,1\n2,2,1\n2,2,2\n2,1,2\n", table.Millimetre, 15, 0},
		{"\ufeffx,y\n0,0\n0,2\n3,2\n3,0\n", table.Millimetre, 6, 1}, // clockwise
	} {
		d, err := Read(strings.NewReader(c.file))
		if err != nil {
			t.Errorf("%q: %v", c.file, err)
			continue
		}
		design, a, err := d.Design(Options{})
		if err != nil {
			t.Errorf("%q: %v", c.file, err)
			continue
		}
		tab, err := table.New(design)
		if err != nil {
			t.Fatal(err)
		}
		if math.Abs(tab.Area()-c.area) > 1e-12 || design.Unit != c.unit || len(a.Notes) != c.notes {
			t.Errorf("%q: area %g in %s, notes %q", c.file, tab.Area(), design.Unit, a.Notes)
		}
	}
}
