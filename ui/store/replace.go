package store

import (
	"errors"
	"io"
	"io/fs"
	"os"
	"path/filepath"
)

// disk is what saving needs of a file system; tests put a failing one in its
// place.
type disk interface {
	Stat(path string) (fs.FileInfo, error)
	CreateTemp(folder, pattern string) (file, error)
	Rename(from, to string) error
	Remove(path string) error
	SyncFolder(path string) error
}

// file is an open file to write to.
type file interface {
	io.Writer
	Name() string
	Chmod(mode fs.FileMode) error
	Sync() error
	Close() error
}

// computer is the disk of this computer.
type computer struct{}

func (computer) Stat(path string) (fs.FileInfo, error)        { return os.Stat(path) }
func (computer) CreateTemp(dir, pattern string) (file, error) { return os.CreateTemp(dir, pattern) }
func (computer) Rename(from, to string) error                 { return os.Rename(from, to) }
func (computer) Remove(path string) error                     { return os.Remove(path) }
func (computer) SyncFolder(path string) error                 { return syncFolder(path) }

const (
	newMode   = 0o644 // of a file that was not there
	writable  = 0o200 // the bit without which a file counts as locked
	temporary = ".cavitywright-*.tmp"
)

// replace puts a file with the content at path: it writes a new one beside it,
// sees it onto the disk, and gives it the name.
func replace(d disk, path string, content []byte) error {
	path = target(path)
	mode, err := modeFor(d, path)
	if err != nil {
		return err
	}
	folder := filepath.Dir(path)
	f, err := d.CreateTemp(folder, temporary)
	if err != nil {
		return folderFault(d, path, err)
	}
	err = fill(f, content, mode)
	if shut := f.Close(); err == nil {
		err = shut
	}
	if err == nil {
		err = d.Rename(f.Name(), path)
	}
	if err != nil {
		_ = d.Remove(f.Name()) // what failed is said already
		return fault(saving, path, err)
	}
	// The file is in place, whole. That the folder's entry may not be on the
	// disk yet matters only if the power fails within seconds; some file
	// systems cannot do it at all.
	_ = d.SyncFolder(folder)
	return nil
}

func fill(f file, content []byte, mode fs.FileMode) error {
	if _, err := f.Write(content); err != nil {
		return err
	}
	if err := f.Chmod(mode); err != nil {
		return err
	}
	return f.Sync()
}

// modeFor is the mode of the file that path will have. A file that is there
// must be one that may be written to: to replace it needs only the folder's
// permission, and would pass over a lock that a person put on it.
func modeFor(d disk, path string) (fs.FileMode, error) {
	at, err := d.Stat(path)
	switch {
	case errors.Is(err, fs.ErrNotExist):
		return newMode, nil
	case err != nil:
		return 0, fault(saving, path, err)
	case !at.Mode().IsRegular():
		return 0, &Fault{Kind: unusual(at), Path: path, doing: saving}
	case at.Mode()&writable == 0:
		return 0, &Fault{Kind: Locked, Path: path, doing: saving}
	}
	return at.Mode().Perm(), nil
}

// unusual is the fault of what is no ordinary file.
func unusual(at fs.FileInfo) Kind {
	if at.IsDir() {
		return Folder
	}
	return Device
}

// folderFault is why no file can be made in the folder of path.
func folderFault(d disk, path string, err error) error {
	at, gone := d.Stat(filepath.Dir(path))
	switch {
	case errors.Is(gone, fs.ErrNotExist) || gone == nil && !at.IsDir():
		return &Fault{Kind: NoFolder, Path: path, doing: saving, cause: err}
	case errors.Is(err, fs.ErrPermission):
		return &Fault{Kind: ReadOnly, Path: path, doing: saving, cause: err}
	}
	return fault(saving, path, err)
}
