package tablefile

import (
	"bytes"
	"errors"
	"fmt"
	"iter"
	"math"
	"slices"
	"strconv"
	"strings"

	"github.com/go-json-experiment/json/jsontext"
	"gonum.org/v1/gonum/spatial/r2"
)

// cursor goes through a file whose syntax is known to hold, value by value. It
// keeps the first refusal, after which its methods do nothing.
type cursor struct {
	src   []byte
	dec   *jsontext.Decoder
	path  string
	err   error
	unit  string // of length, for sentences
	nodes int    // read so far, of all free walls
}

func newCursor(src []byte, unit string) *cursor {
	return &cursor{src: src, dec: jsontext.NewDecoder(bytes.NewReader(src)), unit: unit}
}

func (c *cursor) fail(err error) {
	if c.err == nil {
		c.err = err
	}
}

// mark is a place of which the line is not counted yet.
type mark struct {
	offset int
	path   string
}

func (c *cursor) place(m mark) Place { return placed(c.src, m.offset, m.path) }

func (c *cursor) refuse(m mark, remedy, problem string, args ...any) {
	if c.err == nil {
		c.err = &BadValue{c.place(m), fmt.Sprintf(problem, args...), remedy}
	}
}

// here is the mark of the next key or value.
func (c *cursor) here() mark {
	at := int(c.dec.InputOffset())
	for at < len(c.src) && strings.IndexByte(" \t\r\n:,", c.src[at]) >= 0 {
		at++
	}
	return mark{at, c.path}
}

// kinds names what stands in a file where something else belongs.
var kinds = map[jsontext.Kind]string{'{': "a record in { }", '[': "a list in [ ]", 'n': "null", 't': "true", 'f': "false"}

// expect refuses the next value unless it is of the kind.
func (c *cursor) expect(k jsontext.Kind, remedy string) bool {
	if c.err != nil {
		return false
	}
	got := c.dec.PeekKind()
	if got == k {
		return true
	}
	at, what := c.here(), kinds[got]
	if what == "" {
		v, _ := c.dec.ReadValue() // a number or a text
		what = short(string(v))
	}
	c.refuse(at, remedy, "is %s", what)
	return false
}

// next reads a token where the kind is known.
func (c *cursor) next() jsontext.Token {
	t, err := c.dec.ReadToken()
	if err != nil {
		c.fail(malformed(c.src, err))
	}
	return t
}

// keys goes through the keys of a record. A key that is not known, or stands
// twice, is refused. The value of each must be read within the loop.
func (c *cursor) keys(known ...string) iter.Seq[string] {
	return func(yield func(string) bool) {
		if !c.expect('{', "write it in { }") {
			return
		}
		c.next()
		outer := c.path
		defer func() { c.path = outer }()
		for c.err == nil && c.dec.PeekKind() == '"' {
			c.path = outer
			at := c.here()
			t, err := c.dec.ReadToken()
			if errors.Is(err, jsontext.ErrDuplicateName) {
				c.twice(at, err)
				return
			}
			name := t.String()
			if len(known) > 0 && !slices.Contains(known, name) {
				c.fail(&UnknownKey{c.place(at), name, known})
				return
			}
			c.path = joined(outer, short(name))
			if !yield(name) {
				return
			}
		}
		if c.err == nil {
			c.next()
		}
	}
}

func (c *cursor) twice(at mark, err error) {
	if syn := (*jsontext.SyntacticError)(nil); errors.As(err, &syn) {
		at.path = joined(at.path, short(syn.JSONPointer.LastToken()))
	}
	c.refuse(at, "take one of the two out", "stands twice")
}

// list goes through a list of at most most entries, called as the plural says.
// Each must be read within the loop.
func (c *cursor) list(most int, plural string) iter.Seq[int] {
	return func(yield func(int) bool) {
		if !c.expect('[', "write the "+plural+" in [ ]") {
			return
		}
		c.next()
		outer := c.path
		defer func() { c.path = outer }()
		for i := 0; c.err == nil && c.dec.PeekKind() != ']'; i++ {
			c.path = fmt.Sprintf("%s[%d]", outer, i)
			if i >= most {
				c.refuse(c.here(), "leave some out", "is one too many, as there may be %d %s", most, plural)
				return
			}
			if !yield(i) {
				return
			}
		}
		if c.err == nil {
			c.next()
		}
	}
}

// text is a text of bounded length.
func (c *cursor) text() string {
	at := c.here()
	if !c.expect('"', "write it in quotation marks") {
		return ""
	}
	s := c.next().String()
	if len(s) > mostText {
		c.refuse(at, fmt.Sprintf("shorten it to %d", mostText), "is %d bytes long", len(s))
		return ""
	}
	return s
}

// word is the index of the text in the list of words that may stand here.
func (c *cursor) word(words []string) int {
	at := c.here()
	if !c.expect('"', "write "+either(quotedAll(words))) {
		return 0
	}
	s := c.next().String()
	i := slices.Index(words, s)
	if i < 0 {
		c.refuse(at, "write "+either(quotedAll(words)), "is %s", quoted(s))
		return 0
	}
	return i
}

// number is a number in [lo, hi].
func (c *cursor) number(lo, hi float64) float64 {
	at, remedy := c.here(), within(lo, hi)
	if !c.expect('0', remedy) {
		return 0
	}
	raw := c.next().String()
	v, err := strconv.ParseFloat(raw, 64)
	if err != nil || !(v >= lo && v <= hi) {
		c.refuse(at, remedy, "is %s", short(raw))
		return 0
	}
	return v
}

// anyNumber is a finite number.
func (c *cursor) anyNumber() float64 { return c.number(-math.MaxFloat64, math.MaxFloat64) }

func within(lo, hi float64) string {
	switch {
	case hi == math.MaxFloat64 && lo > 0:
		return "give a number above 0"
	case hi == math.MaxFloat64:
		return "give a number"
	}
	return fmt.Sprintf("give a number from %s to %s", appendNumber(nil, lo), appendNumber(nil, hi))
}

// whole is a whole number in [lo, hi], written as such.
func (c *cursor) whole(lo, hi uint64) uint64 {
	at, remedy := c.here(), fmt.Sprintf("give a whole number from %d to %d", lo, hi)
	if lo == hi {
		remedy = fmt.Sprintf("write %d", lo)
	}
	if !c.expect('0', remedy) {
		return lo
	}
	raw := c.next().String()
	v, err := strconv.ParseUint(raw, 10, 64)
	if err != nil || v < lo || v > hi {
		c.refuse(at, remedy, "is %s", short(raw))
		return lo
	}
	return v
}

// numbers are n numbers in [ ].
func (c *cursor) numbers(n int) []float64 {
	at, v := c.here(), make([]float64, 0, n)
	for range c.list(n, "numbers") {
		v = append(v, c.anyNumber())
	}
	if len(v) < n {
		c.refuse(at, fmt.Sprintf("give %d in [ ]", n), "has %d of %d numbers", len(v), n)
		v = make([]float64, n)
	}
	return v
}

func (c *cursor) point() r2.Vec {
	v := c.numbers(2)
	return r2.Vec{X: v[0], Y: v[1]}
}

func quotedAll(words []string) []string {
	q := make([]string, len(words))
	for i, w := range words {
		q[i] = strconv.Quote(w)
	}
	return q
}
