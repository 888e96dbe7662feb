package modes

import (
	"math"
	"sort"
	"testing"

	"cavitywright/table"
)

// boxModes are the wave numbers below top of the box a × b × c, in order
// (closed form): of the metal box those with no index zero twice, with one zero
// once; of the rigid one all once, the constant one with them.
func boxModes(f Field, a, b, c, top float64) []float64 {
	var list []float64
	for l := 0; math.Pi*float64(l)/a <= top; l++ {
		for m := 0; math.Pi*float64(m)/b <= top; m++ {
			for n := 0; math.Pi*float64(n)/c <= top; n++ {
				k := math.Pi * math.Hypot(math.Hypot(float64(l)/a, float64(m)/b), float64(n)/c)
				times, zeros := 1, 0
				for _, i := range []int{l, m, n} {
					if i == 0 {
						zeros++
					}
				}
				if f == Metal {
					times = max(0, 2-zeros)
					if zeros == 1 {
						times = 1
					}
				}
				for range times {
					list = append(list, k)
				}
			}
		}
	}
	sort.Float64s(list)
	return list
}

// TestBoxes: the sum over the orders runs through the exact staircase of boxes,
// thick and thin; for the metal one it is also the published law V k³/3π² -
// (a + b + c) k/2π + 1/2 (Liu, Chang and Ma, NBS Technical Note 1066, 1983,
// from memory).
func TestBoxes(t *testing.T) {
	for _, c := range []struct{ a, b, h float64 }{{1, 0.8, 0.6}, {1, 0.7, 0.1}, {2, 1, 1.3}} {
		tab := made(t, table.Metre, "rectangle", c.a, c.b)
		for _, f := range []Field{Metal, Sound} {
			p, err := PlateOf(tab, f, c.h)
			if err != nil {
				t.Fatal(err)
			}
			exact := boxModes(f, c.a, c.b, c.h, 50)
			if d := offset(p.Count, exact, 15, 50); math.Abs(d) > 0.15 {
				t.Errorf("%v, %v: the law is %.4f off on the average of %d modes", c, f, d, len(exact))
			}
			for _, n := range []float64{30, 200, 5000} {
				if k := p.At(n); math.Abs(p.Count(k)-n) > 1e-6*n {
					t.Errorf("%v, %v: %v modes at k = %v, where there are %v", c, f, n, k, p.Count(k))
				}
			}
		}
		p, _ := PlateOf(tab, Metal, c.h)
		published := func(k float64) float64 {
			return c.a*c.b*c.h*k*k*k/(3*math.Pi*math.Pi) - (c.a+c.b+c.h)*k/(2*math.Pi) + 0.5
		}
		if d := offset(func(k float64) float64 { return p.Count(k) - published(k) }, nil, 100, 200); math.Abs(d) > 0.002*published(150) {
			t.Errorf("%v: %v off the published law, which counts %v", c, d, published(150))
		}
	}
}

// TestFlatPlate: a plate 8 mm high is two-dimensional below c/2h = 18.7 GHz
// (closed form; common practice); below that its count is the plane's.
func TestFlatPlate(t *testing.T) {
	tab := made(t, table.Millimetre, "quarter-stadium", 360, 200)
	p, err := PlateOf(tab, Metal, 8)
	if err != nil {
		t.Fatal(err)
	}
	air := Medium{LightSpeed, table.Millimetre}
	if got := air.Hertz(p.Cutoff()); math.Abs(got-LightSpeed/0.016) > 1 || math.Abs(got-18.7e9) > 0.05e9 {
		t.Errorf("the limit is %v Hz", got)
	}
	n, err := Of(tab, Dirichlet)
	if err != nil {
		t.Fatal(err)
	}
	k := air.K(17.5e9)
	if p.Orders(k) != 0 || p.Count(k) != n.Count(k) {
		t.Errorf("%v modes with %d orders, the plane has %v", p.Count(k), p.Orders(k), n.Count(k))
	}
	if k := air.K(20e9); p.Orders(k) != 1 || p.Count(k) <= n.Count(k) {
		t.Errorf("above the limit there are %v modes, the plane has %v", p.Count(k), n.Count(k))
	}
}

// TestFreePath: 4V/S of a cube is 2/3 of its edge (Kosten, Acustica 10, 245
// (1960); common practice).
func TestFreePath(t *testing.T) {
	p, err := PlateOf(made(t, table.Metre, "rectangle", 3, 3), Sound, 3)
	if err != nil {
		t.Fatal(err)
	}
	if p.Volume() != 27 || p.Surface() != 54 || p.FreePath() != 2 {
		t.Errorf("volume %v, surface %v, free path %v", p.Volume(), p.Surface(), p.FreePath())
	}
}

// TestFigure: the curves are the counts, in the unit of the axis, and the limit
// of the plate is marked where it lies.
func TestFigure(t *testing.T) {
	tab := made(t, table.Millimetre, "quarter-stadium", 360, 200)
	n, _ := Of(tab, Dirichlet)
	p, err := PlateOf(tab, Metal, 8)
	if err != nil {
		t.Fatal(err)
	}
	air := Medium{LightSpeed, table.Millimetre}
	f := Figure(n, &p, air, 25e9)
	if f.X.Unit != "GHz" || f.X.Hi != 25 || len(f.Curves) != 2 || len(f.X.Marks) != 1 || math.Abs(f.X.Marks[0].At-18.737) > 1e-3 {
		t.Fatalf("axis %+v, %d curves", f.X, len(f.Curves))
	}
	for i, count := range []func(k float64) float64{n.Count, p.Count} {
		for j, x := range f.Curves[i].X {
			if want := math.Max(0, count(air.K(x*1e9))); math.Abs(f.Curves[i].Y[j]-want) > 1e-9*(1+want) || want > f.Y.Hi {
				t.Errorf("%s: %g modes below %g GHz, want %g", f.Curves[i].Name, f.Curves[i].Y[j], x, want)
			}
		}
	}
	if f := Figure(n, nil, air, 900); len(f.Curves) != 1 || f.X.Unit != "Hz" || len(f.X.Marks) != 0 {
		t.Errorf("without a plate: %+v", f.X)
	}
}
