// Package export writes a figure as a file, one format a file of this package.
// A picture carries the table that it was made from inside it, as PNG and as
// SVG, so that a figure alone can be opened again as a table.
//
// It writes to an io.Writer and names no file; what it writes depends on the
// figure and the options alone, so the same export twice gives the same bytes.
package export

import (
	"errors"
	"fmt"
	"io"
	"path/filepath"
	"strings"

	"cavitywright/render"
	"cavitywright/sim/figure"
)

// Format is a kind of file.
type Format uint8

// The formats.
const (
	PNG Format = iota
	SVG
	PDF
	CSV
	JSON
)

// names are the formats' file endings, in the order of their constants.
var names = [...]string{"png", "svg", "pdf", "csv", "json"}

// String is the usual ending of the format's files.
func (f Format) String() string { return names[f] }

// FormatOf tells the format by the ending of a file's name.
func FormatOf(filename string) (Format, error) {
	ending := strings.ToLower(strings.TrimPrefix(filepath.Ext(filename), "."))
	for f, name := range names {
		if ending == name {
			return Format(f), nil
		}
	}
	return 0, &UnknownEnding{Name: filename, Known: names[:]}
}

// UnknownEnding says that a file's name does not tell a format; Known are the
// endings that do.
type UnknownEnding struct {
	Name  string
	Known []string
}

func (e *UnknownEnding) Error() string {
	return fmt.Sprintf("the name %q does not end in a known format; use .%s", e.Name, strings.Join(e.Known, ", ."))
}

// Unfit says that a format cannot hold a kind of figure.
type Unfit struct {
	Format Format
	Figure string
}

func (e *Unfit) Error() string {
	return fmt.Sprintf("%s files do not hold %s; choose another format", strings.ToUpper(e.Format.String()), e.Figure)
}

// BadSize says that a page cannot be made in the size that was asked for.
type BadSize struct {
	WidthMM, HeightMM, DPI float64
	Why                    string
}

func (e *BadSize) Error() string {
	return fmt.Sprintf("a page of %g mm by %g mm at %g dpi cannot be made; %s", e.WidthMM, e.HeightMM, e.DPI, e.Why)
}

// ErrNoValue says that a reading has no value that the file could state.
var ErrNoValue = errors.New("a reading has no finite value, and JSON cannot state that; leave it out or write CSV")

// Options is how a figure is exported. What is zero has its default.
type Options struct {
	WidthMM  float64     // 85, one column of a journal
	HeightMM float64     // what suits the figure
	DPI      float64     // of PNG: 300
	Look     render.Look // in millimetres: render.Paper(1)
	Table    []byte      // the table file, carried inside PNG and SVG; nil for none
	Header   []string    // lines at the head of CSV: convention, seed, version
}

// Defaults of a page.
const (
	columnMM  = 85
	printDPI  = 300
	mmPerInch = 25.4
)

// Bounds of a page: beyond them a slip of the keyboard is likelier than a wish.
const (
	mostMM     = 2000
	mostPixels = 200e6
	leastMM    = 5
	mostDPI    = 4800
	leastDPI   = 10
)

// filled is the options with the defaults put in.
func (o Options) filled(f figure.Figure) (Options, error) {
	if o.Look == (render.Look{}) {
		o.Look = render.Paper(1)
	}
	if o.WidthMM == 0 {
		o.WidthMM = columnMM
	}
	if o.DPI == 0 {
		o.DPI = printDPI
	}
	wrong := func(why string) (Options, error) {
		return o, &BadSize{o.WidthMM, o.HeightMM, o.DPI, why}
	}
	if !(o.WidthMM >= leastMM && o.WidthMM <= mostMM) {
		return wrong(fmt.Sprintf("the width has to be between %d and %d mm", leastMM, mostMM))
	}
	if o.HeightMM == 0 {
		o.HeightMM = min(max(render.Height(f, o.WidthMM, o.Look), leastMM), mostMM)
	}
	if !(o.HeightMM >= leastMM && o.HeightMM <= mostMM) {
		return wrong(fmt.Sprintf("the height has to be between %d and %d mm", leastMM, mostMM))
	}
	if !(o.DPI >= leastDPI && o.DPI <= mostDPI) {
		return wrong(fmt.Sprintf("the resolution has to be between %d and %d dpi", leastDPI, mostDPI))
	}
	return o, nil
}

// box is the page as a box of the canvas.
func (o Options) box() render.Box { return render.NewBox(0, 0, o.WidthMM, o.HeightMM) }

// Write writes a figure in a format.
func Write(w io.Writer, format Format, f figure.Figure, o Options) error {
	o, err := o.filled(f)
	if err != nil && format != CSV && format != JSON {
		return err
	}
	switch format {
	case PNG:
		return writePNG(w, f, o)
	case SVG:
		return writeSVG(w, f, o)
	case PDF:
		return writePDF(w, f, o)
	case CSV:
		return writeCSV(w, f, o)
	case JSON:
		return writeJSON(w, f)
	}
	panic("export: an unknown format")
}

// caption is what a figure says about itself, as lines.
func caption(f figure.Figure) string {
	switch f := f.(type) {
	case figure.Dots:
		return strings.Join(f.Caption, "\n")
	case figure.Paths:
		return strings.Join(f.Caption, "\n")
	case figure.Series:
		return strings.Join(f.Caption, "\n")
	case figure.Polar:
		return strings.Join(f.Caption, "\n")
	case figure.Grid:
		return strings.Join(f.Caption, "\n")
	}
	return ""
}

// kind names a kind of figure.
func kind(f figure.Figure) string {
	switch f.(type) {
	case figure.Dots:
		return "a portrait"
	case figure.Paths:
		return "a drawing"
	case figure.Series:
		return "curves"
	case figure.Polar:
		return "a far field"
	case figure.Grid:
		return "a map"
	case figure.Scalars:
		return "readings"
	}
	return "this figure"
}
