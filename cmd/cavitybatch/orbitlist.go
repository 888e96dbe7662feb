package main

import (
	"bytes"
	"encoding/csv"
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
	fmt.Fprintf(w, "bounces\torbits\tturns\tlength (%s)\ttrace\tresidue\tmultiplier\t|p| from\tto\tleaves\tkind\t\n", c.Unit)
	for i := 0; i < len(c.Orbits); {
		r := &c.Orbits[i]
		copies, senses := 0, 0
		for ; i < len(c.Orbits) && c.Orbits[i].Set == r.Set; i++ {
			copies++
			if senses++; c.Orbits[i].TwoSenses {
				senses++
			}
		}
		fmt.Fprintf(w, "%d\t%d\t%s\t%.12g\t%.8g\t%.6g\t%s\t%.6f\t%.6f\t%s\t%s\t\n", r.Period, senses, r.turns(),
			r.Length, clean(r.Trace), clean(r.Residue), r.Multiplier, clean(r.LeastP), clean(r.GreatestP), r.leaves(), r.word(c.Unit, copies))
	}
	if err := w.Flush(); err != nil {
		return err
	}
	_, err := io.WriteString(out, c.standing())
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

// word is the kind, with what there is to a family.
func (r *orbitRow) word(unit string, copies int) string {
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

// standing says how far the list can be relied on.
func (c *census) standing() string {
	var open, counts []string
	for _, p := range c.Periods {
		if !p.Settled {
			open = append(open, strconv.Itoa(p.Period))
		}
		counts = append(counts, fmt.Sprintf("%d of %d", p.Count, p.Period))
	}
	text := "Orbits by bounces, those that differ when run backwards counted twice and a family as one: " + strings.Join(counts, ", ") + ".\n"
	switch {
	case c.Method == "words" && len(open) == 0:
		return text + "The list is complete: every order in which the walls can be met was tried.\n"
	case c.Method == "words":
		return text + "Some orders of " + strings.Join(open, ", ") + " bounces could not be decided; the list may lack orbits there.\n"
	case len(open) == 0:
		return text + "The last two grids of starts brought nothing new; that is no proof that nothing is missing.\n"
	}
	return text + "With " + strings.Join(open, ", ") + " bounces finer grids of starts still brought new orbits; the list may lack some there.\n"
}

// csv writes a row for each orbit below comment lines that say what they are.
func (c *census) csv() []byte {
	var b bytes.Buffer
	fmt.Fprintf(&b, "# %s, periodic orbits up to %d bounces\n", program, c.UpTo)
	if name := strings.Join(strings.Fields(c.Name), " "); name != "" {
		fmt.Fprintf(&b, "# table: %s\n", name)
	}
	fmt.Fprintf(&b, "# unit of length: %s; length of the wall: %s\n", c.Unit, digits(c.Length))
	b.WriteString("# convention: s is the arclength with the inside on the left; p = sin chi of the outgoing ray, positive towards increasing s; trace and multiplier of one period in (s, p)\n")
	b.WriteString("# seed: none, nothing is drawn at random\n")
	for _, line := range strings.Split(strings.TrimSuffix(c.standing(), "\n"), "\n") {
		fmt.Fprintf(&b, "# %s\n", line)
	}
	b.WriteString("# family: s from:to of each bounce, empty for an isolated orbit; points: s p x y of each bounce\n")
	w := csv.NewWriter(&b)
	_ = w.Write([]string{"period", "set", "winding", "length", "trace", "residue", "multiplier_re", "multiplier_im", "kind", "two_senses", "least_p", "greatest_p", "confined", "family", "points"}) // a buffer takes all
	for i := range c.Orbits {
		_ = w.Write(c.Orbits[i].fields())
	}
	w.Flush()
	return b.Bytes()
}

// fields are the row's columns in the CSV.
func (r *orbitRow) fields() []string {
	winding, confined := "", ""
	if r.Winding != nil {
		winding = strconv.Itoa(*r.Winding)
	}
	if r.Confined != nil {
		confined = strconv.FormatBool(*r.Confined)
	}
	var family, points []string
	if r.Family != nil {
		for _, x := range r.Family.Ranges {
			family = append(family, digits(x[0])+":"+digits(x[1]))
		}
	}
	for _, b := range r.Bounces {
		points = append(points, digits(b.S)+" "+digits(b.P)+" "+digits(b.X)+" "+digits(b.Y))
	}
	return []string{strconv.Itoa(r.Period), strconv.Itoa(r.Set), winding, digits(r.Length), digits(r.Trace), digits(r.Residue),
		digits(r.Multiplier.Re), digits(r.Multiplier.Im), r.Kind, strconv.FormatBool(r.TwoSenses),
		digits(r.LeastP), digits(r.GreatestP), confined, strings.Join(family, " "), strings.Join(points, "; ")}
}

// digits writes a number with as many digits as it takes to read it back.
func digits(x float64) string { return strconv.FormatFloat(x, 'g', -1, 64) }
