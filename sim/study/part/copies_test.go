package part_test

import (
	"bytes"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"

	"cavitywright/sim"
	"cavitywright/sim/measure"
	"cavitywright/sim/study"
	"cavitywright/sim/study/part"
	"cavitywright/sim/study/tolerance"
	"cavitywright/table"
)

// kit makes copies whose readings are exact, which runs nothing.
func kit() tolerance.Kit {
	return tolerance.Kit{
		Kit:    study.Kit{Run: func(*sim.Tracer, uint64) measure.Runner { return nil }},
		Chance: func(stream uint64) rand.Source { return rand.NewPCG(1, stream) },
	}
}

// copying is a tolerance of 10 copies with two errors, some copies no tables.
func copying(t testing.TB) *tolerance.Tolerance {
	t.Helper()
	p := table.Tolerance{Name: "a \"shop\"", Copies: 10, Readings: []string{"area", "perimeter"}, Effort: 1,
		Flaws: []table.Flaw{{Kind: table.DialFlaw, Dial: "eps", Width: 0.6}, {Kind: table.SizeFlaw, Law: table.Uniform, Width: 0.01}}}
	with, err := part.Holding(trial(t).Base, p)
	if err != nil {
		t.Fatal(err)
	}
	tol, err := tolerance.New(with, p)
	if err != nil {
		t.Fatal(err)
	}
	return tol
}

// made is part k of n of a tolerance run, done from its last task to its first, as
// by a run that knows nothing of the others.
func made(t testing.TB, tol *tolerance.Tolerance, k, n int) []byte {
	t.Helper()
	h, err := part.NewCopiesHead(tol, program, k, n)
	bench := tol.Bench(kit())
	rows := map[int]tolerance.Row{}
	for _, task := range slices.Backward(h.Due()) {
		row, err := bench.Take(task)
		if err != nil {
			t.Fatal(err)
		}
		rows[task] = row
	}
	return file(t, h, err, func(task int) ([]byte, error) { return part.CopyLine(task, rows[task]) })
}

// TestCopiesAlike: 1, 3 and 16 parts, and more parts than tasks, gather to what a
// run without parts brings.
func TestCopiesAlike(t *testing.T) {
	tol := copying(t)
	single, err := tol.Run(kit(), nil)
	if err != nil {
		t.Fatal(err)
	}
	faults := 0
	for _, row := range single.Rows {
		if row.Fault != "" {
			faults++
		}
	}
	if faults == 0 || faults == len(single.Rows) {
		t.Fatalf("%d of %d copies are no tables: the trial is too easy", faults, len(single.Rows))
	}
	bytesOf := func(r *tolerance.Result) []byte {
		b, err := r.JSON()
		if err != nil {
			t.Fatal(err)
		}
		lines, err := part.WrittenCopies(r, program)
		if err != nil {
			t.Fatal(err)
		}
		return slices.Concat(b, r.CSV(program), lines)
	}
	want := bytesOf(single)
	for _, n := range []int{1, 3, 16, 40} {
		var all []part.Named
		for k := n; k >= 1; k-- {
			all = append(all, read(t, "p", made(t, tol, k, n)))
		}
		r, err := part.GatherCopies(all)
		if err != nil {
			t.Fatal(err)
		}
		if !bytes.Equal(bytesOf(r), want) {
			t.Errorf("%d parts gather to another result", n)
		}
	}
	if lines, err := part.WrittenCopies(single, program); err != nil || !bytes.Equal(lines, made(t, tol, 1, 1)) {
		t.Errorf("a part 1 of 1 is not what a single run writes: %v", err)
	}
}

// TestCopiesNotAll: parts of a sweep and of a tolerance run are told apart, and
// rows in another place are found.
func TestCopiesNotAll(t *testing.T) {
	tol := copying(t)
	one, two := read(t, "a", made(t, tol, 1, 2)), made(t, tol, 2, 2)
	lines := bytes.SplitAfter(two, []byte("\n"))
	swapped := bytes.Join([][]byte{lines[0], lines[2], lines[1]}, nil)
	for _, c := range []struct {
		says string
		of   []part.Named
	}{
		{"there is nothing to gather", nil},
		{"of 2 parts 2 is missing", []part.Named{one}},
		{"s is of another study than a: one is of a sweep, the other of a tolerance run", []part.Named{one, read(t, "s", written(t, trial(t), 2, 2))}},
		{"part 2 of 2 is damaged: in x, line 2, it belongs elsewhere", []part.Named{one, read(t, "x", swapped)}},
		{"part 2 of 2 is damaged: in x, line 4, it breaks off", []part.Named{one, read(t, "x", append(bytes.Join(lines[:3], nil), '{'))}},
	} {
		if _, err := part.GatherCopies(c.of); err == nil || !strings.HasPrefix(err.Error(), c.says) {
			t.Errorf("%v, want %q", err, c.says)
		}
	}
}
