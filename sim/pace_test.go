package sim

import (
	"fmt"
	"testing"

	"cavitywright/table"
)

// paced are the tables of testdata/pace, by the names of the C programs there.
func paced(t testing.TB) map[string]*table.Table {
	return map[string]*table.Table{
		"stadium":     one(t, "stadium", 1, 1),
		"limacon":     one(t, "limacon", 1, 0.43),
		"square-disc": one(t, "square-with-disc", 2, 0.5),
		"posts":       one(t, "box-of-posts", 10, 60, 0.5),
	}
}

// pacedLanes is the number of orbits that the benchmarks follow together.
const pacedLanes = 8

// BenchmarkPace is the time of one bounce of orbits that are followed together.
// As the C programs do, it sums both Birkhoff coordinates and the places, from
// s = 0.7 and p = 0.3, the other lanes from beside it.
func BenchmarkPace(b *testing.B) {
	for name, tab := range paced(b) {
		b.Run(name, func(b *testing.B) { follow(b, Compile(tab), State{0.7, 0.3}) })
	}
}

func follow(b *testing.B, tr *Tracer, from State) {
	w, u := tr.Walkers(pacedLanes), make([]float64, pacedLanes)
	open := func(i int) { w.Open(i, Start{State: State{from.S + 1e-3*float64(i), from.P}}) }
	for i := range pacedLanes {
		open(i)
	}
	var s, p, places float64
	b.ReportAllocs()
	b.ResetTimer()
	before := spent()
	for n := 0; n < b.N; n += pacedLanes {
		w.Next(u)
		for i := range pacedLanes {
			l := w.Last(i)
			s += l.S
			p += l.P * l.P
			places += l.Point.X + l.Point.Y
			if l.Stop != Going {
				open(i)
			}
		}
	}
	b.ReportMetric(float64(spent()-before)/float64(b.N), "cpu-ns")
	b.ReportMetric(s/float64(b.N), "mean-s")
	b.ReportMetric(p/float64(b.N), "mean-p²")
	b.ReportMetric(places/float64(b.N), "mean-place")
}

// BenchmarkAlone is the time of one bounce of a single orbit.
func BenchmarkAlone(b *testing.B) {
	for name, tab := range paced(b) {
		b.Run(name, func(b *testing.B) {
			w := Compile(tab).Walker()
			bounce := w.Start(State{0.7, 0.3})
			sum := 0.0
			for b.Loop() {
				if bounce.Stop != Going {
					bounce = w.Start(State{0.7, 0.3})
				}
				bounce = w.Next(0)
				sum += bounce.S
			}
			b.ReportMetric(sum/float64(b.N), "mean-s")
		})
	}
}

// BenchmarkPosts is the time of one bounce in a box of many posts: fat ones,
// that leave a fifth of their cell's side open, and thin ones of one radius,
// between which rays fly the farther the fewer they are.
func BenchmarkPosts(b *testing.B) {
	for _, n := range []int{10, 100, 1000, 10_000} {
		cells := 1
		for cells*cells < n {
			cells++
		}
		for name, radius := range map[string]float64{"fat": 0.4 * 10 / float64(cells), "thin": 0.004} {
			b.Run(fmt.Sprintf("%s/%d", name, n), func(b *testing.B) {
				follow(b, Compile(one(b, "box-of-posts", 10, float64(n), radius)), State{0.7, 0.3})
			})
		}
	}
}
