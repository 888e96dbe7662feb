package measure

import "testing"

// TestLattice wants every lattice to be even: along each side one point in each
// of as many equal parts, whatever its shift; and Fibonacci numbers as sizes.
func TestLattice(t *testing.T) {
	for n, want := range map[int]int{-1: 1, 0: 1, 1: 1, 2: 2, 3: 3, 4: 3, 12: 8, 13: 13, 1000: 987} {
		if got := NewFibonacci(n).Size(); got != want {
			t.Errorf("the largest lattice of at most %d points has %d, want %d", n, got, want)
		}
	}
	f := NewFibonacci(1000)
	n := f.Size()
	for _, s := range []Shift{{0.2 / 987, 0.3 / 987}, {0.123456, 0.98765}} {
		us, vs := make([]int, n), make([]int, n)
		for i := range n {
			u, v := f.At(i, s)
			if !(u >= 0 && u < 1 && v >= 0 && v < 1) {
				t.Fatalf("point %d is (%g, %g)", i, u, v)
			}
			us[int(wrapped(u-s.U+0.5/float64(n))*float64(n))]++
			vs[int(wrapped(v-s.V+0.5/float64(n))*float64(n))]++
		}
		for i := range n {
			if us[i] != 1 || vs[i] != 1 {
				t.Fatalf("part %d of %d holds %d points along u and %d along v, want 1", i, n, us[i], vs[i])
			}
		}
	}
}
