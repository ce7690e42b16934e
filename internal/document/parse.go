package document

import (
	"bytes"
	"errors"
	"fmt"
	"io"
	"strings"
	"unicode/utf8"

	"go.yaml.in/yaml/v3"
)

// The limits of a document. They are far above what a person writes.
const (
	maxBytes = 1 << 20
	maxDepth = 32
)

// Parse reads one YAML document. The error is not nil where there is no tree to
// look at. Problems that leave a tree (a key twice, an anchor, nesting too deep)
// are recorded, so that the caller can report them together with its own:
// finish with node.Problems().Err().
func Parse(name string, data []byte) (*Node, error) {
	found := &Problems{file: name}
	checkBytes(data, found)
	if found.Count() > 0 {
		return nil, found.Err()
	}
	source := &lineReader{data: data}
	decoder := yaml.NewDecoder(source)
	var first yaml.Node
	switch err := decoder.Decode(&first); {
	case errors.Is(err, io.EOF):
		found.Add(0, "the file is empty")
	case err != nil:
		found.addSyntax(err, source)
	case isNull(first.Content[0]):
		found.Add(0, "the file is empty")
	}
	if found.Count() > 0 {
		return nil, found.Err()
	}
	checkSingle(decoder, source, found)
	root := build(&first, found)
	return root, nil
}

// checkBytes refuses what is not a text file of sensible size.
func checkBytes(data []byte, found *Problems) {
	switch {
	case len(data) > maxBytes:
		found.Add(0, "the file is larger than 1 MiB (%d bytes)", len(data))
		return
	case bytes.IndexByte(data, 0) >= 0:
		found.Add(lineOf(data, bytes.IndexByte(data, 0)), "this is not a text file: it contains a zero byte")
		return
	}
	for at := 0; at < len(data); {
		r, size := utf8.DecodeRune(data[at:])
		switch {
		case r == utf8.RuneError && size <= 1:
			found.Add(lineOf(data, at), "this is not text in UTF-8: byte 0x%02x cannot be read; save the file as UTF-8", data[at])
			return
		case isControl(r):
			found.Add(lineOf(data, at), "control character U+%04X is not allowed", r)
			return
		}
		at += size
	}
}

func isControl(r rune) bool {
	return r < 0x20 && r != '\t' && r != '\n' && r != '\r' || r >= 0x7f && r < 0xa0 && r != 0x85 || r == 0xfffe || r == 0xffff
}

func lineOf(data []byte, at int) int { return 1 + bytes.Count(data[:at], []byte("\n")) }

// checkSingle records a second document.
func checkSingle(decoder *yaml.Decoder, source *lineReader, found *Problems) {
	var second yaml.Node
	switch err := decoder.Decode(&second); {
	case errors.Is(err, io.EOF):
	case err != nil:
		found.addSyntax(err, source)
	default:
		found.Add(second.Line, "a second YAML document begins here; a file holds one")
	}
}

// lineReader hands out one line at a time, so that the line reached is known when
// the parser gives up: its own positions point at the start of the enclosing block.
type lineReader struct {
	data []byte
	at   int
	line int
}

func (r *lineReader) Read(buffer []byte) (int, error) {
	if r.at >= len(r.data) {
		return 0, io.EOF
	}
	if r.at == 0 || r.data[r.at-1] == '\n' {
		r.line++
	}
	rest := r.data[r.at:]
	if end := bytes.IndexByte(rest, '\n'); end >= 0 {
		rest = rest[:end+1]
	}
	n := copy(buffer, rest)
	r.at += n
	return n, nil
}

// plain puts the parser's commonest complaints in the words of the person who types.
var plain = []struct{ theirs, ours string }{
	{"exceeded max depth", fmt.Sprintf("nested deeper than %d levels", maxDepth)},
	{"found character that cannot start any token", "a value or a key begins with a character that YAML reserves (a tab, @ or `); use spaces to indent and put text in quotes"},
	{"found a tab character that violates indentation", "a tab is used to indent; use spaces"},
	{"mapping values are not allowed in this context", `a ":" stands where no key may be; check the indentation, and put text that contains ": " in quotes`},
	{"did not find expected key", "the line does not fit the ones before it; check the indentation and that every key is followed by a colon"},
	{"did not find expected '-' indicator", `the line does not fit the list before it; check the indentation and the "-"`},
	{"did not find expected ',' or '}'", `a "}" or a comma is missing`},
	{"did not find expected ',' or ']'", `a "]" or a comma is missing`},
	{"could not find expected ':'", "a colon is missing after a key"},
	{"found unexpected end of stream", "a quote is not closed"},
	{"unknown anchor", "aliases (*name) are not used here; write the value out"},
}

func (p *Problems) addSyntax(err error, source *lineReader) {
	text := strings.TrimPrefix(err.Error(), "yaml: ")
	if _, after, ok := strings.Cut(text, ": "); ok && strings.HasPrefix(text, "line ") {
		text = after
	}
	line := source.line
	if _, name, ok := strings.Cut(text, "unknown anchor '"); ok { // found after reading ahead
		name, _, _ = strings.Cut(name, "'")
		line = lineOf(source.data, max(bytes.Index(source.data, []byte("*"+name)), 0))
	}
	for _, say := range plain {
		if strings.HasPrefix(text, say.theirs) {
			p.Add(line, "%s", say.ours)
			return
		}
	}
	p.Add(line, "this is not valid YAML: %s", text)
}
