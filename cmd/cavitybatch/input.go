package main

import (
	"errors"
	"fmt"
	"io/fs"
	"os"

	"cavitywright/table"
	"cavitywright/ui/store"
)

// readTable reads and compiles the table in a file, a figure, or standard
// input where the name is "-". Errors name the file.
func readTable(name string, std streams) (*table.Table, error) {
	d, err := readDesign(name, std)
	var t *table.Table
	if err == nil {
		t, err = table.New(d)
	}
	switch {
	case err == nil:
		return t, nil
	case name == "-":
		return nil, fmt.Errorf("standard input: %w", err)
	}
	return nil, fmt.Errorf("%s: %w", quoted(name), err)
}

// quoted is a file's name as a sentence shows it, so that its first letter
// stays as it is.
func quoted(name string) string { return `"` + name + `"` }

func readDesign(name string, std streams) (table.Design, error) {
	if name == "-" {
		return store.Decode(std.in)
	}
	info, err := os.Stat(name)
	switch {
	case err != nil:
		return table.Design{}, unreadable(err)
	case info.IsDir():
		return table.Design{}, errors.New("this is a folder; name a table file in it")
	}
	f, err := os.Open(name)
	if err != nil {
		return table.Design{}, unreadable(err)
	}
	defer f.Close()
	return store.Decode(f)
}

func unreadable(err error) error {
	switch {
	case errors.Is(err, fs.ErrNotExist):
		return errors.New("there is no such file; check the folder and the name")
	case errors.Is(err, fs.ErrPermission):
		return errors.New("the file may not be read; ask for leave to read it, or copy it")
	}
	return fmt.Errorf("the file cannot be opened (%w)", bare(err))
}

// bare is the reason of a failure without the path, which the sentence names.
func bare(err error) error {
	if e := (*fs.PathError)(nil); errors.As(err, &e) {
		return e.Err
	}
	if e := (*os.LinkError)(nil); errors.As(err, &e) {
		return e.Err
	}
	return err
}
