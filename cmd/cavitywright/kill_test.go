package main

import (
	"fmt"
	"os"
	"path/filepath"
	"syscall"
	"testing"
	"time"

	"cavitywright/ui/window"
)

// kill ends the program as the system or a power failure would, without a
// chance to do anything, and without asking how it ended: its number stays
// taken, as it does where a session manager is slow to ask.
func (d *designer) kill() {
	d.t.Helper()
	if err := d.cmd.Process.Signal(syscall.SIGKILL); err != nil {
		d.t.Fatal(err)
	}
	for end := time.Now().Add(10 * time.Second); ; time.Sleep(5 * time.Millisecond) {
		stat, err := os.ReadFile(fmt.Sprintf("/proc/%d/stat", d.cmd.Process.Pid))
		if err != nil || len(stat) > 0 && containsState(stat, 'Z') {
			return
		}
		if time.Now().After(end) {
			d.t.Fatal("the program does not die")
		}
	}
}

// containsState reports whether a process is at state (proc(5), stat, field 3).
func containsState(stat []byte, state byte) bool {
	for i := len(stat) - 1; i >= 0; i-- {
		if stat[i] == ')' {
			return i+2 < len(stat) && stat[i+2] == state
		}
	}
	return false
}

// bringBack answers the question after a crash.
func (d *designer) bringBack() {
	d.t.Helper()
	d.until("the question whether to bring back what was not saved", func(s window.State) bool { return s.Asks })
	d.do("key", "Return")
	d.until("the question is answered", func(s window.State) bool { return !s.Asks })
}

// work is a home with a table file.
func work(t *testing.T) (home, file string) {
	t.Helper()
	home = t.TempDir()
	file = filepath.Join(home, "disc.cavity.json")
	table, err := os.ReadFile("../../assets/gallery/01-dented-microdisc.cavity.json")
	if err != nil {
		t.Fatal(err)
	}
	if err := os.WriteFile(file, table, 0o644); err != nil {
		t.Fatal(err)
	}
	return home, file
}

func copies(home string) []string {
	all, _ := filepath.Glob(filepath.Join(home, "cavitywright", "recovery", "unsaved-*"))
	return all
}

// TestKilledInADrag: the pointer holds a handle when the program dies; the
// wall comes back as it was in the hand.
func TestKilledInADrag(t *testing.T) {
	needDisplay(t)
	home, file := work(t)
	d := start(t, home, file)
	s := d.until("handles", func(s window.State) bool { return len(s.Handles) > 0 })
	first := s.Length
	grip := s.Handles[len(s.Handles)-1]
	x, y := int(grip[0]), int(grip[1])
	d.do("mousemove", fmt.Sprint(x), fmt.Sprint(y))
	d.do("mousedown", "1")
	for i := 1; i <= 8; i++ {
		d.do("mousemove", fmt.Sprint(x+6*i), fmt.Sprint(y))
	}
	d.until("the wall follows the hand", func(s window.State) bool { return s.Length != first && s.Unsaved })
	held := d.rested(home)
	d.kill()
	d.do("mouseup", "1")

	e := start(t, home)
	e.bringBack()
	back := e.until("the table that was not saved", func(s window.State) bool { return s.Path == file && s.Unsaved })
	if back.Length != held {
		t.Errorf("the wall that came back is %g long, the one in the hand was %g", back.Length, held)
	}
	// Saved, it is not offered again.
	e.do("key", "ctrl+s")
	e.until("the table is saved", func(s window.State) bool { return !s.Unsaved })
	if c := copies(home); len(c) != 0 {
		t.Errorf("after saving the copies %v are left", c)
	}
}

// TestKilledInASave: whenever it dies, the file is the old one or the new one,
// and in the first case the new one comes back.
func TestKilledInASave(t *testing.T) {
	needDisplay(t)
	for _, wait := range []time.Duration{0, 4 * time.Millisecond, 25 * time.Millisecond} {
		home, file := work(t)
		d := start(t, home, file)
		changed := d.changed(home)
		d.press("ctrl+s")
		time.Sleep(wait)
		d.kill()

		saved, err := window.ReadTable(file)
		if err != nil {
			t.Fatalf("killed %s after saving began, the file is no table: %v", wait, err)
		}
		e := start(t, home, file)
		if saved.Length() != changed {
			e.bringBack()
		}
		s := e.until("the table", func(s window.State) bool { return s.Length > 0 })
		if s.Asks {
			e.bringBack() // it died between saving and forgetting the copy
			s = e.until("the table", func(s window.State) bool { return !s.Asks })
		}
		if s.Length != changed {
			t.Errorf("killed %s after saving began, a wall of %g came back, not the one of %g", wait, s.Length, changed)
		}
		t.Logf("killed %s after saving began: the file is the new one: %v", wait, saved.Length() == changed)
		e.kill()
	}
}

// TestKilledInAnExport: the figure is whole or not there, and the table comes
// back.
func TestKilledInAnExport(t *testing.T) {
	needDisplay(t)
	for _, wait := range []time.Duration{30 * time.Millisecond, 300 * time.Millisecond} {
		home, file := work(t)
		d := start(t, home, file)
		changed := d.changed(home)
		d.press("ctrl+shift+e")
		time.Sleep(wait)
		d.kill()

		figure := filepath.Join(home, "disc-portrait.png")
		_, err := os.Stat(figure)
		if err == nil {
			tableInside(t, figure)
		}
		t.Logf("killed %s after the export began: the figure is there: %v", wait, err == nil)
		e := start(t, home, file)
		e.bringBack()
		e.until("the table that was not saved", func(s window.State) bool { return s.Length == changed && s.Unsaved })
		e.kill()
	}
}

// changed drags a handle and waits until a copy is kept of what came of it:
// its length.
func (d *designer) changed(home string) float64 {
	d.t.Helper()
	s := d.until("handles", func(s window.State) bool { return len(s.Handles) > 0 })
	grip := s.Handles[len(s.Handles)-1]
	d.drag(int(grip[0]), int(grip[1]), int(grip[0])+40, int(grip[1]))
	d.until("the wall follows the hand", func(now window.State) bool { return now.Length != s.Length && now.Unsaved })
	return d.rested(home)
}

// rested waits until the hand rested long enough for a copy of what it holds,
// and is the length of that. Copies follow each other at 0.6 s: the second
// after the last movement is of it.
func (d *designer) rested(home string) float64 {
	d.t.Helper()
	time.Sleep(2 * time.Second)
	if c := copies(home); len(c) == 0 {
		d.t.Fatal("no copy is kept of a change")
	}
	return d.until("the table", func(s window.State) bool { return s.Unsaved }).Length
}

// press types a key without waiting for what comes of it.
func (d *designer) press(key string) {
	d.t.Helper()
	if out, err := xdotool("key", key); err != nil {
		d.t.Fatalf("xdotool key %s: %v %s", key, err, out)
	}
}
