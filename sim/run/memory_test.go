package run_test

import (
	"context"
	"os"
	"runtime"
	"strconv"
	"testing"

	"cavitywright/sim"
	"cavitywright/sim/measure"
	"cavitywright/sim/run"
)

// painted is a portrait that is painted as it is traced: of its points it keeps
// whether there is one in each cell of a picture.
type painted struct {
	*sim.Tracer
	orbits, each int
}

func (p painted) Orbits() int  { return p.orbits }
func (p painted) Bounces() int { return p.each }
func (p painted) Start(_ int, uniform func() float64) sim.Start {
	return sim.Start{State: p.Uniform(uniform(), uniform())}
}
func (p painted) Tally() measure.Tally { return &picture{perS: paintedWide / p.Length()} }

const paintedWide, paintedHigh = 800, 400

type picture struct {
	perS   float64
	count  int
	filled [paintedWide * paintedHigh / 64]uint64
}

func (p *picture) Open(int) {}
func (p *picture) Close()   {}
func (p *picture) Add(b *sim.Bounce) {
	if b.Piece < 0 {
		return
	}
	p.count++
	at := int((b.P+1)/2*paintedHigh)*paintedWide + int(b.S*p.perS)
	p.filled[at/64] |= 1 << (at % 64)
}
func (p *picture) Merge(next measure.Tally) {
	o := next.(*picture)
	p.count += o.count
	for i, bits := range o.filled {
		p.filled[i] |= bits
	}
}

// TestPortraitInConstantMemory: what a run holds does not grow with its length.
// CAVITYWRIGHT_BOUNCES asks for more bounces, such as 1000000000.
func TestPortraitInConstantMemory(t *testing.T) {
	n := reduced(20_000_000)
	if s := os.Getenv("CAVITYWRIGHT_BOUNCES"); s != "" {
		var err error
		if n, err = strconv.Atoi(s); err != nil {
			t.Fatal(err)
		}
	}
	const each = 10_000
	m := painted{gallery(t)["02-mixing-plate"], max(n/each, 20), each}
	var early, most uint64
	tally, err := run.Run(context.Background(), run.Job{Tracer: m.Tracer, Measure: m, Seed: 1, Progress: func(done, total int, _ measure.Tally) {
		if done%max(total/100, 1) != 0 {
			return
		}
		runtime.GC()
		var s runtime.MemStats
		runtime.ReadMemStats(&s)
		if done <= total/10 {
			early = max(early, s.HeapAlloc)
		}
		most = max(most, s.HeapAlloc)
	}})
	if err != nil {
		t.Fatal(err)
	}
	if got := tally.(*picture).count; got < m.orbits*each {
		t.Errorf("%d points of %d", got, m.orbits*each)
	}
	t.Logf("%d bounces; the heap held %.1f MB in the first tenth, %.1f MB at most", tally.(*picture).count, float64(early)/1e6, float64(most)/1e6)
	// Tallies that wait come and go: a few at most.
	if most > early+2e6 {
		t.Errorf("the heap grew from %d to %d bytes", early, most)
	}
}
