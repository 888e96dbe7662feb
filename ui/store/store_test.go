package store

import (
	"bytes"
	"errors"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"strings"
	"syscall"
	"testing"

	"cavitywright/table"
	"cavitywright/table/param"
	"cavitywright/table/plane"
	"cavitywright/table/shape"
	"cavitywright/table/tablefile"

	"go.uber.org/goleak"
)

func TestMain(m *testing.M) { goleak.VerifyTestMain(m) }

func disc(t *testing.T, radius float64) table.Design {
	t.Helper()
	f, err := shape.New("disc", param.Values{radius})
	if err != nil {
		t.Fatal(err)
	}
	return table.Design{Name: "plate", Unit: table.Millimetre, Study: table.DefaultStudy(),
		Items: []table.Item{{Shape: f, Place: plane.Identity()}}}
}

func bytesOf(t *testing.T, d table.Design) string {
	t.Helper()
	var b bytes.Buffer
	if err := tablefile.Write(&b, d); err != nil {
		t.Fatal(err)
	}
	return b.String()
}

func onDisk(t *testing.T, path string) string {
	t.Helper()
	b, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	return string(b)
}

// holds checks that the folder holds just the names.
func holds(t *testing.T, folder string, names ...string) {
	t.Helper()
	entries, err := os.ReadDir(folder)
	if err != nil {
		t.Fatal(err)
	}
	var got []string
	for _, e := range entries {
		got = append(got, e.Name())
	}
	if strings.Join(got, " ") != strings.Join(names, " ") {
		t.Errorf("the folder holds %q, not %q", got, names)
	}
}

func saysFault(t *testing.T, err error, kind Kind, says string) {
	t.Helper()
	f := (*Fault)(nil)
	if !errors.As(err, &f) || f.Kind != kind || f.Error() != says {
		t.Errorf("got  %v\nwant %s", err, says)
	}
}

func TestSaveAndLoad(t *testing.T) {
	folder := t.TempDir()
	path := filepath.Join(folder, "plate.cavity.json")
	for _, radius := range []float64{1, 2} { // new, and in place of the old
		if err := Save(path, disc(t, radius)); err != nil {
			t.Fatal(err)
		}
		if got := onDisk(t, path); got != bytesOf(t, disc(t, radius)) {
			t.Errorf("on the disk is\n%s", got)
		}
		d, err := Load(path, tablefile.Read)
		if err != nil {
			t.Fatal(err)
		}
		if bytesOf(t, d) != bytesOf(t, disc(t, radius)) {
			t.Error("another table is loaded")
		}
	}
	holds(t, folder, "plate.cavity.json")
}

func TestMode(t *testing.T) {
	path := filepath.Join(t.TempDir(), "plate.cavity.json")
	for _, mode := range []fs.FileMode{0o644, 0o600, 0o664} {
		if mode != 0o644 { // that of a new one
			if err := os.Chmod(path, mode); err != nil {
				t.Fatal(err)
			}
		}
		if err := Save(path, disc(t, 1)); err != nil {
			t.Fatal(err)
		}
		at, err := os.Stat(path)
		if err != nil {
			t.Fatal(err)
		}
		if at.Mode().Perm() != mode {
			t.Errorf("the mode is %v, not %v", at.Mode().Perm(), mode)
		}
	}
}

func TestLinkStays(t *testing.T) {
	folder, elsewhere := t.TempDir(), t.TempDir()
	link, file := filepath.Join(folder, "plate.cavity.json"), filepath.Join(elsewhere, "real.cavity.json")
	if err := os.Symlink(file, link); err != nil {
		t.Skip("no links here:", err)
	}
	for range 2 { // to a file that is not there, and to one that is
		if err := Save(link, disc(t, 1)); err != nil {
			t.Fatal(err)
		}
		if to, err := os.Readlink(link); err != nil || to != file {
			t.Error("the link is gone")
		}
		holds(t, elsewhere, "real.cavity.json")
	}
}

func TestPlacesRefused(t *testing.T) {
	folder := t.TempDir()
	if err := os.Mkdir(filepath.Join(folder, "sub.cavity.json"), 0o755); err != nil {
		t.Fatal(err)
	}
	locked := filepath.Join(folder, "locked.cavity.json")
	if err := os.WriteFile(locked, []byte("old"), 0o444); err != nil {
		t.Fatal(err)
	}
	save := func(name string) error { return Save(filepath.Join(folder, name), disc(t, 1)) }
	load := func(name string) error {
		_, err := Load(filepath.Join(folder, name), tablefile.Read)
		return err
	}
	gone := filepath.Join(folder, "gone")
	long := strings.Repeat("n", 300)
	saysFault(t, save("gone/a.cavity.json"), NoFolder, `"a.cavity.json" could not be saved: there is no folder "`+gone+`"; choose another one.`)
	saysFault(t, save("locked.cavity.json/a"), NoFolder, `"a" could not be saved: there is no folder "`+locked+`"; choose another one.`)
	saysFault(t, save("sub.cavity.json"), Folder, `"sub.cavity.json" could not be saved: it is a folder; choose a file.`)
	saysFault(t, save("locked.cavity.json"), Locked, `"locked.cavity.json" could not be saved: the file is marked read-only; save under another name, or take the mark off.`)
	saysFault(t, save(long), LongName, `"`+long+`" could not be saved: the disk with "`+folder+`" cannot take this name; choose a shorter or plainer one.`)
	saysFault(t, load("a.cavity.json"), Missing, `"a.cavity.json" could not be opened: there is no such file in "`+folder+`"; it may have been moved, so choose it anew.`)
	saysFault(t, load("sub.cavity.json"), Folder, `"sub.cavity.json" could not be opened: it is a folder; choose a file.`)
	if onDisk(t, locked) != "old" {
		t.Error("the locked file was changed")
	}
	holds(t, folder, "locked.cavity.json", "sub.cavity.json")
}

func TestDevicesRefused(t *testing.T) {
	if _, err := os.Stat("/dev/null"); err != nil {
		t.Skip("no devices here")
	}
	saysFault(t, Save("/dev/null", disc(t, 1)), Device, `"null" could not be saved: it is not an ordinary file; choose another one.`)
	_, err := Load("/dev/zero", tablefile.Read)
	saysFault(t, err, Device, `"zero" could not be opened: it is not an ordinary file; choose another one.`)
}

// To root all folders are open, so that this checks the rest only.
func TestReadOnlyFolder(t *testing.T) {
	folder := t.TempDir()
	if err := os.Chmod(folder, 0o555); err != nil {
		t.Fatal(err)
	}
	defer os.Chmod(folder, 0o755)
	if f, err := os.CreateTemp(folder, "probe"); err == nil {
		f.Close()
		t.Skip("whoever runs this may write everywhere; see TestDiskFails")
	}
	saysFault(t, Save(filepath.Join(folder, "a.cavity.json"), disc(t, 1)), ReadOnly,
		`"a.cavity.json" could not be saved: the folder "`+folder+`" is read-only; choose another one.`)
}

func TestDesignRefused(t *testing.T) {
	folder := t.TempDir()
	path := filepath.Join(folder, "a.cavity.json")
	d := disc(t, 1)
	d.Unit = "furlong"
	if err := Save(path, d); err == nil {
		t.Error("a table in furlongs is saved")
	}
	holds(t, folder)
}

// The words of a reader pass, and so do those of tablefile.
func TestLoadPassesRefusals(t *testing.T) {
	path := filepath.Join(t.TempDir(), "a.cavity.json")
	if err := os.WriteFile(path, []byte(`{"format": "cavity", "version": 9}`), 0o644); err != nil {
		t.Fatal(err)
	}
	_, err := Load(path, tablefile.Read)
	if later := (*tablefile.LaterVersion)(nil); !errors.As(err, &later) || later.File != 9 {
		t.Error(err)
	}
	own := errors.New("there is no table inside this picture")
	if _, err := Load(path, func(io.Reader) (table.Design, error) { return table.Design{}, own }); err != own {
		t.Error(err)
	}
}

func TestEnsureExt(t *testing.T) {
	for path, want := range map[string]string{
		"plate":             "plate.cavity.json",
		"plate.cavity.json": "plate.cavity.json",
		"Plate.Cavity.JSON": "Plate.Cavity.JSON",
		"plate.json":        "plate.cavity.json",
		"plate.cavity":      "plate.cavity.json",
		"a.b/plate 2.5 mm":  "a.b/plate 2.5 mm.cavity.json",
		"plate.png":         "plate.png.cavity.json",
	} {
		if got := EnsureExt(path); got != want {
			t.Errorf("%s becomes %s, not %s", path, got, want)
		}
	}
}

// failing is the disk of this computer, but for what is set.
type failing struct {
	computer
	create, write, chmod, sync, shut, rename error
	half                                     bool // write a half before write fails
}

func (d failing) CreateTemp(folder, pattern string) (file, error) {
	if d.create != nil {
		return nil, &fs.PathError{Op: "open", Path: folder, Err: d.create}
	}
	f, err := os.CreateTemp(folder, pattern)
	return failingFile{f, d}, err
}

func (d failing) Rename(from, to string) error {
	if d.rename != nil {
		return &os.LinkError{Op: "rename", Old: from, New: to, Err: d.rename}
	}
	return d.computer.Rename(from, to)
}

type failingFile struct {
	*os.File
	d failing
}

func (f failingFile) Write(b []byte) (int, error) {
	if f.d.write == nil {
		return f.File.Write(b)
	}
	n := 0
	if f.d.half {
		n, _ = f.File.Write(b[:len(b)/2])
	}
	return n, &fs.PathError{Op: "write", Path: f.Name(), Err: f.d.write}
}

func (f failingFile) Chmod(m fs.FileMode) error { return first(f.d.chmod, f.File.Chmod(m)) }
func (f failingFile) Sync() error               { return first(f.d.sync, f.File.Sync()) }
func (f failingFile) Close() error              { return first(f.d.shut, f.File.Close()) }

func first(a, b error) error {
	if a != nil {
		return a
	}
	return b
}

// Wherever the disk fails, the old file stays as it was and nothing is left.
func TestDiskFails(t *testing.T) {
	odd := errors.New("the cable is loose")
	for _, c := range []struct {
		disk failing
		kind Kind
		says string // FOLDER stands for the folder
	}{
		{failing{create: syscall.EACCES}, ReadOnly, `the folder "FOLDER" is read-only; choose another one.`},
		{failing{create: syscall.EROFS}, ReadOnly, `the folder "FOLDER" is read-only; choose another one.`},
		{failing{create: syscall.ENOSPC}, Full, `the disk with "FOLDER" is full; free some room, or choose another disk.`},
		{failing{write: syscall.ENOSPC, half: true}, Full, `the disk with "FOLDER" is full; free some room, or choose another disk.`},
		{failing{sync: syscall.ENOSPC}, Full, `the disk with "FOLDER" is full; free some room, or choose another disk.`},
		{failing{shut: syscall.ENOSPC}, Full, `the disk with "FOLDER" is full; free some room, or choose another disk.`},
		{failing{rename: syscall.EACCES}, Denied, `you have no permission for it in "FOLDER"; choose another place.`},
		{failing{chmod: syscall.EPERM}, Denied, `you have no permission for it in "FOLDER"; choose another place.`},
	} {
		folder := t.TempDir()
		path := filepath.Join(folder, "a.cavity.json")
		if err := os.WriteFile(path, []byte("old"), 0o644); err != nil {
			t.Fatal(err)
		}
		err := replace(c.disk, path, []byte("much that is new"))
		saysFault(t, err, c.kind, `"a.cavity.json" could not be saved: `+strings.ReplaceAll(c.says, "FOLDER", folder))
		if onDisk(t, path) != "old" {
			t.Errorf("%s: the old file was changed", c.says)
		}
		holds(t, folder, "a.cavity.json")
	}
	folder := t.TempDir()
	err := replace(failing{write: odd}, filepath.Join(folder, "a"), []byte("new"))
	saysFault(t, err, Broken, `"a" could not be saved in "`+folder+`": the disk reports "the cable is loose"; try again, or choose another place.`)
	holds(t, folder)
}

// full is a disk whose files are all the device that has no room.
type full struct{ computer }

func (full) CreateTemp(string, string) (file, error) { return os.OpenFile("/dev/full", os.O_WRONLY, 0) }
func (full) Remove(string) error                     { return nil }

func TestReallyFull(t *testing.T) {
	if _, err := os.Stat("/dev/full"); err != nil {
		t.Skip("there is no /dev/full here")
	}
	folder := t.TempDir()
	err := replace(full{}, filepath.Join(folder, "a"), []byte("new"))
	saysFault(t, err, Full, `"a" could not be saved: the disk with "`+folder+`" is full; free some room, or choose another disk.`)
}
