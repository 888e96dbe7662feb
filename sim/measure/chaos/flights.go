package chaos

import (
	"cavitywright/sim"
	"cavitywright/sim/measure"
)

const (
	// pathWork is the number of flights measured at effort 1, pathEach that of
	// an orbit.
	pathWork = 1e7
	pathEach = 50
	// correlationWork is the number of bounces correlated at effort 1,
	// correlationEach that of an orbit besides its lags.
	correlationWork = 5e6
	correlationEach = 100
)

// MeasurePaths measures the flights between bounces of the table off mirrors;
// effort multiplies their number.
func MeasurePaths(tr *sim.Tracer, run measure.Runner, effort float64) (*measure.FreePathsTally, error) {
	bare, starts, err := offMirrors(tr, run, pathWork*effort/pathEach)
	if err != nil {
		return nil, err
	}
	ran, err := run(measure.FreePaths{Tracer: bare, Starts: starts, Each: pathEach})
	if err != nil {
		return nil, err
	}
	return ran.(*measure.FreePathsTally), nil
}

// MeasureCorrelation correlates an observable with itself up to lags bounces
// later on the table off mirrors; effort multiplies the number of bounces.
func MeasureCorrelation(tr *sim.Tracer, run measure.Runner, effort float64, of measure.Observable, lags int) (*measure.CorrelationTally, error) {
	each := max(correlationEach, lags)
	bare, starts, err := offMirrors(tr, run, correlationWork*effort/float64(each+lags))
	if err != nil {
		return nil, err
	}
	ran, err := run(measure.Correlation{Tracer: bare, Starts: starts, Of: of, Lags: lags, Each: each})
	if err != nil {
		return nil, err
	}
	return ran.(*measure.CorrelationTally), nil
}

// offMirrors is the table off mirrors, with lattices of about orbits starts.
func offMirrors(tr *sim.Tracer, run measure.Runner, orbits float64) (*sim.Tracer, measure.Lattices, error) {
	bare, err := Mirrored(tr)
	if err != nil {
		return nil, measure.Lattices{}, err
	}
	starts, err := measure.DrawnLattices(bare, run, int(orbits/measure.Slowness(bare.Table())))
	return bare, starts, err
}
