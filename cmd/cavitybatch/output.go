package main

import (
	"errors"
	"fmt"
	"io/fs"
	"math/rand/v2"
	"os"
	"path/filepath"
)

// writeFile writes a file whole or not at all: a failure leaves what stood
// there before. What is no regular file, a device or a pipe, is written to
// directly.
func writeFile(name string, data []byte) error {
	mode := fs.FileMode(0o666)
	if real, err := filepath.EvalSymlinks(name); err == nil {
		name = real
	}
	if info, err := os.Stat(name); err == nil {
		if info.IsDir() {
			return fmt.Errorf("%s: this is a folder; name a file in it", quoted(name))
		}
		if !info.Mode().IsRegular() {
			return told(name, os.WriteFile(name, data, 0))
		}
		mode = info.Mode().Perm()
	}
	return told(name, replace(name, data, mode))
}

// replace writes a file of its own beside name and moves it there.
func replace(name string, data []byte, mode fs.FileMode) (err error) {
	part := filepath.Join(filepath.Dir(name), fmt.Sprintf(".%s.%08x.tmp", filepath.Base(name), rand.Uint32()))
	f, err := os.OpenFile(part, os.O_WRONLY|os.O_CREATE|os.O_EXCL, mode)
	if err != nil {
		return err
	}
	defer func() {
		if err != nil {
			_ = os.Remove(part) // what failed first is what counts
		}
	}()
	_, err = f.Write(data)
	if err == nil {
		err = f.Sync()
	}
	if e := f.Close(); err == nil {
		err = e
	}
	if err != nil {
		return err
	}
	return os.Rename(part, name)
}

// told names the file that could not be written, and why, in a sentence.
func told(name string, err error) error {
	switch {
	case err == nil:
		return nil
	case errors.Is(err, fs.ErrNotExist):
		return fmt.Errorf("%s cannot be written: there is no folder %s; make it, or choose another", quoted(name), filepath.Dir(name))
	case errors.Is(err, fs.ErrPermission):
		return fmt.Errorf("%s cannot be written: files may not be made in %s; choose another folder", quoted(name), filepath.Dir(name))
	}
	return fmt.Errorf("%s cannot be written (%w); choose another place", quoted(name), bare(err))
}
