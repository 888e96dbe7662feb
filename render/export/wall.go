package export

import (
	"fmt"
	"io"
	"math"
	"path/filepath"
	"strings"

	"cavitywright/sim/figure"
)

// WallFormat is a kind of file for a wall's outline.
type WallFormat uint8

// The formats of an outline: a drawing in real size, a drawing for machines, a
// stream for masks, a table of points.
const (
	WallSVG WallFormat = iota
	WallDXF
	WallGDS
	WallCSV
)

// wallNames are the formats' file endings, in the order of their constants.
var wallNames = [...]string{"svg", "dxf", "gds", "csv"}

// String is the usual ending of the format's files.
func (f WallFormat) String() string { return wallNames[f] }

// WallFormatOf tells the format by the ending of a file's name.
func WallFormatOf(filename string) (WallFormat, error) {
	ending := strings.ToLower(strings.TrimPrefix(filepath.Ext(filename), "."))
	for f, name := range wallNames {
		if ending == name {
			return WallFormat(f), nil
		}
	}
	return 0, &UnknownEnding{Name: filename, Known: wallNames[:]}
}

// WallOptions is what an outline's file holds besides it. Grid, of a stream, is
// the length of its step in the outline's unit.
type WallOptions struct {
	Table []byte // the table file, carried inside a drawing; nil for none
	Grid  float64
}

// WriteWall writes an outline in a format. It must have been made for that: a
// machine's has lines and arcs alone, a mask's is on the grid, a table of
// points has them.
func WriteWall(w io.Writer, format WallFormat, f figure.Outline, o WallOptions) error {
	switch format {
	case WallSVG:
		return writeWallSVG(w, f, o)
	case WallDXF:
		return writeWallDXF(w, f)
	case WallGDS:
		return writeWallGDS(w, f, o)
	case WallCSV:
		return writeWallCSV(w, f)
	}
	panic("export: an unknown format")
}

// extent is a box of an outline: of its corners, the middles of its arcs and
// the control points of its cubics. It may miss a little of a wide arc.
func extent(contours []figure.Contour) (x0, y0, x1, y1 float64) {
	first := true
	add := func(x, y float64) {
		if first {
			x0, y0, x1, y1 = x, y, x, y
			first = false
		}
		x0, y0, x1, y1 = min(x0, x), min(y0, y), max(x1, x), max(y1, y)
	}
	for _, c := range contours {
		add(c.X, c.Y)
		atX, atY := c.X, c.Y
		for _, s := range c.Steps {
			add(s.X, s.Y)
			switch s.Kind {
			case figure.ArcStep: // the sagitta beyond the chord, to both sides
				dx, dy := s.X-atX, s.Y-atY
				mx, my := (atX+s.X)/2+s.Bulge*dy/2, (atY+s.Y)/2-s.Bulge*dx/2
				add(mx, my)
				add((atX+s.X)/2, (atY+s.Y)/2)
			case figure.OvalStep: // places along it
				sin, cos := math.Sincos(s.Tilt)
				on := func(t float64) (x, y float64) {
					u, v := s.Radius*math.Cos(t), s.Minor*math.Sin(t)
					return cos*u - sin*v, sin*u + cos*v
				}
				ex, ey := on(s.From + s.Sweep)
				for k := range 16 {
					x, y := on(s.From + s.Sweep*float64(k)/16)
					add(s.X-ex+x, s.Y-ey+y)
				}
			case figure.CubicStep:
				add(s.C[0], s.C[1])
				add(s.C[2], s.C[3])
			}
			atX, atY = s.X, s.Y
		}
	}
	return x0, y0, x1, y1
}

// unfit says that an outline has a step that the format has none for.
func unfit(format WallFormat) error {
	return fmt.Errorf("the outline has steps that %s files do not hold; make it for that format", strings.ToUpper(format.String()))
}
