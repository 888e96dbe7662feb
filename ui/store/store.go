// Package store keeps table files on a disk: it saves them so that a failure
// leaves the old file as it was, loads them, and keeps a copy of what is not
// saved for the case of a crash. It knows no window, no clock, and no folder
// that it was not given.
//
// Every error of the disk is a *Fault: one sentence that says what failed,
// where, and what to do.
package store

import (
	"bytes"
	"io"
	"os"
	"path/filepath"
	"strings"

	"cavitywright/table"
	"cavitywright/table/tablefile"
)

// Ext is the ending of a table file's name.
const Ext = ".cavity.json"

// EnsureExt is the path with the ending of a table file, which it gets unless
// it has it, in whatever case. Half of the ending is completed.
func EnsureExt(path string) string {
	lower := strings.ToLower(path)
	if strings.HasSuffix(lower, Ext) {
		return path
	}
	for _, half := range []string{".cavity", ".json"} {
		if strings.HasSuffix(lower, half) {
			return path[:len(path)-len(half)] + Ext
		}
	}
	return path + Ext
}

// Save writes the design to the file at path, whole or not at all: where it
// fails, the file that was there is untouched and nothing is left beside it. A
// file that was there keeps its mode; through a link, the file it leads to is
// replaced. The error is a *Fault, or that of tablefile.Write.
func Save(path string, d table.Design) error {
	var b bytes.Buffer
	if err := tablefile.Write(&b, d); err != nil {
		return err
	}
	return replace(computer{}, path, b.Bytes())
}

// Load reads the file at path with read, which is tablefile.Read for a table
// file, and for a picture a function that finds the table inside. The error is
// a *Fault, or that of read.
func Load(path string, read func(io.Reader) (table.Design, error)) (table.Design, error) {
	// Looked at first: to open a pipe would wait for its other end.
	at, err := os.Stat(path)
	if err != nil {
		return table.Design{}, fault(opening, path, err)
	}
	if !at.Mode().IsRegular() {
		return table.Design{}, &Fault{Kind: unusual(at), Path: path, doing: opening}
	}
	f, err := os.Open(path)
	if err != nil {
		return table.Design{}, fault(opening, path, err)
	}
	defer f.Close()
	source := &watched{r: f}
	d, err := read(source)
	if source.err != nil {
		return table.Design{}, fault(opening, path, source.err)
	}
	return d, err
}

// watched remembers how reading failed, to tell the disk's fault from the
// file's.
type watched struct {
	r   io.Reader
	err error
}

func (w *watched) Read(p []byte) (int, error) {
	n, err := w.r.Read(p)
	if err != nil && err != io.EOF {
		w.err = err
	}
	return n, err
}

// target is the file that a path leads to, through links, also where that file
// does not exist yet.
func target(path string) string {
	for range 40 { // as many as systems follow
		to, err := os.Readlink(path)
		if err != nil {
			return path
		}
		if !filepath.IsAbs(to) {
			to = filepath.Join(filepath.Dir(path), to)
		}
		path = to
	}
	return path
}
