package main

import (
	"bufio"
	"context"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"runtime"
	"strings"
	"time"
)

const modulePath = "cavitywright"

// A site is where a task works: the machine, what is known about it, and the checkout.
type site struct {
	host
	goos   string
	isRoot bool
	// hasTerminal says that a person can be asked for a password.
	hasTerminal bool
	root        string        // the checkout's top folder
	cacheDir    string        // where the built designer is kept
	out         io.Writer     // what the task says
	tell        time.Duration // how often a long build says that it is still going
	// newScreen opens a screen in memory for the window test.
	newScreen func(context.Context) (*screen, error)
}

// openSite finds the checkout around the current folder and describes this machine.
func openSite() (*site, error) {
	here, err := os.Getwd()
	if err != nil {
		return nil, fmt.Errorf("the current folder cannot be read: %w", err)
	}
	root, err := checkoutAround(here)
	if err != nil {
		return nil, err
	}
	cache, err := os.UserCacheDir()
	if err != nil {
		cache = os.TempDir() // no home folder, as in a bare container
	}
	tty, err := os.OpenFile("/dev/tty", os.O_RDWR, 0)
	if err == nil {
		tty.Close()
	}
	return &site{
		host:        machine{},
		hasTerminal: err == nil,
		goos:        runtime.GOOS,
		isRoot:      os.Geteuid() == 0,
		root:        root,
		cacheDir:    filepath.Join(cache, modulePath),
		out:         os.Stdout,
		tell:        15 * time.Second,
		newScreen:   startXvfb,
	}, nil
}

func (s *site) say(format string, args ...any) { fmt.Fprintf(s.out, format+"\n", args...) }

// hasFolder reports whether the checkout has the folder, given with forward slashes.
func (s *site) hasFolder(name string) bool {
	return s.Exists(filepath.Join(s.root, filepath.FromSlash(name)))
}

// checkoutAround walks up from dir to the folder whose go.mod is this project's.
func checkoutAround(dir string) (string, error) {
	for at := dir; ; at = filepath.Dir(at) {
		if moduleOf(filepath.Join(at, "go.mod")) == modulePath {
			return at, nil
		}
		if at == filepath.Dir(at) {
			return "", fmt.Errorf("%s is not inside the %s checkout; change to the folder that holds its go.mod", dir, modulePath)
		}
	}
}

// moduleOf returns the module path that a go.mod declares, or "" where there is none to read.
func moduleOf(goMod string) string {
	f, err := os.Open(goMod)
	if err != nil {
		return ""
	}
	defer f.Close()
	lines := bufio.NewScanner(f)
	for lines.Scan() {
		if name, ok := strings.CutPrefix(strings.TrimSpace(lines.Text()), "module "); ok {
			return strings.Trim(strings.TrimSpace(name), `"`)
		}
	}
	return ""
}
