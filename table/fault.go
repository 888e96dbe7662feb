package table

import (
	"fmt"
	"strings"

	"cavitywright/table/shape"

	"gonum.org/v1/gonum/spatial/r2"
)

// Fault is why a design is no table, in one sentence, with the place. Error
// says what, where and what to do.
type Fault struct {
	Kind  FaultKind
	Item  int    // the item at fault, -1 where it is the whole design
	Other int    // the second item, -1 where there is none
	At    r2.Vec // the place, in the design's unit; meaningless where Placed is false
	Known Whereabouts
	text  string
	cause error
}

// Whereabouts says whether a fault has a place.
type Whereabouts uint8

// Nowhere faults have no place in the plane; Somewhere faults are at At.
const (
	Nowhere Whereabouts = iota
	Somewhere
)

// FaultKind tells the faults apart.
type FaultKind uint8

// The kinds of fault.
const (
	Empty     FaultKind = iota // nothing is drawn
	BadShape                   // a shape cannot be built
	BadNumber                  // a number that is none, or out of range
	TwoWalls                   // more than one outer wall
	Gap                        // a loop does not close
	Sliver                     // a side or a corner too thin to trace
	SelfCross                  // a loop crosses itself
	Overlap                    // two loops cross or touch
	Outside                    // an obstacle outside the wall
	Nested                     // an obstacle within an obstacle
	Backwards                  // a loop with its inside on the wrong side
	BadCoat                    // a coat that lies nowhere
	BadLaunch                  // a launch that starts nowhere
)

func (f *Fault) Error() string { return f.text }

// Unwrap is the error of the shape or parameter behind the fault.
func (f *Fault) Unwrap() error { return f.cause }

// itemName is an item as a sentence names it: "the stadium", or with its
// number where that kind stands more than once.
func (d Design) itemName(i int) string {
	kind := d.Items[i].Shape.Kind()
	if k := shape.Find(kind); k != nil {
		kind = strings.ToLower(k.Title)
	} else {
		kind = "free wall"
	}
	for j, it := range d.Items {
		if j != i && it.Shape.Kind() == d.Items[i].Shape.Kind() {
			return fmt.Sprintf("%s (item %d)", kind, i+1)
		}
	}
	return kind
}

// wallName is an item's wall as a sentence names it.
func (d Design) wallName(i int) string {
	if shape.Find(d.Items[i].Shape.Kind()) == nil {
		return d.itemName(i)
	}
	return "wall of the " + d.itemName(i)
}

// place is a point as a sentence names it.
func (d Design) place(p r2.Vec) string {
	return fmt.Sprintf("(%.6g, %.6g) %s", p.X, p.Y, d.Unit)
}

func (d Design) fault(kind FaultKind, item int, format string, args ...any) *Fault {
	return &Fault{Kind: kind, Item: item, Other: -1, text: fmt.Sprintf(format, args...)}
}

func (d Design) faultAt(kind FaultKind, item int, at r2.Vec, format string, args ...any) *Fault {
	f := d.fault(kind, item, format, args...)
	f.At, f.Known = at, Somewhere
	return f
}
