package export

import (
	"bytes"
	"compress/zlib"
	"encoding/binary"
	"errors"
	"hash/crc32"
	"io"
)

// Why no table came out of a picture.
var (
	ErrNotPNG    = errors.New("this is not a PNG picture; choose one that was exported here")
	ErrNotSVG    = errors.New("this is not an SVG drawing; choose one that was exported here")
	ErrNoTable   = errors.New("there is no table inside this picture; open the table file it was made from")
	ErrTruncated = errors.New("this picture breaks off before its end; copy or download it again")
	ErrDamaged   = errors.New("this picture is damaged where its table should be; copy or download it again")
	ErrTooLarge  = errors.New("this picture claims to hold more than 64 MiB in one piece, so it was not exported here; open the table file instead")
)

// MostCarried is the size, in bytes, of the largest chunk that is read and of
// the largest table that is unpacked. A table file has some kilobytes.
const MostCarried = 64 << 20

// TableInPNG gives the table file that a PNG carries. It reads no further than
// the table, skips the picture itself without decoding it, and holds at most
// MostCarried bytes twice.
func TableInPNG(r io.Reader) ([]byte, error) {
	var head [len(signature)]byte
	if _, err := io.ReadFull(r, head[:]); err != nil && !short(err) {
		return nil, err
	}
	if string(head[:]) != signature {
		return nil, ErrNotPNG
	}
	for {
		table, found, err := nextChunk(r)
		if found || err != nil {
			return table, err
		}
	}
}

// nextChunk reads one chunk and tells whether it held the table.
func nextChunk(r io.Reader) (table []byte, found bool, err error) {
	var frame [8]byte
	if _, err := io.ReadFull(r, frame[:]); err != nil {
		return nil, false, broken(err)
	}
	n, name := binary.BigEndian.Uint32(frame[:4]), string(frame[4:])
	if n > MostCarried {
		return nil, false, ErrTooLarge
	}
	if name == "IEND" {
		return nil, false, ErrNoTable
	}
	if name != "iTXt" {
		_, err := io.CopyN(io.Discard, r, int64(n)+4)
		return nil, false, broken(err)
	}
	var data bytes.Buffer
	if _, err := io.CopyN(&data, r, int64(n)+4); err != nil {
		return nil, false, broken(err)
	}
	text, sum := data.Bytes()[:n], binary.BigEndian.Uint32(data.Bytes()[n:])
	if sum != crc32.Update(crc32.ChecksumIEEE(frame[4:]), crc32.IEEETable, text) {
		return nil, false, ErrDamaged
	}
	return textUnder(tableKey, text)
}

// textUnder unpacks the data of an iTXt chunk where it has the keyword.
func textUnder(key string, data []byte) (text []byte, found bool, err error) {
	rest, ok := bytes.CutPrefix(data, []byte(key+"\x00"))
	if !ok {
		return nil, false, nil
	}
	if len(rest) < 2 {
		return nil, false, ErrDamaged
	}
	packed, method := rest[0], rest[1]
	rest = rest[2:]
	for range 2 { // language and translated keyword
		_, after, ok := bytes.Cut(rest, []byte{0})
		if !ok {
			return nil, false, ErrDamaged
		}
		rest = after
	}
	switch {
	case packed == 0:
		return rest, true, nil
	case packed != 1 || method != 0:
		return nil, false, ErrDamaged
	}
	text, err = inflated(rest)
	return text, err == nil, err
}

// deflated is data compressed by zlib.
func deflated(data []byte) []byte {
	var b bytes.Buffer
	z := zlib.NewWriter(&b)
	_, _ = z.Write(data) // a bytes.Buffer does not fail
	_ = z.Close()
	return b.Bytes()
}

// inflated undoes deflated, for at most MostCarried bytes.
func inflated(data []byte) ([]byte, error) {
	z, err := zlib.NewReader(bytes.NewReader(data))
	if err != nil {
		return nil, ErrDamaged
	}
	text, err := io.ReadAll(io.LimitReader(z, MostCarried+1))
	switch {
	case err != nil:
		return nil, ErrDamaged
	case len(text) > MostCarried:
		return nil, ErrTooLarge
	}
	return text, nil
}

// short says whether a reader ended too early.
func short(err error) bool { return errors.Is(err, io.EOF) || errors.Is(err, io.ErrUnexpectedEOF) }

// broken names the end of a reader; other errors are the reader's own.
func broken(err error) error {
	if short(err) {
		return ErrTruncated
	}
	return err
}
