package main

import (
	"bytes"
	"context"
	"encoding/csv"
	"fmt"
	"math"
	"strconv"
	"text/tabwriter"

	"cavitywright/sim"
	"cavitywright/sim/measure"
	"cavitywright/sim/measure/chaos"
	"cavitywright/table"
)

// launches tells the character of the launched orbits.
type launches struct {
	listing
	Bounces int `default:"5000" placeholder:"N" help:"Bounces of each orbit (${default})."`
}

// launchedOrbit is one orbit in the form of the JSON; null is what it has none of.
type launchedOrbit struct {
	S              *float64 `json:"s"` // of its first bounce
	P              *float64 `json:"p"`
	Bounces        int      `json:"bounces"`
	Stop           string   `json:"stop"` // going where it was not stopped
	Character      string   `json:"character"`
	PerBounce      *float64 `json:"stretching_per_bounce"`
	PerLength      *float64 `json:"stretching_per_length"`
	Digits         float64  `json:"digits"` // in which weighted Birkhoff averages of its halves agree
	Rotation       *float64 `json:"rotation"`
	RotationDigits float64  `json:"rotation_digits"`
	LeastP         float64  `json:"least_p"`
	MostP          float64  `json:"greatest_p"`
	Confined       *bool    `json:"confined"` // null where nothing can leave
}

type launchList struct {
	Name   string          `json:"name"`
	Unit   string          `json:"unit"`
	Length float64         `json:"perimeter"`
	Orbits []launchedOrbit `json:"orbits"`
}

// Help says what is followed where nothing is launched.
func (*launches) Help() string {
	return "Where the study launches no orbit of its own, orbits are seeded evenly in ds dp, as in its portrait."
}

// Run follows and lists.
func (c *launches) Run(ctx context.Context, std streams) error {
	if c.Bounces < 100 || c.Bounces > mostMapBounces {
		return misuse("the number of bounces is %d, but must lie between 100 and %d", c.Bounces, int(mostMapBounces))
	}
	if err := c.check("orbits"); err != nil {
		return err
	}
	t, err := readTable(c.File, std)
	if err != nil {
		return err
	}
	if why := chaos.Mirrors(t); why != "" {
		return &measure.NotMeasured{Name: "character of orbits", Why: why}
	}
	tr := sim.Compile(t)
	m, err := chaos.NewLaunched(tr, c.Bounces)
	if err != nil {
		return err
	}
	if m.Orbits() == 0 {
		for _, l := range measure.WithLaunches(t, table.Study{}, 0).Launches {
			m.Starts = append(m.Starts, tr.Launched(l)...)
		}
	}
	r := newRunner(ctx, tr, t.Design().Study.Seed, c.Workers, std)
	r.title = "launches"
	ran, err := r.run(m)
	r.close()
	if err != nil {
		return err
	}
	list := launchList{Name: t.Design().Name, Unit: t.Design().Unit.String(), Length: t.Length(), Orbits: []launchedOrbit{}}
	for _, o := range ran.(*chaos.LaunchedTally).All {
		list.Orbits = append(list.Orbits, launchRow(&o))
	}
	return c.deliver(std, &list, t.Design().Study.Seed)
}

func launchRow(o *chaos.Portrayed) launchedOrbit {
	l := launchedOrbit{Bounces: o.Bounces, Stop: o.Stop.String(), Character: o.Character.String(), Digits: o.Digits, RotationDigits: o.RotationDigits, LeastP: o.LeastP, MostP: o.MostP}
	if o.Bounces > 0 {
		l.S, l.P = &o.Start.S, &o.Start.P
	}
	if o.PerBounce != 0 {
		l.PerBounce, l.PerLength = &o.PerBounce, &o.PerLength
	}
	if !math.IsNaN(o.Rotation) {
		l.Rotation = &o.Rotation
	}
	if o.Leaves {
		l.Confined = &o.Confined
	}
	return l
}

// tell writes the list for a person.
func (l *launchList) tell(std streams) error {
	w := tabwriter.NewWriter(std.out, 0, 0, 2, ' ', 0)
	fmt.Fprintf(w, "s (%s)\tp\tcharacter\tdigits\tstretching (1/bounce)\trotation number\tleast |p|\tconfined\tbounces\n", l.Unit)
	part := func(v *float64, format string) string {
		if v == nil {
			return "none"
		}
		return fmt.Sprintf(format, *v)
	}
	for i := range l.Orbits {
		o := &l.Orbits[i]
		rotation, confined, bounces := part(o.Rotation, "%.6f"), "nothing leaves", strconv.Itoa(o.Bounces)
		if o.Rotation != nil && o.Character == "regular" {
			rotation = strconv.FormatFloat(*o.Rotation, 'f', int(math.Min(math.Max(o.RotationDigits, 2), 15)), 64)
		}
		if o.Confined != nil {
			confined = map[bool]string{true: "yes", false: "no"}[*o.Confined]
		}
		if o.Stop != sim.Going.String() {
			bounces += ", " + o.Stop
		}
		fmt.Fprintf(w, "%s\t%s\t%s\t%.1f\t%s\t%s\t%.5f\t%s\t%s\n", part(o.S, "%.6f"), part(o.P, "%.6f"), o.Character, o.Digits, part(o.PerBounce, "%.5f"), rotation, o.LeastP, confined, bounces)
	}
	return w.Flush()
}

// csv is the list with a row an orbit.
func (l *launchList) csv(seed uint64) []byte {
	var b bytes.Buffer
	fmt.Fprintf(&b, "# %s\n# lengths in %s; perimeter %s; seed %d; rotation: mean advance along the outer wall a bounce, in parts of its length; digits: in which weighted Birkhoff averages of the halves agree\n",
		program, l.Unit, strconv.FormatFloat(l.Length, 'g', -1, 64), seed)
	w := csv.NewWriter(&b)
	_ = w.Write([]string{"s", "p", "bounces", "stop", "character", "stretching_per_bounce", "stretching_per_length", "digits", "rotation", "rotation_digits", "least_p", "greatest_p", "confined"})
	full := func(v *float64) string {
		if v == nil {
			return ""
		}
		return strconv.FormatFloat(*v, 'g', -1, 64)
	}
	for i := range l.Orbits {
		o := &l.Orbits[i]
		confined := ""
		if o.Confined != nil {
			confined = strconv.FormatBool(*o.Confined)
		}
		_ = w.Write([]string{full(o.S), full(o.P), strconv.Itoa(o.Bounces), o.Stop, o.Character, full(o.PerBounce), full(o.PerLength), full(&o.Digits), full(o.Rotation), full(&o.RotationDigits), full(&o.LeastP), full(&o.MostP), confined})
	}
	w.Flush()
	return b.Bytes()
}
