package main

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"slices"
	"strings"
	"text/tabwriter"

	"cavitywright/render"
	"cavitywright/render/export"
	"cavitywright/sim/figure"
	"cavitywright/sim/study"
	"cavitywright/sim/study/part"
	"cavitywright/table/tablefile"
)

// studyPage is how the result of a study is written.
type studyPage struct {
	Reading  string  `placeholder:"NAME" help:"Draw this reading alone; without it all of them, each in a panel of its own."`
	WidthMM  float64 `name:"width-mm" default:"0" placeholder:"MM" help:"Width of the figure in millimetres; 0 for 85, or 175 for several panels."`
	HeightMM float64 `name:"height-mm" default:"0" placeholder:"MM" help:"Height in millimetres; 0 for what suits the figure."`
	DPI      float64 `name:"dpi" default:"600" placeholder:"N" help:"Dots per inch of a PNG (${default})."`
}

// The heights of a page of panels: of its frame, of a line of its head, which may
// be broken once or twice, and of a row of panels.
const (
	panelsMM   = 42
	headLineMM = 10
	panelMM    = 62
)

// write writes a whole result to a file, as its ending says, and to standard
// output where there is no file or JSON is asked for.
func (c *studyPage) write(r *study.Result, to string, asJSON bool, std streams) error {
	if to != "" {
		b, err := c.encoded(r, to)
		if err != nil {
			return err
		}
		if err := writeFile(to, b); err != nil {
			return err
		}
	}
	switch {
	case asJSON:
		b, err := r.JSON()
		if err != nil {
			return err
		}
		_, err = std.out.Write(b)
		return err
	case to == "":
		return tellStudy(r, std.out)
	}
	return nil
}

// encoded is a whole result in the form that the file's ending says.
func (c *studyPage) encoded(r *study.Result, to string) ([]byte, error) {
	if strings.HasSuffix(to, partEnding) {
		return part.Written(r, program)
	}
	format, err := export.FormatOf(to)
	if err != nil {
		return nil, &wrongUse{err}
	}
	switch format {
	case export.CSV:
		return r.CSV(program), nil
	case export.JSON:
		return r.JSON()
	}
	f := r.Page(program)
	if c.Reading != "" {
		if !slices.Contains(r.Sweep.Readings, c.Reading) {
			return nil, misuse("the sweep takes no reading called %q; it takes %s", c.Reading, strings.Join(r.Sweep.Readings, ", "))
		}
		f = r.Figure(c.Reading, program)
	}
	width := c.WidthMM
	height := c.HeightMM
	if s, several := f.(figure.Sheet); several {
		if width == 0 {
			width = readingsMM
		}
		if height == 0 {
			height = panelsMM + headLineMM*float64(len(s.Head)) + panelMM*float64(len(s.Rows))
		}
	}
	var file, out bytes.Buffer
	if err := tablefile.Write(&file, r.Base.Design()); err != nil {
		return nil, err
	}
	err = export.Write(&out, format, f, export.Options{WidthMM: width, HeightMM: height, DPI: c.DPI, Table: file.Bytes(), Header: header(r.Base)})
	if size := (*export.BadSize)(nil); errors.As(err, &size) {
		return nil, &wrongUse{err}
	}
	return out.Bytes(), err
}

// tellStudy writes the points for a person, a row each.
func tellStudy(r *study.Result, out io.Writer) error {
	w := tabwriter.NewWriter(out, 0, 0, 2, ' ', 0)
	for k := range r.Dials {
		fmt.Fprintf(w, "%s\t", r.Label(k))
	}
	fmt.Fprintln(w, strings.Join(r.Sweep.Readings, "\t"))
	for i := range r.Points() {
		row, _ := r.Point(i)
		for k, v := range row.Values {
			fmt.Fprintf(w, "%.9g %s\t", v, r.Unit(k))
		}
		if row.Fault != "" {
			fmt.Fprintln(w, row.Fault)
			continue
		}
		for _, t := range row.Taken {
			s := figure.Scalar{Value: float64(t.Value), StdErr: float64(t.StdErr)}
			unit := t.Unit
			if unit == "1" {
				unit = ""
			}
			fmt.Fprintf(w, "%s\t", strings.TrimSpace(fmt.Sprint(render.Written(s), " ", unit)))
		}
		fmt.Fprintln(w)
	}
	if err := w.Flush(); err != nil {
		return err
	}
	for _, line := range r.Standing() {
		if _, err := fmt.Fprintln(out, line); err != nil {
			return err
		}
	}
	return nil
}
