package window

import (
	"fmt"
	"math"
	"reflect"
	"strconv"

	"cavitywright/sim"
	"cavitywright/sim/measure/chaos"
	"cavitywright/table"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"
)

// launchedList tells the character of each launched orbit, and keeps up with
// the launches and with a wall that is dragged.
type launchedList struct {
	w     *Window
	work  *work
	list  *readout
	words *widget.Label
	of    []table.Launch // those that the list is for, or that are followed now
	asked bool
}

const (
	// launchedBounces is the length of an orbit that is told.
	launchedBounces = 4000
	// mostLaunched is how many are told.
	mostLaunched = 24
)

func newLaunchedList(w *Window) *launchedList {
	return &launchedList{w: w, work: newWork(w), list: newReadout(), words: widget.NewLabel("")}
}

func (l *launchedList) view() fyne.CanvasObject {
	l.words.Wrapping = fyne.TextWrapWord
	return container.NewVBox(title("Launched orbits"), l.words, l.list.box)
}

// changed tells the orbits anew where the wall or the launches are others.
func (l *launchedList) changed() {
	t := l.w.session.Table()
	launches := t.Design().Study.Launches
	if l.asked && l.work.Fits() && reflect.DeepEqual(l.of, launches) {
		return
	}
	if !l.work.Fits() {
		l.list.Set(nil) // another wall: nothing of the old one stands beside it
	}
	l.asked, l.of = true, launches
	if why := chaos.Mirrors(t); why != "" {
		l.work.Drop()
		l.list.Set(nil)
		l.words.SetText("Orbits are not told apart here: " + why + ".")
		return
	}
	var all []chaos.Portrayed
	more := 0
	l.work.Follow(func(d desk) error {
		m, err := chaos.NewLaunched(d.tracer, launchedBounces)
		if err != nil {
			return err
		}
		if more = len(m.Starts) - mostLaunched; more > 0 {
			m.Starts = m.Starts[:mostLaunched]
		}
		ran, err := d.runner(m)
		if err == nil {
			all = ran.(*chaos.LaunchedTally).All
		}
		return err
	}, func(err error) {
		if err == nil {
			l.show(all, more)
		}
	})
}

// show writes the list.
func (l *launchedList) show(all []chaos.Portrayed, more int) {
	switch {
	case len(all) == 0:
		l.words.SetText("No orbit of its own is launched. Press in the rays or in the portrait to launch one.")
	case more > 0:
		l.words.SetText(fmt.Sprintf("The first %d of %d, off mirrors, over %d bounces.", mostLaunched, mostLaunched+more, launchedBounces))
	default:
		l.words.SetText(fmt.Sprintf("Off mirrors, over %d bounces.", launchedBounces))
	}
	var rows []readoutRow
	unit := l.w.session.Table().Design().Unit.String()
	for i := range all {
		o := &all[i]
		rows = append(rows, readoutRow{fmt.Sprintf("Orbit %d", i+1), launchedValue(o), launchedAbout(o, unit)})
	}
	l.list.Set(rows)
}

// launchedValue is the character in a few words.
func launchedValue(o *chaos.Portrayed) string {
	switch {
	case o.Stop != sim.Going:
		return fmt.Sprintf("ended after %d bounces", o.Bounces)
	case o.Character == chaos.Regular && !math.IsNaN(o.Rotation):
		return "regular, rotation " + strconv.FormatFloat(o.Rotation, 'f', int(math.Min(math.Max(o.RotationDigits, 3), 12)), 64)
	case o.Character == chaos.Chaotic:
		return fmt.Sprintf("chaotic, %.3f 1/bounce", o.PerBounce)
	}
	return o.Character.String()
}

// launchedAbout says all that is known of it.
func launchedAbout(o *chaos.Portrayed, unit string) string {
	if o.Stop != sim.Going {
		return o.Stop.Why()
	}
	text := fmt.Sprintf("From s = %.6g %s, p = %.5g. Stretching %.5f 1/bounce, %.5f 1/%s over %d bounces; weighted Birkhoff averages of its halves agree to %.1f digits. Least |p| %.5f, greatest %.5f.",
		o.Start.S, unit, o.Start.P, o.PerBounce, o.PerLength, unit, o.Bounces, o.Digits, o.LeastP, o.MostP)
	if !math.IsNaN(o.Rotation) {
		text += fmt.Sprintf(" Rotation number (mean advance along the outer wall a bounce, in parts of its length) %.*f, to %.1f digits.", int(math.Min(math.Max(o.RotationDigits, 3), 15)), o.Rotation, o.RotationDigits)
	}
	if o.Character == chaos.Undecided {
		text += " The two ways to tell it disagree: it sticks to an island, or lies near a separatrix."
	}
	switch {
	case o.Leaves && o.Confined:
		text += " Confined: nothing leaves at any of its bounces."
	case o.Leaves:
		text += " Not confined: something leaves at some of its bounces."
	}
	return text
}
