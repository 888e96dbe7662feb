// Command cavitybatch is the designer's kernel without a window: it makes and
// checks table files, takes readings, and writes the figures, from the same
// code as the designer.
//
// JSON goes to standard output where --json is given, progress to standard
// error. Exit codes: 0 fine, 1 the table or study is at fault or nothing
// that was asked could be taken, 2 wrong use.
// The same file with the same seed gives the same numbers on any number of
// workers.
package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"os"
	"os/signal"
	"strings"
	"syscall"
	"unicode"
	"unicode/utf8"

	"cavitywright/assets"

	"github.com/alecthomas/kong"
)

// program stands in the captions of figures.
const program = assets.Program

// The exit codes.
const (
	exitFine  = 0
	exitFault = 1
	exitUse   = 2
)

// commands is the command line.
type commands struct {
	Make         makeTable    `cmd:"" help:"Write a table file of a shape to standard output."`
	Check        check        `cmd:"" help:"Say what the wall of a table is, and what is wrong with it."`
	Readings     takeAll      `cmd:"" help:"Measure the numbers of a table, with errors."`
	Portrait     portrait     `cmd:"" help:"Write the Birkhoff portrait of a table (png, svg, pdf or csv)."`
	Rays         rays         `cmd:"" help:"Write the drawing of a table with its rays (png, svg, pdf or csv)."`
	Stretching   stretching   `cmd:"" help:"Write the map of finite-time stretching over the section (png, svg, pdf or csv)."`
	Convergence  convergence  `cmd:"" help:"Write how the Lyapunov exponent or the chaotic share settles with the bounces used (png, svg, pdf or csv)."`
	Islands      islands      `cmd:"" help:"Say how much of the section is chaotic, and list its islands."`
	Paths        paths        `cmd:"" help:"Write the distribution of the flights between bounces (png, svg, pdf or csv)."`
	Correlation  correlation  `cmd:"" help:"Write how p or the flights are correlated some bounces later (png, svg, pdf or csv)."`
	Launches     launches     `cmd:"" help:"Tell the character of each launched orbit: regular or chaotic, rotation number, least |p|."`
	Pace         pace         `cmd:"" help:"Measure the bounces per second, on one worker and on all."`
	Orbits       orbits       `cmd:"" help:"List the periodic orbits of a table, with length and stability."`
	Modes        countModes   `cmd:"" help:"Count the modes of a table by Weyl's law, flat or of constant height."`
	Survival     survival     `cmd:"" help:"Write what is left of a table's rays against path (png, svg, pdf or csv), with the rate of its fall."`
	Lifetime     lifetime     `cmd:"" help:"Write the map of how long rays last over the section (png, svg, pdf or csv)."`
	Emission     emission     `cmd:"" help:"Write the far field of what leaves (png, svg, pdf or csv)."`
	Transmission transmission `cmd:"" help:"Write how rays pass from opening to opening."`
	Placement    placement    `cmd:"" help:"Write the rate of an opening against its place along the wall."`
	Study        studyRun     `cmd:"" help:"Turn numbers of a table over a sweep and take readings at each point; or a part of it."`
	Gather       gather       `cmd:"" help:"Join the parts of a study."`
	Tolerance    copies       `cmd:"" help:"Take readings of copies of a table as a workshop makes them: their distribution, the yield, and which error matters."`
	Wish         seek         `cmd:"" help:"Seek the wall for a wish: numbers of a table are turned until a reading is greatest, least, or at a value."`
	Sheet        designSheet  `cmd:"" help:"Write the design sheet of a table: outline, readings, portrait and cautions on a page (pdf, svg or png)."`
	Film         filmed       `cmd:"" help:"Turn a number of a table and write how the wall and the portrait change (gif, or numbered png)."`
	Import       outlineIn    `cmd:"" help:"Make a table of an outline that was drawn (svg) or measured (csv), as it is or with a smooth wall fitted."`
	Outline      outlineOut   `cmd:"" help:"Write the wall of a table for a workshop (svg, dxf, gds or csv), with bias and the error achieved."`

	Version kong.VersionFlag `help:"Print the version."`
}

// streams are what a command reads and writes besides files.
type streams struct {
	in       io.Reader
	out, err io.Writer
}

func main() {
	ctx, stop := signal.NotifyContext(context.Background(), os.Interrupt, syscall.SIGTERM)
	context.AfterFunc(ctx, stop) // a second signal ends the program at once
	os.Exit(obey(ctx, os.Args[1:], streams{os.Stdin, os.Stdout, os.Stderr}))
}

// obey parses and carries out a command line, and returns the exit code.
func obey(ctx context.Context, args []string, std streams) int {
	var c commands
	left := -1 // the exit code that --help and --version ask for
	parser, err := kong.New(&c,
		kong.Name("cavitybatch"),
		kong.Description("Tables, readings and figures of cavities without a window. FILE is a table (NAME.cavity.json), a PNG or SVG figure that carries one, or - for standard input."),
		kong.Writers(std.out, std.err),
		kong.Exit(func(code int) { left = code }),
		kong.Vars{"version": program},
		kong.ConfigureHelp(kong.HelpOptions{Compact: true}),
		kong.BindTo(ctx, (*context.Context)(nil)),
		kong.Bind(std),
	)
	if err != nil {
		panic(err) // a fault of the program: the command line's own description
	}
	line, err := parser.Parse(args)
	if left >= 0 {
		return left
	}
	if err != nil {
		complain(std, fmt.Sprintf("%s; %s", plain.Replace(strings.TrimSuffix(err.Error(), ".")), hint(args)))
		return exitUse
	}
	return verdict(line.Run(), std)
}

// plain puts the parser's complaints into words for whoever types commands.
var plain = strings.NewReplacer(
	"expected a float", "expected a number", "expected float value", "expected a number",
	"expected an int", "expected a whole number", "expected int value", "expected a whole number",
	"expected uint value", "expected a whole number", "expected string value", "expected a text",
	"a valid 64 bit int", "a whole number", "a valid 64 bit uint", "a whole number from 0", "a valid 64 bit float", "a number",
	`"EOL" (<EOL>)`, "nothing", " (string)", "",
)

// hint says where the use of a command is explained.
func hint(args []string) string {
	for _, a := range args {
		if !strings.HasPrefix(a, "-") {
			switch a {
			case "make", "check", "readings", "portrait", "rays", "stretching", "convergence", "islands", "paths", "correlation", "launches", "pace", "orbits", "modes", "survival", "lifetime", "emission", "transmission", "placement", "study", "gather", "tolerance", "wish", "import", "outline", "film":
				return fmt.Sprintf("see cavitybatch %s --help", a)
			}
			break
		}
	}
	return "see cavitybatch --help"
}

// verdict turns how a command ended into an exit code, and says why.
func verdict(err error, std streams) int {
	var wrong *wrongUse
	switch {
	case err == nil:
		return exitFine
	case errors.Is(err, syscall.EPIPE): // whoever read has had enough
		return exitFault
	case errors.Is(err, context.Canceled):
		complain(std, "stopped before it was finished; nothing was written")
		return exitFault
	case errors.As(err, &wrong):
		complain(std, err.Error())
		return exitUse
	}
	complain(std, err.Error())
	return exitFault
}

// wrongUse is an error of the command line, not of the table.
type wrongUse struct{ cause error }

func (e *wrongUse) Error() string { return e.cause.Error() }
func (e *wrongUse) Unwrap() error { return e.cause }

func misuse(format string, args ...any) error { return &wrongUse{fmt.Errorf(format, args...)} }

// complain writes an error as one sentence on standard error.
func complain(std streams, text string) {
	first, size := utf8.DecodeRuneInString(text)
	text = string(unicode.ToUpper(first)) + text[size:]
	if !strings.HasSuffix(text, ".") {
		text += "."
	}
	fmt.Fprintln(std.err, text)
}
