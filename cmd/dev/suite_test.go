package main

import (
	"context"
	"errors"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"
	"time"
)

// checkout writes files, given as name and content, below the site's root.
func checkout(t *testing.T, s *site, files map[string]string) {
	t.Helper()
	for name, content := range files {
		path := filepath.Join(s.root, filepath.FromSlash(name))
		if err := os.MkdirAll(filepath.Dir(path), 0o755); err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(path, []byte(content), 0o644); err != nil {
			t.Fatal(err)
		}
	}
}

// have makes the fake see folders of the checkout.
func have(f *fakeHost, s *site, folders ...string) {
	for _, name := range folders {
		f.files = append(f.files, filepath.ToSlash(filepath.Join(s.root, name)))
	}
}

const windowTest = "package main\n\n// reads CAVITYWRIGHT_WINDOW\n"

func TestSuiteRunsEverythingAndClosesTheScreen(t *testing.T) {
	f := readyDebian()
	s, said := siteOn(t, f)
	checkout(t, s, map[string]string{
		"go.mod": "module cavitywright\n\ntool honnef.co/go/tools/cmd/staticcheck\n", "cmd/cavitywright/window_test.go": windowTest,
	})
	have(f, s, "cmd/cavitybatch", "cmd/cavitywright", "sim/run", "ui/live")
	open := false
	s.newScreen = func(context.Context) (*screen, error) {
		open = true
		return &screen{display: ":42", close: func() { open = false }}, nil
	}
	if err := test(t.Context(), s, nil); err != nil {
		t.Fatal(err)
	}
	want := []string{
		"CGO_ENABLED=0 go build -buildvcs=false -o " + os.DevNull + " ./cmd/cavitybatch",
		"CGO_ENABLED=1 go vet -tags=gles,no_emoji ./...",
		"CGO_ENABLED=1 go tool staticcheck -tags=gles,no_emoji ./...",
		"CGO_ENABLED=1 go test -tags=gles,no_emoji -timeout=12m ./...",
		"CGO_ENABLED=1 go test -race -short -tags=gles,no_emoji -timeout=10m ./sim/run/... ./ui/live/...",
		"CAVITYWRIGHT_WINDOW=1 DISPLAY=:42 WAYLAND_DISPLAY= LANG=en_US.UTF-8 LIBGL_ALWAYS_SOFTWARE=1 CGO_ENABLED=1 " +
			"go test -count=1 -v -tags=gles,no_emoji -timeout=8m ./cmd/cavitywright/...",
	}
	if !slices.Equal(f.ran, want) {
		t.Errorf("ran\n%s\nwant\n%s", strings.Join(f.ran, "\n"), strings.Join(want, "\n"))
	}
	if open {
		t.Error("the screen was left open")
	}
	if !strings.Contains(said.String(), "7 of 7 steps passed; after ") {
		t.Errorf("said %q", said)
	}
}

func TestAbsentFoldersArePassedByWithAReason(t *testing.T) {
	f := readyDebian()
	s, said := siteOn(t, f)
	checkout(t, s, map[string]string{"go.mod": "module cavitywright\n"})
	have(f, s, "sim/run")
	if err := test(t.Context(), s, nil); err != nil {
		t.Fatal(err)
	}
	for _, want := range []string{
		"passed by: the checkout has no folder cmd/cavitybatch",
		"passed by: go.mod does not list staticcheck as a tool",
		"without ui/live, which the checkout does not have",
		"4 of 4 steps passed; passed by: cavitybatch without C, staticcheck, real window; after ",
	} {
		if !strings.Contains(said.String(), want) {
			t.Errorf("%q was not said in:\n%s", want, said)
		}
	}
	if !slices.ContainsFunc(f.ran, func(line string) bool { return strings.HasSuffix(line, "-timeout=10m ./sim/run/...") }) {
		t.Errorf("ran %q without the race test of sim/run", f.ran)
	}
}

func TestEachFailureIsCountedAndTheRestStillRuns(t *testing.T) {
	f := readyDebian()
	f.fails = []string{"go vet", "-race"}
	s, _ := siteOn(t, f)
	checkout(t, s, map[string]string{"go.mod": "module cavitywright\n", "table/table.go": "package table\nvar  X = 1\n"})
	have(f, s, "sim/run")
	err := test(t.Context(), s, nil)
	if err == nil || !strings.HasPrefix(err.Error(), "3 of 4 steps failed: gofmt, go vet, race; ") {
		t.Errorf("error %v", err)
	}
}

func TestWindowStepFails(t *testing.T) {
	cases := []struct {
		name, source, want string
	}{
		{"without a window test", "package main\n", "no test in cmd/cavitywright looks at CAVITYWRIGHT_WINDOW"},
		{"without a screen", windowTest, "this test opens no screen"},
	}
	for _, c := range cases {
		s, _ := siteOn(t, readyDebian())
		checkout(t, s, map[string]string{"cmd/cavitywright/window_test.go": c.source})
		if err := testWindow(t.Context(), s, nil); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: error %v, want %q", c.name, err, c.want)
		}
	}
}

func TestSuiteStopsAtItsLimit(t *testing.T) {
	s, _ := siteOn(t, readyDebian())
	ctx, cancel := context.WithTimeoutCause(t.Context(), 0, errSuiteLimit)
	defer cancel()
	<-ctx.Done()
	if err := s.follow(ctx, testSteps); !errors.Is(err, errSuiteLimit) {
		t.Errorf("error %v, want %v", err, errSuiteLimit)
	}
}

func TestBenchTakesTheKernelPackages(t *testing.T) {
	f := readyDebian()
	s, _ := siteOn(t, f)
	have(f, s, "table", "sim", "render")
	if err := bench(t.Context(), s, nil); err != nil {
		t.Fatal(err)
	}
	want := []string{"CGO_ENABLED=1 go test '-run=^$' -bench=. -benchmem -tags=gles,no_emoji ./table/... ./sim/... ./render/..."}
	if !slices.Equal(f.ran, want) {
		t.Errorf("ran %q, want %q", f.ran, want)
	}
}

func TestCheckFormat(t *testing.T) {
	s, _ := siteOn(t, readyDebian())
	checkout(t, s, map[string]string{
		"good.go": "package a\n\nvar X = 1\n", "sim/bad.go": "package sim\nvar  X = 1\n",
		"sim/testdata/bad.go": "not Go", ".git/bad.go": "not Go", "_old/bad.go": "not Go", "notes.txt": "not Go",
	})
	err := checkFormat(s.root)
	if err == nil || err.Error() != "not in gofmt's form: sim/bad.go; run gofmt -w on them" {
		t.Errorf("error %v", err)
	}
	if err := os.Remove(filepath.Join(s.root, "sim", "bad.go")); err != nil {
		t.Fatal(err)
	}
	if err := checkFormat(s.root); err != nil {
		t.Errorf("error %v without the untidy file", err)
	}
}

func TestDisplayNumber(t *testing.T) {
	cases := []struct{ said, want, fault string }{
		{"7\n", ":7", ""},
		{"", "", "ended before it opened"},
		{"no\n", "", "where a display number was expected"},
		{"-1\n", "", "where a display number was expected"},
	}
	for _, c := range cases {
		got, err := displayNumber(strings.NewReader(c.said))
		if got != c.want || (err != nil) != (c.fault != "") || err != nil && !strings.Contains(err.Error(), c.fault) {
			t.Errorf("displayNumber(%q) = %q, %v", c.said, got, err)
		}
	}
}

func TestSilentScreenIsGivenUp(t *testing.T) {
	r, w, err := os.Pipe()
	if err != nil {
		t.Fatal(err)
	}
	defer r.Close()
	defer w.Close()
	if err := r.SetReadDeadline(time.Now().Add(10 * time.Millisecond)); err != nil {
		t.Skip("pipes take no deadline on this system")
	}
	if _, err := displayNumber(r); err == nil || !strings.Contains(err.Error(), "did not open within") {
		t.Errorf("error %v", err)
	}
}

// Two screens are open at once on different displays, and both are gone once closed.
func TestXvfbFindsAFreeDisplay(t *testing.T) {
	if !(machine{}).Has("Xvfb") {
		t.Skip("this system has no Xvfb")
	}
	first, err := startXvfb(t.Context())
	if err != nil {
		t.Fatal(err)
	}
	defer first.close()
	second, err := startXvfb(t.Context())
	if err != nil {
		t.Fatal(err)
	}
	socket := "/tmp/.X11-unix/X" + strings.TrimPrefix(second.display, ":")
	if first.display == second.display || !(machine{}).Exists(socket) {
		t.Errorf("displays %s and %s, socket %s", first.display, second.display, socket)
	}
	second.close()
	if (machine{}).Exists(socket) {
		t.Errorf("%s is still there after the screen was closed", socket)
	}
}
