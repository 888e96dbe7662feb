package main

import (
	"fmt"
	"io"
	"math"
	"text/tabwriter"

	"cavitywright/sim/measure/modes"
)

// tell writes the account for a person.
func (a modeAccount) tell(out io.Writer) error {
	w := tabwriter.NewWriter(out, 0, 0, 2, ' ', 0)
	if a.Name != "" {
		fmt.Fprintf(w, "name\t%s\n", a.Name)
	}
	fmt.Fprintf(w, "wall\t%s, waves at %.9g m/s\n", a.Wall, a.Speed)
	fmt.Fprintf(w, "law\tN(k) = A k²/4π %s k/4π + C, A = %.9g %s², L = %.9g %s, C = %.6g (curved wall %.6g, corners %.6g)\n",
		[...]string{"+ L", "- L"}[sign(a.Law.Edge)], a.Law.Area, a.Unit, math.Abs(a.Law.Edge), a.Unit, a.Law.Bend+a.Law.Corners, a.Law.Bend, a.Law.Corners)
	if p := a.Plate; p != nil {
		fmt.Fprintf(w, "height\t%.9g %s: two-dimensional below %s\n", p.Height, a.Unit, hertz(&p.Limit))
		fmt.Fprintf(w, "cavity\tV = %.9g %s³, S = %.9g %s², mean free path 4V/S = %.9g %s\n", p.Volume, a.Unit, p.Surface, a.Unit, p.FreePath, a.Unit)
		fmt.Fprintf(w, "counted\t%s\n", p.Convention)
	}
	for _, c := range a.Modes {
		fmt.Fprintf(w, "plane\t%s\n", c.text())
		switch {
		case c.PlateCount == nil:
		case c.PlateFrequency == nil:
			fmt.Fprintf(w, "cavity\tno frequency has %.6g modes below it\n", *c.PlateCount)
		default:
			fmt.Fprintf(w, "cavity\t%s below %s\n", some(*c.PlateCount), hertz(c.PlateFrequency))
		}
	}
	return w.Flush()
}

func (c modeCount) text() string {
	if c.Frequency == nil {
		return fmt.Sprintf("no frequency has %.6g modes below it", c.Count)
	}
	text := fmt.Sprintf("%s below %s", some(c.Count), hertz(c.Frequency))
	if c.Spacing != nil {
		text += fmt.Sprintf(", there %s apart in the mean", hertz(c.Spacing))
	}
	return text
}

// some is a number of modes.
func some(n float64) string {
	if n == 1 {
		return "1 mode"
	}
	return fmt.Sprintf("%.6g modes", n)
}

// sign is 1 for a negative number, else 0.
func sign(x float64) int {
	if x < 0 {
		return 1
	}
	return 0
}

// hertz is a frequency as a person reads it.
func hertz(f *float64) string {
	scale, unit := modes.Scale(*f)
	return fmt.Sprintf("%.6g %s", *f/scale, unit)
}
