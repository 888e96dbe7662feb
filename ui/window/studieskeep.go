package window

import (
	"errors"
	"io"
	"os"
	"path/filepath"
	"slices"

	"cavitywright/sim/study"
	"cavitywright/sim/study/part"
	"cavitywright/table"
)

// studyRecord is the file in which the rows of a study are written down as they
// come, as cavitybatch writes a part, so that the same study, run again after a
// crash, goes on where it was. It is used by the work's goroutine.
type studyRecord struct{ file *os.File }

// mostRecords is how many records of studies are kept; the oldest go.
const mostRecords = 20

// recordsFolder is where records are kept, "" where nothing is.
func (w *Window) recordsFolder() string {
	if w.disk.folder == "" {
		return ""
	}
	return filepath.Join(w.disk.folder, "studies")
}

// recorded opens the record of a study, and gives the rows that stand in it.
// Without a folder, or where it cannot be written, there is no record: a study
// can do without.
func recorded(folder string, st *study.Study) (rec *studyRecord, rows []study.Row) {
	h, err := part.NewHead(plainly(st), program, 1, 1)
	if err != nil || folder == "" || os.MkdirAll(folder, 0o700) != nil {
		return nil, nil
	}
	weed(folder, mostRecords-1)
	file, err := os.OpenFile(filepath.Join(folder, h.Name()), os.O_RDWR|os.O_CREATE, 0o600)
	if err != nil {
		return nil, nil
	}
	rec = &studyRecord{file}
	rows, err = rec.open(h)
	if err != nil {
		rec.close()
		return nil, nil
	}
	return rec, rows
}

// plainly is the study without what its rows do not depend on: name, launches,
// axes, other plans, and where the dials stood. So a study is known again after
// one of its walls was put on the table.
func plainly(st *study.Study) *study.Study {
	d := st.Base.Design()
	if first, err := st.Table(st.At(0)); err == nil {
		d = first.Design()
	}
	d.Name, d.Notes = "", ""
	seed := d.Study.Seed
	d.Study = table.DefaultStudy()
	d.Study.Seed, d.Study.Sweeps = seed, []table.DialSweep{st.Sweep}
	t, err := table.New(d)
	if err != nil {
		return st
	}
	plain, err := study.New(t, st.Sweep)
	if err != nil {
		return st
	}
	return plain
}

// open reads what stands and is ready to go on behind it. What belongs to
// another study is written over.
func (rec *studyRecord) open(h part.Head) ([]study.Row, error) {
	text, err := io.ReadAll(rec.file)
	if err != nil {
		return nil, err
	}
	rows, good, _, err := part.Resume(text, h)
	if err != nil {
		rows, good = nil, 0
	}
	head, err := h.Line()
	if err != nil {
		return nil, err
	}
	if err := rec.file.Truncate(int64(good)); err != nil {
		return nil, err
	}
	if _, err := rec.file.Seek(int64(good), io.SeekStart); err != nil {
		return nil, err
	}
	if good == 0 {
		_, err = rec.file.Write(head)
	}
	return rows, err
}

// add writes a row. After a fault nothing more is written: the study goes on
// without a record.
func (rec *studyRecord) add(row study.Row) {
	if rec == nil || rec.file == nil {
		return
	}
	line, err := part.Line(row)
	if err == nil {
		_, err = rec.file.Write(line)
	}
	if err != nil {
		rec.close()
	}
}

func (rec *studyRecord) close() {
	if rec != nil && rec.file != nil {
		_ = rec.file.Close() // what was written is checked when it is read
		rec.file = nil
	}
}

// weed takes away all but the newest files of a folder.
func weed(folder string, keep int) {
	entries, err := os.ReadDir(folder)
	if err != nil {
		return
	}
	slices.SortStableFunc(entries, func(a, b os.DirEntry) int {
		x, err1 := a.Info()
		y, err2 := b.Info()
		if errors.Join(err1, err2) != nil {
			return 0
		}
		return y.ModTime().Compare(x.ModTime())
	})
	for _, e := range entries[min(keep, len(entries)):] {
		_ = os.Remove(filepath.Join(folder, e.Name())) // another time, then
	}
}
