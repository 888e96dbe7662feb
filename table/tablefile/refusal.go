package tablefile

import (
	"bytes"
	"errors"
	"fmt"
	"strconv"
	"strings"
	"unicode/utf8"
)

// Place is where in a file something stands. Line and Column count from 1, in
// characters; Line is 0 where there is no file yet. Path is the way through the
// keys, as in items[1].parameters.radius, and empty at the top.
type Place struct {
	Line, Column int
	Path         string
}

// NotTable is the refusal of what is no table file: no JSON, broken off, or
// JSON of another kind.
type NotTable struct {
	Place
	text string
}

func (e *NotTable) Error() string { return e.text }

// LaterVersion is the refusal of a file of a version after ours.
type LaterVersion struct{ File, Ours int }

func (e *LaterVersion) Error() string {
	return fmt.Sprintf("The file is of version %d, but this program reads versions up to %d; open it with a newer one, or ask for the table in version %d.",
		e.File, e.Ours, e.Ours)
}

// UnknownKey is the refusal of a key that a table file does not have.
type UnknownKey struct {
	Place // of the key; Path is that of the record it stands in
	Key   string
	Known []string // the keys that the record may have
}

func (e *UnknownKey) Error() string {
	return fmt.Sprintf("There is no key %s in %s%s; take it out, or use %s.", quoted(e.Key), e.record(), e.lines(), either(e.Known))
}

// BadValue is the refusal of a value: missing, given twice, of the wrong type,
// or out of its range.
type BadValue struct {
	Place
	problem string // "is -1", "is missing"
	remedy  string // "give a number from 0 to 1"
}

func (e *BadValue) Error() string {
	return fmt.Sprintf("%s %s%s; %s.", e.record(), e.problem, e.lines(), e.remedy)
}

// record is the path, as the sentence names it.
func (p Place) record() string {
	if p.Path == "" {
		return "the file"
	}
	return p.Path
}

func (p Place) lines() string {
	if p.Line == 0 {
		return ""
	}
	return fmt.Sprintf(" (line %d, column %d)", p.Line, p.Column)
}

// unplaced takes the lines out of a refusal, for a design that is in no file.
func unplaced(err error) error {
	if e := (*UnknownKey)(nil); errors.As(err, &e) {
		e.Line = 0
	}
	if e := (*BadValue)(nil); errors.As(err, &e) {
		e.Line = 0
	}
	return err
}

// placed is the place of the byte at offset.
func placed(src []byte, offset int, path string) Place {
	before := src[:min(offset, len(src))]
	line := bytes.Count(before, []byte{'\n'}) + 1
	last := before[bytes.LastIndexByte(before, '\n')+1:]
	return Place{Line: line, Column: utf8.RuneCount(last) + 1, Path: path}
}

// either lists words for a sentence: a, b or c.
func either(words []string) string {
	n := len(words)
	if n < 2 {
		return strings.Join(words, "")
	}
	return strings.Join(words[:n-1], ", ") + " or " + words[n-1]
}

// longestQuote is the number of characters of a file that a sentence repeats.
const longestQuote = 40

func quoted(s string) string { return strconv.Quote(short(s)) }

func short(s string) string {
	if utf8.RuneCountInString(s) <= longestQuote {
		return s
	}
	return string([]rune(s)[:longestQuote]) + "…"
}
