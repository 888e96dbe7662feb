package modes

import (
	"fmt"

	"cavitywright/sim/figure"
)

// curvePoints is the number of points of a drawn count.
const curvePoints = 400

// Figure is the number of modes below a frequency up to top hertz, of the plane
// and, where there is a plate, of the cavity of its height, with the limit up to
// which that is two-dimensional.
func Figure(n Weyl, p *Plate, m Medium, top float64) figure.Series {
	scale, unit := Scale(top)
	f := figure.Series{
		X:       figure.Axis{Label: "f", Unit: unit, Hi: top / scale},
		Y:       figure.Axis{Label: "modes below f", Hi: 1},
		Caption: []string{fmt.Sprintf("Weyl's law with perimeter, curvature and corner terms, %s walls, waves at %.9g m/s.", n.Wall, m.Speed)},
	}
	add := func(name string, hue int, count func(k float64) float64) {
		c := figure.Curve{Name: name, Hue: hue}
		for i := range curvePoints + 1 {
			hertz := top * float64(i) / curvePoints
			c.X, c.Y = append(c.X, hertz/scale), append(c.Y, max(0, count(m.K(hertz))))
			f.Y.Hi = max(f.Y.Hi, c.Y[i])
		}
		f.Curves = append(f.Curves, c)
	}
	add("plane", 0, n.Count)
	if p != nil {
		add("cavity", 1, p.Count)
		f.Caption = append(f.Caption, fmt.Sprintf("Cavity of height %.6g %s: %s.", p.Height, m.Unit, p.Field.Convention()))
		if limit := m.Hertz(p.Cutoff()); limit < top {
			f.X.Marks = append(f.X.Marks, figure.Mark{At: limit / scale, Kind: figure.Event, Name: "c/2h"})
		}
	}
	return f
}

// Scale is the unit in which a person reads a frequency, and how many hertz it
// is.
func Scale(hertz float64) (float64, string) {
	scale, unit := 1.0, "Hz"
	for _, u := range []string{"kHz", "MHz", "GHz", "THz", "PHz"} {
		if hertz < 1000*scale {
			break
		}
		scale, unit = 1000*scale, u
	}
	return scale, unit
}
