package store

import (
	"bytes"
	"os"
	"os/exec"
	"path/filepath"
	"runtime"
	"strings"
	"testing"
	"time"

	"github.com/go-json-experiment/json"
)

var noon = time.Date(2026, 3, 4, 12, 0, 0, 123456789, time.UTC)

// orphan makes the copy one of a process that has ended.
func orphan(t *testing.T, r *Recovery) {
	t.Helper()
	ended := exec.Command(os.Args[0], "-test.run=^$")
	if err := ended.Run(); err != nil {
		t.Fatal(err)
	}
	disown(t, r.copy, owner{PID: ended.Process.Pid, Born: "at another time"})
}

func disown(t *testing.T, path string, o owner) {
	t.Helper()
	head, rest, _ := strings.Cut(onDisk(t, path), "\n")
	us := `"owner":` + ownerText(ourselves())
	if !strings.Contains(head, us) {
		t.Fatalf("the head is %s", head)
	}
	head = strings.Replace(head, us, `"owner":`+ownerText(o), 1)
	if err := os.WriteFile(path, []byte(head+"\n"+rest), 0o600); err != nil {
		t.Fatal(err)
	}
}

func ownerText(o owner) string {
	b, err := json.Marshal(o)
	if err != nil {
		panic(err)
	}
	return string(b)
}

func TestRecovery(t *testing.T) {
	folder := filepath.Join(t.TempDir(), "cavitywright", "recovery")
	if got := Found(folder); got != nil {
		t.Errorf("found %d in no folder", len(got))
	}
	a, b := NewRecovery(folder), NewRecovery(folder)
	keep := func(r *Recovery, radius float64, path string, at time.Time) {
		t.Helper()
		if err := r.Keep(disc(t, radius), path, at); err != nil {
			t.Fatal(err)
		}
	}
	keep(a, 1, "/home/plate.cavity.json", noon)
	keep(a, 2, "/home/plate.cavity.json", noon.Add(time.Minute))
	keep(b, 3, "", noon.Add(time.Hour))
	if got := Found(folder); len(got) != 0 {
		t.Errorf("found %d of a session that runs", len(got))
	}
	orphan(t, a)
	orphan(t, b)
	got := Found(folder)
	if len(got) != 2 {
		t.Fatalf("found %d", len(got))
	}
	if got[0].Path != "" || !got[0].At.Equal(noon.Add(time.Hour)) || bytesOf(t, got[0].Design) != bytesOf(t, disc(t, 3)) {
		t.Errorf("the latest is %+v", got[0])
	}
	if got[1].Path != "/home/plate.cavity.json" || !got[1].At.Equal(noon.Add(time.Minute)) || bytesOf(t, got[1].Design) != bytesOf(t, disc(t, 2)) {
		t.Errorf("the other is %+v", got[1])
	}
	for _, r := range got {
		if err := r.Remove(); err != nil {
			t.Fatal(err)
		}
	}
	holds(t, folder)
	if err := got[0].Remove(); err != nil {
		t.Errorf("removed twice: %v", err)
	}
}

func TestClear(t *testing.T) {
	folder := t.TempDir()
	r := NewRecovery(folder)
	if err := r.Clear(); err != nil {
		t.Errorf("nothing to clear: %v", err)
	}
	for range 2 { // it can be used again
		if err := r.Keep(disc(t, 1), "", noon); err != nil {
			t.Fatal(err)
		}
		if err := r.Clear(); err != nil {
			t.Fatal(err)
		}
		holds(t, folder)
	}
}

// A copy that a person or a cleaner took away is made anew.
func TestFolderTakenAway(t *testing.T) {
	folder := filepath.Join(t.TempDir(), "recovery")
	r := NewRecovery(folder)
	for range 2 {
		if err := r.Keep(disc(t, 1), "", noon); err != nil {
			t.Fatal(err)
		}
		if _, err := os.Stat(r.copy); err != nil {
			t.Fatal(err)
		}
		if err := os.RemoveAll(folder); err != nil {
			t.Fatal(err)
		}
	}
}

func TestKeepRefused(t *testing.T) {
	folder := t.TempDir()
	d := disc(t, 1)
	d.Unit = "furlong"
	if err := NewRecovery(folder).Keep(d, "", noon); err == nil {
		t.Error("a table in furlongs is kept")
	}
	holds(t, folder)
	file := filepath.Join(folder, "file")
	if err := os.WriteFile(file, nil, 0o644); err != nil {
		t.Fatal(err)
	}
	err := NewRecovery(filepath.Join(file, "recovery")).Keep(disc(t, 1), "", noon)
	saysFault(t, err, NoFolder, `"the unsaved state" could not be saved: there is no folder "`+filepath.Join(file, "recovery")+`"; choose another one.`)
}

// Copies that broke in any way are passed over; a whole one among them is found.
func TestDamagedCopies(t *testing.T) {
	folder := t.TempDir()
	r := NewRecovery(folder)
	if err := r.Keep(disc(t, 1), "", noon); err != nil {
		t.Fatal(err)
	}
	orphan(t, r)
	whole := []byte(onDisk(t, r.copy))
	put := func(name string, b []byte) {
		t.Helper()
		if err := os.WriteFile(filepath.Join(folder, name), b, 0o600); err != nil {
			t.Fatal(err)
		}
	}
	put("unsaved-empty.recovery", nil)
	put("unsaved-zeros.recovery", make([]byte, 100000))
	put("unsaved-noline.recovery", bytes.Repeat([]byte("x"), 2*longestHead))
	put("unsaved-nohead.recovery", append([]byte("{}\n"), whole...))
	put("unsaved-other.recovery", append([]byte(`{"owner":{"pid":-1},"path":"","at":"never"}`+"\n"), whole...))
	put("unsaved-notes.txt", []byte("mine"))
	if err := os.Mkdir(filepath.Join(folder, "unsaved-folder.recovery"), 0o755); err != nil {
		t.Fatal(err)
	}
	table := bytes.IndexByte(whole, '\n') + 1
	for n := 0; n < len(whole)-2; n += 7 {
		put("unsaved-cut.recovery", whole[:n])
		got := Found(folder)
		if len(got) != 1 || got[0].file != r.copy {
			t.Fatalf("with one cut at %d of %d (head %d): found %d", n, len(whole), table, len(got))
		}
	}
	entries, err := os.ReadDir(folder)
	if err != nil {
		t.Fatal(err)
	}
	if len(entries) != 9 {
		t.Errorf("%d of 9 entries are left", len(entries))
	}
}

// Numbers of processes are given again: a copy of an earlier one of the same
// number is not taken for ours.
func TestNumberGivenAgain(t *testing.T) {
	if born(os.Getpid()) == "" {
		t.Skip("this system does not tell when a process began")
	}
	folder := t.TempDir()
	r := NewRecovery(folder)
	if err := r.Keep(disc(t, 1), "", noon); err != nil {
		t.Fatal(err)
	}
	us := ourselves()
	disown(t, r.copy, owner{PID: us.PID, Born: us.Born + "0"})
	if got := Found(folder); len(got) != 1 {
		t.Errorf("found %d", len(got))
	}
}

func TestRuns(t *testing.T) {
	if !ourselves().alive() || !(owner{PID: os.Getppid()}).alive() {
		t.Error("a process that runs is not alive")
	}
	for _, pid := range []int{0, -1, 1 << 30} {
		if runs(pid) {
			t.Errorf("process %d runs", pid)
		}
	}
}

// Two programs that keep at once do not get the same file.
// A process that was killed keeps its number until whoever started it asks
// after it; its copy is offered all the same.
func TestKilledNotYetAskedAfter(t *testing.T) {
	if runtime.GOOS != "linux" {
		t.Skip("what a process is at is read from /proc, which only Linux has")
	}
	killed := exec.Command("sleep", "60")
	if err := killed.Start(); err != nil {
		t.Fatal(err)
	}
	defer func() { _ = killed.Wait() }()
	o := owner{killed.Process.Pid, born(killed.Process.Pid)}
	if o.Born == "" || !o.alive() {
		t.Fatalf("a process that runs counts as ended: %+v", o)
	}
	if err := killed.Process.Kill(); err != nil {
		t.Fatal(err)
	}
	for end := time.Now().Add(10 * time.Second); o.alive(); time.Sleep(time.Millisecond) {
		if time.Now().After(end) {
			t.Fatal("a process that was killed still counts as running after 10 s")
		}
	}
	if !runs(o.PID) {
		t.Error("the number of the process was given back before it was asked after, so nothing was tried")
	}
}

func TestOwnFiles(t *testing.T) {
	folder := t.TempDir()
	seen := map[string]bool{}
	for range 20 {
		r := NewRecovery(folder)
		if err := r.Keep(disc(t, 1), "", noon); err != nil {
			t.Fatal(err)
		}
		if seen[r.copy] {
			t.Fatalf("%s belongs to two", r.copy)
		}
		seen[r.copy] = true
	}
}
