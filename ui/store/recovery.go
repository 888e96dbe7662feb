package store

import (
	"bufio"
	"bytes"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"time"

	"cavitywright/table"
	"cavitywright/table/tablefile"

	"github.com/go-json-experiment/json"
)

const (
	copyPattern = "unsaved-*.recovery"
	copyPrefix  = "unsaved-"
	copySuffix  = ".recovery"
	longestHead = 64 << 10 // bytes of the first line of a copy
)

// Recovery keeps the last unsaved state of one document in a folder that all
// documents share. It is for one goroutine at a time.
type Recovery struct {
	folder string
	copy   string // the file, empty while there is none
}

// NewRecovery keeps its copy in the folder, which is made when it is needed.
func NewRecovery(folder string) *Recovery { return &Recovery{folder: folder} }

// copyHead is the first line of a copy; the table file follows.
type copyHead struct {
	Owner owner     `json:"owner"`
	Path  string    `json:"path"`
	At    time.Time `json:"at"`
}

// Keep writes the design as the last unsaved state, in place of the one
// before: whole or not at all. path is where the document was last saved, empty
// for a new one; at is the time. The error is a *Fault, or that of
// tablefile.Write.
func (r *Recovery) Keep(d table.Design, path string, at time.Time) error {
	head, err := json.Marshal(copyHead{ourselves(), path, at})
	if err != nil {
		return fmt.Errorf("the unsaved state could not be kept: %w", err)
	}
	b := bytes.NewBuffer(append(head, '\n'))
	if err := tablefile.Write(b, d); err != nil {
		return err
	}
	first := r.copy == ""
	if err := r.ensure(); err != nil {
		return err
	}
	err = replace(computer{}, r.copy, b.Bytes())
	if err != nil && first {
		_ = r.Clear() // an empty file; what failed is said already
	}
	return err
}

// unsaved is what a sentence calls the copy, of which a person does not know
// the file.
const unsaved = "the unsaved state"

// ensure makes the folder, and a file in it of a name that no other document
// has.
func (r *Recovery) ensure() error {
	if err := os.MkdirAll(r.folder, 0o700); err != nil {
		return fault(saving, filepath.Join(r.folder, unsaved), err)
	}
	if r.copy != "" {
		return nil
	}
	f, err := os.CreateTemp(r.folder, copyPattern)
	if err != nil {
		return folderFault(computer{}, filepath.Join(r.folder, unsaved), err)
	}
	r.copy = f.Name()
	return f.Close()
}

// Clear removes the copy, once the document was saved or closed.
func (r *Recovery) Clear() error {
	if r.copy == "" {
		return nil
	}
	path := r.copy
	r.copy = ""
	return removed(path)
}

func removed(path string) error {
	if err := os.Remove(path); err != nil && !errors.Is(err, fs.ErrNotExist) {
		return fault(saving, path, err)
	}
	return nil
}

// Recovered is what a session that ended without closing left.
type Recovered struct {
	Design table.Design
	Path   string // where the document was last saved, empty for a new one
	At     time.Time
	file   string
}

// Remove takes the copy off the disk, once a person has it back or does not
// want it.
func (r Recovered) Remove() error { return removed(r.file) }

// Found are the copies in the folder of which no process runs any more, the
// latest first. A copy that is damaged is passed over and stays where it is. A
// folder that is not there, or cannot be read, has none.
func Found(folder string) []Recovered {
	entries, _ := os.ReadDir(folder)
	var all []Recovered
	for _, e := range entries {
		if !strings.HasPrefix(e.Name(), copyPrefix) || !strings.HasSuffix(e.Name(), copySuffix) || !e.Type().IsRegular() {
			continue
		}
		if r, ok := readCopy(filepath.Join(folder, e.Name())); ok {
			all = append(all, r)
		}
	}
	slices.SortStableFunc(all, func(a, b Recovered) int { return b.At.Compare(a.At) })
	return all
}

// readCopy is the copy in the file; ok is false where it is damaged, or its
// owner still runs.
func readCopy(path string) (found Recovered, ok bool) {
	f, err := os.Open(path)
	if err != nil {
		return Recovered{}, false
	}
	defer f.Close()
	b := bufio.NewReaderSize(f, longestHead)
	line, err := b.ReadSlice('\n')
	if err != nil {
		return Recovered{}, false
	}
	var head copyHead
	if json.Unmarshal(line, &head, json.RejectUnknownMembers(true)) != nil || head.Owner.PID <= 0 || head.Owner.alive() {
		return Recovered{}, false
	}
	d, err := tablefile.Read(io.Reader(b))
	if err != nil {
		return Recovered{}, false
	}
	return Recovered{Design: d, Path: head.Path, At: head.At, file: path}, true
}
