// Package part writes down the rows of a study as they come, and reads them
// back: line by line, each with a checksum, so that a run that was killed goes on
// where it was, and so that a study can be shared out among machines.
//
// A part is JSON, one record a line. The first line says to which table, sweep or
// tolerance and part of how many it belongs, and carries the table file; each line
// after it is one row, in the order of the tasks. Part k of n has the tasks k-1,
// k-1+n, k-1+2n and so on. The bytes depend on the study alone.
package part

import (
	"bytes"
	"crypto/sha256"
	"encoding/hex"
	"fmt"
	"hash/crc32"
	"strings"

	"cavitywright/sim/study"
	"cavitywright/table"
	"cavitywright/table/tablefile"

	"github.com/go-json-experiment/json"
	"github.com/go-json-experiment/json/jsontext"
)

// Format and Version are those of the files written here.
const (
	Format  = "cavity-part"
	Version = 1
)

// Most bounds the number of parts.
const Most = 100_000

// Head is the first line of a part.
type Head struct {
	Format  string `json:"format"`
	Version int    `json:"version"`
	Program string `json:"program"` // whose numbers these are
	Hash    string `json:"sha256"`  // of the table file, in hexadecimal
	Sweep   string `json:"sweep"`
	// Tolerance is that of a run of copies, which has no sweep.
	Tolerance string `json:"tolerance,omitzero"`
	Part      int    `json:"part"` // from 1
	Of        int    `json:"of"`
	Tasks     int    `json:"tasks"` // of all parts together
	Table     string `json:"table"` // the table file with the sweep in it
}

// NewHead is the head of part k of n of a study whose design holds the sweep.
func NewHead(st *study.Study, program string, k, n int) (Head, error) {
	h, err := headOf(st.Base, program, k, n)
	h.Sweep, h.Tasks = st.Sweep.Name, st.Tasks()
	return h, err
}

// headOf is a head that carries a table.
func headOf(t *table.Table, program string, k, n int) (Head, error) {
	var file bytes.Buffer
	if err := tablefile.Write(&file, t.Design()); err != nil {
		return Head{}, err
	}
	sum := sha256.Sum256(file.Bytes())
	return Head{Format: Format, Version: Version, Program: program, Hash: hex.EncodeToString(sum[:]),
		Part: k, Of: n, Table: file.String()}, nil
}

// Name is a name for the part's file that no other study has.
func (h Head) Name() string {
	sum := sha256.Sum256([]byte(h.Program + "\n" + h.Sweep + h.Tolerance + "\n" + h.Table))
	return fmt.Sprintf("%s-%d-of-%d.jsonl", hex.EncodeToString(sum[:12]), h.Part, h.Of)
}

// Due are the tasks of the part, in order.
func (h Head) Due() (all []int) {
	for i := h.Part - 1; i < h.Tasks; i += h.Of {
		all = append(all, i)
	}
	return all
}

// Study is the study that the head carries. The error is a sentence.
func (h Head) Study() (*study.Study, error) {
	t, err := h.table()
	if err != nil {
		return nil, err
	}
	for _, s := range t.Design().Study.Sweeps {
		if s.Name == h.Sweep {
			return study.New(t, s)
		}
	}
	return nil, fmt.Errorf("the table in it has no sweep called %q", h.Sweep)
}

// table is the table that the head carries.
func (h Head) table() (*table.Table, error) {
	d, err := tablefile.Read(strings.NewReader(h.Table))
	if err != nil {
		return nil, err
	}
	return table.New(d)
}

// same reports whether two heads differ in the number of the part alone.
func (h Head) same(o Head) bool {
	h.Part = o.Part
	return h == o
}

// Line is the line of a row, the end of the line included.
func Line(row study.Row) ([]byte, error) { return sealed("row", row) }

// Line is the line of the head.
func (h Head) Line() ([]byte, error) { return sealed("head", h) }

// sealed is a record with its checksum: CRC-32 (IEEE) of the record's own bytes.
func sealed(kind string, v any) ([]byte, error) {
	b, err := json.Marshal(v, json.Deterministic(true))
	if err != nil {
		return nil, err
	}
	return fmt.Appendf(nil, "{%q:%s,\"crc32\":\"%08x\"}\n", kind, b, crc32.ChecksumIEEE(b)), nil
}

// opened is the record of a line; the error says what is wrong with it.
func opened(line []byte, kind string, v any) error {
	var raw map[string]jsontext.Value
	if err := json.Unmarshal(line, &raw); err != nil {
		return fmt.Errorf("it is not a whole record")
	}
	body, ok := raw[kind]
	if !ok || len(raw) != 2 {
		return fmt.Errorf("it is no %s", kind)
	}
	if string(raw["crc32"]) != fmt.Sprintf(`"%08x"`, crc32.ChecksumIEEE(body)) {
		return fmt.Errorf("its checksum is wrong")
	}
	if err := json.Unmarshal(body, v, json.RejectUnknownMembers(true)); err != nil {
		return fmt.Errorf("it is no %s", kind)
	}
	return nil
}
