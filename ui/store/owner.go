package store

import (
	"bytes"
	"fmt"
	"os"
)

// owner is the process that a recovery copy belongs to. A number alone would
// not do, as systems give it again; Born, where the system tells it, is when
// the process began.
type owner struct {
	PID  int    `json:"pid"`
	Born string `json:"born,omitempty"`
}

func ourselves() owner { return owner{os.Getpid(), born(os.Getpid())} }

// alive reports whether the process still runs. In doubt it does.
func (o owner) alive() bool {
	if !runs(o.PID) || ended(o.PID) {
		return false
	}
	return o.Born == "" || born(o.PID) == o.Born
}

// status is what Linux tells of a process (proc(5), stat) from its third field
// on: what it is at, its parent and so forth; nil on other systems.
func status(pid int) [][]byte {
	stat, err := os.ReadFile(fmt.Sprintf("/proc/%d/stat", pid))
	if err != nil {
		return nil
	}
	// The name in field 2 may hold spaces and brackets; count from its end.
	return bytes.Fields(stat[bytes.LastIndexByte(stat, ')')+1:])
}

// firstField is the number of the first field of status.
const firstField = 3

// ended reports whether the process was killed or has ended and only its
// number is still kept, until whoever started it asks how it went.
func ended(pid int) bool {
	s := status(pid)
	return len(s) > 0 && len(s[0]) == 1 && bytes.ContainsAny(s[0], "ZXx")
}

// born is the start of a process as Linux counts it since it was switched on
// (proc(5), stat, field 22), with the number of that switching on; empty on
// other systems.
func born(pid int) string {
	boot, err := os.ReadFile("/proc/sys/kernel/random/boot_id")
	if err != nil {
		return ""
	}
	const start = 22 - firstField
	s := status(pid)
	if len(s) <= start {
		return ""
	}
	return fmt.Sprintf("%s %s", bytes.TrimSpace(boot), s[start])
}
