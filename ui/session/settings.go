package session

import (
	"math"

	"cavitywright/table"
	"cavitywright/table/wall"

	"gonum.org/v1/gonum/spatial/r2"
)

// Settings are how a person works; they outlast the document.
type Settings struct {
	Tool    ToolName
	Bundle  Bundle
	Snap    Snapping
	Pace    float64 // table sizes that a ball flies in a second
	Motion  Motion
	Drawn   int      // bounces drawn of each ray
	SeedAll int      // orbits of an even seeding
	Law     wall.Law // that the coat tool lays; nil is an opening
	Layer   Layer    // the map that lies under the portrait
}

// Layer is a map of the section that lies under the portrait's dots.
type Layer uint8

// The layers.
const (
	NoLayer    Layer = iota
	Stretching       // finite-time stretching by the tangent map
	Averages         // digits in which weighted Birkhoff averages agree
	Lifetimes        // path until half has gone
	Survivors        // what has not left after some bounces
	Pasts            // and where that came from
)

// ToolName is the tool that the editor's pointer holds.
type ToolName uint8

// The tools of the editor.
const (
	Hand    ToolName = iota // take hold of what is there
	Chain                   // set nodes by clicking
	Stroke                  // draw freehand
	Coats                   // lay coats along the wall
	Measure                 // read off distances, angles and radii
)

// Bundle is what one pull in the rays launches.
type Bundle struct {
	Pattern   table.Pattern
	Count     int
	SpreadDeg float64 // of a fan
	Width     float64 // of a beam, as a fraction of the table's size
}

// Snapping says whether drags go to the grid.
type Snapping uint8

// Whether drags snap.
const (
	SnapOn Snapping = iota
	SnapOff
)

// Motion says whether the balls move.
type Motion uint8

// The balls run or stand.
const (
	Running Motion = iota
	Paused
)

// DefaultSettings are those of a first start.
func DefaultSettings() Settings {
	return Settings{
		Bundle: Bundle{Count: 9, SpreadDeg: 12, Width: 0.2},
		Pace:   0.6, Drawn: 24, SeedAll: 60,
	}
}

// GridStep is the distance of the grid's lines in table units where a unit is
// scalePx pixels: 1, 2 or 5 times a power of ten, at least minPx pixels apart.
func GridStep(scalePx, minPx float64) float64 {
	if !(scalePx > 0) {
		return 1
	}
	least := minPx / scalePx
	ten := math.Pow(10, math.Floor(math.Log10(least)))
	for _, m := range []float64{1, 2, 5} {
		if m*ten >= least*(1-1e-12) {
			return m * ten
		}
	}
	return 10 * ten
}

// Snapped is the grid point nearest to p.
func Snapped(p r2.Vec, step float64) r2.Vec {
	return r2.Vec{X: math.Round(p.X/step) * step, Y: math.Round(p.Y/step) * step}
}
