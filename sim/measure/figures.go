package measure

import (
	"fmt"
	"math"
	"strings"

	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/table"
	"cavitywright/table/plane"
)

// SeededOrbits is the number of orbits of a portrait for which nothing was
// launched: enough that no part of the section stays empty.
const SeededOrbits = 60

// WithLaunches is the study, or, where it launches nothing, the study with an
// even seeding of the whole section by n orbits, so that its portrait shows
// what the table does everywhere.
func WithLaunches(s table.Study, n int) table.Study {
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
		s.Launches = []table.Launch{{Pattern: table.Fan, Count: 41, Spread: 170 * math.Pi / 180}}
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
	for _, set := range tally.Sets() {
		shown := figure.DotSet{Name: set.Name, Hue: set.Hue, X: make([]float64, len(set.X)), Y: make([]float64, len(set.X))}
		for i := range set.X {
			shown.X[i], shown.Y[i] = c.At(set.X[i], set.Y[i])
		}
		f.Sets = append(f.Sets, shown)
	}
	f.Caption = []string{
		captionHead(t, len(tally.Sets()), tally.of.Each, tally.Stops),
		captionFoot(t, program),
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
	f := figure.Paths{Unit: t.Design().Unit.String(), Lines: Outline(t, fineChords*size)}
	for _, l := range f.Lines {
		if l.Role == figure.JointMark {
			resize(l, jointSize*size)
		}
	}
	f.Lines = append(f.Lines, tally.Lines()...)
	f.Caption = []string{captionHead(t, len(tally.Lines()), tally.of.Each, tally.Stops), captionFoot(t, program)}
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
func captionHead(t *table.Table, orbits, each int, stops Stops) string {
	d := t.Design()
	var b strings.Builder
	if d.Name != "" {
		b.WriteString(d.Name + ": ")
	}
	fmt.Fprintf(&b, "%s of up to %s, %s.", counted(orbits, "orbit"), counted(each, "bounce"), launched(d.Study.Launches))
	for _, w := range []struct {
		stop sim.Stop
		text string
	}{{sim.Escaped, "left the table"}, {sim.Spent, "absorbed"}, {sim.Corner, "stopped at a corner"}, {sim.Grazing, "stopped grazing"}, {sim.Lost, "lost"}} {
		if n := stops[w.stop]; n > 0 {
			fmt.Fprintf(&b, " %d %s.", n, w.text)
		}
	}
	return b.String()
}

// captionFoot says on what it was computed, and with what.
func captionFoot(t *table.Table, program string) string {
	d := t.Design()
	sense := "counter-clockwise"
	if d.Study.Display.Sense == table.Clockwise {
		sense = "clockwise"
	}
	return fmt.Sprintf("L = %.7g %s, s %s; seed %d; %s.", t.Length(), d.Unit, sense, d.Study.Seed, program)
}

// launched says in a few words what a study launches.
func launched(launches []table.Launch) string {
	even, others := 0, 0
	for _, l := range launches {
		if l.Pattern == table.Even {
			even++
		} else {
			others++
		}
	}
	switch {
	case others == 0 && even == 1 && launches[0].Region == table.WholeSection():
		return "even in ds dp"
	case others == 0:
		return "even in ds dp over parts of the section"
	case even == 0:
		return counted(others, "launch")
	}
	return counted(others, "launch") + " and an even seeding"
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
