package main

import "errors"

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
