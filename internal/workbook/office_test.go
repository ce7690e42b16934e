package workbook

import (
	"bytes"
	"os"
	"regexp"
	"strconv"
	"testing"

	"parch/internal/study"
)

// officeEdits of a job also go through the independent spreadsheet program: edited in
// the file, recalculated there and held against the same new run. PARCH_OFFICE_EDITS
// takes another number of the twenty:
//
//	PARCH_OFFICE_EDITS=20 go test -run SheetFollowsEdits -v ./internal/workbook
func officeEdits(t *testing.T) int {
	given := os.Getenv("PARCH_OFFICE_EDITS")
	if given == "" {
		return 1
	}
	n, err := strconv.Atoi(given)
	if err != nil || n < 0 || n > editsOfAJob {
		t.Fatalf("PARCH_OFFICE_EDITS is %q: not a number from 0 to %d", given, editsOfAJob)
	}
	return n
}

// edit is some changes of a workbook and the run they are held against.
type edit struct {
	changes []change
	again   *study.Report
}

// followsInOffice edits the file of a layout as a reader would, has each copy
// recalculated and compares it with the new run.
func followsInOffice(t *testing.T, l *layout, data []byte, edits []edit) (y tally) {
	t.Helper()
	original := readBook(t, data)
	files := make([][]byte, len(edits))
	for i, e := range edits {
		files[i] = original.edited(t, e.changes)
	}
	for i, b := range converted(t, true, files...) {
		y.compare(t, l, edits[i].again, b.cell, edits[i].changes)
	}
	return y
}

// cell reads a cell as the evaluator does.
func (b *book) cell(sheet string, column, row int) any {
	c := b.cells[sheet][at(column, row)]
	if v, ok := c.number(); ok {
		return v
	}
	return c.text
}

// edited is the file with the inputs changed and nothing else: what the formulas gave
// is still that of the run.
func (b *book) edited(t *testing.T, changes []change) []byte {
	t.Helper()
	parts := map[string][]byte{}
	for _, c := range changes {
		sheet, place, was := b.named(t, c.name)
		if was.raw == "" || was.formula != "" {
			t.Fatalf("%s at %s!%s is no input", c.name, sheet, place)
		}
		part, ok := parts[b.part[sheet]]
		if !ok {
			part = b.parts[b.part[sheet]]
		}
		cell := regexp.MustCompile(`<c r="` + place + `"( s="\d+")[^>]*>.*?</c>`)
		if len(cell.FindAll(part, -1)) != 1 {
			t.Fatalf("%s!%s is not found", sheet, place)
		}
		parts[b.part[sheet]] = cell.ReplaceAllFunc(part, func(old []byte) []byte {
			head := append([]byte(`<c r="`+place+`"`), cell.FindSubmatch(old)[1]...)
			if c.text {
				return bytes.Join([][]byte{head, []byte(` t="inlineStr"><is><t>` + c.value + `</t></is></c>`)}, nil)
			}
			return bytes.Join([][]byte{head, []byte(`><v>` + c.value + `</v></c>`)}, nil)
		})
	}
	return b.repack(t, parts)
}
