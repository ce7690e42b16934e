package workbook

import (
	"archive/zip"
	"bytes"
	"encoding/xml"
	"errors"
	"fmt"
	"io"
	"regexp"
	"strconv"
	"strings"
	"testing"

	"github.com/xuri/excelize/v2"
)

// stored is a cell as it stands in a file, read without the library that wrote it.
type stored struct {
	formula, kind, raw string
	text               string // of strings, resolved
}

func (s stored) number() (float64, bool) {
	if s.kind != "" && s.kind != "n" {
		return 0, false
	}
	v, err := strconv.ParseFloat(s.raw, 64)
	return v, err == nil
}

// book is a workbook file taken apart.
type book struct {
	parts  map[string][]byte
	order  []string // parts, in the order of the archive
	sheets []string
	part   map[string]string // sheet to part
	cells  map[string]map[string]stored
	names  map[string]string
}

type xmlCell struct {
	R string `xml:"r,attr"`
	T string `xml:"t,attr"`
	F struct {
		Text  string `xml:",chardata"`
		Kind  string `xml:"t,attr"`
		Group string `xml:"si,attr"`
	} `xml:"f"`
	V string `xml:"v"`
	I string `xml:"is>t"`
}

func readBook(t *testing.T, data []byte) *book {
	t.Helper()
	archive, err := zip.NewReader(bytes.NewReader(data), int64(len(data)))
	if err != nil {
		t.Fatal(err)
	}
	b := &book{parts: map[string][]byte{}, part: map[string]string{}, cells: map[string]map[string]stored{}, names: map[string]string{}}
	for _, f := range archive.File {
		r, err := f.Open()
		if err != nil {
			t.Fatal(err)
		}
		if b.parts[f.Name], err = io.ReadAll(r); err != nil {
			t.Fatal(err)
		}
		b.order = append(b.order, f.Name)
	}
	b.readDirectory(t)
	shared := b.sharedText(t)
	for _, sheet := range b.sheets {
		var x struct {
			Rows []struct {
				Cells []xmlCell `xml:"c"`
			} `xml:"sheetData>row"`
		}
		b.decode(t, b.part[sheet], &x)
		cells, first := map[string]stored{}, map[string]xmlCell{} // of a formula that cells share
		for _, row := range x.Rows {
			for _, c := range row.Cells {
				if c.F.Kind == "shared" {
					if c.F.Text != "" {
						first[c.F.Group] = c
					}
					c.F.Text = moved(t, first[c.F.Group], c.R)
				}
				s := stored{formula: c.F.Text, kind: c.T, raw: c.V, text: c.V}
				switch c.T {
				case "s":
					i, err := strconv.Atoi(c.V)
					if err != nil {
						t.Fatal(err)
					}
					s.text = shared[i]
				case "inlineStr":
					s.text = c.I
				}
				cells[c.R] = s
			}
		}
		b.cells[sheet] = cells
	}
	return b
}

var aCell = regexp.MustCompile(`"[^"]*"|(\$?)\b([A-Z]{1,3})(\$?)([0-9]+)\b`)

// moved is the formula of a cell as it reads in another one.
func moved(t *testing.T, from xmlCell, to string) string {
	t.Helper()
	c1, r1, err1 := excelize.CellNameToCoordinates(from.R)
	c2, r2, err2 := excelize.CellNameToCoordinates(to)
	if err := errors.Join(err1, err2); err != nil {
		t.Fatal(err)
	}
	return aCell.ReplaceAllStringFunc(from.F.Text, func(s string) string {
		m := aCell.FindStringSubmatch(s)
		if m[2] == "" {
			return s
		}
		column, row, err := excelize.CellNameToCoordinates(m[2] + m[4])
		if err != nil {
			t.Fatal(err)
		}
		if m[1] == "" {
			column += c2 - c1
		}
		if m[3] == "" {
			row += r2 - r1
		}
		return m[1] + columnName(column) + m[3] + strconv.Itoa(row)
	})
}

func (b *book) decode(t *testing.T, part string, into any) {
	t.Helper()
	if err := xml.Unmarshal(b.parts[part], into); err != nil {
		t.Fatalf("%s: %v", part, err)
	}
}

func (b *book) readDirectory(t *testing.T) {
	var x struct {
		Sheets []struct {
			Name string `xml:"name,attr"`
			ID   string `xml:"http://schemas.openxmlformats.org/officeDocument/2006/relationships id,attr"`
		} `xml:"sheets>sheet"`
		Names []struct {
			Name  string `xml:"name,attr"`
			Place string `xml:",chardata"`
		} `xml:"definedNames>definedName"`
	}
	var rels struct {
		Relations []struct {
			ID     string `xml:"Id,attr"`
			Target string `xml:"Target,attr"`
		} `xml:"Relationship"`
	}
	b.decode(t, "xl/workbook.xml", &x)
	b.decode(t, "xl/_rels/workbook.xml.rels", &rels)
	for _, s := range x.Sheets {
		b.sheets = append(b.sheets, s.Name)
		for _, r := range rels.Relations {
			if r.ID == s.ID {
				b.part[s.Name] = "xl/" + strings.TrimPrefix(strings.TrimPrefix(r.Target, "/"), "xl/")
			}
		}
	}
	for _, n := range x.Names {
		b.names[n.Name] = strings.ReplaceAll(n.Place, "$", "")
	}
}

func (b *book) sharedText(t *testing.T) (out []string) {
	if b.parts["xl/sharedStrings.xml"] == nil {
		return nil
	}
	var x struct {
		Items []struct {
			T    string   `xml:"t"`
			Runs []string `xml:"r>t"`
		} `xml:"si"`
	}
	b.decode(t, "xl/sharedStrings.xml", &x)
	for _, i := range x.Items {
		out = append(out, i.T+strings.Join(i.Runs, ""))
	}
	return out
}

// named is the cell that a name stands for.
func (b *book) named(t *testing.T, name string) (sheet, place string, c stored) {
	t.Helper()
	sheet, place, ok := strings.Cut(b.names[name], "!")
	if !ok {
		t.Fatalf("no cell is named %s", name)
	}
	return sheet, place, b.cells[sheet][place]
}

// repack writes the parts again, some of them changed.
func (b *book) repack(t *testing.T, changed map[string][]byte) []byte {
	t.Helper()
	var out bytes.Buffer
	w := zip.NewWriter(&out)
	for _, name := range b.order {
		part := b.parts[name]
		if c, ok := changed[name]; ok {
			part = c
		}
		f, err := w.Create(name)
		if err != nil {
			t.Fatal(err)
		}
		if _, err := f.Write(part); err != nil {
			t.Fatal(err)
		}
	}
	if err := w.Close(); err != nil {
		t.Fatal(err)
	}
	return out.Bytes()
}

var sharedFormula = regexp.MustCompile(`<c r="([A-Z]+[0-9]+)"([^>]*)><f t="shared"[^>]*?(?:/>|>[^<]*</f>)`)

// plain is a sheet in which no cell leans on the formula of another.
func (b *book) plain(sheet string) []byte {
	return sharedFormula.ReplaceAllFunc(b.parts[b.part[sheet]], func(s []byte) []byte {
		m := sharedFormula.FindSubmatch(s)
		var f bytes.Buffer
		xml.EscapeText(&f, []byte(b.cells[sheet][string(m[1])].formula))
		return fmt.Appendf(nil, `<c r="%s"%s><f>%s</f>`, m[1], m[2], f.Bytes())
	})
}

// with is the file with one cell holding a number instead of what it held.
func (b *book) with(t *testing.T, sheet, place, value string) []byte {
	t.Helper()
	part := b.plain(sheet)
	start := bytes.Index(part, []byte(`<c r="`+place+`"`))
	if start < 0 {
		t.Fatalf("no cell %s on %s", place, sheet)
	}
	end := start + bytes.Index(part[start:], []byte("</c>"))
	head := string(part[start : start+bytes.IndexByte(part[start:], '>')])
	if i := strings.Index(head, ` t="`); i >= 0 {
		head = head[:i]
	}
	fresh := append([]byte(nil), part[:start]...)
	fresh = append(fresh, head+"><v>"+value+"</v>"...)
	return b.repack(t, map[string][]byte{b.part[sheet]: append(fresh, part[end:]...)})
}
