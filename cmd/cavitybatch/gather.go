package main

import (
	"fmt"
	"os"
	"strings"

	"cavitywright/render/export"
	"cavitywright/sim/study/part"
)

// gather joins the parts of a study.
type gather struct {
	Parts []string `arg:"" placeholder:"PART" help:"The parts that cavitybatch study wrote, in any order."`
	Out   string   `short:"o" placeholder:"FILE" help:"The result: .csv, .json, .png, .svg, .pdf, or .jsonl for a part 1/1; each to the byte what a single run writes."`
	JSON  bool     `help:"Write JSON."`
	studyPage
}

// Run joins them.
func (c *gather) Run(std streams) error {
	if c.Out != "" && !strings.HasSuffix(c.Out, partEnding) {
		if _, err := export.FormatOf(c.Out); err != nil {
			return &wrongUse{err}
		}
	}
	var all []part.Named
	for _, name := range c.Parts {
		b, err := os.ReadFile(name)
		if err != nil {
			return fmt.Errorf("%s: %w", quoted(name), unreadable(err))
		}
		f, err := part.Read(b)
		if err != nil {
			return fmt.Errorf("%s: %w", quoted(name), err)
		}
		all = append(all, part.Named{Name: quoted(name), File: f})
	}
	r, err := part.Gather(all)
	if err != nil {
		return err
	}
	if all[0].File.Head.Program != program {
		complain(std, fmt.Sprintf("the parts were made by %s; this is %s", all[0].File.Head.Program, program))
	}
	return c.write(r, c.Out, c.JSON, std)
}
