package render

import (
	"math"
	"testing"

	"cavitywright/sim/figure"
)

// coatedRing is a disc of radius 3 about (1, 2) whose whole wall has a texture.
func coatedRing(x figure.Texture) figure.Paths {
	f := ring()
	coat := figure.Line{Role: figure.Coat, Texture: x, Closed: true}
	for _, l := range f.Lines {
		if l.Role == figure.Wall {
			coat.X, coat.Y, coat.At = l.X, l.Y, l.At
		}
	}
	f.Lines = append(f.Lines, coat)
	return f
}

// Every texture lies along the inside of the wall, no deeper than it should,
// all around; each is drawn in another way, without colour.
func TestTexturesLieInside(t *testing.T) {
	look, box := Paper(1), NewBox(0, 0, 85, 85)
	v := LayoutPaths(ring(), box, look)
	center, radius := v.ToCanvas(1, 2), 3*v.Scale
	var plain record
	DrawPaths(&plain, ring(), v, look)
	for _, x := range []figure.Texture{figure.Dotted, figure.Double, figure.Saw} {
		var c record
		DrawPaths(&c, coatedRing(x), v, look)
		if more := len(c.strokes) - len(plain.strokes) + len(c.dots) - len(plain.dots); more != 1 {
			t.Fatalf("texture %d is drawn in %d parts", x, more)
		}
		var pts []Point
		if x == figure.Dotted {
			d := c.dots[0]
			for i := range d.X {
				pts = append(pts, Point{d.X[i], d.Y[i]})
			}
			if want := 2 * math.Pi * radius / (dotPitch * look.Hair); math.Abs(float64(len(pts))-want) > 0.03*want {
				t.Errorf("%d dots stand along a wall of %.0f pitches", len(pts), want)
			}
			if d.Color != look.Ink {
				t.Error("the dots are not of ink")
			}
		} else {
			for _, s := range c.strokes {
				if in := math.Abs(math.Hypot(s.path.Points[0].X-center.X, s.path.Points[0].Y-center.Y)-radius) < 2*coatDepth*look.Hair; in && s.color == look.Ink && len(s.path.Points) > 90 {
					pts = s.path.Points
				}
			}
		}
		sectors, sag := map[int]bool{}, radius*(1-math.Cos(math.Pi/90))
		for _, q := range pts {
			depth := radius - math.Hypot(q.X-center.X, q.Y-center.Y)
			if depth < -1e-6 || depth > coatDepth*look.Hair+2*sag {
				t.Fatalf("texture %d has a point %g inside the wall", x, depth)
			}
			sectors[int(math.Floor(math.Atan2(q.Y-center.Y, q.X-center.X)*20/math.Pi))] = true
		}
		if len(sectors) != 40 {
			t.Errorf("texture %d covers %d of 40 sectors", x, len(sectors))
		}
	}
}

// However far the view is enlarged, only what is seen is drawn, and it stays
// where it was on the wall when the view is moved.
func TestTexturesWhereSeen(t *testing.T) {
	look, box := Light(1), NewBox(0, 0, 400, 300)
	v := LayoutPaths(ring(), box, look)
	edge := v.ToCanvas(4, 2)
	for _, k := range []float64{1, 30, 1e4, 1e7} {
		near := v.Zoomed(k, edge)
		near.Box = box
		var a, b record
		DrawPaths(&a, coatedRing(figure.Dotted), near, look)
		DrawPaths(&b, coatedRing(figure.Dotted), near.Shifted(0, 1), look)
		n := len(a.dots[0].X)
		if n == 0 || n > 400 {
			t.Fatalf("enlarged %g times %d dots are drawn", k, n)
		}
		found := 0
		for i := range b.dots[0].X {
			for j := range a.dots[0].X {
				if math.Hypot(b.dots[0].X[i]-a.dots[0].X[j], b.dots[0].Y[i]-a.dots[0].Y[j]-1) < 0.05 {
					found++
				}
			}
		}
		if found < n-2 {
			t.Errorf("enlarged %g times only %d of %d dots stay on the wall when the view moves", k, found, n)
		}
	}
}

// The s axis wears the coats: textures over the strip, at an opening neither
// strip nor line but two posts; what lies beyond the frame is cut off; a bare
// wall has no band.
func TestCoatsOnTheAxis(t *testing.T) {
	look, box := Light(1), NewBox(0, 0, 500, 320)
	bare := LayoutDots(scatter(), box, look)
	f := scatter()
	f.X.Coats = []figure.Coated{{Lo: 6, Hi: 8, Texture: figure.Dotted}, {Lo: 2, Hi: 3, Texture: figure.Gap}, {Lo: 9, Hi: 14, Texture: figure.Double}}
	p := LayoutDots(f, box, look)
	if room := bare.Frame.Max.Y - p.Frame.Max.Y; room != coatRoom(f.X, look) || bare.Strip != p.Strip {
		t.Fatalf("the band takes %g of the frame, want %g; the strip %v moved from %v", room, coatRoom(f.X, look), p.Strip, bare.Strip)
	}
	var c record
	Draw(&c, f, box, look)
	gap := false
	for _, d := range c.fills {
		b := Box{d.path.Points[0], d.path.Points[2]}
		if d.color == look.Paper && math.Abs(b.Min.X-p.ToX(2)) < 1e-9 && math.Abs(b.Max.X-p.ToX(3)) < 1e-9 && b.Min.Y <= p.Strip.Min.Y && b.Max.Y >= p.Strip.Max.Y {
			gap = true
		}
	}
	posts := 0
	for _, d := range c.strokes {
		q := d.path.Points
		if d.pen.Width == postWidth*look.Hair {
			posts++
		}
		if len(q) == 2 && q[0].Y == p.Strip.Min.Y && q[1].Y == q[0].Y && q[0].X < p.ToX(2.5) && q[1].X > p.ToX(2.5) {
			t.Error("the wall's line runs through the opening")
		}
		for _, q := range q {
			if q.Y > p.Frame.Max.Y+look.Tick && q.Y < p.Strip.Max.Y && q.X > p.Frame.Max.X+1 {
				t.Errorf("a coat is drawn to (%g, %g), beyond the frame", q.X, q.Y)
			}
		}
	}
	if !gap || posts != 2 {
		t.Errorf("the opening is a gap: %v, with %d posts", gap, posts)
	}
	dots := c.dots[0]
	for i := range dots.X {
		if dots.X[i] < p.ToX(6) || dots.X[i] > p.ToX(8) || dots.Y[i] > p.Strip.Min.Y || dots.Y[i] < p.Frame.Max.Y {
			t.Errorf("a dot of the lossy stretch stands at (%g, %g)", dots.X[i], dots.Y[i])
		}
	}
}

// A critical line crosses its stretch of the wall alone.
func TestCriticalOverItsStretch(t *testing.T) {
	look, box := Light(1), NewBox(0, 0, 500, 320)
	f := scatter()
	f.Y.Marks = []figure.Mark{{At: 0.5, Kind: figure.Critical, From: 2, To: 3}, {At: -0.5, Kind: figure.Critical, From: 30, To: 40}}
	p := LayoutDots(f, box, look)
	var c record
	Draw(&c, f, box, look)
	n := 0
	for _, d := range c.strokes {
		if len(d.pen.Dash) == 0 {
			continue
		}
		n++
		if q := d.path.Points; math.Abs(q[0].X-p.ToX(2)) > 1e-9 || math.Abs(q[1].X-p.ToX(3)) > 1e-9 {
			t.Errorf("the line runs from %g to %g, want %g to %g", q[0].X, q[1].X, p.ToX(2), p.ToX(3))
		}
	}
	if n != 1 {
		t.Errorf("%d critical lines are drawn, want the one within the frame", n)
	}
}

// The name of a critical line stands within the frame at the line's right end,
// also near the frame's top; on a stretch without room for it, it is left out.
func TestCriticalIsNamed(t *testing.T) {
	look, box := Light(1), NewBox(0, 0, 500, 320)
	f := scatter()
	lo, hi := f.X.Lo, f.X.Hi
	f.Y.Marks = []figure.Mark{{At: f.Y.Hi, Kind: figure.Critical, Name: "p = 1/n", From: lo, To: hi},
		{At: 0, Kind: figure.Critical, Name: "p = 0.2", From: lo, To: lo + (hi-lo)/100}}
	p := LayoutDots(f, box, look)
	var c record
	Draw(&c, f, box, look)
	named := 0
	for _, text := range c.texts {
		switch text.String {
		case "p = 0.2":
			t.Error("a name stands over a stretch that is shorter than it")
		case "p = 1/n":
			named++
			if !p.Frame.Contains(text.At) || text.At.X < p.Frame.Max.X-2*look.Small {
				t.Errorf("the name stands at %v, the frame is %v", text.At, p.Frame)
			}
		}
	}
	if named != 1 {
		t.Errorf("the line is named %d times", named)
	}
}

// The legend stands under the plot, or the drawing, above the caption, within
// the figure, and has one sample a line.
func TestKeysAreSet(t *testing.T) {
	look := Paper(1)
	keys := []figure.Key{{Texture: figure.Gap, Text: "opening, width 0.3 mm"}, {Texture: figure.Dotted, Text: "lossy mirror, R = 0.9"},
		{Texture: figure.Double, Text: "dielectric, n = 3.3 to 1, TM"}, {Texture: figure.Saw, Text: "rough, 50 % scattered"}}
	dots, paths := scatter(), ring()
	dots.X.Keys, paths.Keys = keys, keys
	for _, f := range []figure.Figure{dots, paths} {
		box := NewBox(0, 0, 85, Height(f, 85, look))
		var c record
		Draw(&c, f, box, look)
		found := 0
		var rows []Box
		caption := math.Inf(1)
		for _, x := range c.texts {
			for _, k := range keys {
				if x.String == k.Text {
					found++
					rows = append(rows, textBox(x))
				}
			}
			if x.String == "A disc." || x.String == dots.Caption[0] {
				caption = min(caption, textBox(x).Min.Y)
			}
		}
		for i, b := range rows {
			if b.Max.X > box.Max.X || b.Max.Y > caption {
				t.Errorf("%T: line %d of the legend at %v leaves the figure, or stands on the caption at %g", f, i, b, caption)
			}
			for _, o := range c.texts {
				if q := textBox(o); q != b && q.Min.X < b.Max.X && b.Min.X < q.Max.X && q.Min.Y < b.Max.Y && b.Min.Y < q.Max.Y {
					t.Errorf("%T: line %d of the legend stands on %q", f, i, o.String)
				}
			}
		}
		if found != len(keys) {
			t.Errorf("%T: %d lines of the legend are set of %d", f, found, len(keys))
		}
	}
}
