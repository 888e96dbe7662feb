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
	return runs(o.PID) && (o.Born == "" || born(o.PID) == o.Born)
}

// born is the start of a process as Linux counts it since it was switched on
// (proc(5), stat, field 22), with the number of that switching on; empty on
// other systems.
func born(pid int) string {
	stat, err := os.ReadFile(fmt.Sprintf("/proc/%d/stat", pid))
	if err != nil {
		return ""
	}
	boot, err := os.ReadFile("/proc/sys/kernel/random/boot_id")
	if err != nil {
		return ""
	}
	// The name in field 2 may hold spaces and brackets; count from its end.
	fields := bytes.Fields(stat[bytes.LastIndexByte(stat, ')')+1:])
	const start = 22 - 3 // the first field after the name is the third
	if len(fields) <= start {
		return ""
	}
	return fmt.Sprintf("%s %s", bytes.TrimSpace(boot), fields[start])
}
