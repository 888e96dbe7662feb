package tablefile

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"strconv"
	"strings"

	"github.com/go-json-experiment/json/jsontext"
)

// head is what decides how the rest is read.
type head struct{ unit string }

// readHead holds the whole file to the syntax of JSON and finds its version, so
// that a file of a later version is not taken for a bad one of ours.
func readHead(src []byte) (head, error) {
	first := bytes.TrimLeft(src, " \t\r\n")
	switch {
	case len(src) > mostBytes:
		return head{}, &NotTable{text: fmt.Sprintf("The file is larger than %d MiB, and no table file is; open another.", mostBytes>>20)}
	case len(first) == 0:
		return head{}, &NotTable{text: "The file is empty; copy it here again, or open another."}
	case first[0] != '{':
		at := placed(src, len(src)-len(first), "")
		return head{}, &NotTable{at, fmt.Sprintf("This is no table file: it begins with %q at line %d, column %d, where a { belongs; open a file that ends in .cavity.json.",
			firstRune(first), at.Line, at.Column)}
	}
	values, err := headValues(src)
	if err != nil {
		return head{}, malformed(src, err)
	}
	if string(values["format"]) != strconv.Quote(Format) {
		return head{}, &NotTable{text: fmt.Sprintf("The file is JSON, but no table file: it lacks \"format\": %q; open a file that ends in .cavity.json.", Format)}
	}
	// What is no number is left to readDesign, which tells where it stands.
	if v, err := strconv.Atoi(string(values["version"])); err == nil && v > Version {
		return head{}, &LaterVersion{File: v, Ours: Version}
	}
	return head{unit: strings.Trim(string(values["unit"]), `"`)}, nil
}

// headValues are the values of the head as they stand in the file, which is
// read to its end. A key that stands twice is left to readDesign, which need
// not remember the keys of what it does not know.
func headValues(src []byte) (map[string]jsontext.Value, error) {
	values := map[string]jsontext.Value{}
	dec := jsontext.NewDecoder(bytes.NewReader(src), jsontext.AllowDuplicateNames(true))
	if _, err := dec.ReadToken(); err != nil {
		return nil, err
	}
	for dec.PeekKind() == '"' {
		key, err := dec.ReadToken()
		if err != nil {
			return nil, err
		}
		switch name := key.String(); name {
		case "format", "version", "unit":
			if k := dec.PeekKind(); k == '"' || k == '0' {
				v, err := dec.ReadValue()
				if err != nil {
					return nil, err
				}
				values[name] = v.Clone()
				continue
			}
		}
		if err := dec.SkipValue(); err != nil {
			return nil, err
		}
	}
	if _, err := dec.ReadToken(); err != nil { // the closing brace
		return nil, err
	}
	end := int(dec.InputOffset())
	switch _, err := dec.ReadToken(); err {
	case io.EOF:
		return values, nil
	case nil:
		at := placed(src, end, "")
		return nil, &NotTable{at, fmt.Sprintf("The file goes on after its last }, at line %d, column %d; take out what follows.", at.Line, at.Column)}
	default:
		return nil, err
	}
}

// malformed puts an error of the syntax into a sentence.
func malformed(src []byte, err error) error {
	syn := (*jsontext.SyntacticError)(nil)
	switch more := (*NotTable)(nil); {
	case errors.As(err, &more):
		return more
	case !errors.As(err, &syn):
		return &NotTable{text: "The file cannot be read as JSON; open another."}
	}
	at := placed(src, int(syn.ByteOffset), pathOf(syn.JSONPointer))
	if errors.Is(err, io.ErrUnexpectedEOF) {
		at = placed(src, len(src), at.Path)
		return &NotTable{at, fmt.Sprintf("The file breaks off in %s, at line %d, column %d; copy it here again, or save the table anew.",
			at.record(), at.Line, at.Column)}
	}
	if w, start := noNumber(src, int(syn.ByteOffset)); w != "" {
		return &BadValue{placed(src, start, at.Path), "is " + w, "give a number"}
	}
	return &NotTable{at, fmt.Sprintf("Line %d, column %d, in %s, is not valid JSON: %s; mend it there, or save the table anew.",
		at.Line, at.Column, at.record(), strings.TrimPrefix(syn.Err.Error(), "jsontext: "))}
}

// noNumber is the word at the offset that other programs write for what is no
// number, with the minus sign before it, and where it starts.
func noNumber(src []byte, offset int) (word string, start int) {
	rest := src[min(offset, len(src)):]
	start = offset
	if offset > 0 && src[offset-1] == '-' {
		start--
	}
	for _, w := range []string{"NaN", "nan", "Infinity", "Inf", "inf"} {
		if bytes.HasPrefix(rest, []byte(w)) {
			return string(src[start:offset]) + w, start
		}
	}
	return "", offset
}

// pathOf writes a pointer as a path: /items/1/at as items[1].at.
func pathOf(p jsontext.Pointer) string {
	path := ""
	for token := range p.Tokens() {
		if _, err := strconv.ParseUint(token, 10, 64); err == nil {
			path += "[" + token + "]"
			continue
		}
		path = joined(path, short(token))
	}
	return path
}

func joined(path, key string) string {
	if path == "" {
		return key
	}
	return path + "." + key
}

func firstRune(b []byte) string { return string([]rune(string(b[:min(len(b), 4)]))[:1]) }
