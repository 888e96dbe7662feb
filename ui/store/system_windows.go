package store

import (
	"errors"
	"os"
	"syscall"
)

// syncFolder does nothing: a folder cannot be synced here.
func syncFolder(string) error { return nil }

// What Windows reports of a full disk (winerror.h).
const (
	errorHandleDiskFull = syscall.Errno(39)
	errorDiskFull       = syscall.Errno(112)
)

func isFull(err error) bool {
	return errors.Is(err, errorDiskFull) || errors.Is(err, errorHandleDiskFull)
}

// runs reports whether there is a process of that number: to find one opens it
// here.
func runs(pid int) bool {
	if pid <= 0 {
		return false
	}
	p, err := os.FindProcess(pid)
	if err != nil {
		return false
	}
	_ = p.Release() // nothing was done with it
	return true
}
