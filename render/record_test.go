package render

import (
	"image/color"
	"math"
	"math/rand/v2"

	"cavitywright/render/letter"
	"cavitywright/sim/figure"
)

// record is a canvas that keeps what was drawn on it.
type record struct {
	fills   []drawn
	strokes []drawn
	texts   []Text
	dots    []Dots
}

type drawn struct {
	path  Path
	color color.RGBA
	pen   Pen
}

func clone(p Path) Path {
	return Path{append([]Op(nil), p.Ops...), append([]Point(nil), p.Points...)}
}

func (r *record) Fill(p Path, c color.RGBA) { r.fills = append(r.fills, drawn{clone(p), c, Pen{}}) }
func (r *record) Stroke(p Path, pen Pen) {
	r.strokes = append(r.strokes, drawn{clone(p), pen.Color, pen})
}
func (r *record) Text(t Text) { r.texts = append(r.texts, t) }
func (r *record) Dots(d Dots) { r.dots = append(r.dots, d) }

// textBox is the area that a text covers, from the baseline to its capitals.
func textBox(t Text) Box {
	s, w, h := t.Start(), t.Width(), letter.CapHeight*t.Size
	if t.Turn == Upward {
		return Box{Point{s.X - h, s.Y - w}, s}
	}
	return Box{Point{s.X, s.Y - h}, Point{s.X + w, s.Y}}
}

// overlap says whether two boxes share more than an edge.
func overlap(a, b Box) bool {
	return a.Min.X < b.Max.X-1e-9 && b.Min.X < a.Max.X-1e-9 && a.Min.Y < b.Max.Y-1e-9 && b.Min.Y < a.Max.Y-1e-9
}

// holds says whether a box lies within another, but for rounding.
func holds(outer, inner Box) bool {
	o := outer.Inset(-1e-6)
	return o.Contains(inner.Min) && o.Contains(inner.Max)
}

// scatter is a portrait of noise with everything a portrait can wear.
func scatter() figure.Dots {
	r := rand.New(rand.NewPCG(1, 2))
	f := figure.Dots{
		X: figure.Axis{Label: "s", Unit: "mm", Lo: 0, Hi: 10, Marks: []figure.Mark{
			{At: 0, Kind: figure.LoopStart, Name: "wall"}, {At: 2.5}, {At: 5, Name: "corner"}, {At: 8, Kind: figure.LoopStart, Name: "post"}}},
		Y: figure.Axis{Label: "p = sin χ", Lo: -1, Hi: 1, Marks: []figure.Mark{
			{At: 0.303, Kind: figure.Critical, Name: "1/n"}, {At: -0.303, Kind: figure.Critical, Name: "−1/n"}}},
		Strip: true, StripLo: 0, StripHi: 10,
		Caption: []string{"What was computed, with units: 10 mm around.", "Seed 1; a second line that is long enough to have to be broken somewhere in a narrow column."},
	}
	for hue := -1; hue < 3; hue++ {
		s := figure.DotSet{Hue: hue}
		for range 200 {
			s.X, s.Y = append(s.X, 10*r.Float64()), append(s.Y, 2*r.Float64()-1)
		}
		f.Sets = append(f.Sets, s)
	}
	return f
}

// ring is a drawing of a disc of radius 3 about (1, 2) with a ray and more.
func ring() figure.Paths {
	wall := figure.Line{Role: figure.Wall, Closed: true}
	for i := range 90 {
		a := 2 * math.Pi * float64(i) / 90
		wall.X, wall.Y = append(wall.X, 1+3*math.Cos(a)), append(wall.Y, 2+3*math.Sin(a))
		wall.At = append(wall.At, float64(i)/90)
	}
	floor := wall
	floor.Role, floor.At = figure.Floor, nil
	return figure.Paths{Unit: "um", Caption: []string{"A disc."}, Lines: []figure.Line{
		{Role: figure.Ray, X: []float64{4, -2, 1}, Y: []float64{2, 2, 5}}, wall, floor,
		{Role: figure.Ball, Hue: 1, X: []float64{1}, Y: []float64{2}},
		{Role: figure.Construct, X: []float64{-2, 4}, Y: []float64{2, 2}},
		{Role: figure.JointMark, X: []float64{3.9, 4.1}, Y: []float64{2, 2}},
	}}
}

// decay is two curves on a logarithmic axis.
func decay() figure.Series {
	f := figure.Series{X: figure.Axis{Label: "path t", Unit: "mm", Lo: 0, Hi: 50},
		Y: figure.Axis{Label: "survival", Lo: 1e-5, Hi: 1, Scale: figure.Log}, Caption: []string{"Survival."}}
	for k := range 2 {
		c := figure.Curve{Name: []string{"one", "another"}[k], Hue: k}
		for i := range 100 {
			x := float64(i) / 2
			c.X, c.Y, c.Err = append(c.X, x), append(c.Y, math.Exp(-x*0.2*float64(k+1))), append(c.Err, 0.01)
		}
		f.Curves = append(f.Curves, c)
	}
	return f
}

// table is readings of every form.
func table() figure.Scalars {
	return figure.Scalars{Rows: []figure.Scalar{
		{Name: "perimeter", Value: 10.25, Unit: "mm"},
		{Name: "escape-rate", Value: 3.2e-7, StdErr: 4e-9, Unit: "1/mm", Bounces: 1000000, Seed: 7, Note: "measured between 100 and 900 mm"},
	}}
}

// figures is one figure of each kind, and of each an empty one.
func figures() map[string]figure.Figure {
	return map[string]figure.Figure{
		"dots": scatter(), "paths": ring(), "series": decay(), "scalars": table(),
		"no dots": figure.Dots{}, "no paths": figure.Paths{}, "no series": figure.Series{}, "no scalars": figure.Scalars{},
	}
}
