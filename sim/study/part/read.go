package part

import (
	"bytes"
	"errors"
	"fmt"

	"cavitywright/sim/study"
)

// File is a part as it was read: its head, the rows that stand whole and in
// order, and how many bytes these take. What follows them is damaged or was
// being written when the run ended.
type File struct {
	Head Head
	Rows []study.Row
	Good int
	// Damage is what is wrong with the line after the last good one, nil where
	// nothing follows; Line is its number.
	Damage error
	Line   int
}

// ErrNoPart says that a file is no part of a study.
var ErrNoPart = errors.New("this is no part of a study; name a file that cavitybatch study wrote")

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
		var row study.Row
		if f.Damage = opened(rest[:end], "row", &row); f.Damage != nil {
			break
		}
		if n := len(f.Rows); n >= len(due) || row.Task != due[n] {
			f.Damage = errors.New("it belongs elsewhere")
			break
		}
		f.Rows = append(f.Rows, row)
		f.Good += end + 1
		f.Line++
	}
	return f, nil
}

// opening is how every part begins.
const opening = `{"head":{"format":"` + Format + `"`

// Missing are the tasks that are still to be done.
func (f *File) Missing() []int { return f.Head.Due()[len(f.Rows):] }

// Named is a part with the name that sentences give it.
type Named struct {
	Name string
	File *File
}

// Gather joins the parts of one study. The error is a sentence that names parts
// that are missing, damaged, not finished, or of another study.
func Gather(parts []Named) (*study.Result, error) {
	if len(parts) == 0 {
		return nil, errors.New("there is nothing to gather; name the parts")
	}
	first := parts[0].File.Head
	have := map[int]string{}
	for _, p := range parts {
		h := p.File.Head
		if !h.same(first) {
			return nil, fmt.Errorf("%s is of another study than %s: %s; gather parts of one study only", p.Name, parts[0].Name, difference(h, first))
		}
		if other, twice := have[h.Part]; twice {
			return nil, fmt.Errorf("part %d of %d stands twice, in %s and %s; leave one out", h.Part, h.Of, other, p.Name)
		}
		have[h.Part] = p.Name
		if p.File.Damage != nil {
			return nil, fmt.Errorf("part %d of %d is damaged: in %s, line %d, %v; run that part again, and it goes on from there", h.Part, h.Of, p.Name, p.File.Line, p.File.Damage)
		}
		if n := len(p.File.Missing()); n > 0 {
			return nil, fmt.Errorf("part %d of %d is not finished: %s lacks %d of %d rows; run it again, and it goes on from there", h.Part, h.Of, p.Name, n, len(h.Due()))
		}
	}
	if len(have) < first.Of {
		return nil, fmt.Errorf("of %d parts %s missing; run %s, or name the files", first.Of, missing(have, first.Of), them(first.Of-len(have)))
	}
	st, err := first.Study()
	if err != nil {
		return nil, fmt.Errorf("%s holds no study: %w", parts[0].Name, err)
	}
	if st.Tasks() != first.Tasks {
		return nil, fmt.Errorf("%s holds a study of %d tasks, but says %d; run it again with this program", parts[0].Name, st.Tasks(), first.Tasks)
	}
	r := study.NewResult(st)
	for _, p := range parts {
		for _, row := range p.File.Rows {
			r.Add(row)
		}
	}
	return r, nil
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
	case a.Sweep != b.Sweep:
		return fmt.Sprintf("sweep %q, not %q", a.Sweep, b.Sweep)
	case a.Of != b.Of:
		return fmt.Sprintf("one of %d parts, not of %d", a.Of, b.Of)
	}
	return "its table, or the sweep in it, is another one"
}

// mostNamed bounds the numbers in a sentence.
const mostNamed = 20

// missing names the parts that are not there.
func missing(have map[int]string, of int) string {
	text, n := "", 0
	for k := 1; k <= of; k++ {
		if _, ok := have[k]; ok {
			continue
		}
		if n++; n <= mostNamed {
			text += fmt.Sprintf(", %d", k)
		}
	}
	if n > mostNamed {
		text += fmt.Sprintf(" and %d more", n-mostNamed)
	}
	if n == 1 {
		return text[2:] + " is"
	}
	return text[2:] + " are"
}

func them(n int) string {
	if n == 1 {
		return "it"
	}
	return "them"
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
