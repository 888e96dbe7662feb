package outline

import (
	"math"
	"slices"

	"cavitywright/table/plane"

	"gonum.org/v1/gonum/spatial/r2"
)

// Scatter is about how far the points of a closed polygon scatter across a
// smooth wall (standard deviation): from how each misses the cubic through its
// two neighbours on either side, by the median, so that corners do not count.
// Points at uneven distances read as scatter.
func Scatter(points []r2.Vec) float64 {
	n := len(points)
	if n < leastFitPoints {
		return 0
	}
	miss := make([]float64, n)
	at := func(i int) r2.Vec { return points[(i+n)%n] }
	for i, p := range points {
		near, far := r2.Add(at(i-1), at(i+1)), r2.Add(at(i-2), at(i+2))
		expected := r2.Scale(1.0/6, r2.Sub(r2.Scale(4, near), far))
		along := r2.Sub(at(i+1), at(i-1))
		if l := r2.Norm(along); l > 0 {
			miss[i] = math.Abs(plane.Cross(along, r2.Sub(p, expected))) / l
		}
	}
	slices.Sort(miss)
	// The median of a normal distribution's size is 0.6745 of its deviation;
	// the weights 1, 4/6 twice and 1/6 twice make the miss 1.394 of a point's.
	return miss[n/2] / 0.6745 / 1.394
}

// FitWithin is a tolerance that suits the points: five times their scatter,
// beyond which hardly a point of them lies, but no less than 1e-4 of their
// size; rounded up to one digit.
func FitWithin(points []r2.Vec) float64 {
	tol := math.Max(5*Scatter(points), 1e-4*plane.Diagonal(plane.Around(points...)))
	if !(tol > 0) {
		return 0
	}
	digit := math.Pow(10, math.Floor(math.Log10(tol)))
	return math.Ceil(tol/digit-1e-9) * digit
}
