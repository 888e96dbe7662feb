package export

import (
	"bufio"
	"fmt"
	"io"
	"math"
	"strings"

	"cavitywright/sim/figure"
)

// The layers of a DXF drawing.
const (
	layerWall      = "WALL"
	layerObstacles = "OBSTACLES"
	layerOpenings  = "OPENINGS"
)

// insertUnits are DXF's numbers for units of length, by their metres.
var insertUnits = map[float64]int{1: 6, 1e-2: 5, 1e-3: 4, 1e-6: 13, 1e-9: 12}

// writeWallDXF writes an outline as an ASCII DXF drawing of release 2000: each
// contour one closed LWPOLYLINE, whose bulges are the true arcs, in the
// outline's unit, which the header names.
func writeWallDXF(w io.Writer, f figure.Outline) error {
	d := &dxf{b: bufio.NewWriter(w), next: 0x10}
	x0, y0, x1, y1 := extent(f.Contours)
	for _, line := range f.Caption {
		d.put(999, strings.Join(strings.Fields(line), " "))
	}
	// The handles of what others refer to.
	layers := []struct {
		name   string
		colour int
	}{{"0", 7}, {layerWall, 7}, {layerObstacles, 5}, {layerOpenings, 1}}
	model, paper := d.handle(), d.handle()
	entities := &strings.Builder{}
	body := &dxf{b: bufio.NewWriter(entities), next: 0x100}
	for _, c := range f.Contours {
		layer := layerWall
		if c.Obstacle {
			layer = layerObstacles
		}
		if err := body.polyline(c, layer, model, 1); err != nil {
			return err
		}
	}
	for _, c := range f.Openings {
		if err := body.polyline(c, layerOpenings, model, 0); err != nil {
			return err
		}
	}
	_ = body.b.Flush() // a strings.Builder does not fail

	d.section("HEADER", func() {
		d.put(9, "$ACADVER", 1, "AC1015", 9, "$HANDSEED", 5, fmt.Sprintf("%X", body.next+1))
		d.put(9, "$INSUNITS", 70, insertUnits[f.Metres], 9, "$MEASUREMENT", 70, 1)
		d.put(9, "$EXTMIN", 10, x0, 20, y0, 30, 0.0, 9, "$EXTMAX", 10, x1, 20, y1, 30, 0.0)
	})
	d.section("CLASSES", func() {})
	d.section("TABLES", func() {
		d.table("VPORT", func(owner string) {
			d.put(0, "VPORT", 5, d.handle(), 330, owner, 100, "AcDbSymbolTableRecord", 100, "AcDbViewportTableRecord", 2, "*Active", 70, 0,
				10, 0.0, 20, 0.0, 11, 1.0, 21, 1.0, 12, (x0+x1)/2, 22, (y0+y1)/2, 40, 1.1*max(y1-y0, 1e-9), 41, 1.5)
		})
		d.table("LTYPE", func(owner string) {
			for _, name := range []string{"ByBlock", "ByLayer", "Continuous"} {
				d.put(0, "LTYPE", 5, d.handle(), 330, owner, 100, "AcDbSymbolTableRecord", 100, "AcDbLinetypeTableRecord", 2, name, 70, 0, 3, "", 72, 65, 73, 0, 40, 0.0)
			}
		})
		d.table("LAYER", func(owner string) {
			for _, l := range layers {
				d.put(0, "LAYER", 5, d.handle(), 330, owner, 100, "AcDbSymbolTableRecord", 100, "AcDbLayerTableRecord", 2, l.name, 70, 0, 62, l.colour, 6, "Continuous")
			}
		})
		d.table("STYLE", func(owner string) {
			d.put(0, "STYLE", 5, d.handle(), 330, owner, 100, "AcDbSymbolTableRecord", 100, "AcDbTextStyleTableRecord", 2, "Standard", 70, 0, 40, 0.0, 41, 1.0, 50, 0.0, 71, 0, 42, 1.0, 3, "txt", 4, "")
		})
		d.table("VIEW", func(string) {})
		d.table("UCS", func(string) {})
		d.table("APPID", func(owner string) {
			d.put(0, "APPID", 5, d.handle(), 330, owner, 100, "AcDbSymbolTableRecord", 100, "AcDbRegAppTableRecord", 2, "ACAD", 70, 0)
		})
		d.table("DIMSTYLE", func(string) {})
		d.table("BLOCK_RECORD", func(owner string) {
			for i, name := range []string{"*Model_Space", "*Paper_Space"} {
				d.put(0, "BLOCK_RECORD", 5, []string{model, paper}[i], 330, owner, 100, "AcDbSymbolTableRecord", 100, "AcDbBlockTableRecord", 2, name)
			}
		})
	})
	d.section("BLOCKS", func() {
		for i, name := range []string{"*Model_Space", "*Paper_Space"} {
			owner := []string{model, paper}[i]
			d.put(0, "BLOCK", 5, d.handle(), 330, owner, 100, "AcDbEntity", 8, "0", 100, "AcDbBlockBegin", 2, name, 70, 0, 10, 0.0, 20, 0.0, 30, 0.0, 3, name, 1, "")
			d.put(0, "ENDBLK", 5, d.handle(), 330, owner, 100, "AcDbEntity", 8, "0", 100, "AcDbBlockEnd")
		}
	})
	d.section("ENTITIES", func() { _, _ = d.b.WriteString(entities.String()) })
	d.section("OBJECTS", func() {
		root, groups := d.handle(), d.handle()
		d.put(0, "DICTIONARY", 5, root, 330, "0", 100, "AcDbDictionary", 281, 1, 3, "ACAD_GROUP", 350, groups)
		d.put(0, "DICTIONARY", 5, groups, 330, root, 100, "AcDbDictionary", 281, 1)
	})
	d.put(0, "EOF")
	return d.b.Flush()
}

// dxf writes group codes with their values, and counts handles.
type dxf struct {
	b    *bufio.Writer
	next int
}

func (d *dxf) handle() string {
	d.next++
	return fmt.Sprintf("%X", d.next)
}

// put writes pairs of a group code and a value, a line each.
func (d *dxf) put(pairs ...any) {
	for i := 0; i < len(pairs); i += 2 {
		v := pairs[i+1]
		switch x := v.(type) {
		case float64:
			v = number(x)
		case string:
			v = plainText(x)
		}
		fmt.Fprintf(d.b, "%3d\n%v\n", pairs[i], v)
	}
}

// plainText is a text in ASCII, with other letters by their number, as the
// release has them.
func plainText(s string) string {
	var b strings.Builder
	for _, r := range s {
		if r < 0x80 {
			b.WriteRune(r)
		} else {
			fmt.Fprintf(&b, "\\U+%04X", r)
		}
	}
	return b.String()
}

func (d *dxf) section(name string, body func()) {
	d.put(0, "SECTION", 2, name)
	body()
	d.put(0, "ENDSEC")
}

func (d *dxf) table(name string, body func(owner string)) {
	owner := d.handle()
	d.put(0, "TABLE", 2, name, 5, owner, 330, "0", 100, "AcDbSymbolTable", 70, 1)
	if name == "DIMSTYLE" {
		d.put(100, "AcDbDimStyleTable", 71, 0)
	}
	body(owner)
	d.put(0, "ENDTAB")
}

// polyline writes a contour; closed is 1 for one whose last step leads back.
func (d *dxf) polyline(c figure.Contour, layer, owner string, closed int) error {
	n := len(c.Steps) + 1 - closed
	d.put(0, "LWPOLYLINE", 5, d.handle(), 330, owner, 100, "AcDbEntity", 8, layer, 100, "AcDbPolyline", 90, n, 70, closed, 43, 0.0)
	x, y := c.X, c.Y
	for i := range n {
		d.put(10, x, 20, y)
		if i >= len(c.Steps) {
			break
		}
		s := c.Steps[i]
		switch {
		case s.Kind != figure.StraightStep && s.Kind != figure.ArcStep || math.IsNaN(s.Bulge):
			return unfit(WallDXF)
		case s.Bulge != 0:
			d.put(42, s.Bulge)
		}
		x, y = s.X, s.Y
	}
	return nil
}
