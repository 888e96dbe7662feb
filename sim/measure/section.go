package measure

import (
	"fmt"
	"math"

	"cavitywright/sim/figure"
	"cavitywright/table"
	"cavitywright/table/wall"
)

// Section writes the section of a table on the axes that a display asks for.
// The kernel's s and p keep their one convention; this is the only place where
// the others are made of them.
type Section struct {
	Length  float64
	Unit    string
	Display table.Display
}

// NewSection is the section of a table on its own display.
func NewSection(t *table.Table) Section {
	return Section{t.Length(), t.Design().Unit.String(), t.Design().Study.Display}
}

// At is where the state (s, p) stands on the axes.
func (c Section) At(s, p float64) (x, y float64) {
	if c.Display.Sense == table.Clockwise {
		s, p = c.Length-s, -p
	}
	if c.Display.Position == table.Fraction {
		s /= c.Length
	}
	if c.Display.Momentum == table.Angle {
		p = math.Asin(p) * 180 / math.Pi
	}
	return s, p
}

// Back is the state that stands at a place of the axes.
func (c Section) Back(x, y float64) (s, p float64) {
	if c.Display.Position == table.Fraction {
		x *= c.Length
	}
	if c.Display.Momentum == table.Angle {
		y = math.Sin(y * math.Pi / 180)
	}
	if c.Display.Sense == table.Clockwise {
		x, y = c.Length-x, -y
	}
	return x, y
}

// Axes are the axes of the portrait over a region of the section, with the
// joints and loops of the wall and the critical lines of a transparent body as
// marks, and no dots yet.
func (c Section) Axes(t *table.Table, g table.Region) figure.Dots {
	x0, y0 := c.At(g.S0*c.Length, g.P0)
	x1, y1 := c.At(g.S1*c.Length, g.P1)
	f := figure.Dots{
		X:     figure.Axis{Label: "s", Unit: c.Unit, Lo: math.Min(x0, x1), Hi: math.Max(x0, x1)},
		Y:     figure.Axis{Label: "p = sin χ", Lo: math.Min(y0, y1), Hi: math.Max(y0, y1)},
		Strip: true,
	}
	if c.Display.Position == table.Fraction {
		f.X.Label, f.X.Unit = "s/L", ""
	}
	if c.Display.Momentum == table.Angle {
		f.Y.Label, f.Y.Unit = "χ", "°"
	}
	if c.Display.Sense == table.Clockwise {
		f.X.Label += ", clockwise"
	}
	f.StripLo, _ = c.At(0, 0)
	f.StripHi, _ = c.At(c.Length, 0)
	for i, l := range t.Loops() {
		if i > 0 {
			x, _ := c.At(l.S0, 0)
			f.X.Marks = append(f.X.Marks, figure.Mark{At: x, Kind: figure.LoopStart})
		}
	}
	for _, j := range t.Joints() {
		x, _ := c.At(j.S, 0)
		f.X.Marks = append(f.X.Marks, figure.Mark{At: x, Kind: figure.Joint})
	}
	c.addCoats(&f, t)
	return f
}

// addCoats lays the coats along the s axis, with the critical lines of each
// dielectric stretch over that stretch.
func (c Section) addCoats(f *figure.Dots, t *table.Table) {
	for _, r := range Coats(t) {
		l := t.Loops()[r.Loop]
		c.addCoat(f, r.Law, r.S0, math.Min(r.S1, l.S1))
		if r.S1 > l.S1 {
			c.addCoat(f, r.Law, l.S0, l.S0+r.S1-l.S1)
		}
	}
}

func (c Section) addCoat(f *figure.Dots, law wall.Law, s0, s1 float64) {
	x0, _ := c.At(s0, 0)
	x1, _ := c.At(s1, 0)
	x0, x1 = math.Min(x0, x1), math.Max(x0, x1)
	f.X.Coats = append(f.X.Coats, figure.Coated{Lo: x0, Hi: x1, Texture: TextureOf(law)})
	d, ok := law.(wall.Dielectric)
	if !ok || d.Critical() >= 1 {
		return
	}
	for _, p := range []float64{-d.Critical(), d.Critical()} {
		_, y := c.At(0, p)
		f.Y.Marks = append(f.Y.Marks, figure.Mark{At: y, Kind: figure.Critical, Name: criticalName(d, y), From: x0, To: x1})
	}
}

// criticalName is what a critical line is called: p = 1/n, of the sign that is
// shown.
func criticalName(d wall.Dielectric, shown float64) string {
	sign := ""
	if shown < 0 {
		sign = "−"
	}
	if d.Outside == 1 {
		return "p = " + sign + "1/n"
	}
	return fmt.Sprintf("p = %s%.4g", sign, d.Critical())
}
