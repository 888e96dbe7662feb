package main

import (
	"path/filepath"
	"strings"
)

// listing is what the commands that list things are asked.
type listing struct {
	File    string `arg:"" placeholder:"FILE" help:"The table, or - for standard input."`
	Out     string `short:"o" placeholder:"FILE.csv" help:"Write the list as CSV to a file, one row each."`
	Workers int    `default:"0" placeholder:"N" help:"Number of workers, which changes no number; 0 for all processors."`
	JSON    bool   `help:"Write JSON."`
}

// check refuses a file that would not be CSV, and a number of workers that is
// none. what names the things listed.
func (c *listing) check(what string) error {
	if c.Out != "" && !strings.EqualFold(filepath.Ext(c.Out), ".csv") {
		return misuse("%s: %s are written as CSV; let the name end in .csv", quoted(c.Out), what)
	}
	return checkWorkers(c.Workers)
}

// listed is a list that can be written in all three forms.
type listed interface {
	csv(seed uint64) []byte
	tell(std streams) error
}

// deliver writes a list: as CSV to the file where one is named, as JSON where
// that is asked for, else for a person.
func (c *listing) deliver(std streams, l listed, seed uint64) error {
	if c.Out != "" {
		if err := writeFile(c.Out, l.csv(seed)); err != nil {
			return err
		}
	}
	switch {
	case c.JSON:
		return writeJSON(std.out, l)
	case c.Out == "":
		return l.tell(std)
	}
	return nil
}
