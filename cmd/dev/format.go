package main

import (
	"bytes"
	"errors"
	"fmt"
	"go/format"
	"io/fs"
	"os"
	"path/filepath"
	"strings"
)

// checkFormat returns an error that names each Go file under root which gofmt would change. Folders that Go itself
// passes over (testdata, and names that begin with a dot or an underscore) are passed over.
func checkFormat(root string) error {
	var untidy []string
	err := filepath.WalkDir(root, func(path string, entry fs.DirEntry, err error) error {
		switch {
		case err != nil:
			return err
		case entry.IsDir() && path != root && passedOver(entry.Name()):
			return filepath.SkipDir
		case entry.IsDir() || filepath.Ext(path) != ".go":
			return nil
		}
		tidy, err := isFormatted(path)
		if err != nil {
			return err
		}
		if !tidy {
			untidy = append(untidy, relative(root, path))
		}
		return nil
	})
	if err == nil && len(untidy) > 0 {
		err = errors.New("not in gofmt's form: " + strings.Join(untidy, ", ") + "; run gofmt -w on them")
	}
	return err
}

func passedOver(folder string) bool {
	return folder == "testdata" || folder == "vendor" || strings.HasPrefix(folder, ".") || strings.HasPrefix(folder, "_")
}

func isFormatted(path string) (bool, error) {
	source, err := os.ReadFile(path)
	if err != nil {
		return false, err
	}
	formatted, err := format.Source(source)
	if err != nil {
		return false, fmt.Errorf("%s: %w", path, err)
	}
	return bytes.Equal(source, formatted), nil
}

func relative(root, path string) string {
	if rel, err := filepath.Rel(root, path); err == nil {
		return filepath.ToSlash(rel)
	}
	return path
}
