package main

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"io"
	"os"

	"cavitywright/sim/study"
	"cavitywright/sim/study/part"
)

// begun is a part that is being written.
type begun struct {
	name string
	file *os.File
}

// add writes a row whole and to the disk, so that what was done is never done
// twice.
func (b *begun) add(row study.Row) error {
	line, err := part.Line(row)
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
func (c *studyRun) runPart(ctx context.Context, std streams, st *study.Study, k, n int) (err error) {
	h, err := part.NewHead(st, program, k, n)
	if err != nil {
		return err
	}
	b, done, remark, err := begin(c.Out, h)
	if err != nil {
		return err
	}
	if remark != "" {
		complain(std, remark)
	}
	due := h.Due()
	at := done
	err = b.close(c.tasks(ctx, std, st, due[done:], func(row study.Row) error {
		at++
		return b.add(row)
	}))
	if errors.Is(err, context.Canceled) {
		return fmt.Errorf("stopped; %d of %d rows stand in %s, and the same command goes on from there", at, len(due), quoted(c.Out))
	}
	if err != nil {
		return err
	}
	if c.JSON {
		return writeJSON(std.out, partRow{c.Out, st.Sweep.Name, k, n, len(due), done, st.Tasks()})
	}
	_, err = fmt.Fprintf(std.out, "part %d of %d of %s: %d rows, %d of them done before\n", k, n, st.Sweep.Name, len(due), done)
	return err
}

// partRow is how far a part is, in the form of its JSON.
type partRow struct {
	File    string `json:"file"`
	Sweep   string `json:"sweep"`
	Part    int    `json:"part"`
	Of      int    `json:"of"`
	Rows    int    `json:"rows"`
	Resumed int    `json:"resumed"` // rows that stood in the file before
	Tasks   int    `json:"tasks"`   // of all parts
}

// begin opens a part at the end of its whole rows, or begins it. done is the
// number of these; remark says what was damaged and is done again.
func begin(name string, h part.Head) (b *begun, done int, remark string, err error) {
	file, err := os.OpenFile(name, os.O_RDWR|os.O_CREATE, 0o666)
	if err != nil {
		return nil, 0, "", told(name, err)
	}
	defer func() {
		if err != nil {
			_ = file.Close() // what failed first is what counts
		}
	}()
	text, err := io.ReadAll(file)
	if err != nil {
		return nil, 0, "", told(name, err)
	}
	head, err := h.Line()
	if err != nil {
		return nil, 0, "", err
	}
	good := 0
	if !bytes.HasPrefix(head, text) { // else the head itself is still to be written
		old, err := part.Read(text)
		if err != nil {
			return nil, 0, "", fmt.Errorf("%s is not gone on with: %w", quoted(name), err)
		}
		if why := old.Head.Differs(h); why != "" {
			return nil, 0, "", fmt.Errorf("%s holds a part of another run: %s; name another file, or take this one away", quoted(name), why)
		}
		good, done = old.Good, len(old.Rows)
		if old.Damage != nil {
			remark = fmt.Sprintf("line %d of %s is damaged (%v); it is done again, with what follows it", old.Line, quoted(name), old.Damage)
		}
	}
	b = &begun{name, file}
	if err := file.Truncate(int64(good)); err != nil {
		return nil, 0, "", told(name, err)
	}
	if _, err := file.Seek(int64(good), io.SeekStart); err != nil {
		return nil, 0, "", told(name, err)
	}
	if good == 0 {
		if _, err := file.Write(head); err != nil {
			return nil, 0, "", told(name, err)
		}
	}
	return b, done, remark, nil
}
