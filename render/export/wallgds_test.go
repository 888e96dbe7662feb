package export

import (
	"encoding/binary"
	"fmt"
	"math"
	"strings"
	"testing"

	"cavitywright/table/outline"
	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// readGDS is a reader of the records of a stream (GDSII Stream Format Manual,
// 6.0): length, type and kind of data, big-endian; reals of excess 64.
func readGDS(t *testing.T, file []byte) (contours []contourRead, user, metres float64) {
	t.Helper()
	real := func(b []byte) float64 {
		mantissa := 0.0
		for i := 7; i >= 1; i-- {
			mantissa = (mantissa + float64(b[i])) / 256
		}
		v := mantissa * math.Pow(16, float64(b[0]&0x7f)-64)
		if b[0]&0x80 != 0 {
			v = -v
		}
		return v
	}
	var order []string
	open := false
	for len(file) > 0 {
		n := int(binary.BigEndian.Uint16(file))
		if n < 4 || n%2 == 1 || n > len(file) {
			t.Fatalf("a record of %d bytes", n)
		}
		kind, data := file[2], file[4:n]
		switch kind {
		case 0x03:
			user, metres = real(data[:8]), real(data[8:])
		case 0x08:
			contours, open = append(contours, contourRead{closed: true}), false
		case 0x09:
			contours, open = append(contours, contourRead{}), true
		case 0x0D:
			contours[len(contours)-1].layer = fmt.Sprint(binary.BigEndian.Uint16(data))
		case 0x10:
			c := &contours[len(contours)-1]
			for i := 0; i < len(data); i += 8 {
				c.x = append(c.x, float64(int32(binary.BigEndian.Uint32(data[i:]))))
				c.y = append(c.y, float64(int32(binary.BigEndian.Uint32(data[i+4:]))))
			}
			last := len(c.x) - 1
			if !open && (c.x[0] != c.x[last] || c.y[0] != c.y[last]) {
				t.Error("a polygon does not end where it begins")
			}
			if last+1 > 8191 || last < 1 {
				t.Errorf("an element of %d points", last+1)
			}
			if !open {
				c.x, c.y = c.x[:last], c.y[:last]
			}
			c.bulge = make([]float64, len(c.x))
		}
		if kind != 0x0D && kind != 0x0E && kind != 0x0F && kind != 0x10 && kind != 0x11 && kind != 0x08 && kind != 0x09 {
			order = append(order, fmt.Sprintf("%02X", kind))
		}
		file = file[n:]
	}
	if got := strings.Join(order, " "); got != "00 01 02 03 05 06 07 04" {
		t.Errorf("the records are %s", got)
	}
	return contours, user, metres
}

// TestWallGDS: an independent reader finds whole grid steps, the area within
// the error stated, no polygon of more than 8191 points and no edges that
// cross.
func TestWallGDS(t *testing.T) {
	for name, tab := range everyWall(t) {
		size := plane.Diagonal(tab.Bounds())
		grid := 1e-6 * size
		file, a := handed(t, tab, WallGDS, outline.Options{ChordError: 1e-5 * size, Grid: grid})
		contours, user, metres := readGDS(t, file)
		step := grid * tab.Design().Unit.Metres()
		if math.Abs(metres/step-1) > 1e-14 || math.Abs(user/(step*1e6)-1) > 1e-14 {
			t.Errorf("%s: a step is %g m and %g µm, want %g m", name, metres, user, step)
		}
		var loops [][]r2.Vec
		for i := range contours {
			c := &contours[i]
			var points []r2.Vec
			for k := range c.x {
				c.x[k], c.y[k] = c.x[k]*grid, c.y[k]*grid
				points = append(points, r2.Vec{X: c.x[k], Y: c.y[k]})
			}
			if c.closed {
				loops = append(loops, points)
			}
		}
		area, _ := summed(contours)
		if d := area - tab.Area(); !tab.Open() && math.Abs(d) > tab.Length()*a.Achieved {
			t.Errorf("%s: area off by %g where %g is stated", name, d, a.Achieved)
		}
		if a.Achieved > 1e-5*size+1.3*grid {
			t.Errorf("%s: achieved %g", name, a.Achieved)
		}
		if at, met := outline.Crossing(loops); met != outline.Apart {
			t.Errorf("%s: edges cross at %v", name, at)
		}
	}
}

// TestWallGDSLarge: a wall of 30 mm at 1 nm takes more points than a polygon
// may have, and is divided.
func TestWallGDSLarge(t *testing.T) {
	tab := everyWall(t)["square-with-disc"]
	file, a := handed(t, tab, WallGDS, outline.Options{ChordError: 1e-9, Grid: 1e-6})
	contours, _, _ := readGDS(t, file)
	area, _ := summed(contours)
	if len(contours) < 2 || math.Abs(area*1e-12-tab.Area()) > tab.Length()*a.Achieved {
		t.Errorf("%d polygons of area %g, want %g", len(contours), area*1e-12, tab.Area())
	}
}

// TestReal8: the stream's reals, against the manual's examples (1e-3 and 1e-9
// as every 1 nm stream has them; from memory) and the limits of a double.
func TestReal8(t *testing.T) {
	for _, c := range []struct {
		x    float64
		want uint64
	}{{1, 0x4110000000000000}, {0, 0}, {-2, 0xC120000000000000}, {1e-3, 0x3E4189374BC6A7F0}, {1e-9, 0x3944B82FA09B5A54}, {0.0625, 0x4010000000000000}} {
		got := real8(c.x)
		if diff := int64(got - c.want); diff > 16 || diff < -16 {
			t.Errorf("%g: %016X, want %016X", c.x, got, c.want)
		}
	}
}
