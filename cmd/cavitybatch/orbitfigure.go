package main

import (
	"context"
	"fmt"
	"slices"

	"cavitywright/render/export"
	"cavitywright/sim"
	"cavitywright/sim/figure"
	"cavitywright/sim/measure"
	"cavitywright/sim/orbit"
	"cavitywright/table"

	"github.com/vbauerster/mpb/v8"
	"github.com/vbauerster/mpb/v8/decor"
)

// watching lets the search show a bar where standard error is a terminal. ended
// takes it off; close must be called at last.
func watching(std streams, ask *orbit.Search) (ended, close func()) {
	if !isTerminal(std.err) {
		return func() {}, func() {}
	}
	const whole = 1000
	bars := mpb.New(mpb.WithOutput(std.err), mpb.WithWidth(60))
	bar := bars.New(whole, mpb.BarStyle(), mpb.BarRemoveOnComplete(), mpb.PrependDecorators(decor.Name("searching", decor.WC{W: 18, C: decor.DindentRight})))
	ask.Told = func(share float64, _ int) { bar.SetCurrent(min(int64(share*whole), whole-1)) }
	over := false
	ended = func() {
		if !over {
			over = true
			bar.Abort(true)
		}
	}
	return ended, func() { ended(); bars.Wait() }
}

// picture writes the orbits on the table or on the portrait.
func (c *orbits) picture(ctx context.Context, std streams, t *table.Table, list *orbit.List, format export.Format) error {
	shown := list.Firsts()
	if len(c.Only) > 0 {
		shown = slices.DeleteFunc(shown, func(o *orbit.Orbit) bool { return !slices.Contains(c.Only, o.Class) })
	}
	if len(shown) == 0 {
		return fmt.Errorf("no orbit is left to draw; the sets have the numbers 1 to %d", len(list.Firsts()))
	}
	if c.On == "table" {
		return c.publish(ctx, t, c.Out, format, orbit.Drawing(t, shown, program))
	}
	d := t.Design()
	d.Study = measure.WithLaunches(t, d.Study, 0)
	t, err := c.studied(d)
	if err != nil {
		return err
	}
	var all []*orbit.Orbit // every copy: a portrait shows them apart
	for i := range list.Orbits {
		if o := &list.Orbits[i]; len(c.Only) == 0 || slices.Contains(c.Only, o.Class) {
			all = append(all, o)
		}
	}
	tr := sim.Compile(t)
	p := page{leaf: c.leaf, Out: c.Out}
	return p.draw(ctx, std, tr, measure.NewPortrait(tr, d.Study.Launches, d.Study.Bounces), format, func(ran measure.Tally) figure.Figure {
		f := measure.PortraitFigure(t, ran.(*measure.PortraitTally), program)
		f.Spots = orbit.Spots(t, all, -1)
		const key = "a ring is elliptic, a cross hyperbolic, a cross in a ring inverse hyperbolic, a bar a marginal family"
		f.Caption = slices.Insert(f.Caption, len(f.Caption)-1, fmt.Sprintf("Periodic orbits up to %d bounces: %s.", c.UpTo, key))
		return f
	})
}
