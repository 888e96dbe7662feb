package export

import (
	"bufio"
	"encoding/xml"
	"fmt"
	"io"
	"math"
	"strings"

	"cavitywright/sim/figure"
)

// OpeningsGroup is the id of the group of lines that are no wall: the openings.
const OpeningsGroup = "openings"

// writeWallSVG writes an outline as SVG in real size: the numbers of its paths
// are lengths in the outline's unit with y turned down, x kept, and width and
// height say how large that is. Arcs are arcs and cubics cubics. The table lies
// in the metadata.
func writeWallSVG(w io.Writer, f figure.Outline, o WallOptions) error {
	b := bufio.NewWriter(w)
	x0, y0, x1, y1 := extent(f.Contours)
	margin := 0.02 * math.Hypot(x1-x0, y1-y0)
	x0, y0, x1, y1 = x0-margin, y0-margin, x1+margin, y1+margin
	mm := f.Metres * 1e3
	fmt.Fprintf(b, "<?xml version=\"1.0\" encoding=\"UTF-8\"?>\n")
	fmt.Fprintf(b, "<svg xmlns=\"http://www.w3.org/2000/svg\" version=\"1.1\" width=\"%smm\" height=\"%smm\" viewBox=\"%s %s %s %s\">\n",
		number((x1-x0)*mm), number((y1-y0)*mm), number(x0), number(-y1), number(x1-x0), number(y1-y0))
	if f.Name != "" {
		fmt.Fprintf(b, "<title>%s</title>\n", escaped(f.Name))
	}
	fmt.Fprintf(b, "<desc>%s</desc>\n", escaped(strings.Join(f.Caption, "\n")))
	if o.Table != nil {
		fmt.Fprintf(b, "<metadata>\n%s\n</metadata>\n", carried(o.Table))
	}
	pen := number(margin / 20)
	fmt.Fprintf(b, "<g id=\"wall\" fill=\"none\" stroke=\"#000000\" stroke-width=\"%s\">\n", pen)
	for i, c := range f.Contours {
		fmt.Fprintf(b, "<path id=\"loop-%d\" d=\"%s Z\"/>\n", i+1, pathData(c))
	}
	fmt.Fprintf(b, "</g>\n")
	if len(f.Openings) > 0 {
		fmt.Fprintf(b, "<g id=\"%s\" fill=\"none\" stroke=\"#c00000\" stroke-width=\"%s\">\n", OpeningsGroup, pen)
		for _, c := range f.Openings {
			fmt.Fprintf(b, "<path d=\"%s\"/>\n", pathData(c))
		}
		fmt.Fprintf(b, "</g>\n")
	}
	fmt.Fprintf(b, "</svg>\n")
	return b.Flush()
}

// pathData is a contour in SVG's grammar. With y down, what turns left turns
// clockwise of the angles there: its sweep flag is 0.
func pathData(c figure.Contour) string {
	var b strings.Builder
	at := func(x, y float64) string { return number(x) + " " + number(0-y) }
	b.WriteString("M " + at(c.X, c.Y))
	for _, s := range c.Steps {
		switch s.Kind {
		case figure.ArcStep, figure.OvalStep:
			large, left := 0, 1
			if math.Abs(s.Sweep) > math.Pi {
				large = 1
			}
			if s.Sweep > 0 {
				left = 0
			}
			fmt.Fprintf(&b, " A %s %s %s %d %d %s", number(s.Radius), number(s.Minor), number(0-s.Tilt*180/math.Pi), large, left, at(s.X, s.Y))
		case figure.CubicStep:
			b.WriteString(" C " + at(s.C[0], s.C[1]) + " " + at(s.C[2], s.C[3]) + " " + at(s.X, s.Y))
		default:
			b.WriteString(" L " + at(s.X, s.Y))
		}
	}
	return b.String()
}

func escaped(s string) string {
	var b strings.Builder
	_ = xml.EscapeText(&b, []byte(s)) // a strings.Builder does not fail
	return b.String()
}
