package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"os"
	"strconv"
	"strings"

	"cavitywright/sim/study"
	"cavitywright/sim/study/part"
)

// begun is a part that is being written.
type begun struct {
	name string
	file *os.File
}

// add writes a row whole and to the disk, so that what was done is never done
// twice. It takes what the line of the row came to.
func (b *begun) add(line []byte, err error) error {
	if err != nil {
		return err
	}
	if _, err = b.file.Write(line); err == nil {
		err = b.file.Sync()
	}
	return told(b.name, err)
}

// close closes the file.
func (b *begun) close(err error) error {
	if e := b.file.Close(); err == nil {
		err = told(b.name, e)
	}
	return err
}

// runPart does what is missing of part k of n, in the file named with -o.
func (c *studyRun) runPart(ctx context.Context, std streams, st *study.Study, k, n int) error {
	h, err := part.NewHead(st, program, k, n)
	if err != nil {
		return err
	}
	return goOn(std, c.Out, h, c.JSON, func(_ part.File, due []int, add func([]byte, error) error) error {
		return c.tasks(ctx, std, st, due, func(row study.Row) error { return add(part.Line(row)) })
	})
}

// goOn does what is missing of a part in a file: do is given what stands in it
// and the tasks that are due, and adds the line of each.
func goOn(std streams, to string, h part.Head, asJSON bool, do func(stands part.File, due []int, add func(line []byte, err error) error) error) error {
	b, stands, remark, err := begin(to, h)
	if err != nil {
		return err
	}
	if remark != "" {
		complain(std, remark)
	}
	due, done := h.Due(), stands.Done()
	at := done
	err = b.close(do(stands, due[done:], func(line []byte, err error) error {
		at++
		return b.add(line, err)
	}))
	if errors.Is(err, context.Canceled) {
		return fmt.Errorf("stopped; %d of %d rows stand in %s, and the same command goes on from there", at, len(due), quoted(to))
	}
	if err != nil {
		return err
	}
	if asJSON {
		return writeJSON(std.out, partRow{to, h.Sweep, h.Tolerance, h.Part, h.Of, len(due), done, h.Tasks})
	}
	_, err = fmt.Fprintf(std.out, "part %d of %d of %s: %d rows, %d of them done before\n", h.Part, h.Of, h.Sweep+h.Tolerance, len(due), done)
	return err
}

// partRow is how far a part is, in the form of its JSON.
type partRow struct {
	File      string `json:"file"`
	Sweep     string `json:"sweep,omitzero"`
	Tolerance string `json:"tolerance,omitzero"`
	Part      int    `json:"part"`
	Of        int    `json:"of"`
	Rows      int    `json:"rows"`
	Resumed   int    `json:"resumed"` // rows that stood in the file before
	Tasks     int    `json:"tasks"`   // of all parts
}

// partAsked is K/N, 1/1 where nothing is asked for; a part needs a file of its
// own kind.
func partAsked(text, to string) (k, n int, err error) {
	if text == "" {
		return 1, 1, nil
	}
	a, b, ok := strings.Cut(text, "/")
	k, err1 := strconv.Atoi(a)
	n, err2 := strconv.Atoi(b)
	switch {
	case !ok || err1 != nil || err2 != nil || k < 1 || k > n || n > part.Most:
		return 0, 0, misuse("the part %q is not understood; write K/N with K from 1 to N, for example 2/16", text)
	case !strings.HasSuffix(to, partEnding):
		return 0, 0, misuse("a part is written to a file that ends in %s; name one with -o", partEnding)
	}
	return k, n, nil
}

// begin opens a part at the end of its whole rows, or begins it; remark says what
// was damaged and is done again.
func begin(name string, h part.Head) (b *begun, stands part.File, remark string, err error) {
	file, err := os.OpenFile(name, os.O_RDWR|os.O_CREATE, 0o666)
	if err != nil {
		return nil, stands, "", told(name, err)
	}
	defer func() {
		if err != nil {
			_ = file.Close() // what failed first is what counts
		}
	}()
	text, err := io.ReadAll(file)
	if err != nil {
		return nil, stands, "", told(name, err)
	}
	stands, damage, err := part.Reopened(text, h)
	if err != nil {
		return nil, stands, "", fmt.Errorf("%s is not gone on with: %w", quoted(name), err)
	}
	if damage != "" {
		remark = fmt.Sprintf("in %s, %s; it is done again, with what follows it", quoted(name), damage)
	}
	b = &begun{name, file}
	if err := file.Truncate(int64(stands.Good)); err != nil {
		return nil, stands, "", told(name, err)
	}
	if _, err := file.Seek(int64(stands.Good), io.SeekStart); err != nil {
		return nil, stands, "", told(name, err)
	}
	if stands.Good == 0 {
		head, err := h.Line()
		if err != nil {
			return nil, stands, "", err
		}
		if _, err := file.Write(head); err != nil {
			return nil, stands, "", told(name, err)
		}
	}
	return b, stands, remark, nil
}
