package measure

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/table"
	"cavitywright/table/plane"
)

const (
	// seeded is the number of orbits of a portrait for which nothing was
	// launched: enough that no part of the section stays empty.
	seeded = 60
	// seededOpen is that number among posts without a wall, where most orbits
	// leave at once.
	seededOpen = 2000
)

// WithLaunches is the study, or, where it launches nothing, the study with an
// even seeding of the whole section by n orbits, so that its portrait shows
// what the table does everywhere. n = 0 is a number that suits the table.
func WithLaunches(t *table.Table, s table.Study, n int) table.Study {
	switch {
	case n > 0:
	case t.Open():
		n = seededOpen
	default:
		n = seeded
	}
	if len(s.Launches) == 0 {
		s.Launches = []table.Launch{{Pattern: table.Even, Count: n, Region: table.WholeSection()}}
	}
	return s
}

// WithRays is the study, or, where it launches nothing, the study with a
// launch to draw: on a closed table one ray off the wall, among posts a fan.
func WithRays(t *table.Table, s table.Study) table.Study {
	switch {
	case len(s.Launches) > 0:
	case t.Open():
		s.Launches = []table.Launch{{Pattern: table.Fan, Count: 21, Spread: 170 * math.Pi / 180}}
	default:
		s.Launches = []table.Launch{{S: 0.11, P: 0.35}}
	}
	return s
}

// PortraitFigure is the portrait of a table on the axes that its study asks
// for. program is the name and version that the caption ends with.
func PortraitFigure(t *table.Table, tally *PortraitTally, program string) figure.Dots {
	c := NewSection(t)
	f := c.Axes(t, table.WholeSection())
	f.X.Keys = keysOf(t, criticalRemark)
	for _, set := range tally.Sets() {
		shown := figure.DotSet{Name: set.Name, Hue: set.Hue, X: make([]float64, len(set.X)), Y: make([]float64, len(set.X))}
		for i := range set.X {
			shown.X[i], shown.Y[i] = c.At(set.X[i], set.Y[i])
		}
		f.Sets = append(f.Sets, shown)
	}
	f.Caption = []string{
		captionHead(t, t.Design().Study.Launches, len(tally.Sets()), tally.of.Each, tally.Stops),
		Foot(t, program),
	}
	return f
}

const (
	// fineChords is the chord error of a wall in a drawing, relative to the
	// table's size: on a page of two columns a few micrometres.
	fineChords = 2e-5
	// jointSize is half the length of a joint's mark, relative to the size.
	jointSize = 0.01
)

// RaysFigure is a table with its rays. program is the name and version that
// the caption ends with.
func RaysFigure(t *table.Table, tally *RaysTally, program string) figure.Paths {
	size := plane.Diagonal(t.Bounds())
	f := figure.Paths{Unit: t.Design().Unit.String(), Lines: Outline(t, fineChords*size), Keys: Keys(t)}
	for _, l := range f.Lines {
		if l.Role == figure.JointMark {
			resize(l, jointSize*size)
		}
	}
	f.Lines = append(f.Lines, tally.Lines()...)
	launches := t.Design().Study.Launches
	if own := slices.DeleteFunc(slices.Clone(launches), func(l table.Launch) bool { return l.Pattern == table.Even }); len(own) > 0 {
		launches = own // NewRays leaves the sea out
	}
	f.Caption = []string{captionHead(t, launches, len(tally.Lines()), tally.of.Each, tally.Stops), Foot(t, program)}
	return f
}

// resize makes the segment l of half length h about its middle.
func resize(l figure.Line, h float64) {
	x, y := (l.X[0]+l.X[1])/2, (l.Y[0]+l.Y[1])/2
	dx, dy := l.X[1]-x, l.Y[1]-y
	k := h / math.Hypot(dx, dy)
	l.X[0], l.X[1] = x-k*dx, x+k*dx
	l.Y[0], l.Y[1] = y-k*dy, y+k*dy
}

// captionHead says what was computed.
func captionHead(t *table.Table, launches []table.Launch, orbits, each int, stops Stops) string {
	var b strings.Builder
	b.WriteString(Head(t))
	fmt.Fprintf(&b, "%s of up to %s, %s.", counted(orbits, "orbit"), counted(each, "bounce"), launched(t, launches))
	for _, w := range []struct {
		stop sim.Stop
		text string
	}{{sim.Escaped, "left"}, {sim.Spent, "absorbed"}, {sim.Corner, "stopped at a corner"}, {sim.Grazing, "stopped grazing"}, {sim.Lost, "lost"}} {
		if n := stops[w.stop]; n > 0 {
			fmt.Fprintf(&b, " %d %s.", n, w.text)
		}
	}
	return b.String()
}

// Head is what a caption begins with: the table's name, where it has one.
func Head(t *table.Table) string {
	if name := t.Design().Name; name != "" {
		return name + ": "
	}
	return ""
}

// Foot is the last line of a caption: on what a figure was computed, and with
// what.
func Foot(t *table.Table, program string) string {
	d := t.Design()
	sense := ""
	if d.Study.Display.Sense == table.Clockwise {
		sense = ", s clockwise"
	}
	return fmt.Sprintf("L = %.7g %s%s; seed %d; %s.", t.Length(), d.Unit, sense, d.Study.Seed, program)
}

// launched says in a few words what a study launches.
func launched(t *table.Table, launches []table.Launch) string {
	even, others := 0, 0
	for _, l := range launches {
		if l.Pattern == table.Even {
			even++
		} else {
			others++
		}
	}
	switch {
	case even == 1 && others == 0 && launches[0].Region == table.WholeSection():
		return "even in ds dp"
	case others == 0:
		return "even in ds dp over parts of the section"
	case even > 0:
		return counted(others, "launch") + " and an even seeding"
	case others > 1:
		return counted(others, "launch")
	}
	return pattern(launches[0]) + place(t, launches[0])
}

// pattern names the pattern of a launch.
func pattern(l table.Launch) string {
	switch l.Pattern {
	case table.Fan:
		return fmt.Sprintf("a fan over %.4g° ", l.Spread*180/math.Pi)
	case table.Beam:
		return "a beam "
	case table.Sweep:
		return "a row of (s, p) "
	}
	return ""
}

// place says where a launch starts.
func place(t *table.Table, l table.Launch) string {
	unit := t.Design().Unit.String()
	switch {
	case l.Pattern == table.Sweep:
		g, length := l.Region, t.Length()
		return fmt.Sprintf("from (%.4g %s, %.4g) to (%.4g %s, %.4g)", g.S0*length, unit, g.P0, g.S1*length, unit, g.P1)
	case l.From == table.OnWall:
		return fmt.Sprintf("from s = %.5g %s, p = %.4g", l.S*t.Length(), unit, l.P)
	}
	return fmt.Sprintf("from (%.4g, %.4g) %s at %.4g°", l.Point.X, l.Point.Y, unit, l.Angle*180/math.Pi)
}

func counted(n int, noun string) string {
	switch {
	case n == 1:
		return "1 " + noun
	case strings.HasSuffix(noun, "ch"):
		return fmt.Sprintf("%d %ses", n, noun)
	}
	return fmt.Sprintf("%d %ss", n, noun)
}
