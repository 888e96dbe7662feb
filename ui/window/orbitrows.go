package window

import (
	"cmp"
	"fmt"
	"math"
	"math/cmplx"
	"slices"
	"strconv"
	"strings"

	"cavitywright/render"
	"cavitywright/sim/orbit"
	"cavitywright/table"
)

// orbitColumn is one column of the list of orbits: what it says of an orbit, and
// the number by which it sorts, or nil where it sorts by its text.
type orbitColumn struct {
	name  string
	wide  float32
	about string
	text  func(o *orbit.Orbit, leaks string) string
	size  func(o *orbit.Orbit) float64
}

// orbitColumns are the columns, in order. Lengths carry the unit in the head.
func orbitColumns(unit string) []orbitColumn {
	least := func(o *orbit.Orbit) float64 { p, _ := o.PRange(); return p }
	return []orbitColumn{
		{"bounces", 76, "Bounces of one period.", func(o *orbit.Orbit, _ string) string { return strconv.Itoa(o.Period()) }, func(o *orbit.Orbit) float64 { return float64(o.Period()) }},
		{"length (" + unit + ")", 88, "Length of one period.", func(o *orbit.Orbit, _ string) string { return fmt.Sprintf("%.7g", o.Length) }, func(o *orbit.Orbit) float64 { return o.Length }},
		{"kind", 124, "What its neighbours do.", func(o *orbit.Orbit, _ string) string { return o.Sort() }, nil},
		{"trace", 78, "Trace of the monodromy matrix of one period: stable between −2 and 2.", func(o *orbit.Orbit, _ string) string { return signed("%.5g", o.Trace()) }, (*orbit.Orbit).Trace},
		{"residue", 92, "(2 − trace)/4: stable between 0 and 1.", func(o *orbit.Orbit, _ string) string { return signed("%.6g", o.Residue()) }, (*orbit.Orbit).Residue},
		{"multipliers", 150, "Eigenvalues of the monodromy matrix: on the circle, as angles, or real ones.", multipliersText, func(o *orbit.Orbit) float64 { great, _ := o.Multipliers(); return cmplx.Abs(great) }},
		{"turns", 56, "How often it runs round the wall in one period.", turnsText, func(o *orbit.Orbit) float64 { return float64(o.Winding) }},
		{"stays", 60, "Whether nothing leaves along it: no bounce lies on an opening or within the critical angle.", func(o *orbit.Orbit, leaks string) string { return staysText(o, leaks) }, nil},
		{"|p|", 132, "The least and the greatest |p| of its bounces.", rangeText, least},
		{"copies", 218, "What the wall's symmetries make of it.", func(o *orbit.Orbit, _ string) string { return o.Symmetry() }, nil},
		{"both ways", 84, "Whether it is another orbit when run backwards.", sensesText, nil},
		{"sides met", 150, "The sides of the wall that it meets, by their numbers in the order of s.", func(o *orbit.Orbit, _ string) string { return o.Word }, nil},
	}
}

func signed(format string, x float64) string {
	if math.Abs(x) < 1e-12 {
		x = 0 // what rounding leaves
	}
	return render.Proper(fmt.Sprintf(format, x))
}

// multipliersText are the multipliers of an orbit, those of a family being 1.
func multipliersText(o *orbit.Orbit, _ string) string {
	great, small := o.Multipliers()
	switch {
	case o.Family != nil:
		return "1 and 1"
	case imag(great) != 0:
		return fmt.Sprintf("circle, ±%.5g°", math.Abs(math.Atan2(imag(great), real(great)))*180/math.Pi)
	}
	return signed("%.5g", real(great)) + " and " + signed("%.3g", real(small))
}

func turnsText(o *orbit.Orbit, _ string) string {
	if o.Winding == 0 {
		return "–"
	}
	return strconv.Itoa(o.Winding)
}

// staysText says whether the orbit is confined; leaks is empty where nothing can
// leave.
func staysText(o *orbit.Orbit, leaks string) string {
	switch {
	case leaks == "":
		return "–"
	case o.Confined:
		return "yes"
	}
	return "no"
}

func rangeText(o *orbit.Orbit, _ string) string {
	a, b := o.PRange()
	if b-a < 1e-9 {
		return fmt.Sprintf("%.6f", math.Abs(math.Round(a*1e12)/1e12))
	}
	return fmt.Sprintf("%.5f to %.5f", a, b)
}

func sensesText(o *orbit.Orbit, _ string) string {
	if o.TwoSenses {
		return "two"
	}
	return "one"
}

// orbitWords are the particulars of one orbit in sentences.
func orbitWords(o *orbit.Orbit, unit string) string {
	var b strings.Builder
	great, small := o.Multipliers()
	switch {
	case o.Family != nil:
		f := o.Family
		fmt.Fprintf(&b, "A family: bounce 1 sweeps over s from %.6g to %.6g %s", f.Ranges[0].From, f.Ranges[0].To, unit)
		if f.Broken {
			b.WriteString(" and further; it was not followed to its ends")
		}
		b.WriteString(".")
	case imag(great) != 0:
		fmt.Fprintf(&b, "Multipliers on the circle at ±%.6g°.", math.Atan2(imag(great), real(great))*180/math.Pi)
	default:
		fmt.Fprintf(&b, "Multipliers %s and %s.", signed("%.8g", real(great)), signed("%.6g", real(small)))
	}
	fmt.Fprintf(&b, " It closes to %.1g. Bounces (s in %s, p):", o.Closure, unit)
	for i, x := range o.Bounces {
		fmt.Fprintf(&b, " %d (%s, %s)", i+1, signed("%.8g", x.S), signed("%.8g", x.P))
	}
	return b.String() + "."
}

// sortOrbits sorts by a column, up (1) or down (-1); equal ones keep the order of
// the list.
func sortOrbits(rows []*orbit.Orbit, by orbitColumn, dir int, leaks string) {
	slices.SortStableFunc(rows, func(a, b *orbit.Orbit) int {
		if by.size != nil {
			return dir * cmp.Compare(by.size(a), by.size(b))
		}
		return dir * cmp.Compare(by.text(a, leaks), by.text(b, leaks))
	})
}

// leaksText is empty where nothing can leave the table.
func leaksText(t *table.Table) string {
	if orbit.Leaks(t) {
		return "leaks"
	}
	return ""
}

const (
	// besideShare is how far from an orbit its neighbours are launched: of the
	// wall's length in s, and in p.
	besideShare = 0.004
	// besideCount is how many.
	besideCount = 9
)

// beside are launches of neighbours of an orbit: a row of states through its
// first bounce, from one side to the other.
func beside(t *table.Table, o *orbit.Orbit) table.Launch {
	b := o.Bounces[0]
	s := b.S / t.Length()
	g := table.Region{S0: s - besideShare, S1: s + besideShare, P0: b.P - besideShare, P1: b.P + besideShare}
	if g.S0 < 0 {
		g.S0, g.S1 = 0, 2*besideShare
	}
	if g.S1 > 1 {
		g.S0, g.S1 = 1-2*besideShare, 1
	}
	const edge = 0.999
	g.P0, g.P1 = max(g.P0, -edge), min(g.P1, edge)
	return table.Launch{Pattern: table.Sweep, Count: besideCount, Region: g}
}
