package survey

import (
	"fmt"
	"math"
	"strings"

	"cavitywright/table/curve"
)

// Sentences say in plain words what the report holds and what of the theory of
// billiards it allows, the most consequential first.
func (r *Report) Sentences() []string {
	var all []string
	for _, part := range []func() []string{r.smoothWords, r.convexWords, r.flatWords, r.bendWords, r.cornerWords, r.toolWords, r.symmetryWords} {
		all = append(all, part()...)
	}
	return all
}

func (r *Report) length(x float64) string {
	return fmt.Sprintf("%.6g %s", x, r.table.Design().Unit)
}

func (r *Report) place(p Place) string {
	u := r.table.Design().Unit
	return fmt.Sprintf("s = %.6g %s, (%.6g, %.6g) %s", p.S, u, tidy(p.At.X, r), tidy(p.At.Y, r), u)
}

// tidy is the coordinate, or zero where it is rounding.
func tidy(x float64, r *Report) float64 {
	if math.Abs(x) < 1e-12*sizeOf(r.table) {
		return 0
	}
	return x
}

func (r *Report) stretch(s Stretch) string {
	if s.S0 == s.S1 {
		return "at s = " + r.length(s.S0)
	}
	return fmt.Sprintf("from s = %.6g to %s", s.S0, r.length(s.S1))
}

// some is a list with what exceeds three replaced by their number.
func some(list []string) string {
	const shown = 3
	if n := len(list) - shown; n > 0 {
		return fmt.Sprintf("%s and %d more", strings.Join(list[:shown], ", "), n)
	}
	if n := len(list) - 1; n > 0 {
		return strings.Join(list[:n], ", ") + " and " + list[n]
	}
	return list[0]
}

func plural(n int, one, many string) string {
	if n == 1 {
		return "1 " + one
	}
	return fmt.Sprintf("%d %s", n, many)
}

// smoothWords say what the smoothness allows: Lazutkin's caustics need a
// strictly convex wall with six continuous derivatives (Lazutkin, Math. USSR
// Izv. 7, 185 (1973); Douady, thesis, Paris 7 (1982)); a jump of the curvature
// destroys those near the wall (Hubacher, Commun. Math. Phys. 108, 483 (1987)).
func (r *Report) smoothWords() []string {
	if r.Convexity.Open {
		return []string{"The table has no outer wall: almost every ray leaves, and theorems on closed tables do not apply."}
	}
	switch r.Class {
	case C0:
		return []string{fmt.Sprintf("The wall is continuous only (C0): it has %s, so KAM and Lazutkin's theorem on caustics, which need a smooth strictly convex wall, do not apply; rays that meet a corner stop and are counted.",
			plural(len(r.Corners), "corner", "corners"))}
	case C1:
		return []string{fmt.Sprintf("The wall is C1, not C2: the curvature jumps at %s, first at %s. KAM and Lazutkin's theorem on caustics, which need a smooth strictly convex wall, do not apply; no caustic comes near a convex wall whose curvature jumps (Hubacher 1987).",
			plural(len(r.Jumps), "place", "places"), r.place(r.Jumps[0].Place))}
	case C2:
		text := "The wall is C2: tangent and curvature are continuous, more is not known."
		if r.Convexity.Strict {
			text += " Lazutkin's theorem on caustics near the wall needs six derivatives (Douady 1982); do not rely on it."
		}
		return []string{text}
	}
	text := "Every loop of the wall is one analytic curve, smooth in every derivative."
	if r.Convexity.Strict && r.Convexity.Posts == 0 {
		text += " It is strictly convex, so caustics line the wall and rays at grazing angles never enter the sea (Lazutkin 1973)."
	}
	return []string{text}
}

// convexWords: where the curvature of a convex wall vanishes there is no
// caustic (Mather, Ergod. Theory Dyn. Syst. 2, 397 (1982)).
func (r *Report) convexWords() []string {
	c := r.Convexity
	if c.Open {
		return nil
	}
	var list []string
	switch {
	case !c.Convex:
		var at []string
		for _, d := range c.Dents {
			at = append(at, r.stretch(d))
		}
		list = append(list, fmt.Sprintf("The outer wall is not convex: it turns away %s. It has no caustic that goes around the whole table.", some(at)))
	case c.Strict:
		list = append(list, "The outer wall is strictly convex.")
	case len(r.Flatness.Zeros) > 0 && r.Class > C1:
		list = append(list, fmt.Sprintf("The outer wall is convex, not strictly: its curvature vanishes at %s, so it has no caustic at all (Mather 1982).", r.place(r.Flatness.Zeros[0])))
	case len(r.Flatness.Flats) > 0:
		list = append(list, "The outer wall is convex, not strictly: it has straight stretches.")
	default:
		list = append(list, "The outer wall is convex, not strictly: its curvature vanishes somewhere.")
	}
	if c.Posts > 0 {
		list = append(list, fmt.Sprintf("%s inside: the table itself is not convex.", sentence(plural(c.Posts, "obstacle stands", "obstacles stand"))))
	}
	return list
}

func sentence(s string) string { return strings.ToUpper(s[:1]) + s[1:] }

func (r *Report) flatWords() []string {
	f := r.Flatness
	var list []string
	if n := len(f.Flats); n > 0 {
		text := fmt.Sprintf("The curvature vanishes on %s, %s or %.4g %% of the wall.", plural(n, "straight stretch", "straight stretches"), r.length(f.Length), 100*f.Length/r.Perimeter)
		if r.straight() {
			text = "Every side is straight: rays part linearly, and the Lyapunov exponent is zero (Sinai; Katok 1987)."
		}
		list = append(list, text)
	}
	if len(f.Zeros) > 0 {
		var at []string
		for _, z := range f.Zeros {
			at = append(at, "at "+r.place(z))
		}
		list = append(list, fmt.Sprintf("The curvature vanishes on curved wall %s.", some(at)))
	}
	for k, s := range f.Strips {
		if k == 3 {
			list = append(list, fmt.Sprintf("The same holds for %s.", plural(len(f.Strips)-k, "more pair", "more pairs")))
			break
		}
		list = append(list, fmt.Sprintf("Two straight stretches face each other in parallel, %s apart, with a free width of %s: rays that bounce between them are a marginal family, correlations decay slowly, and measured exponents converge slowly.",
			r.length(s.Across), r.length(s.Along)))
	}
	for _, a := range f.Diameters {
		list = append(list, fmt.Sprintf("The arc of radius %s %s turns by %.6g degrees, more than half a turn: its diameters are a marginal family of orbits.", r.length(a.Radius), r.stretch(a.Stretch), a.Sweep*180/math.Pi))
	}
	return list
}

// straight reports whether the wall has no curve.
func (r *Report) straight() bool {
	for i := range r.table.Pieces() {
		if r.table.Pieces()[i].Kind != curve.Segment {
			return false
		}
	}
	return true
}

func (r *Report) bendWords() []string {
	var list []string
	for _, e := range []struct {
		Extreme
		word string
	}{{r.Bend.Focusing, "focuses"}, {r.Bend.Dispersing, "disperses"}} {
		switch {
		case e.Known() && e.Radius == 0:
			list = append(list, fmt.Sprintf("The wall %s with a radius that tends to zero at the cusp at %s.", e.word, r.place(e.Place)))
		case e.Known():
			list = append(list, fmt.Sprintf("The wall %s most sharply with a radius of %s at %s.", e.word, r.length(e.Radius), r.place(e.Place)))
		}
	}
	if !r.Convexity.Open && !r.Bend.Focusing.Known() && r.Bend.Dispersing.Known() {
		list = append(list, "No wall focuses: every curved stretch disperses, which makes the table chaotic (Sinai 1970).")
	}
	return list
}

func (r *Report) cornerWords() []string {
	if len(r.Corners) == 0 {
		return nil
	}
	var at []string
	for _, c := range r.Corners {
		at = append(at, fmt.Sprintf("%.6g degrees at %s", c.Angle*180/math.Pi, r.place(c.Place)))
	}
	return []string{fmt.Sprintf("%s, by the angle inside: %s.", sentence(plural(len(r.Corners), "corner", "corners")), some(at))}
}

func (r *Report) toolWords() []string {
	if !r.Tool.Checked {
		return nil
	}
	if len(r.Tool.Beyond) == 0 {
		return []string{fmt.Sprintf("A round tool of radius %s reaches the whole wall.", r.length(r.Tool.Radius))}
	}
	var at []string
	for _, b := range r.Tool.Beyond {
		text := fmt.Sprintf("%s %s", b.Why, r.stretch(b.Stretch))
		if !math.IsNaN(b.Left) {
			text += fmt.Sprintf(" (its edge stays %s from the corner)", r.length(b.Left))
		}
		at = append(at, text)
	}
	return []string{fmt.Sprintf("A round tool of radius %s does not touch %s of the wall, at %s: %s.",
		r.length(r.Tool.Radius), r.length(r.Tool.Length), plural(len(at), "place", "places"), some(at))}
}

func (r *Report) symmetryWords() []string {
	s := r.Symmetry
	within := r.length(s.Within)
	about := fmt.Sprintf("(%.6g, %.6g) %s", tidy(s.Centre.X, r), tidy(s.Centre.Y, r), r.table.Design().Unit)
	var text string
	switch {
	case s.Order == 0:
		text = fmt.Sprintf("The wall has the full symmetry of the circle, O(2), about %s.", about)
	case len(s.Mirrors) > 0:
		var at []string
		for _, m := range s.Mirrors {
			at = append(at, fmt.Sprintf("%.6g", m*180/math.Pi))
		}
		text = fmt.Sprintf("The wall has the symmetry %s, to within %s: %s through %s at %s degrees from x",
			s.Name(), within, plural(s.Order, "mirror line", "mirror lines"), about, some(at))
		if s.Order > 1 {
			text += fmt.Sprintf(", and rotations by %.6g degrees", 360/float64(s.Order))
		}
		text += fmt.Sprintf("; a cell of 1/%d of the table says it all.", 2*s.Order)
	case s.Order > 1:
		text = fmt.Sprintf("The wall has the symmetry %s, to within %s: rotations by %.6g degrees about %s, no mirror line.", s.Name(), within, 360/float64(s.Order), about)
	default:
		text = fmt.Sprintf("The wall has no symmetry (C1), looked for to within %s.", within)
	}
	if s.Order != 1 && len(r.table.Stretches()) > 0 {
		text += " Whether the coats follow it is not looked at."
	}
	return []string{text}
}
