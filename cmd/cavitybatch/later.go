package main

import "errors"

// orbits is announced, and not in this version.
type orbits struct {
	File string `arg:"" placeholder:"FILE" help:"The table."`
	UpTo int    `placeholder:"N" help:"The most bounces of an orbit."`
	JSON bool   `help:"Write JSON."`
}

// Run says that it cannot be done yet.
func (*orbits) Run() error {
	return errors.New("this version does not search for periodic orbits yet")
}

// emission is announced, and not in this version.
type emission struct {
	File string `arg:"" placeholder:"FILE" help:"The table."`
	Out  string `short:"o" placeholder:"FILE" help:"The figure's file."`
	JSON bool   `help:"Write JSON."`
}

// Run says that it cannot be done yet.
func (*emission) Run() error {
	return errors.New("this version does not compute the far field yet")
}
