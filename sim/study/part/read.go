package part

import (
	"bytes"
	"errors"
	"fmt"

	"cavitywright/sim/study"
	"cavitywright/sim/study/tolerance"
)

// File is a part as it was read: its head, the rows that stand whole and in
// order, and how many bytes these take. What follows them is damaged or was
// being written when the run ended. A part of a sweep has Rows, one of a
// tolerance run Copies.
type File struct {
	Head   Head
	Rows   []study.Row
	Copies []tolerance.Row
	Good   int
	// Damage is what is wrong with the line after the last good one, nil where
	// nothing follows; Line is its number.
	Damage error
	Line   int
}

// ErrNoPart says that a file is no part of a study.
var ErrNoPart = errors.New("this is no part of a study; name a file that cavitybatch study or tolerance wrote")

// ErrBegun says that a file ends within its first line, which was being written
// when the run ended.
var ErrBegun = errors.New("the part breaks off in its first line; run it again")

// Read reads a part. The error is ErrNoPart, ErrBegun or one of a later version;
// a damaged row is none, but said in the File.
func Read(b []byte) (*File, error) {
	end := bytes.IndexByte(b, '\n')
	if end < 0 {
		if bytes.HasPrefix(b, []byte(opening)) || bytes.HasPrefix([]byte(opening), b) {
			return nil, ErrBegun
		}
		return nil, ErrNoPart
	}
	f := &File{Good: end + 1, Line: 2}
	if err := opened(b[:end], "head", &f.Head); err != nil || f.Head.Format != Format {
		return nil, ErrNoPart
	}
	h := f.Head
	switch {
	case h.Version > Version:
		return nil, fmt.Errorf("the part is of version %d, but this program reads versions up to %d; use a newer one", h.Version, Version)
	case h.Part < 1 || h.Part > h.Of || h.Of > Most || h.Tasks < 0:
		return nil, ErrNoPart
	}
	due := h.Due()
	for rest := b[f.Good:]; len(rest) > 0; rest = b[f.Good:] {
		end := bytes.IndexByte(rest, '\n')
		if end < 0 {
			f.Damage = errors.New("it breaks off")
			break
		}
		if f.Damage = f.add(rest[:end], due); f.Damage != nil {
			break
		}
		f.Good += end + 1
		f.Line++
	}
	return f, nil
}

// opening is how every part begins.
const opening = `{"head":{"format":"` + Format + `"`

// add reads a row; the error says what is wrong with its line.
func (f *File) add(line []byte, due []int) error {
	var row study.Row
	var one copyRow
	task := &row.Task
	into := any(&row)
	if f.Head.Tolerance != "" {
		task, into = &one.Task, &one
	}
	if err := opened(line, "row", into); err != nil {
		return err
	}
	if n := f.Done(); n >= len(due) || *task != due[n] {
		return errors.New("it belongs elsewhere")
	}
	if f.Head.Tolerance != "" {
		f.Copies = append(f.Copies, one.Row)
	} else {
		f.Rows = append(f.Rows, row)
	}
	return nil
}

// Done is the number of rows that stand.
func (f *File) Done() int { return max(len(f.Rows), len(f.Copies)) }

// Missing are the tasks that are still to be done.
func (f *File) Missing() []int { return f.Head.Due()[f.Done():] }

// Resume is what a run of the part h goes on from, where its file holds text so
// far: the rows that stand whole, the bytes that they take, and in a few words
// what is damaged and done again, "" for nothing. Of a file that ends within the
// first line nothing stands. The error says why the file is not gone on with.
func Resume(text []byte, h Head) (rows []study.Row, good int, damage string, err error) {
	f, damage, err := Reopened(text, h)
	return f.Rows, f.Good, damage, err
}

// Reopened is Resume for parts of any kind: the file as far as it stands.
func Reopened(text []byte, h Head) (f File, damage string, err error) {
	nothing := File{Head: h}
	head, err := h.Line()
	if err != nil || bytes.HasPrefix(head, text) && len(text) < len(head) {
		return nothing, "", err
	}
	read, err := Read(text)
	if err != nil {
		return nothing, "", err
	}
	if why := read.Head.Differs(h); why != "" {
		return nothing, "", &Other{why}
	}
	if read.Damage != nil {
		damage = fmt.Sprintf("line %d is damaged (%v)", read.Line, read.Damage)
	}
	return *read, damage, nil
}

// Other says that a file holds a part of another run, and in what it differs.
type Other struct{ Why string }

func (e *Other) Error() string {
	return "it holds a part of another run: " + e.Why + "; name another file, or take this one away"
}

// Differs says in what a part is not the one that o heads, "" where it is.
func (h Head) Differs(o Head) string {
	switch {
	case h == o:
		return ""
	case h.Part != o.Part:
		return fmt.Sprintf("part %d, not %d", h.Part, o.Part)
	}
	return difference(h, o)
}

// difference says in what two heads differ.
func difference(a, b Head) string {
	switch {
	case a.Program != b.Program:
		return fmt.Sprintf("made by %s, not %s", a.Program, b.Program)
	case (a.Tolerance == "") != (b.Tolerance == ""):
		return "one is of a sweep, the other of a tolerance run"
	case a.Tolerance != b.Tolerance:
		return fmt.Sprintf("tolerance %q, not %q", a.Tolerance, b.Tolerance)
	case a.Sweep != b.Sweep:
		return fmt.Sprintf("sweep %q, not %q", a.Sweep, b.Sweep)
	case a.Of != b.Of:
		return fmt.Sprintf("one of %d parts, not of %d", a.Of, b.Of)
	}
	if a.Tolerance != "" {
		return "its table, or the tolerance in it, is another one"
	}
	return "its table, or the sweep in it, is another one"
}

// Written is a result as a part 1 of 1, to the byte what a single run writes; of
// one that is not whole the rows up to the first that is missing, from where a
// run goes on.
func Written(r *study.Result, program string) ([]byte, error) {
	h, err := NewHead(r.Study, program, 1, 1)
	if err != nil {
		return nil, err
	}
	b, err := h.Line()
	if err != nil {
		return nil, err
	}
	for _, i := range h.Due() {
		row, done := r.Rows[i]
		if !done {
			break
		}
		line, err := Line(row)
		if err != nil {
			return nil, err
		}
		b = append(b, line...)
	}
	return b, nil
}
