package main

import (
	"bytes"
	"context"
	"errors"
	"path/filepath"
	"slices"
	"strings"
	"testing"
	"time"
)

var errFake = errors.New("exit status 1")

// A fakeHost has exactly the programs, files and pkg-config modules that it lists, and notes each call it is asked to
// run. A line of brings says what is there once a call that contains the key has run.
type fakeHost struct {
	env      map[string]string
	programs []string
	files    []string // as glob patterns are asked for them
	modules  []string
	fails    []string            // a call that contains one of these fails
	failOnce []string            // the same, the first time only
	brings   map[string][]string // programs and files that a call brings
	says     map[string]string   // what a silent call prints
	ran      []string            // calls that ran with the terminal's streams
	wait     time.Duration       // how long each of them takes
}

func (f *fakeHost) Getenv(name string) string { return f.env[name] }
func (f *fakeHost) Has(program string) bool   { return slices.Contains(f.programs, program) }

func (f *fakeHost) Exists(pattern string) bool {
	return slices.Contains(f.files, filepath.ToSlash(pattern))
}

func (f *fakeHost) Run(_ context.Context, c call) error {
	time.Sleep(f.wait)
	line := c.String()
	f.ran = append(f.ran, line)
	for i, part := range f.failOnce {
		if strings.Contains(line, part) {
			f.failOnce = slices.Delete(f.failOnce, i, i+1)
			return errFake
		}
	}
	if f.failing(line) {
		return errFake
	}
	for part, brought := range f.brings {
		if strings.Contains(line, part) {
			f.programs = append(f.programs, brought...)
			f.files = append(f.files, brought...)
		}
	}
	return nil
}

func (f *fakeHost) Read(_ context.Context, c call) (string, error) {
	line := c.String()
	if name, ok := strings.CutPrefix(line, "pkg-config --exists "); ok && !slices.Contains(f.modules, name) {
		return "", errFake
	}
	said := ""
	for part, text := range f.says {
		if strings.Contains(line, part) {
			said = text
		}
	}
	if f.failing(line) {
		return said, errFake
	}
	return said, nil
}

func (f *fakeHost) failing(line string) bool {
	return slices.ContainsFunc(f.fails, func(part string) bool { return strings.Contains(line, part) })
}

// bareDebian is a Debian with Go and gcc and nothing else, as root, without lists of packages.
func bareDebian() *fakeHost {
	return &fakeHost{
		programs: []string{"apt-get", "go", "gcc"},
		says:     map[string]string{"go env CC": "gcc"},
	}
}

// readyDebian is the same with everything that the tasks need.
func readyDebian() *fakeHost {
	f := bareDebian()
	f.programs = append(f.programs, "pkg-config", "Xvfb", "xdotool", "import")
	f.modules = []string{"gl", "x11", "xcursor", "xrandr", "xinerama", "xi", "xxf86vm"}
	f.files = []string{"/usr/lib/*/dri/*_dri.so"}
	return f
}

// siteOn is a Linux site on the fake, with root rights, and what the task says.
func siteOn(t *testing.T, f *fakeHost) (*site, *bytes.Buffer) {
	t.Helper()
	var said bytes.Buffer
	return &site{
		host: f, goos: "linux", isRoot: true, root: t.TempDir(), cacheDir: "/cache", out: &said, tell: time.Hour,
		newScreen: func(context.Context) (*screen, error) {
			return nil, errors.New("this test opens no screen")
		},
	}, &said
}
