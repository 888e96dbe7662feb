package export

import (
	"io"
	"strings"

	"cavitywright/render"
	"cavitywright/render/vector"
	"cavitywright/sim/figure"
)

// writePDF draws the figure as a document of one page.
func writePDF(w io.Writer, f figure.Figure, o Options) error {
	c := vector.NewPDF(o.WidthMM, o.HeightMM)
	render.Draw(c, f, o.box(), o.Look)
	about := caption(f)
	title, _, _ := strings.Cut(about, "\n")
	if title == "" {
		title = kind(f)
	}
	return c.Write(w, title, about)
}
