package live

import (
	"bytes"
	"image"
	"sync"
	"testing"
	"time"

	"cavitywright/assets"
	"cavitywright/render"
	"cavitywright/table"
	"cavitywright/table/edit"
	"cavitywright/table/tablefile"
	"cavitywright/ui/session"

	"go.uber.org/goleak"
)

func TestMain(m *testing.M) { goleak.VerifyTestMain(m) }

func opened(t testing.TB, i int) *session.Session {
	t.Helper()
	d, err := tablefile.Read(bytes.NewReader(assets.Gallery()[i]))
	if err != nil {
		t.Fatal(err)
	}
	tab, err := table.New(d)
	if err != nil {
		t.Fatal(err)
	}
	return session.New(tab, "")
}

// queue stands for the window's goroutine.
type queue struct{ c chan func() }

func (q queue) post(f func()) { q.c <- f }

// pump runs what is posted until ok, or a minute has passed.
func (q queue) pump(t testing.TB, what string, ok func() bool) {
	t.Helper()
	end := time.After(time.Minute)
	for !ok() {
		select {
		case f := <-q.c:
			f()
		case <-end:
			t.Fatalf("waited for: %s", what)
		}
	}
}

func (q queue) drain() {
	for {
		select {
		case f := <-q.c:
			f()
		default:
			return
		}
	}
}

func request(s *session.Session) Request {
	return Request{
		Revision: s.Revision(), Table: s.Table(), Section: s.Section, Settings: s.Settings,
		Look: render.Light(1), Portrait: image.Pt(700, 320), Rays: image.Pt(500, 300),
	}
}

// started is an engine whose posts run when the test pumps.
func started(t testing.TB) (*Engine, queue, *Status) {
	t.Helper()
	q := queue{make(chan func(), 64)}
	var last Status
	e := New(q.post, func(s Status) { last = s })
	t.Cleanup(func() {
		var w sync.WaitGroup
		w.Go(e.Close)
		done := make(chan struct{})
		go func() { w.Wait(); close(done) }()
		for {
			select {
			case f := <-q.c:
				f()
			case <-done:
				q.drain()
				return
			}
		}
	})
	return e, q, &last
}

// inked counts the pixels of a picture that are not paper.
func inked(img *image.RGBA) int {
	n := 0
	paper := render.Light(1).Paper
	for i := 0; i < len(img.Pix); i += 4 {
		if img.Pix[i] != paper.R || img.Pix[i+1] != paper.G || img.Pix[i+2] != paper.B {
			n++
		}
	}
	return n
}

// TestFills: the portrait fills to what the study asks for, on every table of
// the gallery, and no ray is lost.
func TestFills(t *testing.T) {
	for i, name := range assets.GalleryNames() {
		s := opened(t, i)
		s.Settings.Motion = session.Paused
		study := s.Table().Design().Study
		study.Bounces = 400
		if err := s.Do(edit.SetStudy{Study: study, Name: "fewer"}); err != nil {
			t.Fatal(err)
		}
		e, q, last := started(t)
		e.Show(request(s))
		q.pump(t, "the portrait of "+name, func() bool { return last.Done >= 1 && last.Revision == s.Revision() })
		p, r := e.PortraitFrames.Take(), e.RaysFrames.Take()
		if p == nil || p.Rect.Size() != image.Pt(700, 320) || r == nil || r.Rect.Size() != image.Pt(500, 300) {
			t.Fatalf("%s: pictures are missing or of another size", name)
		}
		if inked(p) < 2000 || inked(r) < 500 {
			t.Errorf("%s: %d and %d pixels drawn", name, inked(p), inked(r))
		}
		if last.Lost > 0 || last.Bounces == 0 {
			t.Errorf("%s: %+v", name, *last)
		}
	}
}

// TestNewestWins: of many edits in a row the last one is shown, and frames of
// the edits before come while the hand still moves.
func TestNewestWins(t *testing.T) {
	s := opened(t, 0)
	e, q, last := started(t)
	seen := map[uint64]bool{}
	s.Begin()
	for i := range 60 {
		if err := s.Amend(edit.SetValue{Item: 0, Param: 1, Value: 0.1 + 0.005*float64(i)}); err != nil {
			t.Fatal(err)
		}
		e.Show(request(s))
		for end := time.Now().Add(16 * time.Millisecond); time.Now().Before(end); time.Sleep(time.Millisecond) {
			q.drain()
		}
		seen[last.Revision] = true
	}
	s.End()
	e.Show(request(s))
	q.pump(t, "the last edit", func() bool { return last.Revision == s.Revision() })
	if len(seen) < 4 {
		t.Errorf("during the drag only %d revisions were shown", len(seen))
	}
}

// TestStands: a portrait that was stopped stands still, and goes on.
func TestStands(t *testing.T) {
	s := opened(t, 1)
	s.Settings.Motion = session.Paused
	e, q, last := started(t)
	e.Fill(Stands)
	e.Show(request(s))
	q.pump(t, "the first frame", func() bool { return last.Bounces > 0 })
	if last.Done >= 1 {
		t.Fatal("the portrait filled although it was stopped")
	}
	e.Fill(Fills)
	q.pump(t, "the whole portrait", func() bool { return last.Done >= 1 })
}

// BenchmarkFirstFrame is the time from an edit to the pictures of both panes.
func BenchmarkFirstFrame(b *testing.B) {
	s := opened(b, 10) // the free wall with a post
	e, q, last := started(b)
	k := 0
	for b.Loop() {
		k++
		place := s.Table().Design().Items[1].Place
		place.Shift.X += 0.001 * float64(1-2*(k%2))
		if err := s.Do(edit.Shift{Item: 1, Place: place}); err != nil {
			b.Fatal(err)
		}
		e.Show(request(s))
		q.pump(b, "a frame", func() bool { return last.Revision == s.Revision() })
	}
	b.ReportMetric(last.FirstMs, "ms-first")
}
