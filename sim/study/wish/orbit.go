package wish

import (
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"

	"cavitywright/sim/orbit"
	"cavitywright/sim/study"
	"cavitywright/table"
)

// orbitNumber is a number of a periodic orbit: of the orbits of a period the one
// of a rank by length, the shortest first.
type orbitNumber struct {
	what         string
	period, rank int
}

const orbitPrefix = "orbit-"

// OrbitForms says how a number of an orbit is written as a goal.
const OrbitForms = "orbit-trace:N:K, orbit-length:N:K or orbit-residue:N:K: of the periodic orbits of N bounces the K-th by length, the shortest first"

func orbitOf(text string) (orbitNumber, error) {
	wrong := refuse("%q is no number of an orbit; write %s", text, OrbitForms)
	f := strings.Split(text, ":")
	if len(f) != 3 || !slices.Contains([]string{"orbit-trace", "orbit-length", "orbit-residue"}, f[0]) {
		return orbitNumber{}, wrong
	}
	period, err1 := strconv.Atoi(f[1])
	rank, err2 := strconv.Atoi(f[2])
	if err1 != nil || err2 != nil || period < orbit.Least || period > orbit.MostBounces || rank < 1 {
		return orbitNumber{}, wrong
	}
	return orbitNumber{f[0], period, rank}, nil
}

// of is the number on a table; not a number, and why, where there is no such
// orbit.
func (o orbitNumber) of(t *table.Table, kit study.Kit) (float64, string, error) {
	list, err := orbit.Find(t, orbit.Search{UpTo: o.period, Spread: kit.Spread, Watch: kit.Watch})
	if err != nil {
		return math.NaN(), "", err
	}
	var all []*orbit.Orbit
	for i := range list.Orbits {
		if list.Orbits[i].Period() == o.period {
			all = append(all, &list.Orbits[i])
		}
	}
	if o.rank > len(all) {
		return math.NaN(), fmt.Sprintf("there are %d orbits of %d bounces", len(all), o.period), nil
	}
	slices.SortStableFunc(all, func(a, b *orbit.Orbit) int {
		switch {
		case a.Length < b.Length:
			return -1
		case a.Length > b.Length:
			return 1
		}
		return 0
	})
	x := all[o.rank-1]
	switch o.what {
	case "orbit-length":
		return x.Length, "", nil
	case "orbit-residue":
		return x.Residue(), "", nil
	}
	return x.Trace(), "", nil
}
