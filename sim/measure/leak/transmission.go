package leak

import (
	"math"

	"cavitywright/sim"
	"cavitywright/sim/measure"
)

// Transmission lets rays in through each opening in turn by the cosine law,
// as an isotropic field outside sends them, and keeps by which opening they
// leave and after what path.
type Transmission struct {
	Tracer *sim.Tracer
	Ports  []Port
	Each   int // most bounces of a ray
	Cut    float64
	Paths  []float64 // ends of the classes of path, ascending
	// Lattice is used for each port in turn.
	Lattice measure.Lattices
}

// Orbits is the number of rays of all ports.
func (m Transmission) Orbits() int { return len(m.Ports) * m.Lattice.Size() }

// Bounces is Each.
func (m Transmission) Bounces() int { return m.Each }

// Start is a ray through a port; those of the first port come first.
func (m Transmission) Start(i int, _ func() float64) sim.Start {
	n := m.Lattice.Size()
	p := m.Ports[i/n]
	u, v := m.Lattice.At(i % n)
	return sim.Start{State: through(p.Doors, u*p.Width, 2*v-1)}
}

// Tally is a *TransmissionTally.
func (m Transmission) Tally() measure.Tally {
	return &TransmissionTally{of: m, lots: measure.Lots[passed]{Size: m.Lattice.Points.Size()}}
}

// passed is what became of one lattice of rays from one port: the weight that
// left by each port and elsewhere, and by class of path.
type passed struct {
	by        []float64 // one a port
	elsewhere float64   // through other parts of the wall
	byPath    []float64
	path      float64 // weighted sum over what left
	account   Account
}

// TransmissionTally is what passed of each lattice of each port.
type TransmissionTally struct {
	Stops   measure.Stops
	Flights int64
	of      Transmission
	lots    measure.Lots[passed]
	ray     course
}

// Open begins ray i.
func (t *TransmissionTally) Open(i int) {
	t.lots.Open(i)
	if row := t.lots.Last(); row.by == nil {
		row.by, row.byPath = make([]float64, len(t.of.Ports)), make([]float64, len(t.of.Paths)+1)
	}
	t.ray.open()
}

// Add takes a bounce.
func (t *TransmissionTally) Add(b *sim.Bounce) {
	t.ray.take(b)
	if b.N == 0 {
		return
	}
	t.Flights++
	row := t.lots.Last()
	t.ray.book(&row.account)
	w := t.ray.left
	if w == 0 {
		return
	}
	port := -1
	if b.Stop == sim.Escaped {
		port = portAt(t.of.Ports, b.S)
	}
	if port >= 0 {
		row.by[port] += w
	} else {
		row.elsewhere += w
	}
	row.path += w * t.ray.path
	k := 0
	for k < len(t.of.Paths) && t.ray.path > t.of.Paths[k] {
		k++
	}
	row.byPath[k] += w
}

// Enough ends a ray that carries too little.
func (t *TransmissionTally) Enough() bool { return t.ray.weight < t.of.Cut }

// Close ends the ray.
func (t *TransmissionTally) Close() {
	if t.ray.stop != sim.Going {
		t.Stops[t.ray.stop]++
	}
	t.ray.close(&t.lots.Last().account)
}

// Merge adds the next tally.
func (t *TransmissionTally) Merge(next measure.Tally) {
	o := next.(*TransmissionTally)
	t.Stops.Add(o.Stops)
	t.Flights += o.Flights
	t.lots.Merge(&o.lots, func(into, from *passed) {
		addTo(into.by, from.by)
		addTo(into.byPath, from.byPath)
		into.elsewhere += from.elsewhere
		into.path += from.path
		into.account.add(&from.account)
	})
}

// Scattering is the matrix of the openings of a table.
type Scattering struct {
	Tracer  *sim.Tracer
	Ports   []Port
	Rays    int // through each port
	Each    int
	Flights int64
	Stops   measure.Stops
	Account Account
	Paths   []float64 // ends of the classes of path
	rows    []passed  // lattice by lattice, port by port
}

const (
	// scatterWork is the number of flights at effort 1, and scatterEach the most
	// bounces of a ray, in means.
	scatterWork = 5e6
	scatterEach = 300
	scatterMost = 200000
	// pathClasses is the number of classes of path, up to pathReach mean
	// dwells.
	pathClasses = 120
	pathReach   = 6
)

// MeasureScattering measures how rays pass from opening to opening; effort
// multiplies the number of flights. The error is a *measure.NotMeasured or the
// runner's.
func MeasureScattering(tr *sim.Tracer, run measure.Runner, effort float64) (*Scattering, error) {
	t := tr.Table()
	none := func(why string) (*Scattering, error) {
		return nil, &measure.NotMeasured{Name: "transmission", Why: why}
	}
	if why := measure.Closed(t); why != "" {
		return none(why)
	}
	ports := PortsOf(t)
	if len(ports) == 0 {
		return none("the wall has no opening; lay one on it")
	}
	width := 0.0
	for _, p := range ports {
		width += p.Width
	}
	mean := t.Length() / width // bounces until a ray leaves: Kac 1947
	m := Transmission{Tracer: tr, Ports: ports, Each: int(min(scatterEach*mean, scatterMost)), Cut: survivalCut}
	for k := range pathClasses {
		m.Paths = append(m.Paths, pathReach*math.Pi*t.Area()/width*float64(k+1)/pathClasses)
	}
	var err error
	rays := scatterWork * effort / measure.Slowness(t) / (1 + mean) / float64(len(ports))
	if m.Lattice, err = measure.DrawnLattices(tr, run, max(int(rays), 2000)); err != nil {
		return nil, err
	}
	ran, err := run(m)
	if err != nil {
		return nil, err
	}
	return ran.(*TransmissionTally).Scattering(), nil
}

// Scattering is what the tally holds.
func (t *TransmissionTally) Scattering() *Scattering {
	s := &Scattering{Tracer: t.of.Tracer, Ports: t.of.Ports, Rays: t.of.Lattice.Size(), Each: t.of.Each,
		Flights: t.Flights, Stops: t.Stops, Paths: t.of.Paths, rows: t.lots.Rows}
	for i := range s.rows {
		s.Account.add(&s.rows[i].account)
	}
	return s
}

// of is the mean over the lattices of one port of a share of what started.
func (s *Scattering) of(port int, read func(*passed) float64) (share, stderr float64) {
	var m measure.Sample
	n := len(s.rows) / len(s.Ports)
	for i := range n {
		row := &s.rows[port*n+i]
		m.Take(read(row) / row.account.Started)
	}
	return m.Mean()
}

// Share is the share of what comes in through port from that leaves through
// port to: transmission, or reflection where they are one.
func (s *Scattering) Share(from, to int) (share, stderr float64) {
	return s.of(from, func(p *passed) float64 { return p.by[to] })
}

// Rest are the other parts of a row of the matrix: what left elsewhere, what
// the wall absorbed, and what stayed; with the shares they add up to 1.
func (s *Scattering) Rest(from int) (elsewhere, absorbed, kept float64) {
	elsewhere, _ = s.of(from, func(p *passed) float64 { return p.elsewhere })
	absorbed, _ = s.of(from, func(p *passed) float64 { return p.account.Absorbed })
	kept, _ = s.of(from, func(p *passed) float64 { return p.account.Kept + p.account.Undecided })
	return elsewhere, absorbed, kept
}

// Dwell is the mean path of what comes in through port from, until it leaves,
// with its standard error; from = -1 is all ports, each by its width.
func (s *Scattering) Dwell(from int) (mean, stderr float64) {
	one := func(port int) (float64, float64) {
		n := len(s.rows) / len(s.Ports)
		var a, b float64
		for i := range n {
			row := &s.rows[port*n+i]
			a, b = a+row.path, b+row.account.Left
		}
		mean := a / b
		_, err := s.of(port, func(p *passed) float64 { return (p.path - mean*p.account.Left) })
		return mean, err * float64(s.Rays) / b
	}
	if from >= 0 {
		return one(from)
	}
	width, square := 0.0, 0.0
	for i, p := range s.Ports {
		m, e := one(i)
		mean += m * p.Width
		square += e * e * p.Width * p.Width
		width += p.Width
	}
	return mean / width, math.Sqrt(square) / width
}
