package run

import "math/rand/v2"

// Chance is the generator of a stream of a seed, for what is drawn beside the
// orbits: the copies of a tolerance, the population of a search. Streams from
// FirstStream on have nothing in common with those of orbits.
func Chance(seed, stream uint64) rand.Source { return rand.NewPCG(seed, FirstStream+stream) }

// FirstStream is above the number of any orbit.
const FirstStream = 1 << 62
