package tablefile

import "cavitywright/table"

var (
	studyKeys   = []string{"seed", "bounces", "launches", "display", "sweeps", "tolerances", "wishes"}
	displayKeys = []string{"sense", "position", "momentum"}

	originWords   = []string{table.OnWall: "wall", table.Inside: "inside"}
	patternWords  = []string{table.Single: "single", table.Fan: "fan", table.Beam: "beam", table.Sweep: "sweep", table.Even: "even"}
	senseWords    = []string{table.CounterClockwise: "counter-clockwise", table.Clockwise: "clockwise"}
	positionWords = []string{table.Arclength: "arclength", table.Fraction: "fraction"}
	momentumWords = []string{table.Sine: "sine", table.Angle: "angle"}
)

// study is the study; what it leaves out is as in a new one.
func (c *cursor) study() table.Study {
	s := table.DefaultStudy()
	for key := range c.keys(studyKeys...) {
		switch key {
		case "seed":
			s.Seed = c.whole(0, 1<<64-1)
		case "bounces":
			s.Bounces = int(c.whole(0, mostBounces))
		case "launches":
			for range c.list(mostStarts, "launches") {
				s.Launches = append(s.Launches, c.launch())
			}
		case "display":
			s.Display = c.display()
		case "sweeps":
			s.Sweeps = c.sweeps()
		case "tolerances":
			s.Tolerances = c.tolerances()
		case "wishes":
			s.Wishes = c.wishes()
		}
	}
	return s
}

func (c *cursor) display() table.Display {
	var d table.Display
	for key := range c.keys(displayKeys...) {
		switch key {
		case "sense":
			d.Sense = table.Sense(c.word(senseWords))
		case "position":
			d.Position = table.Position(c.word(positionWords))
		case "momentum":
			d.Momentum = table.Momentum(c.word(momentumWords))
		}
	}
	return d
}

// launchKeys are the keys that matter for the origin and the pattern. A sweep
// and an even seeding start from their region of the section.
func launchKeys(from table.Origin, p table.Pattern) []string {
	if p == table.Sweep || p == table.Even {
		return []string{"pattern", "count", "region"}
	}
	keys := []string{"pattern", "origin", "s", "p"}
	if from == table.Inside {
		keys = []string{"pattern", "origin", "point", "angle"}
	}
	if p == table.Single {
		return keys
	}
	return append(keys, "count", "spread")
}

var allLaunchKeys = []string{"pattern", "origin", "s", "p", "point", "angle", "count", "spread", "region"}

// launch is one launch. It has just the keys that matter to it.
func (c *cursor) launch() table.Launch {
	at, seen := c.here(), seen{}
	marks := map[string]mark{}
	l := table.Launch{Count: 1}
	for key := range c.keys(allLaunchKeys...) {
		seen.add(key)
		marks[key] = c.here()
		switch key {
		case "pattern":
			l.Pattern = table.Pattern(c.word(patternWords))
		case "origin":
			l.From = table.Origin(c.word(originWords))
		case "s":
			l.S = c.anyNumber()
		case "p":
			l.P = c.anyNumber()
		case "point":
			l.Point = c.point()
		case "angle":
			l.Angle = c.anyNumber()
		case "count":
			l.Count = int(c.whole(1, mostOrbits))
		case "spread":
			l.Spread = c.anyNumber()
		case "region":
			l.Region = c.region()
		}
	}
	needed := launchKeys(l.From, l.Pattern)
	c.need(at, seen, needed...)
	for _, key := range needed {
		delete(marks, key)
	}
	for _, key := range allLaunchKeys {
		if m, there := marks[key]; there {
			c.refuse(m, "take it out", "does not matter to a launch of this pattern and origin")
		}
	}
	return l
}

// region is [s0, s1, p0, p1], s as fractions of the length.
func (c *cursor) region() table.Region {
	at := c.here()
	v := c.numbers(4)
	for i, lo := range []float64{0, 0, -1, -1} {
		if v[i] < lo || v[i] > 1 {
			c.refuse(at, "give [s0, s1, p0, p1] with s from 0 to 1 and p from -1 to 1", "has the number %v", v[i])
		}
	}
	return table.Region{S0: v[0], S1: v[1], P0: v[2], P1: v[3]}
}
