package export

import (
	"fmt"
	"math"
	"strconv"
	"strings"
	"testing"

	"cavitywright/table"
	"cavitywright/table/outline"
	"cavitywright/table/plane"
)

// contourRead is a contour as a reader found it: corners and, of each edge,
// the bulge.
type contourRead struct {
	layer  string
	closed bool
	x, y   []float64
	bulge  []float64
}

// measured is the signed area and the length of a contour, by its own formulas:
// the shoelace and the segment of a circle.
func (c *contourRead) measured() (area, length float64) {
	n := len(c.x)
	for i := range n {
		j := (i + 1) % n
		if j == 0 && !c.closed {
			break
		}
		area += (c.x[i]*c.y[j] - c.x[j]*c.y[i]) / 2
		chord := math.Hypot(c.x[j]-c.x[i], c.y[j]-c.y[i])
		if b := c.bulge[i]; b != 0 {
			angle := 4 * math.Atan(b)
			radius := chord / 2 / math.Sin(math.Abs(angle)/2)
			area += radius * radius / 2 * (angle - math.Sin(angle))
			chord = radius * math.Abs(angle)
		}
		length += chord
	}
	return area, length
}

// readDXF is a reader of the little that is needed: pairs of group codes and
// values, LWPOLYLINE entities, layers and units (DXF Reference, release 2000).
func readDXF(t *testing.T, file []byte) (contours []contourRead, units int, layers []string) {
	t.Helper()
	lines := strings.Split(strings.TrimSuffix(string(file), "\n"), "\n")
	if len(lines)%2 != 0 || lines[len(lines)-1] != "EOF" {
		t.Fatal("the drawing is no list of pairs that ends with EOF")
	}
	handles := map[string]bool{}
	var entity, variable string
	for i := 0; i < len(lines); i += 2 {
		code, err := strconv.Atoi(strings.TrimSpace(lines[i]))
		if err != nil {
			t.Fatalf("line %d: %v", i+1, err)
		}
		value := lines[i+1]
		for _, r := range value {
			if r > 126 {
				t.Fatalf("line %d is not ASCII: %q", i+2, value)
			}
		}
		num := func() float64 {
			v, err := strconv.ParseFloat(value, 64)
			if err != nil {
				t.Fatalf("line %d: %v", i+2, err)
			}
			return v
		}
		switch {
		case code == 0:
			if entity = value; entity == "LWPOLYLINE" {
				contours = append(contours, contourRead{})
			}
		case code == 9:
			variable = value
		case code == 5 && variable != "$HANDSEED", code == 5 && entity != "SECTION":
			if handles[value] {
				t.Errorf("the handle %s is given twice", value)
			}
			handles[value] = true
		case variable == "$INSUNITS" && code == 70:
			units, _ = strconv.Atoi(value)
			variable = ""
		case entity == "LAYER" && code == 2:
			layers = append(layers, value)
		case entity == "LWPOLYLINE":
			c := &contours[len(contours)-1]
			switch code {
			case 8:
				c.layer = value
			case 70:
				c.closed = value == "1"
			case 10:
				c.x, c.bulge = append(c.x, num()), append(c.bulge, 0)
			case 20:
				c.y = append(c.y, num())
			case 42:
				c.bulge[len(c.bulge)-1] = num()
			}
		}
	}
	return contours, units, layers
}

// summed is the area (obstacles taken out) and length of contours.
func summed(contours []contourRead) (area, length float64) {
	for i := range contours {
		if !contours[i].closed {
			continue
		}
		a, l := contours[i].measured()
		area, length = area+a, length+l
	}
	return area, length
}

// TestWallDXF: an independent reader finds the area and the perimeter within
// the error stated, the unit, the layers and the openings. Walls of lines and
// arcs are exact.
func TestWallDXF(t *testing.T) {
	for name, tab := range everyWall(t) {
		size := plane.Diagonal(tab.Bounds())
		file, a := handed(t, tab, WallDXF, outline.Options{ChordError: 1e-5 * size})
		contours, units, layers := readDXF(t, file)
		if want := map[table.Unit]int{table.Millimetre: 4, table.Micrometre: 13}[tab.Design().Unit]; units != want {
			t.Errorf("%s: unit %d, want %d", name, units, want)
		}
		if got := fmt.Sprint(layers); got != "[0 WALL OBSTACLES OPENINGS]" {
			t.Errorf("%s: layers %s", name, got)
		}
		held(t, name, tab, contours, a, size)
		for _, c := range contours {
			if want := map[bool]string{true: "WALL or OBSTACLES", false: "OPENINGS"}[c.closed]; !strings.Contains(want, c.layer) {
				t.Errorf("%s: layer %s", name, c.layer)
			}
		}
		if name == "free" {
			_, l := contours[2].measured()
			s := tab.Stretches()
			if want := s[len(s)-1].S1 - s[0].S0; len(contours) != 3 || math.Abs(l-want) > 1e-9*size {
				t.Errorf("the opening is %g long, want %g", l, want)
			}
		}
	}
}

// held holds what a reader found to the table and the error stated.
func held(t *testing.T, name string, tab *table.Table, contours []contourRead, a outline.Account, size float64) {
	t.Helper()
	area, length := summed(contours)
	slip := a.Achieved + 1e-12*size
	if d := area - tab.Area(); !tab.Open() && math.Abs(d) > tab.Length()*slip {
		t.Errorf("%s: area off by %g where %g is stated", name, d, a.Achieved)
	}
	if d := length - tab.Length(); math.Abs(d) > 2*math.Pi*float64(len(tab.Loops())+4)*slip {
		t.Errorf("%s: perimeter off by %g where %g is stated", name, d, a.Achieved)
	}
	if d := area - tab.Area() - a.AreaOff; !tab.Open() && math.Abs(d) > 1e-9*size*size+tab.Length()*slip*0.2 {
		t.Errorf("%s: area off by %g, stated %g", name, area-tab.Area(), a.AreaOff)
	}
}
