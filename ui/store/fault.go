package store

import (
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"syscall"
)

// Fault is why a file could not be saved or opened. Error is one sentence:
// what, where, what to do.
type Fault struct {
	Kind  Kind
	Path  string
	doing doing
	cause error
}

// Kind tells the faults of a disk apart.
type Kind uint8

// The kinds of fault.
const (
	Broken   Kind = iota // none of the others
	Missing              // there is no such file
	NoFolder             // there is no such folder
	Folder               // it is a folder
	Device               // it is neither a file nor a folder
	Locked               // the file is marked as not to be changed
	Denied               // the file may not be read or written by this person
	ReadOnly             // the folder, or all of the disk, takes no new file
	Full                 // no room is left
	LongName             // the name is too long, or has a character that names cannot have
)

type doing uint8

const (
	saving doing = iota
	opening
)

func (f *Fault) Error() string {
	head := fmt.Sprintf("%q could not be %s", filepath.Base(f.Path), [...]string{saving: "saved", opening: "opened"}[f.doing])
	folder := filepath.Dir(f.Path)
	switch f.Kind {
	case Missing:
		return fmt.Sprintf("%s: there is no such file in %q; it may have been moved, so choose it anew.", head, folder)
	case NoFolder:
		return fmt.Sprintf("%s: there is no folder %q; choose another one.", head, folder)
	case Folder:
		return head + ": it is a folder; choose a file."
	case Device:
		return head + ": it is not an ordinary file; choose another one."
	case Locked:
		return head + ": the file is marked read-only; save under another name, or take the mark off."
	case Denied:
		return fmt.Sprintf("%s: you have no permission for it in %q; choose another place.", head, folder)
	case ReadOnly:
		return fmt.Sprintf("%s: the folder %q is read-only; choose another one.", head, folder)
	case Full:
		return fmt.Sprintf("%s: the disk with %q is full; free some room, or choose another disk.", head, folder)
	case LongName:
		return fmt.Sprintf("%s: the disk with %q cannot take this name; choose a shorter or plainer one.", head, folder)
	}
	return fmt.Sprintf("%s in %q: the disk reports %q; try again, or choose another place.", head, folder, reason(f.cause))
}

// Unwrap is what the system reported, nil where it was not asked.
func (f *Fault) Unwrap() error { return f.cause }

// reason is what the system says, without the names of its functions.
func reason(err error) string {
	if p := (*fs.PathError)(nil); errors.As(err, &p) {
		return p.Err.Error()
	}
	if l := (*os.LinkError)(nil); errors.As(err, &l) {
		return l.Err.Error()
	}
	return err.Error()
}

// fault is the *Fault behind a system's error.
func fault(what doing, path string, err error) error {
	f := &Fault{Path: path, doing: what, cause: err}
	switch {
	case isFull(err):
		f.Kind = Full
	case errors.Is(err, syscall.EROFS):
		f.Kind = ReadOnly
	case errors.Is(err, fs.ErrPermission):
		f.Kind = Denied
	case errors.Is(err, fs.ErrNotExist) && what == saving, errors.Is(err, syscall.ENOTDIR):
		f.Kind = NoFolder
	case errors.Is(err, fs.ErrNotExist):
		f.Kind = Missing
	case errors.Is(err, syscall.EISDIR):
		f.Kind = Folder
	case errors.Is(err, syscall.ENAMETOOLONG), errors.Is(err, fs.ErrInvalid), errors.Is(err, syscall.EINVAL):
		f.Kind = LongName
	}
	return f
}
