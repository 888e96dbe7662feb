package live

import (
	"image"
	"testing"
	"time"

	"cavitywright/render"
	"cavitywright/table"
	"cavitywright/table/edit"
	"cavitywright/table/wall"
	"cavitywright/ui/session"
)

// rampPixels counts the pixels of a picture that have a colour of the map's
// scale, other than its palest, which are like the paper.
func rampPixels(img *image.RGBA) int {
	r := render.NewRamp(render.Light(1))
	colours := map[[3]byte]bool{}
	for _, c := range r[len(r)/8:] {
		colours[[3]byte{c.R, c.G, c.B}] = true
	}
	n := 0
	for i := 0; i < len(img.Pix); i += 4 {
		if colours[[3]byte(img.Pix[i:i+3])] {
			n++
		}
	}
	return n
}

// small is a request for a small picture.
func small(s *session.Session) Request {
	r := request(s)
	r.Portrait = image.Pt(360, 220)
	return r
}

// mapping is a portrait as the engine keeps it, with a map asked for.
func mapping(t *testing.T, s *session.Session, l session.Layer) (*portrait, func() *image.RGBA) {
	t.Helper()
	s.Settings.Layer = l
	p := &portrait{}
	r := small(s)
	p.show(&r)
	return p, func() *image.RGBA { return p.draw(nil) }
}

// TestLayerFills: the map under the portrait comes coarse at first and soon,
// and becomes whole.
func TestLayerFills(t *testing.T) {
	for _, l := range []session.Layer{session.Stretching, session.Averages} {
		s := opened(t, 1)
		p, picture := mapping(t, s, l)
		p.fill(true, Fills)
		scale := rampPixels(picture()) // the bar of the scale alone
		if p.layer.done() != 0 {
			t.Fatal("the map was begun before the first frame")
		}
		begun := time.Now()
		p.fill(false, Fills)
		first := time.Since(begun)
		if n := rampPixels(picture()); n < 3*scale && n < 5000 {
			t.Errorf("layer %d: the first pass paints %d pixels of the map", l, n)
		}
		for end := time.Now().Add(time.Minute); p.layer.filling(); {
			if !p.fill(false, Fills) || time.Now().After(end) {
				t.Fatalf("layer %d: the map stands at %g", l, p.layer.done())
			}
		}
		t.Logf("layer %d: first pass after %v", l, first)
		if p.status().Mapped != 1 {
			t.Errorf("layer %d: the status is %+v", l, p.status())
		}
	}
}

// TestLayerIsNeverStale: an edit of the wall, a zoom or another layer clears the
// map at once; a launch, which changes no wall, keeps it.
func TestLayerIsNeverStale(t *testing.T) {
	s := opened(t, 1)
	p, picture := mapping(t, s, session.Stretching)
	p.fill(true, Fills)
	scale := rampPixels(picture())
	fill := func() {
		for p.layer.done() < 0.02 {
			if !p.fill(false, Fills) {
				t.Fatal("nothing is mapped")
			}
		}
		if n := rampPixels(picture()); n < 2000 {
			t.Fatalf("the map has %d pixels", n)
		}
	}
	ask := func() {
		r := small(s)
		p.show(&r)
	}
	for _, c := range []struct {
		name  string
		do    func() error
		keeps bool
	}{
		{"a launch", func() error { return s.Do(edit.Launch{New: []table.Launch{{S: 0.2, P: 0.1}}}) }, true},
		{"an edit", func() error { return s.Do(edit.SetValue{Item: 0, Param: 1, Value: 0.22}) }, false},
		{"undo", func() error { s.Undo(); return nil }, false},
		{"a zoom", func() error { s.Section = session.ZoomedSection(s.Section, 0.5, 0.5, 0.5); return nil }, false},
		{"another layer", func() error { s.Settings.Layer = session.Averages; return nil }, false},
	} {
		fill()
		if err := c.do(); err != nil {
			t.Fatalf("%s: %v", c.name, err)
		}
		ask()
		if kept := p.layer.done() > 0; kept != c.keeps {
			t.Errorf("%s: the map is kept: %v", c.name, kept)
		}
		if n := rampPixels(picture()); !c.keeps && n > 2*scale+500 {
			t.Errorf("%s: %d pixels of the map are left", c.name, n)
		}
	}
	s.Settings.Layer = session.NoLayer
	ask()
	if p.layer.mosaic != nil || p.status().Mapped != 1 {
		t.Error("a map that was switched off is still there")
	}
}

// TestLayerStops: a portrait that was stopped maps nothing, and a wall that has
// no map says why.
func TestLayerStops(t *testing.T) {
	s := opened(t, 1)
	p, _ := mapping(t, s, session.Stretching)
	p.fill(true, Stands)
	for range 3 {
		p.fill(false, Stands)
	}
	if p.layer.done() != 0 {
		t.Errorf("a portrait that stands maps: %g", p.layer.done())
	}
	design := s.Table().Design()
	design.Coats = append(design.Coats, table.Coat{Side: table.AllSides, To: 1, Law: wall.Rough{Share: 0.5}})
	tab, err := table.New(design)
	if err != nil {
		t.Fatal(err)
	}
	s.Open(tab, "")
	r := small(s)
	p.show(&r)
	if p.fill(true, Fills); p.layer.why == "" || p.layer.filling() {
		t.Errorf("a rough wall has a map: %+v", p.layer)
	}
	p.draw(nil)
}

// TestLayerColoursHoldStill: the range of the colours is that of the first pass
// and is widened a few times at most until the map is whole; it holds all that
// is known.
func TestLayerColoursHoldStill(t *testing.T) {
	p, picture := mapping(t, opened(t, 1), session.Stretching)
	p.fill(true, Fills)
	p.fill(false, Fills)
	picture()
	changes, before := 0, p.layer.axis()
	for p.layer.filling() {
		if !p.fill(false, Fills) {
			t.Fatalf("the map stands at %g", p.layer.done())
		}
		picture()
		now, known := p.layer.axis(), p.layer.mosaic.Axis()
		if now.Lo > before.Lo || now.Hi < before.Hi || now.Lo > known.Lo || now.Hi < known.Hi {
			t.Fatalf("the range goes from %g to %g, then from %g to %g; known is %g to %g", before.Lo, before.Hi, now.Lo, now.Hi, known.Lo, known.Hi)
		}
		if now.Lo != before.Lo || now.Hi != before.Hi {
			changes++
		}
		before = now
	}
	t.Logf("widened %d times", changes)
	if changes > 4 {
		t.Errorf("the colours changed %d times", changes)
	}
}
