package main

import (
	"context"
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"time"
)

// suiteLimit bounds a whole test run, the first build of the toolkit included.
const suiteLimit = 28 * time.Minute

var errSuiteLimit = fmt.Errorf("the tests did not end within %s", spoken(suiteLimit))

// A step is one part of a task: what it is called, the folders it looks at, and what it does.
type step struct {
	name    string
	folders []string // with forward slashes; those that are absent are left out, and with none left the step is passed by
	do      func(ctx context.Context, s *site, patterns []string) error
}

// testSteps in the order in which a fault shows soonest.
var testSteps = []step{
	{"gofmt", nil, func(_ context.Context, s *site, _ []string) error { return checkFormat(s.root) }},
	{"cavitybatch without C", []string{"cmd/cavitybatch"}, buildBatch},
	{"go vet", nil, func(ctx context.Context, s *site, _ []string) error {
		return s.goTool(ctx, withC, "vet", tagged(s), "./...")
	}},
	{"staticcheck", nil, lint},
	{"tests", nil, func(ctx context.Context, s *site, _ []string) error {
		return s.goTool(ctx, withC, "test", tagged(s), "-timeout=12m", "./...")
	}},
	{"race", []string{"sim/run", "ui/live"}, func(ctx context.Context, s *site, patterns []string) error {
		return s.goTool(ctx, withC, append([]string{"test", "-race", "-short", tagged(s), "-timeout=10m"}, patterns...)...)
	}},
	{"real window", []string{"cmd/cavitywright"}, testWindow},
}

// benchSteps measure the kernel; they need Go, and the first a C compiler.
var benchSteps = []step{
	{"pace against C", []string{paceFolder}, pace},
	{"benchmarks", []string{"table", "sim", "render"}, func(ctx context.Context, s *site, patterns []string) error {
		return s.goTool(ctx, withC, append([]string{"test", "-run=^$", "-bench=.", "-benchmem", tagged(s)}, patterns...)...)
	}},
}

// An errPassedBy is the reason why a step does not apply here.
type errPassedBy string

func (e errPassedBy) Error() string { return string(e) }

// test installs what the tests need, runs every step and says how it went.
func test(ctx context.Context, s *site, args []string) error {
	if err := withoutArguments("test", args); err != nil {
		return err
	}
	ctx, cancel := context.WithTimeoutCause(ctx, suiteLimit, errSuiteLimit)
	defer cancel()
	if err := s.prepare(ctx, append(append([]need{}, windowNeeds...), testNeeds...)); err != nil {
		return err
	}
	return s.follow(ctx, testSteps)
}

// bench runs every benchmark of the kernel.
func bench(ctx context.Context, s *site, args []string) error {
	if err := withoutArguments("bench", args); err != nil {
		return err
	}
	return s.follow(ctx, benchSteps)
}

// follow runs the steps in order, whether or not an earlier one failed, and ends with one line about all of them.
func (s *site) follow(ctx context.Context, steps []step) error {
	began := time.Now()
	var failed, passedBy []string
	passed := 0
	for _, st := range steps {
		if ctx.Err() != nil {
			return whyStopped(ctx)
		}
		err := s.take(ctx, st)
		var reason errPassedBy
		switch {
		case err == nil:
			passed++
		case errors.As(err, &reason):
			s.say("   passed by: %v", reason)
			passedBy = append(passedBy, st.name)
		default:
			s.say("   FAILED: %v", err)
			failed = append(failed, st.name)
		}
	}
	tail := fmt.Sprintf("after %s", spoken(time.Since(began)))
	if len(passedBy) > 0 {
		tail = fmt.Sprintf("passed by: %s; %s", strings.Join(passedBy, ", "), tail)
	}
	if len(failed) > 0 {
		return fmt.Errorf("%d of %d steps failed: %s; %s", len(failed), len(failed)+passed, strings.Join(failed, ", "), tail)
	}
	if passed == 0 {
		return fmt.Errorf("nothing was run; %s", tail)
	}
	s.say("%d of %d steps passed; %s.", passed, passed, tail)
	return nil
}

// take runs one step over those of its folders that the checkout has.
func (s *site) take(ctx context.Context, st step) error {
	s.say("== %s", st.name)
	patterns, absent := s.patterns(st.folders)
	if len(st.folders) > 0 && len(patterns) == 0 {
		return errPassedBy("the checkout has no folder " + strings.Join(absent, ", "))
	}
	if len(absent) > 0 {
		s.say("   without %s, which the checkout does not have", strings.Join(absent, ", "))
	}
	return st.do(ctx, s, patterns)
}

// patterns returns Go's package patterns for those folders that the checkout has, and the folders that it has not.
func (s *site) patterns(folders []string) (patterns, absent []string) {
	for _, f := range folders {
		if s.hasFolder(f) {
			patterns = append(patterns, "./"+f+"/...")
		} else {
			absent = append(absent, f)
		}
	}
	return patterns, absent
}

// withC overrules a CGO_ENABLED=0 of the surroundings, under which the window library has no files to compile.
var withC = []string{"CGO_ENABLED=1"}

func tagged(s *site) string { return "-tags=" + testTags(s.goos) }

// goTool runs the go command in the checkout.
func (s *site) goTool(ctx context.Context, env []string, args ...string) error {
	c := call{args: append([]string{"go"}, args...), dir: s.root, env: env}
	s.say("   %s", c)
	return s.Run(ctx, c)
}

// buildBatch shows that the batch program needs no C compiler.
func buildBatch(ctx context.Context, s *site, _ []string) error {
	return s.goTool(ctx, []string{"CGO_ENABLED=0"}, "build", "-buildvcs=false", "-o", os.DevNull, "./cmd/cavitybatch")
}

// lint runs staticcheck where go.mod lists it as a tool.
func lint(ctx context.Context, s *site, _ []string) error {
	goMod, err := os.ReadFile(filepath.Join(s.root, "go.mod"))
	if err != nil {
		return err
	}
	if !strings.Contains(string(goMod), "honnef.co/go/tools/cmd/staticcheck") {
		return errPassedBy("go.mod does not list staticcheck as a tool")
	}
	return s.goTool(ctx, withC, "tool", "staticcheck", tagged(s), "./...")
}

// windowSwitch is the environment variable that lets the test in a real window run.
const windowSwitch = "CAVITYWRIGHT_WINDOW"

// testWindow runs the designer in a real window. The screen is always one of our own: the test moves the pointer and
// types, which would be in the way of a person at the same screen, and the person in the way of the test.
func testWindow(ctx context.Context, s *site, patterns []string) error {
	if s.goos != "linux" {
		return errPassedBy("the screen in memory that it runs on exists on Linux only")
	}
	if !hasWindowTest(filepath.Join(s.root, "cmd", "cavitywright")) {
		return errors.New("no test in cmd/cavitywright looks at " + windowSwitch + ", so nothing would be tried in a real window")
	}
	scr, err := s.newScreen(ctx)
	if err != nil {
		return err
	}
	defer scr.close()
	env := append([]string{windowSwitch + "=1", "DISPLAY=" + scr.display, "WAYLAND_DISPLAY=", "LANG=en_US.UTF-8", "LIBGL_ALWAYS_SOFTWARE=1"}, withC...)
	return s.goTool(ctx, env, append([]string{"test", "-count=1", "-v", tagged(s), "-timeout=8m"}, patterns...)...)
}

// hasWindowTest reports whether a test in the folder looks at windowSwitch. Without this, a test that was renamed or
// removed would look like one that passed.
func hasWindowTest(folder string) bool {
	files, _ := filepath.Glob(filepath.Join(folder, "*_test.go")) // the pattern is well formed
	for _, f := range files {
		if source, err := os.ReadFile(f); err == nil && strings.Contains(string(source), windowSwitch) {
			return true
		}
	}
	return false
}
