//go:build unix

package sim

import (
	"syscall"
	"time"
)

// spent is the processor time of this process so far: unlike that of the clock
// it does not count what other programs took.
func spent() time.Duration {
	var r syscall.Rusage
	if err := syscall.Getrusage(syscall.RUSAGE_SELF, &r); err != nil {
		panic(err)
	}
	return time.Duration(r.Utime.Nano() + r.Stime.Nano())
}
