// Command dev prepares a machine for the desktop toolkit, builds and starts the designer, and runs every test.
//
// It uses the standard library only and needs no C compiler itself, so that it runs before anything is installed
// or downloaded. It asks the system's package manager for what is missing and prints each such command before it
// runs it.
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
)

const usage = `Usage: go run ./cmd/dev TASK

  start [FILE]   install what the window needs, build the designer and open it
  test           install what the tests need and run every test, the one in a real window included
  bench          measure the speed of tracing and drawing

Each command that changes the system is printed before it runs.
`

// Exit codes: the task succeeded, the task or the machine is at fault, wrong use.
const (
	exitFine  = 0
	exitFault = 1
	exitUse   = 2
)

func main() {
	ctx, stop := signal.NotifyContext(context.Background(), os.Interrupt, syscall.SIGTERM)
	code := dispatch(ctx, os.Args[1:], os.Stderr, openSite)
	stop()
	os.Exit(code)
}

// dispatch runs the task named by the first argument on the site that open finds, and returns the exit code.
func dispatch(ctx context.Context, args []string, complaints io.Writer, open func() (*site, error)) int {
	if len(args) == 0 {
		fmt.Fprint(complaints, usage)
		return exitUse
	}
	task, ok := tasks[args[0]]
	if !ok {
		fmt.Fprintf(complaints, "There is no task %q.\n\n%s", args[0], usage)
		return exitUse
	}
	s, err := open()
	if err == nil {
		err = task(ctx, s, args[1:])
	}
	var wrong useError
	switch {
	case err == nil:
		return exitFine
	case errors.As(err, &wrong):
		fmt.Fprintf(complaints, "%s\n\n%s", sentence(err), usage)
		return exitUse
	default:
		fmt.Fprintln(complaints, sentence(err))
		return exitFault
	}
}

// sentence writes an error as a sentence; one that ends with a line to copy gets no full stop.
func sentence(err error) string {
	first, size := utf8.DecodeRuneInString(err.Error())
	text := string(unicode.ToUpper(first)) + err.Error()[size:]
	if strings.Contains(text, "\n") {
		return text
	}
	return text + "."
}

// A useError says that the command line asks for something that a task does not take.
type useError string

func (e useError) Error() string { return string(e) }

var tasks = map[string]func(context.Context, *site, []string) error{
	"start": start,
	"test":  test,
	"bench": bench,
}

// withoutArguments refuses arguments on behalf of a task that takes none.
func withoutArguments(task string, args []string) error {
	if len(args) > 0 {
		return useError(fmt.Sprintf("the task %q takes no arguments, but %q was given", task, args[0]))
	}
	return nil
}
