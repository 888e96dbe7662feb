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
	"cavitywright/sim/measure/reading"
	"cavitywright/table"
)

// islands says what is chaotic and lists the islands.
type islands struct {
	listing
	Effort float64 `default:"1" placeholder:"K" help:"Multiply the number of cells of the map and of bounces (${default})."`
	Seed   *uint64 `placeholder:"N" help:"Seed of chance; the study's where none is given."`
}

// seaChart is what islands finds, in the form of its JSON.
type seaChart struct {
	Name    string      `json:"name"`
	Verdict string      `json:"verdict"`
	Unit    string      `json:"unit"`
	Length  float64     `json:"perimeter"`
	Columns int         `json:"columns"` // of the map
	Rows    int         `json:"rows"`
	Bounces int         `json:"bounces"` // from each cell
	Seas    int         `json:"seas"`
	Chains  int         `json:"chains"`
	Regular float64     `json:"regular_share"` // of the map's cells
	Small   float64     `json:"speck_share"`   // regular cells in regions too small to be islands
	Islands []islandRow `json:"islands"`
}

type islandRow struct {
	Share   float64  `json:"share"`
	Err     float64  `json:"stderr"`
	S       *float64 `json:"s"` // null for a band around the wall
	P       float64  `json:"p"`
	Loop    int      `json:"loop"`
	Chain   int      `json:"chain"`
	Members int      `json:"members"` // islands of its chain
	Period  int      `json:"period"`  // 0 where it is not told
	Cells   int      `json:"cells"`
}

// Run maps and lists.
func (c *islands) Run(ctx context.Context, std streams) error {
	if err := checkEffort(c.Effort); err != nil {
		return err
	}
	if err := c.check("islands"); err != nil {
		return err
	}
	t, err := readTable(c.File, std)
	if err != nil {
		return err
	}
	if why := chaos.Mirrors(t); why != "" {
		return &measure.NotMeasured{Name: "list of islands", Why: why}
	}
	seed := t.Design().Study.Seed
	if c.Seed != nil {
		seed = *c.Seed
	}
	r := newRunner(ctx, sim.Compile(t), seed, c.Workers, std)
	r.title = "islands"
	chart, err := charted(t, reading.NewTaker(r.tracer, r.run, c.Effort, seed, 0))
	r.close()
	if err != nil {
		return err
	}
	return c.deliver(std, chart, seed)
}

func charted(t *table.Table, k *reading.Taker) (*seaChart, error) {
	verdict, err := k.Verdict()
	if err != nil {
		return nil, err
	}
	c := &seaChart{Name: t.Design().Name, Verdict: verdict, Unit: t.Design().Unit.String(), Length: t.Length(), Islands: []islandRow{}}
	if chaos.Integrable(t) != "" {
		return c, nil
	}
	s, err := k.Survey()
	if err != nil {
		return nil, err
	}
	c.Columns, c.Rows, c.Bounces = s.Columns, s.Rows, s.Each
	c.Seas, c.Chains, c.Regular, c.Small = s.Seas, s.Chains, s.Regular, s.Small
	for _, i := range s.Islands {
		row := islandRow{Share: i.Share, Err: i.Err, P: i.P, Loop: i.Loop, Chain: i.Chain, Members: i.Members, Period: i.Period, Cells: i.Cells}
		if !i.Winds {
			row.S = &i.S
		}
		c.Islands = append(c.Islands, row)
	}
	return c, nil
}

// listedIslands is how many islands are listed for a person; JSON and CSV have
// them all.
const listedIslands = 20

// tell writes the verdict and the largest islands.
func (c *seaChart) tell(std streams) error {
	fmt.Fprintln(std.out, c.Verdict)
	if len(c.Islands) == 0 {
		return nil
	}
	fmt.Fprintf(std.out, "\nMap of %d × %d cells, %d bounces from each.\n\n", c.Columns, c.Rows, c.Bounces)
	w := tabwriter.NewWriter(std.out, 0, 0, 2, ' ', 0)
	fmt.Fprintln(w, "share\ts/L\tp\tchain\tperiod\tcells")
	for _, i := range c.Islands[:min(len(c.Islands), listedIslands)] {
		at, period := "around", "not told"
		if i.S != nil {
			at = strconv.FormatFloat(*i.S/c.Length, 'f', 4, 64)
		}
		if i.Period > 0 {
			period = strconv.Itoa(i.Period)
		}
		fmt.Fprintf(w, "%.3f ± %.3f %%\t%s\t%.4f\t%d\t%s\t%d\n", 100*i.Share, 100*i.Err, at, math.Round(i.P*1e4)/1e4+0, i.Chain, period, i.Cells)
	}
	if n := len(c.Islands) - listedIslands; n > 0 {
		fmt.Fprintf(w, "%d smaller ones\n", n)
	}
	return w.Flush()
}

// csv is the list with a row an island.
func (c *seaChart) csv(seed uint64) []byte {
	var b bytes.Buffer
	fmt.Fprintf(&b, "# %s\n# %s\n# s and perimeter in %s; perimeter %s; seed %d; share of ds dp with its standard error; s is empty for a band around the wall\n",
		program, c.Verdict, c.Unit, strconv.FormatFloat(c.Length, 'g', -1, 64), seed)
	w := csv.NewWriter(&b)
	_ = w.Write([]string{"share", "stderr", "s", "p", "loop", "chain", "members", "period", "cells"}) // a bytes.Buffer does not fail
	full := func(v float64) string { return strconv.FormatFloat(v, 'g', -1, 64) }
	for _, i := range c.Islands {
		s := ""
		if i.S != nil {
			s = full(*i.S)
		}
		_ = w.Write([]string{full(i.Share), full(i.Err), s, full(i.P), strconv.Itoa(i.Loop), strconv.Itoa(i.Chain), strconv.Itoa(i.Members), strconv.Itoa(i.Period), strconv.Itoa(i.Cells)})
	}
	w.Flush()
	return b.Bytes()
}
