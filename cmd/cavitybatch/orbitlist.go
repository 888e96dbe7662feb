package main

import (
	"fmt"
	"io"
	"math"
	"strconv"
	"strings"
	"text/tabwriter"
)

// tell writes the census for a person: a row for each set of orbits alike.
func (c *census) tell(out io.Writer) error {
	w := tabwriter.NewWriter(out, 0, 0, 2, ' ', 0)
	fmt.Fprintf(w, "set\tbounces\torbits\tturns\tlength (%s)\ttrace\tresidue\tmultiplier\t|p| from\tto\tleaves\tword\tkind\tcopies\t\n", c.Unit)
	for i := 0; i < len(c.Orbits); {
		r := &c.Orbits[i]
		copies, senses := 0, 0
		for ; i < len(c.Orbits) && c.Orbits[i].Set == r.Set; i++ {
			copies++
			if senses++; c.Orbits[i].TwoSenses {
				senses++
			}
		}
		fmt.Fprintf(w, "%d\t%d\t%d\t%s\t%.12g\t%.8g\t%.6g\t%s\t%.6f\t%.6f\t%s\t%s\t%s\t%s\t\n", r.Set, r.Period, senses, r.turns(),
			r.Length, clean(r.Trace), clean(r.Residue), r.Multiplier, clean(r.LeastP), clean(r.GreatestP), r.leaves(), r.Word, r.sort(c.Unit, copies), r.Symmetry)
	}
	if err := w.Flush(); err != nil {
		return err
	}
	_, err := io.WriteString(out, strings.Join(c.list.Standing(), "\n")+"\n")
	return err
}

// clean is x without what is left of zero by rounding.
func clean(x float64) float64 {
	if math.Abs(x) < 1e-12 {
		return 0
	}
	return x
}

// turns is the winding as a person reads it.
func (r *orbitRow) turns() string {
	if r.Winding == nil {
		return "-"
	}
	return strconv.Itoa(*r.Winding)
}

// leaves says whether light or rays leave along the orbit.
func (r *orbitRow) leaves() string {
	switch {
	case r.Confined == nil:
		return "-"
	case *r.Confined:
		return "no"
	}
	return "yes"
}

// String is the multiplier; for an elliptic orbit its angle.
func (m complexRow) String() string {
	if m.Im != 0 {
		return fmt.Sprintf("%.6g° on the circle", math.Atan2(m.Im, m.Re)*180/math.Pi)
	}
	return fmt.Sprintf("%.8g", m.Re)
}

// sort is the kind, with what there is to a family.
func (r *orbitRow) sort(unit string, copies int) string {
	f := r.Family
	if f == nil {
		return r.Kind
	}
	text := "marginal family"
	if copies > 1 {
		text = strconv.Itoa(copies) + " marginal families"
	}
	from, to := f.Ranges[0][0], f.Ranges[0][1]
	text += fmt.Sprintf(", s from %.6g to %.6g %s", clean(from), to, unit)
	if copies > 1 {
		text += " (the first)"
	}
	if !f.Whole {
		text += ", not followed to its ends"
	}
	return text
}
