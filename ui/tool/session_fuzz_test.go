package tool

import (
	"bytes"
	"fmt"
	"math/rand/v2"
	"os"
	"runtime/debug"
	"slices"
	"strconv"
	"testing"
	"time"

	"cavitywright/assets"
	"cavitywright/table"
	"cavitywright/table/tablefile"
	"cavitywright/ui/session"

	"gonum.org/v1/gonum/spatial/r2"
)

// deedsVariable names the environment variable with the number of random
// gestures and commands; seedVariable the seed to begin with.
const (
	deedsVariable = "CAVITYWRIGHT_DEEDS"
	seedVariable  = "CAVITYWRIGHT_SEED"
)

// deedsDefault is the number without the variable: some seconds of work.
const deedsDefault = 4000

// lineLength is the number of deeds on one document before another is opened:
// long enough for undo to go a long way, short enough for many documents.
const lineLength = 400

func fromEnv(t *testing.T, name string, otherwise int) int {
	s := os.Getenv(name)
	if s == "" {
		return otherwise
	}
	n, err := strconv.Atoi(s)
	if err != nil || n < 1 {
		t.Fatalf("%s is %q; set it to a whole number above 0", name, s)
	}
	return n
}

// TestRandomDeeds does random gestures and commands on the session and holds
// it to four laws: nothing panics; a refused command leaves the table that was
// there; every table keeps its file, byte for byte, whatever is done after it;
// undo to the start gives the first file and redo to the end the last.
func TestRandomDeeds(t *testing.T) {
	deeds := fromEnv(t, deedsVariable, deedsDefault)
	first := fromEnv(t, seedVariable, 1)
	if testing.Short() {
		deeds /= 4
	}
	done, seed := 0, first
	count := map[string]int{}
	refused, steps, slow := 0, 0, time.Duration(0)
	var slowest string
	for ; done < deeds; seed++ {
		p := newPerson(t, uint64(seed))
		p.live(min(lineLength, deeds-done))
		done += len(p.diary)
		refused += p.refused
		steps += p.steps
		for k, n := range p.count {
			count[k] += n
		}
		if p.slow > slow {
			slow, slowest = p.slow, fmt.Sprintf("seed %d, %s", seed, p.slowest)
		}
		if t.Failed() {
			return
		}
	}
	if refused == 0 || steps == 0 {
		t.Errorf("%d deeds were refused and %d became steps; both must occur", refused, steps)
	}
	for _, d := range allDeeds() {
		if count[d.name] == 0 && deeds >= deedsDefault {
			t.Errorf("%q was never done", d.name)
		}
	}
	t.Logf("%d deeds from seeds %d to %d: %d steps, %d refused; the slowest took %s (%s)", done, first, seed-1, steps, refused, slow.Round(time.Millisecond), slowest)
}

// person is somebody who does anything at all with one document.
type person struct {
	t   *testing.T
	rng *rand.Rand
	s   *session.Session
	e   *Editor
	r   *Rays
	q   *Portrait

	reach float64
	size  float64
	diary []string
	count map[string]int
	files map[*table.Table]string // of each table that stood as a step
	trail []*table.Table          // in the order in which they came to stand

	refused, steps int
	slow           time.Duration
	slowest        string
}

func newPerson(t *testing.T, seed uint64) *person {
	rng := rand.New(rand.NewPCG(seed, 0xcab1e))
	s := opened(t, rng.IntN(len(assets.Gallery())))
	p := &person{t: t, rng: rng, s: s, e: NewEditor(s), r: NewRays(s), q: NewPortrait(s), count: map[string]int{}}
	p.begin()
	return p
}

// begin notes the document that was just opened.
func (p *person) begin() {
	b := p.s.Table().Bounds()
	p.size = r2.Norm(r2.Sub(b.Max, b.Min))
	p.reach = p.size / 60
	p.files, p.trail = map[*table.Table]string{}, nil
	p.note()
}

// note keeps the file of the table that stands, and holds it to the one kept
// before.
func (p *person) note() {
	now := p.s.Table()
	f := file(p.t, p.s)
	if was, ok := p.files[now]; ok && was != f {
		p.fail("a table that stood before has another file now")
	}
	p.files[now] = f
	if n := len(p.trail); n == 0 || p.trail[n-1] != now {
		p.trail = append(p.trail, now)
	}
}

func (p *person) fail(format string, args ...any) {
	p.t.Helper()
	tail := p.diary[max(0, len(p.diary)-12):]
	p.t.Fatalf("%s\nafter %d deeds, the last of them: %q", fmt.Sprintf(format, args...), len(p.diary), tail)
}

// live does n deeds, and walks to the ends of the history at the end.
func (p *person) live(n int) {
	defer func() {
		if r := recover(); r != nil {
			p.fail("panic: %v\n%s", r, debug.Stack())
		}
	}()
	total := 0
	all := allDeeds()
	for _, d := range all {
		total += d.often
	}
	for range n {
		k := p.rng.IntN(total)
		p.do(all[slices.IndexFunc(all, func(d deed) bool { k -= d.often; return k < 0 })])
	}
	p.walk()
}

// do does one deed and looks whether the laws hold.
func (p *person) do(d deed) {
	p.diary = append(p.diary, d.name)
	p.count[d.name]++
	before := p.s.Table()
	begun := time.Now()
	d.do(p)
	if took := time.Since(begun); took > p.slow {
		p.slow, p.slowest = took, d.name
	}
	if p.s.Refusal != nil && !p.s.InGesture() {
		p.refused++
		if p.s.Refusal.Error() == "" {
			p.fail("a refusal without a sentence")
		}
	}
	if p.rng.IntN(4) == 0 {
		p.look() // what the panes ask for on every redraw must not fail either
	}
	if p.s.Table() != before && !p.s.InGesture() {
		p.steps++
		p.note()
	}
}

// look asks for what the panes show.
func (p *person) look() {
	p.s.Handles()
	p.e.Draft()
	p.e.Group()
	p.e.Frame(p.reach)
	at := p.somewhere()
	if h := p.e.Hint(at, p.reach); h == "" {
		p.fail("no hint at %v", at)
	}
	if r, ok := SelectedCoat(p.s); ok && r.Loop >= 0 {
		r.Sides(p.s.Table())
		r.Fractions(p.s.Table())
		p.e.Coats().Handles(p.reach)
	}
}

// mayRefuse runs a command that may be refused, outside of any gesture.
func (p *person) mayRefuse(f func() error) {
	if p.s.InGesture() {
		p.s.End()
	}
	before := p.s.Table()
	was := file(p.t, p.s)
	undo, redo := p.s.Steps()
	if err := f(); err == nil {
		return
	}
	if p.s.Table() != before || file(p.t, p.s) != was {
		p.fail("a refused command changed the table")
	}
	if u, r := p.s.Steps(); u != undo || r != redo {
		p.fail("a refused command changed what undo and redo do: %q, %q became %q, %q", undo, redo, u, r)
	}
}

// walk goes to the start of the history and to its end: each table has the
// file that it had, the last is the one that stood.
func (p *person) walk() {
	p.escape()
	p.note()
	last := file(p.t, p.s)
	back := 0
	for {
		if u, _ := p.s.Steps(); u == "" {
			break
		}
		p.s.Undo()
		p.note()
		back++
	}
	if got := file(p.t, p.s); p.s.Table() != p.trail[0] || got != p.files[p.trail[0]] {
		p.fail("undo to the start does not give the first file")
	}
	for range back {
		if _, r := p.s.Steps(); r == "" {
			p.fail("there is nothing to redo after %d undos", back)
		}
		p.s.Redo()
		p.note()
	}
	if file(p.t, p.s) != last {
		p.fail("redo to the end does not give the last file")
	}
}

// reopen writes the document and reads it back: the same file again, and the
// same wall.
func (p *person) reopen() {
	p.walk()
	was := file(p.t, p.s)
	d, err := tablefile.Read(bytes.NewReader([]byte(was)))
	if err != nil {
		p.fail("a table that stands cannot be read back: %v\n%s", err, was)
	}
	t, err := table.New(d)
	if err != nil {
		p.fail("a table that stands cannot be built again: %v\n%s", err, was)
	}
	if t.Length() != p.s.Table().Length() {
		p.fail("the length is %v after reading back, %v before", t.Length(), p.s.Table().Length())
	}
	p.s.Open(t, "document.cavity.json")
	if p.s.Unsaved() {
		p.fail("a document that was just read counts as changed")
	}
	if file(p.t, p.s) != was {
		p.fail("the file is another one after reading it back")
	}
	p.begin()
}
