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

const buildLine = "CGO_ENABLED=1 go build -buildvcs=false -tags gles,no_emoji,migrated_fynedo -o /cache/cavitywright ./cmd/cavitywright"

func TestStartBuildsThenRunsWithItsArguments(t *testing.T) {
	f := readyDebian()
	f.env = map[string]string{"DISPLAY": ":0"}
	s, said := siteOn(t, f)
	if err := start(t.Context(), s, []string{"my table.cavity.json"}); err != nil {
		t.Fatal(err)
	}
	want := []string{buildLine, "/cache/cavitywright 'my table.cavity.json'"}
	if !slices.Equal(f.ran, want) {
		t.Errorf("ran %q, want %q", f.ran, want)
	}
	if !strings.Contains(said.String(), "two to five minutes") {
		t.Errorf("said %q without how long the first build takes", said)
	}
}

func TestStartWithoutAScreenBuildsAndSaysSo(t *testing.T) {
	f := readyDebian()
	s, _ := siteOn(t, f)
	err := start(t.Context(), s, nil)
	if err == nil || !strings.Contains(err.Error(), "neither DISPLAY nor WAYLAND_DISPLAY is set") {
		t.Errorf("error %v does not name the missing screen", err)
	}
	if !slices.Equal(f.ran, []string{buildLine}) {
		t.Errorf("ran %q, want the build alone", f.ran)
	}
}

func TestStartOnOtherSystemsInstallsNothing(t *testing.T) {
	f := &fakeHost{programs: []string{"gcc"}, says: map[string]string{"go env CC": "gcc"}}
	s, _ := siteOn(t, f)
	s.goos = "windows"
	if err := start(t.Context(), s, nil); err != nil {
		t.Fatal(err)
	}
	if len(f.ran) != 2 || !strings.Contains(f.ran[0], "-tags no_emoji,migrated_fynedo ") || !strings.HasSuffix(filepath.ToSlash(f.ran[1]), "cavitywright.exe") {
		t.Errorf("ran %q", f.ran)
	}
}

func TestFailedBuildStartsNothing(t *testing.T) {
	f := readyDebian()
	f.env = map[string]string{"DISPLAY": ":0"}
	f.fails = []string{"go build"}
	s, _ := siteOn(t, f)
	if err := start(t.Context(), s, nil); err == nil || len(f.ran) != 1 {
		t.Errorf("error %v after %q", err, f.ran)
	}
}

func TestHeartbeatSpeaksWhileTheBuildRunsAndNotAfter(t *testing.T) {
	f := readyDebian()
	f.wait = 100 * time.Millisecond
	s, said := siteOn(t, f)
	s.tell = 5 * time.Millisecond
	if err := s.buildDesigner(t.Context()); err != nil {
		t.Fatal(err)
	}
	text := said.String()
	if strings.Count(text, "still building") < 2 {
		t.Errorf("said %q in twenty intervals", text)
	}
	if _, after, _ := strings.Cut(text, "Built in"); strings.Contains(after, "still building") {
		t.Errorf("said %q after the build", after)
	}
}

func TestSpoken(t *testing.T) {
	for d, want := range map[time.Duration]string{
		0: "0 s", 1499 * time.Millisecond: "1 s", 59600 * time.Millisecond: "1 min 0 s", 28 * time.Minute: "28 min 0 s",
	} {
		if got := spoken(d); got != want {
			t.Errorf("spoken(%v) = %q, want %q", d, got, want)
		}
	}
}

func TestDispatch(t *testing.T) {
	cases := []struct {
		args []string
		code int
		says string
	}{
		{nil, exitUse, "Usage:"},
		{[]string{"help"}, exitUse, `There is no task "help".`},
		{[]string{"test", "./..."}, exitUse, `The task "test" takes no arguments, but "./..." was given.`},
		{[]string{"start"}, exitFault, "No C compiler was found"},
		{[]string{"bench"}, exitFault, "Nothing was run"},
	}
	for _, c := range cases {
		var complaints bytes.Buffer
		code := dispatch(t.Context(), c.args, &complaints, func() (*site, error) {
			f := readyDebian()
			f.programs = slices.DeleteFunc(f.programs, func(p string) bool { return p == "gcc" })
			s, _ := siteOn(t, f)
			return s, nil
		})
		if code != c.code || !strings.HasPrefix(complaints.String(), c.says) {
			t.Errorf("%q: exit %d, said %q; want %d, %q", c.args, code, complaints.String(), c.code, c.says)
		}
	}
}

func TestDispatchOutsideTheCheckout(t *testing.T) {
	var complaints bytes.Buffer
	code := dispatch(t.Context(), []string{"start"}, &complaints, func() (*site, error) {
		_, err := checkoutAround(t.TempDir())
		return nil, err
	})
	if code != exitFault || !strings.Contains(complaints.String(), "change to the folder that holds its go.mod") {
		t.Errorf("exit %d, said %q", code, complaints.String())
	}
}

func TestCallAsALine(t *testing.T) {
	c := call{env: []string{"A=b c"}, args: []string{"printf", "%s", "it's", ""}}
	if got, want := c.String(), `'A=b c' printf %s 'it'\''s' ''`; got != want {
		t.Errorf("got %s, want %s", got, want)
	}
}

func TestMachineStopsWhatItRuns(t *testing.T) {
	if !(machine{}).Has("sleep") {
		t.Skip("this system has no sleep program")
	}
	limit := errors.New("the limit of this test")
	ctx, cancel := context.WithTimeoutCause(t.Context(), 50*time.Millisecond, limit)
	defer cancel()
	began := time.Now()
	err := machine{}.Run(ctx, call{args: []string{"sleep", "60"}})
	if !errors.Is(err, limit) || time.Since(began) > graceAfterStop {
		t.Errorf("error %v after %v, want %v at once", err, time.Since(began), limit)
	}
}
