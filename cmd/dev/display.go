package main

import (
	"bufio"
	"context"
	"errors"
	"fmt"
	"io"
	"os"
	"os/exec"
	"strconv"
	"strings"
	"syscall"
	"time"
)

// screenSize is the size in pixels and the depth in bits of the screen that the window test sees.
const screenSize = "1400x900x24"

// screenPatience is how long the screen may take to open.
const screenPatience = 30 * time.Second

// A screen is an X display in memory, where a window can be tested without anyone's pointer in the way.
type screen struct {
	display string // as in DISPLAY
	close   func()
}

// startXvfb opens a screen on a display number that Xvfb finds to be free.
func startXvfb(ctx context.Context) (*screen, error) {
	numbers, report, err := os.Pipe()
	if err != nil {
		return nil, fmt.Errorf("the screen in memory could not be started: %w", err)
	}
	defer numbers.Close()
	live, cancel := context.WithCancel(ctx)
	// The first of ExtraFiles is file 3 in the child.
	cmd := exec.CommandContext(live, "Xvfb", "-displayfd", "3", "-screen", "0", screenSize, "-nolisten", "tcp", "-noreset") // a screen that starts anew when the last program goes turns the next away
	cmd.ExtraFiles = []*os.File{report}
	cmd.Cancel = func() error { return cmd.Process.Signal(syscall.SIGTERM) }
	cmd.WaitDelay = screenGrace
	err = cmd.Start()
	report.Close() // ours; the child has its own, so that its end is seen as the end of the pipe
	if err != nil {
		cancel()
		return nil, fmt.Errorf("the screen in memory could not be started: %w", err)
	}
	shut := func() {
		cancel()
		_ = cmd.Wait() // it was told to stop, so its exit status says nothing
	}
	_ = numbers.SetReadDeadline(time.Now().Add(screenPatience))
	display, err := displayNumber(numbers)
	if err != nil {
		shut()
		return nil, err
	}
	return &screen{display: display, close: func() {
		shut()
		sweep(display)
	}}, nil
}

// screenGrace is how long Xvfb may take to end. It forgets a request to end that
// comes while it is still opening, and has then to be killed.
const screenGrace = 2 * time.Second

// sweep removes what a killed Xvfb leaves of its display.
func sweep(display string) {
	number := strings.TrimPrefix(display, ":")
	for _, left := range []string{"/tmp/.X11-unix/X" + number, "/tmp/.X" + number + "-lock"} {
		_ = os.Remove(left) // mostly it is gone already
	}
}

// displayNumber reads the number that Xvfb reports once its display is open, and returns it as DISPLAY takes it.
func displayNumber(r io.Reader) (string, error) {
	line, err := bufio.NewReader(r).ReadString('\n')
	switch {
	case errors.Is(err, os.ErrDeadlineExceeded):
		return "", fmt.Errorf("the screen in memory (Xvfb) did not open within %s", spoken(screenPatience))
	case err != nil:
		return "", errors.New("the screen in memory (Xvfb) ended before it opened; run `Xvfb -displayfd 1` and see what it says")
	}
	number, err := strconv.ParseUint(strings.TrimSpace(line), 10, 16)
	if err != nil {
		return "", fmt.Errorf("the screen in memory (Xvfb) reported %q where a display number was expected", line)
	}
	return fmt.Sprintf(":%d", number), nil
}
