package measure

import (
	"fmt"
	"math"

	"cavitywright/sim/figure"
	"cavitywright/table"
	"cavitywright/table/outline"
	"cavitywright/table/plane"
	"cavitywright/table/shape"
)

// Handover is how a wall is handed over. Grid (in the table's unit) is asked
// for with Mask alone, which makes polygons without holes of at most
// outline.MaskPoints corners; Points adds points with normals.
type Handover struct {
	outline.Options
	For Recipient
}

// Recipient says what the outline is made for.
type Recipient uint8

// The recipients: a drawing with all kinds of step, a machine that knows lines
// and arcs, a mask of polygons on a grid, a table of points.
const (
	Drawing Recipient = iota
	Machine
	Mask
	PointTable
)

// HandedOver is the wall of a table as an outline for a recipient, with what it
// differs by. program stands in its caption.
func HandedOver(t *table.Table, h Handover, program string) (figure.Outline, outline.Account, error) {
	d := t.Design()
	f := figure.Outline{Name: d.Name, Unit: d.Unit.String(), Metres: d.Unit.Metres()}
	h.Form = [...]outline.Form{Drawing: outline.Curves, Machine: outline.Arcs, Mask: outline.Chords, PointTable: outline.Chords}[h.For]
	if h.For != Mask {
		h.Grid = 0
	}
	o, err := outline.Trace(t, h.Options)
	if err != nil {
		return f, outline.Account{}, err
	}
	account := o.Account
	paths := o.Paths
	switch h.For {
	case Mask:
		polygons, bent, err := outline.Masked(o, h.Grid, outline.MaskPoints)
		if err != nil {
			return f, account, err
		}
		paths, account.Achieved, account.Steps = polygons, account.Achieved+bent, 0
		for _, p := range polygons {
			account.Steps += len(p.Steps)
		}
	case PointTable:
		points, worst, err := outline.Samples(t, h.Options)
		if err != nil {
			return f, account, err
		}
		for _, p := range points {
			f.Points = append(f.Points, figure.WallPoint{Loop: p.Loop, S: p.S, X: p.Point.X, Y: p.Point.Y, NX: p.Normal.X, NY: p.Normal.Y, Curvature: p.Curvature})
		}
		paths, account.Achieved, account.Steps = nil, worst, len(points)
	}
	for _, p := range paths {
		c := contour(p)
		if h.For == Mask {
			c.Obstacle = t.Open()
		}
		f.Contours = append(f.Contours, c)
	}
	for _, r := range Coats(t) {
		if TextureOf(r.Law) != figure.Gap {
			continue
		}
		p, err := outline.Stretch(t, r.S0, r.S1-r.S0, h.Options)
		if err != nil {
			return f, account, err
		}
		f.Openings = append(f.Openings, contour(p))
	}
	f.Caption = handoverLines(t, h, account, program)
	return f, account, nil
}

func contour(p outline.Path) figure.Contour {
	c := figure.Contour{Obstacle: p.Side == shape.Obstacle, X: p.Start.X, Y: p.Start.Y}
	for _, s := range p.Steps {
		c.Steps = append(c.Steps, figure.ContourStep{
			Kind: figure.StepKind(s.Kind), X: s.To.X, Y: s.To.Y, Bulge: s.Bulge,
			Radius: s.Radius, Minor: s.Minor, Tilt: s.Tilt, From: s.From, Sweep: s.Sweep,
			C: [4]float64{s.C[0].X, s.C[0].Y, s.C[1].X, s.C[1].Y},
		})
	}
	return c
}

// handoverLines say what the outline is.
func handoverLines(t *table.Table, h Handover, a outline.Account, program string) []string {
	u := t.Design().Unit
	lines := []string{program}
	if name := t.Design().Name; name != "" {
		lines = append([]string{name}, lines...)
	}
	lines = append(lines,
		fmt.Sprintf("wall outline, lengths in %s, y up, inside on the left of the outer wall's counter-clockwise sense", u),
		fmt.Sprintf("greatest distance from the wall %.3g %s (asked for %.3g %s)", a.Achieved, u, h.ChordError, u))
	if h.Bias == 0 {
		return append(lines, "as drawn, no bias")
	}
	return append(lines, fmt.Sprintf("bias %+.6g %s: the wall is moved by that much %s", h.Bias, u,
		map[bool]string{true: "out of the table, into the material", false: "into the table"}[h.Bias > 0]))
}

// HandoverSentence says what an outline is in one line, for a person.
func HandoverSentence(t *table.Table, a outline.Account, bias float64) string {
	u := t.Design().Unit
	text := fmt.Sprintf("%d steps, no farther than %.3g %s from the wall", a.Steps, a.Achieved, u)
	if bias != 0 {
		text += fmt.Sprintf(" moved by %+.4g %s", bias, u)
	}
	if !t.Open() {
		text += fmt.Sprintf("; area %+.3g %s², perimeter %+.3g %s", a.AreaOff, u, a.Longer, u)
	}
	return text
}

// HandoverDefaults are the options of a handover with what is 0 filled in: a
// grid of 1 nm, and a chord error of 1e-4 of the table's size but not below the
// grid, or of a drawing, which is to be read again, 1e-9 of the size.
func HandoverDefaults(t *table.Table, h Handover) outline.Options {
	o := h.Options
	if o.Grid == 0 {
		o.Grid = 1e-9 / t.Design().Unit.Metres()
	}
	if o.ChordError == 0 {
		size := plane.Diagonal(t.Bounds())
		o.ChordError = math.Max(usualError*size, o.Grid)
		if h.For == Drawing {
			o.ChordError = fineError * size
		}
	}
	return o
}

// usualError and fineError are chord errors in sizes of the table.
const usualError, fineError = 1e-4, 1e-9
