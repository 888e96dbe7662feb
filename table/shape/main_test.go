package shape

import (
	"fmt"
	"os"
	"runtime"
	"testing"
	"time"
)

// mostMemory is far above what any shape needs. A curve that is cut up without
// end would otherwise take the whole machine along.
const mostMemory = 1 << 30

func TestMain(m *testing.M) {
	watchMemory()
	os.Exit(m.Run())
}

func watchMemory() {
	var s runtime.MemStats
	runtime.ReadMemStats(&s)
	if s.HeapAlloc > mostMemory {
		fmt.Fprintln(os.Stderr, "FAIL: the test holds more than 1 GiB; some curve is cut up without end")
		os.Exit(1)
	}
	time.AfterFunc(50*time.Millisecond, watchMemory)
}
