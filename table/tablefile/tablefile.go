// Package tablefile writes a design as a table file, and reads it back: JSON,
// versioned and strict. It knows streams of bytes, not disks or file names.
//
// A file holds what a person drew and chose, never what is compiled from it.
// Lengths are in the file's unit, angles in radians, items and sides are
// counted from 0, stretches of wall are fractions of a side. Keys have a fixed
// order, a record stands on one line, and a number has the fewest digits that
// read back to the same bits, so that two versions of a file differ just where
// their tables do.
package tablefile

import (
	"bytes"
	"fmt"
	"io"

	"cavitywright/table"
)

// Version is the version of the files that Write writes, and the latest that
// Read reads.
const Version = 1

// Format is the value of the key "format" in every table file.
const Format = "cavity"

// The greatest sizes of a file and of what is in it. They are far above what
// is drawn by hand, and keep a file that was made by mistake or malice from
// occupying the machine.
const (
	mostBytes   = 64 << 20
	mostText    = 1 << 20 // bytes of the name or the notes
	mostItems   = 5000
	mostNodes   = 5000 // of all free walls together
	mostCoats   = 1000
	mostStarts  = 10000 // launches
	mostOrbits  = 1000000
	mostBounces = 1000000000
)

// Read is the design in a table file. It refuses what is no table file
// (*NotTable), a later version (*LaterVersion), a key it does not know
// (*UnknownKey), a value that is missing or cannot be (*BadValue), and a design
// that does not compile (*table.Fault); other errors are those of r. Each is
// one sentence: what, where, what to do.
func Read(r io.Reader) (table.Design, error) {
	src, err := io.ReadAll(io.LimitReader(r, mostBytes+1))
	if err != nil {
		return table.Design{}, fmt.Errorf("the table could not be read to its end: %w", err)
	}
	d, err := decode(src)
	if err != nil {
		return table.Design{}, err
	}
	if _, err := table.New(d); err != nil {
		return table.Design{}, err
	}
	return d, nil
}

// Write writes a design that compiles as a table file: the same bytes for the
// same design. It refuses, in the words of Read, what no file can say, and then
// writes nothing; it does not compile the design anew. Text that is not valid
// UTF-8 has the invalid bytes replaced.
func Write(w io.Writer, d table.Design) error {
	b, err := encode(d)
	if err != nil {
		return err
	}
	if _, err := decode(b); err != nil {
		return unplaced(err)
	}
	_, err = w.Write(b)
	return err
}

// decode checks the file from the outside in: its syntax, its version, its keys
// and values. Whether the design is a table is not asked.
func decode(src []byte) (table.Design, error) {
	src = bytes.TrimPrefix(src, []byte("\ufeff")) // as some editors put it
	h, err := readHead(src)
	if err != nil {
		return table.Design{}, err
	}
	d, err := readDesign(src, h)
	if err != nil {
		return table.Design{}, err
	}
	return d, nil
}
