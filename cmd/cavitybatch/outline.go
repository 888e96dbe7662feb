package main

import (
	"bytes"
	"fmt"
	"math"

	"cavitywright/render/export"
	"cavitywright/sim/measure"
	"cavitywright/table/outline"
	"cavitywright/table/tablefile"
)

// outlineOut writes the wall of a table for a workshop.
type outlineOut struct {
	File       string  `arg:"" placeholder:"FILE" help:"The table, or - for standard input."`
	Out        string  `short:"o" required:"" placeholder:"FILE" help:"The outline's file; its ending says the format: .svg (true arcs and cubics in real size), .dxf (lines and true arcs), .gds (polygons on a grid) or .csv (points, normals and curvature)."`
	ChordError float64 `name:"chord-error" default:"0" placeholder:"E" help:"Greatest distance of the outline from the wall, in the table's unit; where none is given 1e-4 of the table's size but not below the grid, in SVG 1e-9."`
	Bias       float64 `default:"0" placeholder:"B" help:"Move the wall by B out of the table, into the material, in the table's unit; negative into the table."`
	Grid       float64 `default:"0" placeholder:"G" help:"Grid of .gds, in the table's unit; 1 nm where none is given."`
	JSON       bool    `help:"Write what was achieved as JSON."`
}

// outlineAccount is what an outline differs by, in the form of its JSON.
type outlineAccount struct {
	File       string  `json:"file"`
	Unit       string  `json:"unit"`
	ChordError float64 `json:"chord_error"`
	Achieved   float64 `json:"achieved_error"`
	Bias       float64 `json:"bias"`
	Grid       float64 `json:"grid"`
	Vertices   int     `json:"vertices"`
	Area       float64 `json:"area"`
	Perimeter  float64 `json:"perimeter"`
	AreaOff    float64 `json:"area_difference"`
	Longer     float64 `json:"perimeter_difference"`
}

// recipients are whom the formats are made for.
var recipients = map[export.WallFormat]measure.Recipient{
	export.WallSVG: measure.Drawing, export.WallDXF: measure.Machine, export.WallGDS: measure.Mask, export.WallCSV: measure.PointTable,
}

// Run writes the outline.
func (c *outlineOut) Run(std streams) error {
	format, err := export.WallFormatOf(c.Out)
	if err != nil {
		return &wrongUse{err}
	}
	if c.ChordError < 0 || c.Grid < 0 || math.IsNaN(c.ChordError) || math.IsNaN(c.Grid) {
		return misuse("the chord error and the grid must be lengths above 0")
	}
	t, err := readTable(c.File, std)
	if err != nil {
		return err
	}
	h := measure.Handover{For: recipients[format], Options: outline.Options{ChordError: c.ChordError, Bias: c.Bias, Grid: c.Grid}}
	h.Options = measure.HandoverDefaults(t, h)
	f, a, err := measure.HandedOver(t, h, program)
	if err != nil {
		return err
	}
	o := export.WallOptions{Grid: h.Grid}
	if format == export.WallSVG && c.Bias == 0 {
		var file bytes.Buffer
		if err := tablefile.Write(&file, t.Design()); err != nil {
			return err
		}
		o.Table = file.Bytes()
	}
	var out bytes.Buffer
	if err := export.WriteWall(&out, format, f, o); err != nil {
		return err
	}
	if err := writeFile(c.Out, out.Bytes()); err != nil {
		return err
	}
	if !c.JSON {
		_, err := fmt.Fprintf(std.out, "%s: %s.\n", c.Out, measure.HandoverSentence(t, a, c.Bias))
		return err
	}
	account := outlineAccount{
		File: c.Out, Unit: t.Design().Unit.String(), ChordError: h.ChordError, Achieved: a.Achieved, Bias: c.Bias, Vertices: a.Steps,
		Area: a.Area, Perimeter: a.Perimeter, AreaOff: a.AreaOff, Longer: a.Longer,
	}
	if h.For == measure.Mask {
		account.Grid = h.Grid
	}
	return writeJSON(std.out, account)
}
