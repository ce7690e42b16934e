package workbook

import (
	"bytes"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"regexp"
	"strings"
	"testing"

	"parch/internal/outside"
)

// onLetter is a workbook set up for the other usual size of paper.
func (b *book) onLetter(t *testing.T) []byte {
	t.Helper()
	changed := map[string][]byte{}
	for _, sheet := range b.sheets {
		part := b.parts[b.part[sheet]]
		if n := bytes.Count(part, []byte(`paperSize="9"`)); n != 1 {
			t.Fatalf("%s: paper A4 stands %d times", sheet, n)
		}
		changed[b.part[sheet]] = bytes.Replace(part, []byte(`paperSize="9"`), []byte(`paperSize="1"`), 1)
	}
	return b.repack(t, changed)
}

// printedBook is a workbook on paper.
type printedBook struct {
	pdf   string         // its file
	pages map[string]int // of each sheet
	first map[string]int // page of each sheet, from 1
}

var footer = regexp.MustCompile(`(?m)^ *(\S.*?) {2,}Page \d+ of \d+ *$`)

// pagesBySheet prints workbooks with an independent program and counts the pages of
// each sheet by the name in the footer. Where typefaces are named, no other is there to
// stand in for the workbook's own.
func pagesBySheet(t *testing.T, only []string, files ...[]byte) []printedBook {
	t.Helper()
	soffice, pdftotext := outside.Program(t, "soffice"), outside.Program(t, "pdftotext")
	dir := t.TempDir()
	office := func(args []string) *exec.Cmd {
		cmd := exec.CommandContext(t.Context(), soffice, args...)
		if len(only) > 0 {
			cmd.Env = append(os.Environ(), "FONTCONFIG_FILE="+fontsOnly(t, only))
		}
		return cmd
	}
	args := []string{"-env:UserInstallation=file://" + filepath.ToSlash(filepath.Join(dir, "profile")), "--headless", "--convert-to", "pdf", "--outdir", dir}
	for i, data := range files {
		name := filepath.Join(dir, fmt.Sprintf("book%d.xlsx", i))
		if err := os.WriteFile(name, data, 0o644); err != nil {
			t.Fatal(err)
		}
		args = append(args, name)
	}
	if text, err := office(args).CombinedOutput(); err != nil {
		t.Fatalf("soffice: %v\n%s", err, text)
	}
	all := make([]printedBook, len(files))
	for i := range files {
		pdf := filepath.Join(dir, fmt.Sprintf("book%d.pdf", i))
		out, err := exec.CommandContext(t.Context(), pdftotext, "-layout", pdf, "-").Output()
		if err != nil {
			t.Fatal(err)
		}
		all[i] = printedBook{pdf, map[string]int{}, map[string]int{}}
		for no, page := range strings.Split(string(out), "\f") {
			m := footer.FindAllStringSubmatch(page, -1)
			if m == nil {
				if strings.Count(string(out), "\f") > no { // after the last page nothing follows
					t.Errorf("book %d: page %d is empty", i, no+1)
				}
				continue
			}
			sheet := m[len(m)-1][1]
			if all[i].pages[sheet]++; all[i].first[sheet] == 0 {
				all[i].first[sheet] = no + 1
			}
		}
	}
	return all
}

// typefaces are the files of the families of typefaces that this system has.
func typefaces(t *testing.T) map[string][]string {
	t.Helper()
	list := outside.Program(t, "fc-list")
	out, err := exec.CommandContext(t.Context(), list, "--format", "%{family[0]}\t%{file}\n").Output()
	if err != nil {
		t.Fatal(err)
	}
	families := map[string][]string{}
	for _, line := range strings.Split(strings.TrimSpace(string(out)), "\n") {
		if family, file, ok := strings.Cut(line, "\t"); ok {
			families[family] = append(families[family], file)
		}
	}
	return families
}

// fontsOnly is a configuration of a system that has these files of typefaces alone.
func fontsOnly(t *testing.T, files []string) string {
	t.Helper()
	dir := t.TempDir()
	for i, file := range files {
		if err := os.Symlink(file, filepath.Join(dir, fmt.Sprintf("%d-%s", i, filepath.Base(file)))); err != nil {
			t.Fatal(err)
		}
	}
	name := filepath.Join(dir, "fonts.conf")
	text := `<?xml version="1.0"?><!DOCTYPE fontconfig SYSTEM "urn:fontconfig:fonts.dtd"><fontconfig><dir>` + dir + "</dir><cachedir>" + t.TempDir() + "</cachedir></fontconfig>"
	if err := os.WriteFile(name, []byte(text), 0o644); err != nil {
		t.Fatal(err)
	}
	return name
}

// Decision prints on one page and Bench card on one for each lot, on both usual
// sizes of paper, for few lots and for many.
func TestPagesToSignAndForTheBench(t *testing.T) {
	if testing.Short() {
		t.Skip("prints workbooks")
	}
	small := readBook(t, written(t, demo(t)))
	crowd := readBook(t, written(t, many(30, 3)))
	books := [][]byte{written(t, demo(t)), small.onLetter(t), written(t, synthetic()), crowd.onLetter(t)}
	for i, b := range pagesBySheet(t, nil, books...) {
		checkPages(t, i, b.pages, []int{3, 3, 2, 30}[i])
		if i == 0 {
			checkExponents(t, b.pdf, b.first[sheetChecks])
		}
	}
}

// checkExponents looks for tolerances as they are printed: some formats for the space
// after a number cost its exponent the last digits.
func checkExponents(t *testing.T, pdf string, page int) {
	t.Helper()
	no := fmt.Sprint(page)
	out, err := exec.CommandContext(t.Context(), outside.Program(t, "pdftotext"), "-layout", "-f", no, "-l", no, pdf, "-").Output()
	if err != nil {
		t.Fatal(err)
	}
	for _, want := range []string{"1.2E-06 ", "5.0E-03 "} {
		if !strings.Contains(string(out), want) {
			t.Errorf("Checks prints no %s", want)
		}
	}
	if strings.Contains(string(out), "0.0E+00") {
		t.Error("Checks prints 0 as a power of ten")
	}
}

func checkPages(t *testing.T, book int, pages map[string]int, cards int) {
	t.Helper()
	if pages[sheetDecision] != 1 || pages[sheetBenchCard] != cards {
		t.Errorf("book %d: Decision on %d pages, Bench card on %d, want 1 and %d", book, pages[sheetDecision], pages[sheetBenchCard], cards)
	}
}

// standIns are typefaces that systems without the workbook's own print it in, narrow
// ones and wide ones.
var standIns = []string{"Carlito", "Liberation Sans", "Liberation Sans Narrow", "DejaVu Sans", "DejaVu Sans Mono", "DejaVu Serif",
	"Noto Sans", "Open Sans", "FreeSans"}

// The pages, and that they can be read, do not depend on the typeface that stands in:
// with each one that the system has, as if it had no other.
func TestPagesInAnyTypeface(t *testing.T) {
	if testing.Short() {
		t.Skip("prints workbooks")
	}
	small := readBook(t, written(t, demo(t)))
	books := [][]byte{written(t, demo(t)), small.onLetter(t)}
	decision := layoutOf(t).decision()
	tried := 0
	families := typefaces(t)
	for _, family := range standIns {
		if len(families[family]) == 0 {
			continue
		}
		tried++
		t.Run(family, func(t *testing.T) {
			for i, b := range pagesBySheet(t, families[family], books...) {
				checkPages(t, i, b.pages, 3)
				checkLetters(t, b.pdf, b.first[sheetDecision], decision)
			}
		})
	}
	if tried == 0 {
		t.Skip("none of the typefaces is installed")
	}
}
