// Package wall says what a bounce does: which share of a ray returns, which
// leaves, and in which directions. It is local physics; it knows neither where
// on the wall it happens nor what is done with the shares.
package wall

// Law is what a stretch of wall does to a ray that meets it.
type Law interface {
	// Scatter answers for one bounce. u is a number drawn evenly from [0, 1),
	// for the laws that need chance. It is pure: equal arguments, equal answer.
	Scatter(in Incidence, u float64) Outcome
	// Name is the law's name in files.
	Name() string
	// Values are the law's parameters in the order of its Specs.
	Values() []float64
}

// Incidence is a ray at the wall: P is the sine of its angle from the inward
// normal, positive towards increasing s, which a mirror keeps; Curvature is the
// wall's (1/length).
type Incidence struct{ P, Curvature float64 }

// Lobe is a direction with the share of the weight that goes there.
type Lobe struct{ P, Weight float64 }

// Outcome is what returns into the table and what leaves through the wall.
// What is missing from Back.Weight + Through.Weight = 1 was absorbed. Through.P
// is the sine of the angle from the outward normal outside.
type Outcome struct{ Back, Through Lobe }

// Absorbed is the share that neither returned nor left.
func (o Outcome) Absorbed() float64 { return 1 - o.Back.Weight - o.Through.Weight }

// Mirror returns everything at the angle it came.
type Mirror struct{}

// Scatter keeps P and the whole weight.
func (Mirror) Scatter(in Incidence, _ float64) Outcome { return Outcome{Back: Lobe{in.P, 1}} }

// Lossy is a mirror of the given reflectivity in [0, 1]; the rest is absorbed.
type Lossy struct{ Reflectivity float64 }

// Scatter keeps P and the share Reflectivity.
func (l Lossy) Scatter(in Incidence, _ float64) Outcome {
	return Outcome{Back: Lobe{in.P, l.Reflectivity}}
}

// Opening lets everything out, undeflected.
type Opening struct{}

// Scatter sends the whole weight through.
func (Opening) Scatter(in Incidence, _ float64) Outcome { return Outcome{Through: Lobe{in.P, 1}} }

// Rough scatters the share Share of all rays by the cosine law (p even in
// [-1, 1], which keeps ds dp), and mirrors the others.
type Rough struct{ Share float64 }

// Scatter uses u twice: to choose, and, rescaled, as the new direction.
func (r Rough) Scatter(in Incidence, u float64) Outcome {
	if u < r.Share {
		return Outcome{Back: Lobe{2*u/r.Share - 1, 1}}
	}
	return Outcome{Back: Lobe{in.P, 1}}
}
