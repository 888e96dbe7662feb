package export

import (
	"bufio"
	"encoding/binary"
	"fmt"
	"io"
	"math"
	"strings"

	"cavitywright/sim/figure"
)

// The layers of a stream file.
const (
	maskTable     = 1 // what is inside the table
	maskOpenings  = 2 // lines of no width along openings
	maskObstacles = 3 // of a table without an outer wall
)

// The records of a stream file that are written: type and kind of data (GDSII
// Stream Format Manual, Calma 1987).
const (
	gdsHeader   = 0x0002
	gdsBgnLib   = 0x0102
	gdsLibName  = 0x0206
	gdsUnits    = 0x0305
	gdsEndLib   = 0x0400
	gdsBgnStr   = 0x0502
	gdsStrName  = 0x0606
	gdsEndStr   = 0x0700
	gdsBoundary = 0x0800
	gdsPath     = 0x0900
	gdsLayer    = 0x0D02
	gdsDataType = 0x0E02
	gdsWidth    = 0x0F03
	gdsXY       = 0x1003
	gdsEndEl    = 0x1100
)

// mostGDSPoints is the greatest number of points of one element.
const mostGDSPoints = 8191

// TooWide says that an outline does not fit the whole numbers of a stream.
type TooWide struct{ Steps float64 }

func (e *TooWide) Error() string {
	return fmt.Sprintf("the outline is %.3g grid steps wide, and a stream file holds %.3g at most; choose a coarser grid", e.Steps, float64(math.MaxInt32))
}

// writeWallGDS writes an outline on its grid as a GDSII stream. Its user unit
// is the micrometre. It bears no time, so that the same wall gives the same
// bytes.
func writeWallGDS(w io.Writer, f figure.Outline, o WallOptions) error {
	x0, y0, x1, y1 := extent(f.Contours)
	if widest := max(math.Abs(x0), math.Abs(y0), math.Abs(x1), math.Abs(y1)) / o.Grid; !(widest < math.MaxInt32) {
		return &TooWide{widest}
	}
	g := &stream{b: bufio.NewWriter(w), grid: o.Grid}
	step := o.Grid * f.Metres
	epoch := []int16{1970, 1, 1, 0, 0, 0, 1970, 1, 1, 0, 0, 0}
	g.record(gdsHeader, []int16{600})
	g.record(gdsBgnLib, epoch)
	g.text(gdsLibName, "CAVITY")
	g.record(gdsUnits, []uint64{real8(step / 1e-6), real8(step)})
	g.record(gdsBgnStr, epoch)
	g.text(gdsStrName, structureName(f.Name))
	for _, c := range f.Contours {
		layer := int16(maskTable)
		if c.Obstacle {
			layer = maskObstacles
		}
		if err := g.boundary(c, layer); err != nil {
			return err
		}
	}
	for _, c := range f.Openings {
		if err := g.path(c); err != nil {
			return err
		}
	}
	g.record(gdsEndStr, nil)
	g.record(gdsEndLib, nil)
	return g.b.Flush()
}

type stream struct {
	b    *bufio.Writer
	grid float64
}

// record writes one record; data is a slice of numbers of fixed size, or nil.
func (g *stream) record(kind uint16, data any) {
	size := 4
	if data != nil {
		size += binary.Size(data)
	}
	_ = binary.Write(g.b, binary.BigEndian, [2]uint16{uint16(size), kind}) // errors stay in the writer
	if data != nil {
		_ = binary.Write(g.b, binary.BigEndian, data)
	}
}

func (g *stream) text(kind uint16, s string) {
	b := []byte(s)
	if len(b)%2 == 1 {
		b = append(b, 0)
	}
	g.record(kind, b)
}

// points are the corners of a contour as pairs of whole grid steps.
func (g *stream) points(c figure.Contour) ([]int32, error) {
	xy := make([]int32, 0, 2*len(c.Steps)+2)
	add := func(x, y float64) {
		xy = append(xy, int32(math.Round(x/g.grid)), int32(math.Round(y/g.grid)))
	}
	add(c.X, c.Y)
	for _, s := range c.Steps {
		if s.Kind != figure.StraightStep {
			return nil, unfit(WallGDS)
		}
		add(s.X, s.Y)
	}
	return xy, nil
}

func (g *stream) boundary(c figure.Contour, layer int16) error {
	xy, err := g.points(c)
	if err == nil && len(xy) > 2*mostGDSPoints {
		err = fmt.Errorf("a polygon has %d points, and a stream file holds %d at most; divide it", len(xy)/2, mostGDSPoints)
	}
	if err != nil {
		return err
	}
	g.record(gdsBoundary, nil)
	g.record(gdsLayer, []int16{layer})
	g.record(gdsDataType, []int16{0})
	g.record(gdsXY, xy)
	g.record(gdsEndEl, nil)
	return nil
}

// path writes a line of no width, in pieces where it is long.
func (g *stream) path(c figure.Contour) error {
	xy, err := g.points(c)
	if err != nil {
		return err
	}
	for len(xy) >= 4 {
		n := min(len(xy), 2*200) // as some readers take no more
		g.record(gdsPath, nil)
		g.record(gdsLayer, []int16{maskOpenings})
		g.record(gdsDataType, []int16{0})
		g.record(gdsWidth, []int32{0})
		g.record(gdsXY, xy[:n])
		g.record(gdsEndEl, nil)
		xy = xy[n-2:]
		if len(xy) == 2 {
			break
		}
	}
	return nil
}

// real8 is a number in the stream's own form: a sign, an exponent of 16 from
// -64, and 56 bits of a fraction in [1/16, 1).
func real8(x float64) uint64 {
	if x == 0 {
		return 0
	}
	var sign uint64
	if x < 0 {
		sign, x = 1<<63, -x
	}
	fraction, two := math.Frexp(x) // in [1/2, 1)
	exponent := (two + 3) >> 2     // of 16, rounded up
	fraction = math.Ldexp(fraction, two-4*exponent)
	return sign | uint64(exponent+64)<<56 | uint64(math.Ldexp(fraction, 56))
}

// structureName is a name as a stream may have it: up to 32 letters, digits
// and low lines.
func structureName(name string) string {
	name = strings.Map(func(r rune) rune {
		switch {
		case r == 'ç':
			return 'C'
		case r >= 'a' && r <= 'z':
			return r - 'a' + 'A'
		case r >= 'A' && r <= 'Z', r >= '0' && r <= '9':
			return r
		}
		return '_'
	}, name)
	if name = strings.Trim(name, "_"); name == "" {
		return "WALL"
	}
	return name[:min(len(name), 32)]
}
