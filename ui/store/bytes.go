package store

import "path/filepath"

// WriteFile puts content at path, whole or not at all, as Save does. The error
// is a *Fault.
func WriteFile(path string, content []byte) error { return replace(computer{}, path, content) }

// CanWrite reports, as a *Fault, why a file could not be put at path: it makes
// and removes a temporary file beside it. It spares a person long work whose
// result has no place to go.
func CanWrite(path string) error {
	d := computer{}
	path = target(path)
	if _, err := modeFor(d, path); err != nil {
		return err
	}
	f, err := d.CreateTemp(filepath.Dir(path), temporary)
	if err != nil {
		return folderFault(d, path, err)
	}
	name := f.Name()
	_ = f.Close()
	return d.Remove(name)
}
