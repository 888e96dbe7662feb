package main

import (
	"fmt"
	"math/rand/v2"
	"os"
	"slices"
	"strconv"
	"strings"
	"testing"
	"time"

	"cavitywright/ui/live"
	"cavitywright/ui/window"
)

// deedsVariable is the number of random gestures and keys in the real window.
const deedsVariable = "CAVITYWRIGHT_WINDOW_DEEDS"

// TestRandomHands: random clicks, drags, wheels and keys anywhere in the
// window. It neither fails nor hangs; what it writes stays in its own home.
func TestRandomHands(t *testing.T) {
	needDisplay(t)
	deeds, seed := number(t, deedsVariable, 400), number(t, "CAVITYWRIGHT_SEED", 1)
	rng := rand.New(rand.NewPCG(uint64(seed), 0x4a4d))
	home, file := work(t)
	d := start(t, home, file)
	t.Logf("%d deeds from seed %d", deeds, seed)
	started := 1
	for done := 0; done < deeds; {
		const together = 20
		s := d.until("the state", func(s window.State) bool { return s.Beats > 0 })
		line := randomDeeds(rng, s, together)
		if out, err := xdotool(strings.Fields(line)...); err != nil {
			t.Fatalf("xdotool %s: %v %s", line, err, out)
		}
		done += together
		if d.over() {
			// File, Quit is a place like any other: no failure, if it said nothing.
			if d.log.Len() > 0 && strings.Contains(d.log.String(), "goroutine ") {
				t.Fatalf("after %d deeds the program failed; the last were %s\n%s", done, line, d.log.String())
			}
			d = start(t, home, file)
			started++
			continue
		}
		beats := s.Beats
		d.until(fmt.Sprintf("an answer after the deeds %s", line), func(s window.State) bool { return s.Beats > beats+4 })
	}
	// Nothing is held, no question stands, and the table is one.
	for range 6 {
		d.do("key", "Escape")
	}
	s := d.until("the state", func(s window.State) bool { return s.Beats > 0 })
	if !(s.Length > 0) {
		t.Errorf("at the end the wall has length %g", s.Length)
	}
	if s.Status.Lost > 0 {
		t.Errorf("%d rays were lost", s.Status.Lost)
	}
	t.Logf("the program was started %d times", started)
	tellStalls(t, s.Stalls)
}

func number(t *testing.T, name string, otherwise int) int {
	s := os.Getenv(name)
	if s == "" {
		return otherwise
	}
	n, err := strconv.Atoi(s)
	if err != nil || n < 1 {
		t.Fatalf("%s is %q; set it to a whole number above 0", name, s)
	}
	return n
}

// over reports whether the program has ended.
func (d *designer) over() bool {
	stat, err := os.ReadFile(fmt.Sprintf("/proc/%d/stat", d.cmd.Process.Pid))
	return err != nil || containsState(stat, 'Z')
}

// handKeys are keys that a hand may hit; none of them closes the window.
var handKeys = strings.Fields("v n d x a g o e c p s b w r t i q m 1 2 3 f l Escape Escape Return Tab Delete space Up Down Left Right F1 " +
	"ctrl+z ctrl+z ctrl+z ctrl+y ctrl+s ctrl+k ctrl+n ctrl+e ctrl+shift+e ctrl+c ctrl+v ctrl+d 5 0 period minus BackSpace")

// randomDeeds are n things a hand does, as words of xdotool: each a click, a
// drag, a turn of the wheel or a key, mostly in a pane or at a handle.
func randomDeeds(rng *rand.Rand, s window.State, n int) string {
	var b strings.Builder
	names := []string{"table", "rays", "portrait"}
	place := func() (x, y int) {
		switch k := rng.IntN(10); {
		case k < 3 && len(s.Handles) > 0:
			h := s.Handles[rng.IntN(len(s.Handles))]
			return min(max(int(h[0]), 0), 1279), min(max(int(h[1]), 0), 799) // a view that is zoomed has some outside
		case k < 8:
			if p := s.Panes[names[rng.IntN(3)]]; p[2] > 2 && p[3] > 2 {
				return p[0] + rng.IntN(p[2]), p[1] + rng.IntN(p[3])
			}
		}
		return rng.IntN(1280), rng.IntN(800)
	}
	for range n {
		x, y := place()
		switch k := rng.IntN(20); {
		case k < 7:
			to, up := place()
			fmt.Fprintf(&b, "mousemove %d %d mousedown 1 ", x, y)
			for i := 1; i <= 4; i++ {
				fmt.Fprintf(&b, "mousemove %d %d ", x+(to-x)*i/4, y+(up-y)*i/4)
				if rng.IntN(30) == 0 {
					fmt.Fprintf(&b, "key %s ", handKeys[rng.IntN(len(handKeys))])
				}
			}
			b.WriteString("mouseup 1 ")
		case k < 11:
			fmt.Fprintf(&b, "mousemove %d %d click 1 ", x, y)
		case k < 12:
			fmt.Fprintf(&b, "mousemove %d %d click --repeat 2 1 ", x, y)
		case k < 14:
			fmt.Fprintf(&b, "mousemove %d %d click %d ", x, y, 4+rng.IntN(2))
		case k < 15:
			fmt.Fprintf(&b, "mousemove %d %d ", x, y)
		default:
			fmt.Fprintf(&b, "key %s ", handKeys[rng.IntN(len(handKeys))])
		}
	}
	return b.String()
}

// ours are the stalls in which the window's goroutine was at work for this
// program, rather than for the toolkit's painting.
func ours(all []live.Stall) []live.Stall {
	return slices.DeleteFunc(slices.Clone(all), func(s live.Stall) bool {
		paints := slices.ContainsFunc(s.Doing, func(f string) bool {
			return strings.Contains(f, "drawSingleFrame") || strings.Contains(f, "writeState") || strings.Contains(f, "glCanvas).paint")
		})
		// What it waits for is of the program's making if it is a disk; a
		// processor or another thread is not, on a machine that has more to do.
		disk := slices.ContainsFunc(s.Doing, func(f string) bool { return strings.HasPrefix(f, "syscall.") || strings.HasPrefix(f, "os.") })
		limit := float64(live.StallFrom.Milliseconds())
		return paints || len(s.Doing) == 0 || s.RanMs < limit && !(disk && s.WaitMs-s.QueuedMs >= limit)
	})
}

// outline is where a stall was: the innermost functions, and those of this
// program.
func outline(doing []string) []string {
	var short []string
	for i, f := range doing {
		own := strings.HasPrefix(f, "window.") || strings.HasPrefix(f, "pane.") || strings.HasPrefix(f, "session.") || strings.HasPrefix(f, "tool.")
		if i < 3 || own {
			short = append(short, f)
		}
	}
	return short
}

// tellStalls prints what was measured.
func tellStalls(t *testing.T, all []live.Stall) {
	mine := ours(all)
	var worst float64
	for _, s := range all {
		worst = max(worst, s.WaitMs)
	}
	t.Logf("%d waits over %s, the longest %.0f ms; %d of them by the program itself", len(all), live.StallFrom, worst, len(mine))
	for _, s := range mine {
		t.Logf("%.0f ms (of them at work %.0f): %s", s.WaitMs, s.RanMs, strings.Join(outline(s.Doing), " < "))
	}
}

// search opens the list of commands, types, and takes the first that is found;
// otherwise is typed where text is empty.
func (d *designer) search(text, otherwise string) {
	d.t.Helper()
	if text == "" {
		text = otherwise
	}
	d.do("key", "ctrl+k")
	d.until("the list of commands", func(s window.State) bool { return s.Asks })
	d.do("type", "--delay", "30", text)
	d.do("key", "Return")
	d.until("the list gone", func(s window.State) bool { return !s.Asks })
}

// stallTries is how often the session is gone through: a busy machine can only
// add stalls, so one without any shows that the program has none.
const stallTries = 3

// TestNoStalls: in a session of dragging, sheets, measuring and exporting
// nothing of the program holds the window for more than a tenth of a second.
// Painting is left out: on a screen in memory it is done by the processor, in
// the toolkit. It measures time, and so runs only where it is asked for:
//
//	CAVITYWRIGHT_WINDOW=1 CAVITYWRIGHT_STALLS=1 go test -tags gles,no_emoji -run NoStalls ./cmd/cavitywright
func TestNoStalls(t *testing.T) {
	if os.Getenv("CAVITYWRIGHT_STALLS") != "1" {
		t.Skip("set CAVITYWRIGHT_STALLS=1 to look for stalls")
	}
	needDisplay(t)
	for try := 1; ; try++ {
		stalls := atWork(t)
		tellStalls(t, stalls)
		n := len(ours(stalls))
		if n == 0 {
			return
		}
		if try == stallTries {
			t.Fatalf("%d times the program itself held the window for more than %s", n, live.StallFrom)
		}
	}
}

// atWork goes through a session and is what the window's goroutine was late for.
func atWork(t *testing.T) []live.Stall {
	t.Helper()
	home, file := work(t)
	d := start(t, home, file)
	s := d.until("handles", func(s window.State) bool { return len(s.Handles) > 0 })
	grip := s.Handles[len(s.Handles)-1]
	x, y := int(grip[0]), int(grip[1])
	d.drag(x, y, x+60, y)
	d.drag(x+60, y, x+20, y)
	for _, key := range strings.Fields("w r t i q m m m m l l 1 1 h e ctrl+z h") {
		d.do("key", key)
		time.Sleep(500 * time.Millisecond)
	}
	for _, key := range strings.Fields("ctrl+n a ctrl+e") {
		d.do("key", key)
		d.until("the question of "+key, func(s window.State) bool { return s.Asks })
		d.do("key", "Escape")
		d.until("the question gone", func(s window.State) bool { return !s.Asks })
	}
	for _, sheet := range []string{"Orbits", "Modes", "Outline", "Studies", "Tolerance", "Wish", "Film"} {
		d.search(map[string]string{"Outline": "Export the wall", "Orbits": "Periodic orbits", "Film": "Film:"}[sheet], sheet)
		d.until("the sheet "+sheet, func(s window.State) bool { return s.Sheet == sheet })
		time.Sleep(600 * time.Millisecond)
	}
	d.do("key", "r")
	s = d.until("the readings", func(s window.State) bool { return s.Sheet == "Readings" })
	d.do("key", "ctrl+s")
	d.do("key", "ctrl+shift+e")
	time.Sleep(2 * time.Second)
	beats := d.until("the state", func(s window.State) bool { return s.Beats > 0 }).Beats
	s = d.until("an answer", func(s window.State) bool { return s.Beats > beats+10 })
	d.kill()
	return s.Stalls
}
