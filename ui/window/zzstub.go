package window

import (
	"cavitywright/table"
	"cavitywright/table/tablefile"
	"os"
)

type stub struct{}

var store stub

func (stub) WriteFile(p string, b []byte) error { return os.WriteFile(p, b, 0o644) }
func (stub) EnsureExt(p string) string          { return p }
func (stub) Save(p string, d table.Design) error {
	f, err := os.Create(p)
	if err != nil {
		return err
	}
	defer f.Close()
	return tablefile.Write(f, d)
}

type disk struct{}

func newDisk(*Window, string) disk { return disk{} }
func (disk) changed()              {}
func (disk) clear()                {}
func (disk) offerRecovered()       {}
