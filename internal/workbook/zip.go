package workbook

import (
	"archive/zip"
	"bytes"
	"compress/flate"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"regexp"
	"slices"
	"sort"
	"strings"
	"time"
)

const contentTypes = "[Content_Types].xml"

// parts collects the parts of a package and writes them sorted, with one time
// stamp, so that the same content always gives the same bytes.
type parts struct {
	out     io.Writer
	content map[string]*bytes.Buffer
	patch   func(name string, part []byte) ([]byte, error)
}

func (p *parts) Create(name string) (io.Writer, error) {
	if _, ok := p.content[name]; ok {
		return nil, fmt.Errorf("part %s is written twice", name)
	}
	buffer := new(bytes.Buffer)
	p.content[name] = buffer
	return buffer, nil
}

func (p *parts) AddFS(fs.FS) error { return errors.New("adding a file system is not supported") }

func (p *parts) Close() error {
	names := make([]string, 0, len(p.content))
	for name := range p.content {
		names = append(names, name)
	}
	sort.Slice(names, func(i, j int) bool {
		a, b := partOrder(names[i]), partOrder(names[j])
		return a < b || a == b && names[i] < names[j]
	})
	archive := zip.NewWriter(p.out)
	archive.RegisterCompressor(zip.Deflate, func(w io.Writer) (io.WriteCloser, error) { return flate.NewWriter(w, flate.BestCompression) })
	for _, name := range names {
		part, err := p.patch(name, p.content[name].Bytes())
		if err != nil {
			return fmt.Errorf("part %s: %w", name, err)
		}
		header := &zip.FileHeader{Name: name, Method: zip.Deflate, Modified: time.Date(1980, 1, 1, 0, 0, 0, 0, time.UTC)}
		w, err := archive.CreateHeader(header)
		if err != nil {
			return err
		}
		if _, err := w.Write(part); err != nil {
			return err
		}
	}
	return archive.Close()
}

func partOrder(name string) int {
	switch name {
	case contentTypes:
		return 0
	case "_rels/.rels":
		return 1
	}
	return 2
}

// patchPart puts right what the writing library leaves open.
func (w *file) patchPart(name string, part []byte) ([]byte, error) {
	switch {
	case name == contentTypes:
		return sortDefaults(part), nil
	case strings.HasPrefix(name, "xl/charts/chart"):
		return patchChart(part, w.valuesAt)
	case strings.HasPrefix(name, "xl/drawings/drawing"):
		return anchorBySize(part)
	case strings.HasPrefix(name, "xl/worksheets/sheet"):
		return bytes.ReplaceAll(part, []byte("<colBreaks></colBreaks>"), nil), nil // an empty list
	}
	return part, nil
}

var defaultEntry = regexp.MustCompile(`<Default [^>]*(?:/>|></Default>)`)

// sortDefaults orders the default content types, which come in random order.
func sortDefaults(part []byte) []byte {
	entries := defaultEntry.FindAll(part, -1)
	sorted := slices.Clone(entries)
	slices.SortFunc(sorted, bytes.Compare)
	next := 0
	return defaultEntry.ReplaceAllFunc(part, func([]byte) []byte {
		next++
		return sorted[next-1]
	})
}
