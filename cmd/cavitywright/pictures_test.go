package main

import (
	"os"
	"os/exec"
	"path/filepath"
	"strconv"
	"testing"
	"time"

	"cavitywright/ui/window"
)

// TestPictures makes the pictures of the README from the program as it stands,
// into the folder that CAVITYWRIGHT_PICTURES names:
//
//	CAVITYWRIGHT_WINDOW=1 CAVITYWRIGHT_PICTURES=../../assets/pictures go test -tags gles,no_emoji -run Pictures ./cmd/cavitywright
func TestPictures(t *testing.T) {
	folder := os.Getenv("CAVITYWRIGHT_PICTURES")
	if folder == "" {
		t.Skip("set CAVITYWRIGHT_PICTURES to a folder to make the README's pictures")
	}
	needDisplay(t)
	shot := func(name string) {
		path := filepath.Join(folder, name+".png")
		out, err := exec.Command("import", "-window", "root", "-crop", "1280x800+0+0", "+repage", path).CombinedOutput()
		if err != nil {
			t.Fatalf("%v: %s", err, out)
		}
	}
	for _, p := range []struct {
		name, table string
		drag        int           // how far the last handle is dragged, in pixels
		keys        []string      // pressed once the portrait is full
		clicks      [][2]int      // then clicked
		wait        time.Duration // for what they begin, which the state does not tell
	}{
		{name: "first", table: "01-dented-microdisc"},
		{name: "dragged", table: "01-dented-microdisc", drag: 44},
		{name: "mushroom", table: "05-mushroom"},
		{name: "free-wall", table: "11-pebble"},
		{name: "dark", table: "10-quadrupole-laser", keys: []string{"l"}, wait: 3 * time.Second},
		{name: "far-field", table: "14-one-way-microdisc", keys: []string{"i"}, wait: 15 * time.Second},
		{name: "survival", table: "13-leaky-d", keys: []string{"t"}, wait: 15 * time.Second},
		{name: "readings", table: "05-mushroom", keys: []string{"r"}, clicks: [][2]int{{990, 72}}, wait: 45 * time.Second},
		{name: "wall", table: "03-quarter-plate", keys: []string{"w"}, wait: 3 * time.Second},
		{name: "stretching", table: "01-dented-microdisc", drag: 44, keys: []string{"m"}, wait: 20 * time.Second},
	} {
		d := start(t, t.TempDir(), filepath.Join("../../assets/gallery", p.table+".cavity.json"))
		s := d.until("handles", func(s window.State) bool { return len(s.Handles) > 0 })
		if p.drag != 0 {
			h := s.Handles[len(s.Handles)-1]
			d.drag(int(h[0]), int(h[1]), int(h[0])+p.drag, int(h[1]))
			d.until("the portrait", func(s window.State) bool { return s.Unsaved && s.Status.Done >= 1 })
		}
		d.do("mousemove", "640", "795")
		d.do("mousemove", "642", "796")
		d.until("the portrait", func(s window.State) bool { return s.Status.Done >= 1 })
		for _, k := range p.keys {
			d.do("mousemove", "640", "400")
			d.do("key", k)
			time.Sleep(time.Second)
		}
		for _, c := range p.clicks {
			d.do("mousemove", strconv.Itoa(c[0]), strconv.Itoa(c[1]))
			d.do("click", "1")
		}
		if p.wait > 0 {
			d.do("mousemove", "640", "795")
			time.Sleep(p.wait)
		}
		shot(p.name)
		_ = d.cmd.Process.Kill()
		_ = d.cmd.Wait()
	}
}
