// Command cavitywright is the desktop designer of cavities: it opens the
// window of ui/window on a table file, or on the first table of the gallery.
//
//	cavitywright [FILE]
package main

import (
	"encoding/json"
	"errors"
	"flag"
	"fmt"
	"os"
	"path/filepath"
	"runtime"
	"strings"

	"cavitywright/assets"
	"cavitywright/table"
	"cavitywright/ui/window"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/app"
)

func main() {
	state := flag.String("state", "", "write what the window shows to this file after each frame (for tests)")
	flag.Usage = func() {
		fmt.Fprintln(flag.CommandLine.Output(), "usage: cavitywright [FILE]\n\nFILE is a table (NAME.cavity.json), a PNG or SVG figure that carries one, or an outline to import (svg or csv).")
		flag.PrintDefaults()
	}
	flag.Parse()
	if flag.NArg() > 1 {
		flag.Usage()
		os.Exit(2)
	}
	if err := run(flag.Arg(0), *state); err != nil {
		fmt.Fprintln(os.Stderr, "cavitywright:", err)
		os.Exit(1)
	}
}

func run(path, state string) error {
	asked := path
	t, path, trouble := first(path)
	outline := trouble != nil && window.HoldsOutline(asked, trouble)
	if outline {
		trouble = nil
		var err error
		if t, path, err = first(""); err != nil {
			return err
		}
	}
	if trouble != nil {
		// Said in the terminal and in the window: who started it by a click
		// sees no terminal.
		fmt.Fprintln(os.Stderr, "cavitywright:", trouble)
		var err error
		if t, path, err = first(""); err != nil {
			return err
		}
	}
	if runtime.GOOS == "linux" && os.Getenv("DISPLAY") == "" {
		return errors.New("there is no X display to open a window on; start it in a desktop session, or set DISPLAY")
	}
	if l := os.Getenv("LANG"); l == "" || strings.HasPrefix(l, "C.") || l == "C" {
		_ = os.Setenv("LANG", "en_US.UTF-8") // the toolkit complains of a locale without a language
	}
	app.SetMetadata(fyne.AppMetadata{
		ID: "org.cavitywright.designer", Name: "Cavitywright", Version: assets.Version,
		Icon:       fyne.NewStaticResource("icon.png", assets.Icon),
		Migrations: map[string]bool{"fyneDo": true},
	})
	a := app.NewWithID("org.cavitywright.designer")
	o := window.Options{Recovery: recoveryFolder()}
	if state != "" {
		o.Watch = func(s window.State) { writeState(state, s) }
	}
	w := window.New(a, t, path, o)
	if trouble != nil {
		w.Say(trouble.Error())
	}
	if outline {
		w.ImportOutline(asked)
	}
	w.ShowAndRun()
	return nil
}

// first is the table to open: that of the file, or the gallery's first.
func first(path string) (*table.Table, string, error) {
	if path == "" {
		t, err := window.GalleryTable(0)
		return t, "", err
	}
	t, err := window.ReadTable(path)
	if err != nil {
		return nil, "", err
	}
	abs, err := filepath.Abs(path)
	if err != nil {
		abs = path
	}
	return t, window.DocumentPath(abs), nil
}

// recoveryFolder is where copies that survive a crash are kept.
func recoveryFolder() string {
	dir, err := os.UserCacheDir()
	if err != nil {
		return ""
	}
	return filepath.Join(dir, "cavitywright", "recovery")
}

// writeState replaces the file in one step, so that a reader never sees half.
func writeState(path string, s window.State) {
	b, err := json.Marshal(s)
	if err != nil {
		return
	}
	if os.WriteFile(path+".new", b, 0o644) == nil {
		_ = os.Rename(path+".new", path)
	}
}
