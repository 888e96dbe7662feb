package shape

import "fmt"

// Fault is why a shape cannot be built. Reason says what, where and what to
// do, as the part of a sentence after a colon. Node is the index of the node at
// fault in a free wall, else -1.
type Fault struct {
	Node   int
	Reason string
}

func (f *Fault) Error() string { return f.Reason }

func misfit(format string, args ...any) *Fault {
	return &Fault{Node: -1, Reason: fmt.Sprintf(format, args...)}
}

func nodeFault(node int, format string, args ...any) *Fault {
	return &Fault{Node: node, Reason: fmt.Sprintf(format, args...)}
}

// slack is the least difference of two lengths that must differ, relative to
// the greater: below it a ledge or a gap would be a sliver of its table, which
// takes none shorter than 1e-7 of its size.
const slack = 1e-6

// below reports whether x is smaller than limit by a width that can be built.
func below(x, limit float64) bool { return x <= limit*(1-slack) }
