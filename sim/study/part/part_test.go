package part_test

import (
	"bytes"
	"errors"
	"slices"
	"strings"
	"testing"

	"cavitywright/sim"
	"cavitywright/sim/measure"
	"cavitywright/sim/study"
	"cavitywright/sim/study/part"
	"cavitywright/table"
	"cavitywright/table/plane"
	"cavitywright/table/shape"

	"pgregory.net/rapid"
)

const program = "a program 1"

// trial is a sweep over 17 points, some of them no tables, that costs nothing: its readings are exact.
func trial(t testing.TB) *study.Study {
	t.Helper()
	f, err := shape.New("limacon", []float64{1, 0.3})
	if err != nil {
		t.Fatal(err)
	}
	s := table.DialSweep{Name: "a \"trial\"", Turns: []table.Turn{{Dial: "eps", From: 0.1, To: 1.7, Points: 17}}, Readings: []string{"area", "perimeter"}, Effort: 1}
	d := table.Design{Name: "Larkmoor trial plate", Unit: table.Millimetre, Study: table.DefaultStudy(),
		Items: []table.Item{{Shape: f, Place: plane.Identity()}}}
	d.Study.Sweeps = []table.DialSweep{s}
	tab, err := table.New(d)
	if err != nil {
		t.Fatal(err)
	}
	st, err := study.New(tab, s)
	if err != nil {
		t.Fatal(err)
	}
	return st
}

// taken are the rows of the trial, worked out once.
var taken []study.Row

func rows(t testing.TB, st *study.Study) []study.Row {
	t.Helper()
	kit := study.Kit{Run: func(*sim.Tracer, uint64) measure.Runner { return nil }} // exact readings run nothing
	for len(taken) < st.Tasks() {
		row, err := st.Take(len(taken), kit)
		if err != nil {
			t.Fatal(err)
		}
		taken = append(taken, row)
	}
	return taken
}

// written is part k of n of a study.
func written(t testing.TB, st *study.Study, k, n int) []byte {
	t.Helper()
	h, err := part.NewHead(st, program, k, n)
	return file(t, h, err, func(task int) ([]byte, error) { return part.Line(rows(t, st)[task]) })
}

// file is a whole part: its head, which came with an error, and its lines.
func file(t testing.TB, h part.Head, err error, line func(task int) ([]byte, error)) []byte {
	t.Helper()
	var b []byte
	add := func(line []byte, err error) {
		if err != nil {
			t.Fatal(err)
		}
		b = append(b, line...)
	}
	if err != nil {
		t.Fatal(err)
	}
	add(h.Line())
	for _, task := range h.Due() {
		add(line(task))
	}
	return b
}

func read(t testing.TB, name string, b []byte) part.Named {
	t.Helper()
	f, err := part.Read(b)
	if err != nil {
		t.Fatal(err)
	}
	return part.Named{Name: name, File: f}
}

// TestAlike: 1, 3 and 16 parts, and more parts than tasks, gather to the bytes of
// a single run, in any order.
func TestAlike(t *testing.T) {
	st := trial(t)
	single := written(t, st, 1, 1)
	whole, err := part.Gather([]part.Named{read(t, "one", single)})
	if err != nil {
		t.Fatal(err)
	}
	csv := whole.CSV(program)
	json, err := whole.JSON()
	if err != nil {
		t.Fatal(err)
	}
	for _, n := range []int{1, 3, 16, 30} {
		var all []part.Named
		for k := n; k >= 1; k-- {
			all = append(all, read(t, "p", written(t, st, k, n)))
		}
		r, err := part.Gather(all)
		if err != nil {
			t.Fatal(err)
		}
		again, err := part.Written(r, program)
		if err != nil {
			t.Fatal(err)
		}
		otherJSON, err := r.JSON()
		if err != nil {
			t.Fatal(err)
		}
		if !bytes.Equal(again, single) || !bytes.Equal(r.CSV(program), csv) || !bytes.Equal(otherJSON, json) {
			t.Errorf("%d parts gather to another result", n)
		}
	}
}

// TestBreaksOff: wherever a part breaks off, what is read is whole lines of it
// and nothing else.
func TestBreaksOff(t *testing.T) {
	b := written(t, trial(t), 2, 3)
	head := bytes.IndexByte(b, '\n') + 1
	for n := range len(b) {
		f, err := part.Read(b[:n])
		if n < head {
			if !errors.Is(err, part.ErrBegun) {
				t.Fatalf("after %d bytes of the head: %v", n, err)
			}
			continue
		}
		if err != nil {
			t.Fatal(err)
		}
		good := bytes.LastIndexByte(b[:n], '\n') + 1
		if f.Good != good || (f.Damage != nil) != (n > good) || len(f.Rows) != bytes.Count(b[:n], []byte{'\n'})-1 {
			t.Fatalf("after %d bytes %d are good, %d rows, %v", n, f.Good, len(f.Rows), f.Damage)
		}
	}
}

// TestDamaged: a byte that is changed anywhere is found, and what stands before
// its line is kept.
func TestDamaged(t *testing.T) {
	b := written(t, trial(t), 2, 3)
	head := bytes.IndexByte(b, '\n') + 1
	rapid.Check(t, func(t *rapid.T) {
		i := rapid.IntRange(0, len(b)-1).Draw(t, "place")
		c := rapid.Byte().Filter(func(c byte) bool { return c != b[i] }).Draw(t, "byte")
		bad := slices.Clone(b)
		bad[i] = c
		f, err := part.Read(bad)
		if i < head {
			if err == nil {
				t.Fatalf("byte %d of the head is %q, and it is read", i, c)
			}
			return
		}
		if err != nil {
			t.Fatal(err)
		}
		if start := bytes.LastIndexByte(b[:i], '\n') + 1; f.Damage == nil || f.Good != start {
			t.Fatalf("byte %d is %q: %d bytes are good, want %d; %v", i, c, f.Good, start, f.Damage)
		}
	})
}

// TestNotAll: parts that are missing, twice there, damaged, unfinished or of
// another study are named.
func TestNotAll(t *testing.T) {
	st := trial(t)
	parts := func(n int) (all []part.Named) {
		for k := range n {
			all = append(all, read(t, string(rune('a'+k)), written(t, st, k+1, n)))
		}
		return all
	}
	three := parts(3)
	short := written(t, st, 2, 3)
	lines := bytes.SplitAfter(short, []byte("\n"))
	unfinished := read(t, "u", bytes.Join(lines[:3], nil))
	cut := read(t, "c", short[:len(short)-3])
	swapped := read(t, "s", bytes.Join([][]byte{lines[0], lines[2], lines[1]}, nil))
	other := trial(t)
	other.Sweep.Name = "other"
	for _, c := range []struct {
		says string
		of   []part.Named
	}{
		{"there is nothing to gather", nil},
		{"of 3 parts 2 is missing; run it, or name the files", []part.Named{three[0], three[2]}},
		{"of 16 parts 4, 5, 6, 7, 8, 9, 10, 11, 12, 13, 14, 15, 16 are missing; run them", parts(16)[:3]},
		{"part 1 of 3 stands twice, in a and a", []part.Named{three[0], three[0]}},
		{"part 2 of 3 is not finished: u lacks 4 of 6 rows; run it again", []part.Named{three[0], unfinished, three[2]}},
		{"part 2 of 3 is damaged: in c, line 7, it breaks off; run that part again", []part.Named{three[0], cut, three[2]}},
		{"part 2 of 3 is damaged: in s, line 2, it belongs elsewhere", []part.Named{three[0], swapped, three[2]}},
		{"a is of another study than b: one of 3 parts, not of 16", []part.Named{parts(16)[1], three[0]}},
		{`x is of another study than a: sweep "other", not "a \"trial\""`, []part.Named{three[0], read(t, "x", written(t, other, 2, 3))}},
	} {
		if _, err := part.Gather(c.of); err == nil || !strings.HasPrefix(err.Error(), c.says) {
			t.Errorf("%v, want %q", err, c.says)
		}
	}
	for _, b := range []string{"\n", "a table\n", `{"format":"cavity"}` + "\n", `{"head":{"format":"cavity-part"},"crc32":"00000000"}` + "\n"} {
		if _, err := part.Read([]byte(b)); !errors.Is(err, part.ErrNoPart) {
			t.Errorf("%q: %v", b, err)
		}
	}
}
