package workbook

import (
	"archive/zip"
	"bytes"
	"compress/flate"
	"errors"
	"fmt"
	"hash/crc32"
	"io"
	"io/fs"
	"regexp"
	"slices"
	"sort"
	"strconv"
	"strings"
	"time"
)

const contentTypes = "[Content_Types].xml"

// parts collects the parts of a package and writes them sorted, with one time
// stamp, so that the same content always gives the same bytes. A part is
// compressed as soon as the next one begins: a large workbook would not fit
// beside itself.
type parts struct {
	out   io.Writer
	patch func(name string, part []byte) ([]byte, error)

	open   string // the part that is being written
	buffer bytes.Buffer
	done   map[string]packed

	writers map[int]*flate.Writer // by level
}

// smallFile is the level at which a workbook of a few lots can be mailed and is
// written at once.
const smallFile = 7

// largePart is the size from which time counts more than a few kilobytes.
const largePart = 4 << 20

// packed is a compressed part.
type packed struct {
	data     []byte
	size     uint64 // before compression
	checksum uint32
}

func (p *parts) Create(name string) (io.Writer, error) {
	if err := p.finish(); err != nil {
		return nil, err
	}
	if _, ok := p.done[name]; ok {
		return nil, fmt.Errorf("part %s is written twice", name)
	}
	p.open = name
	return &p.buffer, nil
}

func (p *parts) AddFS(fs.FS) error { return errors.New("adding a file system is not supported") }

// finish patches and compresses the part that is being written.
func (p *parts) finish() error {
	if p.open == "" {
		return nil
	}
	part, err := p.patch(p.open, p.buffer.Bytes())
	if err != nil {
		return fmt.Errorf("part %s: %w", p.open, err)
	}
	data, err := p.compress(part)
	if err != nil {
		return err
	}
	p.done[p.open] = packed{data, uint64(len(part)), crc32.ChecksumIEEE(part)}
	p.open = ""
	p.buffer.Reset()
	return nil
}

func (p *parts) compress(part []byte) ([]byte, error) {
	level := smallFile
	if len(part) > largePart {
		level = flate.BestSpeed
	}
	var data bytes.Buffer
	w := p.writers[level]
	if w == nil {
		var err error
		if w, err = flate.NewWriter(&data, level); err != nil {
			return nil, err
		}
		if p.writers == nil {
			p.writers = map[int]*flate.Writer{}
		}
		p.writers[level] = w
	}
	w.Reset(&data)
	if _, err := w.Write(part); err != nil {
		return nil, err
	}
	err := w.Close()
	return data.Bytes(), err
}

func (p *parts) Close() error {
	if err := p.finish(); err != nil {
		return err
	}
	names := make([]string, 0, len(p.done))
	for name := range p.done {
		names = append(names, name)
	}
	sort.Slice(names, func(i, j int) bool {
		a, b := partOrder(names[i]), partOrder(names[j])
		return a < b || a == b && names[i] < names[j]
	})
	archive := zip.NewWriter(p.out)
	for _, name := range names {
		part := p.done[name]
		w, err := archive.CreateRaw(&zip.FileHeader{Name: name, Method: zip.Deflate, Modified: time.Date(1980, 1, 1, 0, 0, 0, 0, time.UTC),
			CRC32: part.checksum, CompressedSize64: uint64(len(part.data)), UncompressedSize64: part.size})
		if err != nil {
			return err
		}
		if _, err := w.Write(part.data); err != nil {
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
		return patchChart(part, w.drawnAt)
	case strings.HasPrefix(name, "xl/drawings/drawing"):
		return anchorBySize(part)
	case name == "xl/sharedStrings.xml":
		return w.texts.part(), nil
	case strings.HasPrefix(name, "xl/worksheets/sheet"):
		part = bytes.ReplaceAll(part, []byte("<colBreaks></colBreaks>"), nil) // an empty list
		return w.withCells(name, part)
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

// withCells is a sheet with its cells in it.
func (w *file) withCells(name string, part []byte) ([]byte, error) {
	no, err := strconv.Atoi(strings.TrimSuffix(strings.TrimPrefix(name, "xl/worksheets/sheet"), ".xml"))
	if err != nil || no < 1 || no > len(w.grids) {
		return nil, fmt.Errorf("no sheet is kept in it")
	}
	before, after, ok := bytes.Cut(part, []byte("<sheetData></sheetData>"))
	if !ok {
		return nil, fmt.Errorf("there is no place for the cells")
	}
	g := w.grids[no-1]
	out := append(append(w.room[:0], before...), "<sheetData>"...)
	if out, err = w.appendCells(out, g); err != nil {
		return nil, err
	}
	g.rows = nil // written: a large workbook would not fit twice
	w.room = append(append(out, "</sheetData>"...), after...)
	return w.room, nil
}
