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

var footer = regexp.MustCompile(`(?m)^ *(\S.*?) {2,}Page \d+ of \d+ *$`)

// pagesBySheet prints workbooks with an independent program and counts the pages of
// each sheet by the name in the footer.
func pagesBySheet(t *testing.T, files ...[]byte) []map[string]int {
	t.Helper()
	soffice, pdftotext := outside.Program(t, "soffice"), outside.Program(t, "pdftotext")
	dir := t.TempDir()
	args := []string{"-env:UserInstallation=file://" + filepath.ToSlash(filepath.Join(dir, "profile")), "--headless", "--convert-to", "pdf", "--outdir", dir}
	for i, data := range files {
		name := filepath.Join(dir, fmt.Sprintf("book%d.xlsx", i))
		if err := os.WriteFile(name, data, 0o644); err != nil {
			t.Fatal(err)
		}
		args = append(args, name)
	}
	if text, err := exec.CommandContext(t.Context(), soffice, args...).CombinedOutput(); err != nil {
		t.Fatalf("soffice: %v\n%s", err, text)
	}
	all := make([]map[string]int, len(files))
	for i := range files {
		out, err := exec.CommandContext(t.Context(), pdftotext, "-layout", filepath.Join(dir, fmt.Sprintf("book%d.pdf", i)), "-").Output()
		if err != nil {
			t.Fatal(err)
		}
		all[i] = map[string]int{}
		for _, page := range strings.Split(string(out), "\f") {
			if m := footer.FindAllStringSubmatch(page, -1); m != nil {
				all[i][m[len(m)-1][1]]++
			}
		}
	}
	return all
}

// Decision prints on one page and Bench card on one for each lot, on both usual
// sizes of paper, for few lots and for many.
func TestPagesToSignAndForTheBench(t *testing.T) {
	if testing.Short() {
		t.Skip("prints workbooks")
	}
	small := readBook(t, written(t, demo(t)))
	crowd := readBook(t, written(t, many(30, 3)))
	for i, pages := range pagesBySheet(t, written(t, demo(t)), small.onLetter(t), written(t, synthetic()), crowd.onLetter(t)) {
		want := []int{3, 3, 2, 30}[i]
		if pages[sheetDecision] != 1 || pages[sheetBenchCard] != want {
			t.Errorf("book %d: Decision on %d pages, Bench card on %d, want 1 and %d", i, pages[sheetDecision], pages[sheetBenchCard], want)
		}
	}
}
