package main

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"strings"

	"cavitywright/render/export"
	"cavitywright/table"
	"cavitywright/table/outline"
	"cavitywright/table/outline/intake"
	"cavitywright/table/tablefile"
)

// outlineIn makes a table of an outline that was drawn or measured.
type outlineIn struct {
	File      string  `arg:"" placeholder:"FILE" help:"An SVG drawing, or a table of points (x and y in each line), or - for standard input."`
	Unit      string  `placeholder:"U" help:"Unit of the table: m, cm, mm, um or nm; what suits the size where none is given. A file that states no unit has its numbers taken in it."`
	Scale     float64 `default:"0" placeholder:"K" help:"Multiply all lengths by K."`
	Height    float64 `default:"0" placeholder:"H" help:"Make the wall H high, in the table's unit."`
	Fit       float64 `default:"0" placeholder:"TOL" help:"Lay smooth walls along polygons of many points, none of which then lies farther than TOL (in the table's unit) from the wall."`
	CornerDeg float64 `name:"corner-deg" default:"30" placeholder:"DEG" help:"A bend of more than this within a few points stays a corner of a fitted wall (${default} degrees)."`
	Name      string  `placeholder:"TEXT" help:"Name of the table; the file's where none is given."`
	Drawn     bool    `help:"Read the lines of a drawing even where it carries a table."`
	Out       string  `short:"o" placeholder:"FILE" help:"Write the table to a file instead of standard output."`
	JSON      bool    `help:"Write what was found as JSON to standard output; the table then needs -o."`
}

// intakeAccount is what became of an outline, in the form of its JSON.
type intakeAccount struct {
	Unit     string    `json:"unit"`
	Loops    int       `json:"loops"`
	Nodes    int       `json:"nodes"`
	Points   int       `json:"points"`   // of polygons
	Residual *residual `json:"residual"` // null where nothing was fitted
	Moved    float64   `json:"moved"`    // by joints made smooth
	Notes    []string  `json:"notes"`
}

type residual struct {
	RMS      float64 `json:"rms"`
	Greatest float64 `json:"greatest"`
	X        float64 `json:"x"` // where that is
	Y        float64 `json:"y"`
	Corners  int     `json:"corners"`
}

// Run reads the outline and writes the table.
func (c *outlineIn) Run(std streams) error {
	if c.JSON && c.Out == "" {
		return misuse("with --json the table needs a file of its own; name it with -o")
	}
	if c.Fit < 0 || c.Scale < 0 || c.Height < 0 || c.Scale > 0 && c.Height > 0 || !(c.CornerDeg > 0) || c.CornerDeg >= 180 {
		return misuse("the tolerance, the scale or the height, and the angle must be above 0, and only one of scale and height can be given")
	}
	o := intake.Options{Scale: c.Scale, Height: c.Height, Fit: outline.Fit{Tolerance: c.Fit, CornerDeg: c.CornerDeg}}
	if c.Unit != "" {
		u, err := table.ParseUnit(c.Unit)
		if err != nil {
			return &wrongUse{err}
		}
		o.Unit = u
	}
	content, err := c.content(std)
	if err != nil {
		return c.about(err)
	}
	d, a, carried, err := c.design(content, o)
	if err != nil {
		return c.about(err)
	}
	if c.Name != "" {
		d.Name = c.Name
	}
	var file bytes.Buffer
	if err := tablefile.Write(&file, d); err != nil {
		return c.about(err)
	}
	if c.Out != "" {
		err = writeFile(c.Out, file.Bytes())
	} else {
		_, err = std.out.Write(file.Bytes())
	}
	if err != nil {
		return err
	}
	if c.JSON {
		return writeJSON(std.out, accountOf(a, d))
	}
	if carried {
		fmt.Fprintln(std.err, "The drawing carries its table, which was taken; --drawn reads its lines instead.")
		return nil
	}
	for _, line := range intake.Lines(a, d.Unit) {
		fmt.Fprintln(std.err, line)
	}
	return nil
}

// design is the table that a drawing carries, or its lines as one.
func (c *outlineIn) design(content []byte, o intake.Options) (d table.Design, a intake.Account, carried bool, err error) {
	if !c.Drawn && intake.LooksDrawn(content[:min(len(content), 512)]) {
		if inside, err := export.TableInSVG(bytes.NewReader(content)); err == nil {
			d, err := tablefile.Read(bytes.NewReader(inside))
			return d, a, true, err
		}
	}
	drawing, err := intake.Read(bytes.NewReader(content))
	if err != nil {
		return d, a, false, err
	}
	d, a, err = drawing.Design(o)
	if d.Name = "Imported outline"; c.File != "-" {
		d.Name = strings.TrimSuffix(filepath.Base(c.File), filepath.Ext(c.File))
	}
	return d, a, false, err
}

func (c *outlineIn) content(std streams) ([]byte, error) {
	in := std.in
	if c.File != "-" {
		info, err := os.Stat(c.File)
		switch {
		case err != nil:
			return nil, unreadable(err)
		case info.IsDir():
			return nil, errors.New("this is a folder; name a drawing in it")
		}
		f, err := os.Open(c.File)
		if err != nil {
			return nil, unreadable(err)
		}
		defer f.Close()
		in = f
	}
	return io.ReadAll(io.LimitReader(in, intake.MostBytes+1))
}

// about names the file at fault.
func (c *outlineIn) about(err error) error {
	if c.File == "-" {
		return fmt.Errorf("standard input: %w", err)
	}
	return fmt.Errorf("%s: %w", quoted(c.File), err)
}

func accountOf(a intake.Account, d table.Design) intakeAccount {
	out := intakeAccount{Unit: d.Unit.String(), Loops: a.Loops, Nodes: a.Nodes, Points: a.Points, Moved: a.Moved, Notes: append([]string{}, a.Notes...)}
	if a.Fitted {
		r := a.Residual
		out.Residual = &residual{RMS: r.RMS, Greatest: r.Greatest, X: r.At.X, Y: r.At.Y, Corners: r.Corners}
	}
	return out
}
