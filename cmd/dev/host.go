package main

import (
	"context"
	"errors"
	"os"
	"os/exec"
	"path/filepath"
	"regexp"
	"strings"
	"time"
)

// A host is what a task may ask of the machine and run on it. Tests replace it.
type host interface {
	Getenv(name string) string
	Has(program string) bool                          // whether the program is on PATH, or is the path of one
	Exists(pattern string) bool                       // whether a file or folder matches the glob pattern
	Run(ctx context.Context, c call) error            // runs with the terminal's streams
	Read(ctx context.Context, c call) (string, error) // runs silently and returns what both streams said
}

// A call is a program with its arguments, where it runs and what it finds in its environment.
type call struct {
	args  []string
	dir   string   // "" for the current folder
	env   []string // NAME=value, added to the environment
	input string   // what Read hands to standard input
}

var plainWord = regexp.MustCompile(`^[A-Za-z0-9_./:=,+@%-]+$`)

// quoted writes one word for a POSIX shell.
func quoted(word string) string {
	if plainWord.MatchString(word) {
		return word
	}
	return "'" + strings.ReplaceAll(word, "'", `'\''`) + "'"
}

// String writes the call as a line for a POSIX shell.
func (c call) String() string {
	var words []string
	for _, w := range c.env {
		words = append(words, quoted(w))
	}
	for _, w := range c.args {
		words = append(words, quoted(w))
	}
	return strings.Join(words, " ")
}

// A machine is the host that the program really runs on.
type machine struct{}

func (machine) Getenv(name string) string { return os.Getenv(name) }

func (machine) Has(program string) bool {
	_, err := exec.LookPath(program)
	return err == nil
}

func (machine) Exists(pattern string) bool {
	found, err := filepath.Glob(pattern)
	return err == nil && len(found) > 0
}

func (machine) Run(ctx context.Context, c call) error {
	cmd := c.command(ctx)
	cmd.Stdin, cmd.Stdout, cmd.Stderr = os.Stdin, os.Stdout, os.Stderr
	return ended(ctx, cmd.Run())
}

func (machine) Read(ctx context.Context, c call) (string, error) {
	cmd := c.command(ctx)
	cmd.Stdin = strings.NewReader(c.input)
	out, err := cmd.CombinedOutput()
	return strings.TrimSpace(string(out)), ended(ctx, err)
}

// graceAfterStop is how long a program that was asked to stop may take before it is killed.
const graceAfterStop = 10 * time.Second

// command prepares the call; when ctx ends, the program is asked to stop as by Ctrl-C.
func (c call) command(ctx context.Context) *exec.Cmd {
	cmd := exec.CommandContext(ctx, c.args[0], c.args[1:]...)
	cmd.Dir = c.dir
	cmd.Env = append(os.Environ(), c.env...)
	cmd.Cancel = func() error { return cmd.Process.Signal(os.Interrupt) }
	cmd.WaitDelay = graceAfterStop
	return cmd
}

// ended prefers the reason why everything stops to the exit status that follows from it.
func ended(ctx context.Context, err error) error {
	if err != nil && ctx.Err() != nil {
		return whyStopped(ctx)
	}
	return err
}

var errStopped = errors.New("stopped before the end, as asked")

// whyStopped says why a context that has ended did so.
func whyStopped(ctx context.Context) error {
	if errors.Is(ctx.Err(), context.DeadlineExceeded) {
		return context.Cause(ctx)
	}
	return errStopped
}
