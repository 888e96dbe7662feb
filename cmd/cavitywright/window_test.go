package main

import (
	"bytes"
	"encoding/json"
	"fmt"
	"image"
	"image/png"
	"os"
	"os/exec"
	"path/filepath"
	"testing"
	"time"

	"cavitywright/render/export"
	"cavitywright/ui/window"
)

// The real window: the program is built, started under the display, driven by
// synthetic pointer and keys, and judged by its screen, its state and its
// files. It needs Xvfb, xdotool and import, and runs where the set-up program
// asks for it (CAVITYWRIGHT_WINDOW=1).

func needDisplay(t *testing.T) {
	t.Helper()
	if os.Getenv("CAVITYWRIGHT_WINDOW") != "1" {
		t.Skip("set CAVITYWRIGHT_WINDOW=1 under a display with xdotool and import to drive the real window")
	}
	for _, tool := range []string{"xdotool", "import"} {
		if _, err := exec.LookPath(tool); err != nil {
			t.Fatalf("%s is not installed: %v", tool, err)
		}
	}
}

// designer is a running program.
type designer struct {
	t     *testing.T
	cmd   *exec.Cmd
	state string
	log   bytes.Buffer
}

var binary string

func TestMain(m *testing.M) {
	code := func() int {
		if os.Getenv("CAVITYWRIGHT_WINDOW") == "1" {
			dir, err := os.MkdirTemp("", "cavitywright")
			if err != nil {
				fmt.Fprintln(os.Stderr, err)
				return 1
			}
			defer os.RemoveAll(dir)
			binary = filepath.Join(dir, "cavitywright")
			if out, err := exec.Command("go", "build", "-tags", "gles,no_emoji", "-o", binary, ".").CombinedOutput(); err != nil {
				fmt.Fprintf(os.Stderr, "%v: %s", err, out)
				return 1
			}
		}
		return m.Run()
	}()
	os.Exit(code)
}

func start(t *testing.T, home string, args ...string) *designer {
	t.Helper()
	d := &designer{t: t, state: filepath.Join(t.TempDir(), "state.json")}
	d.cmd = exec.Command(binary, append([]string{"-state", d.state}, args...)...)
	d.cmd.Env = append(os.Environ(), "HOME="+home, "XDG_CONFIG_HOME="+home, "XDG_CACHE_HOME="+home, "LANG=en_US.UTF-8", "LIBGL_ALWAYS_SOFTWARE=1")
	d.cmd.Stderr = &d.log
	if err := d.cmd.Start(); err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() {
		_ = d.cmd.Process.Kill()
		_ = d.cmd.Wait()
		if bytes.Contains(d.log.Bytes(), []byte("Error in Fyne call thread")) || bytes.Contains(d.log.Bytes(), []byte("panic")) {
			t.Errorf("the program complained:\n%s", d.log.String())
		}
	})
	d.until("the window shows a filled portrait", func(s window.State) bool { return s.Status.Done >= 1 && s.Status.Bounces > 0 })
	d.do("search", "--sync", "--onlyvisible", "--name", "Cavitywright", "windowfocus")
	return d
}

// until waits for the state; a busy machine gets a minute.
func (d *designer) until(what string, ok func(window.State) bool) window.State {
	d.t.Helper()
	var s window.State
	for end := time.Now().Add(time.Minute); time.Now().Before(end); time.Sleep(50 * time.Millisecond) {
		b, err := os.ReadFile(d.state)
		if err != nil || json.Unmarshal(b, &s) != nil {
			continue
		}
		if ok(s) {
			return s
		}
	}
	s.Stalls = nil
	d.t.Fatalf("waited for: %s\nlast state: %+v\n%s", what, s, d.log.String())
	return s
}

func (d *designer) do(args ...string) {
	d.t.Helper()
	if out, err := xdotool(args...); err != nil {
		d.t.Fatalf("xdotool %v: %v %s", args, err, out)
	}
	time.Sleep(60 * time.Millisecond)
}

func xdotool(args ...string) ([]byte, error) {
	return exec.Command("xdotool", args...).CombinedOutput()
}

func (d *designer) drag(x0, y0, x1, y1 int) {
	d.t.Helper()
	d.do("mousemove", fmt.Sprint(x0), fmt.Sprint(y0))
	d.do("mousedown", "1")
	const steps = 12
	for i := 1; i <= steps; i++ {
		d.do("mousemove", fmt.Sprint(x0+(x1-x0)*i/steps), fmt.Sprint(y0+(y1-y0)*i/steps))
	}
	d.do("mouseup", "1")
}

// screen is the part of the screen that a pane covers.
func (d *designer) screen(s window.State, pane string) image.Image {
	d.t.Helper()
	out, err := exec.Command("import", "-window", "root", "png:-").Output()
	if err != nil {
		d.t.Fatal(err)
	}
	img, err := png.Decode(bytes.NewReader(out))
	if err != nil {
		d.t.Fatal(err)
	}
	p := s.Panes[pane]
	return img.(interface {
		SubImage(image.Rectangle) image.Image
	}).SubImage(image.Rect(p[0], p[1], p[0]+p[2], p[1]+p[3]))
}

// differ is the share of pixels that differ by more than a quarter of full
// scale in some channel.
func differ(a, b image.Image) float64 {
	ra, rb := a.Bounds(), b.Bounds()
	if ra.Size() != rb.Size() {
		return 1
	}
	n := 0
	for y := range ra.Dy() {
		for x := range ra.Dx() {
			r0, g0, b0, _ := a.At(ra.Min.X+x, ra.Min.Y+y).RGBA()
			r1, g1, b1, _ := b.At(rb.Min.X+x, rb.Min.Y+y).RGBA()
			if far(r0, r1) || far(g0, g1) || far(b0, b1) {
				n++
			}
		}
	}
	return float64(n) / float64(ra.Dx()*ra.Dy())
}

func far(a, b uint32) bool { return max(a, b)-min(a, b) > 0x4000 }

// TestRealWindow: start, drag a handle, see the portrait change, save, reopen,
// export, and compare.
func TestRealWindow(t *testing.T) {
	needDisplay(t)
	home := t.TempDir()
	file := filepath.Join(home, "disc.cavity.json")
	table, err := os.ReadFile("../../assets/gallery/01-dented-microdisc.cavity.json")
	if err != nil {
		t.Fatal(err)
	}
	if err := os.WriteFile(file, table, 0o644); err != nil {
		t.Fatal(err)
	}

	d := start(t, home, file)
	before := d.until("the first state", func(s window.State) bool { return len(s.Handles) > 0 })
	was := d.screen(before, "portrait")
	grip := before.Handles[len(before.Handles)-1]
	d.drag(int(grip[0]), int(grip[1]), int(grip[0])+70, int(grip[1]))
	after := d.until("the drag reshaped the wall and the portrait filled", func(s window.State) bool {
		return s.Length != before.Length && s.Unsaved && s.Status.Done >= 1
	})
	d.do("mousemove", "640", "795") // off the panes: no cross-hair in the picture
	now := d.screen(after, "portrait")
	if share := differ(was, now); share < 0.1 {
		t.Errorf("after the drag only %.3f of the portrait's pixels changed", share)
	}
	if after.Status.Lost > 0 {
		t.Errorf("%d rays were lost", after.Status.Lost)
	}

	d.do("key", "ctrl+s")
	d.until("the table is saved", func(s window.State) bool { return !s.Unsaved })
	d.do("key", "ctrl+shift+e")
	figure := filepath.Join(home, "disc-portrait.png")
	waitFile(t, figure)
	saved, err := os.ReadFile(file)
	if err != nil {
		t.Fatal(err)
	}
	if bytes.Equal(saved, table) {
		t.Error("the saved file is the old one")
	}
	carried := tableInside(t, figure)
	if !bytes.Equal(carried, saved) {
		t.Error("the figure does not carry the saved table")
	}
	_ = d.cmd.Process.Kill()
	_ = d.cmd.Wait()

	// The file, and the figure alone, open as the same table with the same
	// portrait.
	for _, again := range []string{file, figure} {
		e := start(t, home, again)
		s := e.until("the same wall", func(s window.State) bool { return s.Length == after.Length && s.Status.Done >= 1 })
		e.do("mousemove", "640", "795")
		if share := differ(now, e.screen(s, "portrait")); share > 0.01 {
			t.Errorf("%s: %.4f of the portrait's pixels differ after reopening", filepath.Base(again), share)
		}
		_ = e.cmd.Process.Kill()
		_ = e.cmd.Wait()
	}
}

func waitFile(t *testing.T, path string) {
	t.Helper()
	for end := time.Now().Add(time.Minute); time.Now().Before(end); time.Sleep(50 * time.Millisecond) {
		if info, err := os.Stat(path); err == nil && info.Size() > 0 {
			return
		}
	}
	t.Fatalf("%s was not written", path)
}

func tableInside(t *testing.T, path string) []byte {
	t.Helper()
	f, err := os.Open(path)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	b, err := export.TableInPNG(f)
	if err != nil {
		t.Fatal(err)
	}
	return b
}
