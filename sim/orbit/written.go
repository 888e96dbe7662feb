package orbit

import (
	"encoding/csv"
	"fmt"
	"io"
	"strconv"
	"strings"

	"cavitywright/table"
)

// Standing says in sentences what the wall's symmetries are, how many orbits
// there are, and how far the list can be relied on.
func (l *List) Standing() (lines []string) {
	var open, counts []string
	for n := Least; n <= l.UpTo; n++ {
		if !l.Settled[n] {
			open = append(open, strconv.Itoa(n))
		}
		counts = append(counts, fmt.Sprintf("%d of %d", l.Count(n), n))
	}
	return append(lines, l.wall(),
		"Orbits by bounces, copies and those that differ when run backwards counted each and a family as one: "+strings.Join(counts, ", ")+".",
		l.reliance(strings.Join(open, ", ")))
}

func (l *List) wall() string {
	if l.Turns == 1 && l.Mirrors == 0 {
		return "No symmetry of the wall was found."
	}
	return fmt.Sprintf("The wall maps onto itself by %s and %s; an orbit and its images are one set.",
		counted(l.Turns-1, "turn"), counted(l.Mirrors, "reflection"))
}

func counted(n int, what string) string {
	switch n {
	case 0:
		return "no " + what
	case 1:
		return "1 " + what
	}
	return fmt.Sprintf("%d %ss", n, what)
}

// reliance says what may be missing; open are the periods that did not settle.
func (l *List) reliance(open string) string {
	switch {
	case l.Words > 0 && open == "":
		return "The list is complete: every order in which the walls can be met was tried."
	case l.Words > 0:
		return "Some orders of " + open + " bounces could not be decided; the list may lack orbits there."
	case open == "":
		return "The last two grids of starts brought nothing new; that is no proof that nothing is missing."
	}
	return "With " + open + " bounces finer grids of starts still brought new orbits; the list may lack some there."
}

// WriteCSV writes a row for each orbit below comment lines that say what they
// are. program is the name and version that they begin with. All digits are
// kept.
func (l *List) WriteCSV(out io.Writer, t *table.Table, program string) error {
	d := t.Design()
	head := []string{fmt.Sprintf("%s, periodic orbits up to %d bounces", program, l.UpTo)}
	if name := strings.Join(strings.Fields(d.Name), " "); name != "" {
		head = append(head, "table: "+name)
	}
	head = append(head, fmt.Sprintf("unit of length: %s; length of the wall: %s", d.Unit, digits(t.Length())),
		"convention: s is the arclength with the inside on the left; p = sin chi of the outgoing ray, positive towards increasing s; trace and multiplier of one period in (s, p)",
		"seed: none, nothing is drawn at random")
	head = append(append(head, l.Standing()...),
		"set: equal for orbits that a symmetry of the wall maps into each other; word: the sides met, by number in the order of s",
		"family: s from:to of each bounce, empty for an isolated orbit; points: s p x y of each bounce")
	for _, line := range head {
		if _, err := fmt.Fprintf(out, "# %s\n", line); err != nil {
			return err
		}
	}
	w := csv.NewWriter(out)
	_ = w.Write([]string{"period", "set", "winding", "length", "trace", "residue", "multiplier_re", "multiplier_im", "kind", "two_senses",
		"least_p", "greatest_p", "confined", "family", "points", "copies", "symmetry", "word"}) // errors stay in the writer
	leaks := Leaks(t)
	for i := range l.Orbits {
		_ = w.Write(l.Orbits[i].fields(leaks))
	}
	w.Flush()
	return w.Error()
}

// fields are the orbit's columns.
func (o *Orbit) fields(leaks bool) []string {
	winding, confined := "", ""
	if o.Winding > 0 {
		winding = strconv.Itoa(o.Winding)
	}
	if leaks {
		confined = strconv.FormatBool(o.Confined)
	}
	var family, points []string
	if o.Family != nil {
		for _, x := range o.Family.Ranges {
			family = append(family, digits(x.From)+":"+digits(x.To))
		}
	}
	for _, b := range o.Bounces {
		points = append(points, digits(b.S)+" "+digits(b.P)+" "+digits(b.Point.X)+" "+digits(b.Point.Y))
	}
	great, _ := o.Multipliers()
	least, greatest := o.PRange()
	return []string{strconv.Itoa(o.Period()), strconv.Itoa(o.Class), winding, digits(o.Length), digits(o.Trace()), digits(o.Residue()),
		digits(real(great)), digits(imag(great)), o.Kind().String(), strconv.FormatBool(o.TwoSenses),
		digits(least), digits(greatest), confined, strings.Join(family, " "), strings.Join(points, "; "), strconv.Itoa(o.Copies), o.Symmetry(), o.Word}
}

// digits writes a number with as many digits as it takes to read it back.
func digits(x float64) string { return strconv.FormatFloat(x, 'g', -1, 64) }
