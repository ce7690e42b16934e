package main

import (
	"os/exec"
	"slices"
	"strings"
	"testing"
)

// floors is the house from the top down: a package may import only what stands
// below it.
var floors = []string{
	"parch/cmd/parch",
	"parch/internal/cli",
	"parch/internal/workbook",
	"parch/internal/report",
	"parch/internal/inspect",
	"parch/internal/proof",
	"parch/internal/bench",
	"parch/internal/study",
	"parch/internal/search",
	"parch/internal/doubt",
	"parch/internal/spread",
	"parch/internal/costs",
	"parch/internal/routes",
	"parch/internal/steps",
	"parch/internal/assay",
	"parch/internal/job",
	"parch/internal/history",
	"parch/internal/listing",
	"parch/internal/mixture",
	"parch/catalog",
	"parch/internal/thermo",
	"parch/internal/document",
	"parch/internal/quantity",
	"parch/internal/memo",
	"parch/internal/outside",
}

func TestImportsPointDown(t *testing.T) {
	out, err := exec.Command("go", "list", "-f", `{{.ImportPath}} {{join .Imports " "}}`, "parch/...").Output()
	if err != nil {
		t.Fatal(err)
	}
	for line := range strings.Lines(string(out)) {
		words := strings.Fields(line)
		from := slices.Index(floors, words[0])
		if from < 0 {
			t.Errorf("%s has no place in the house: add it to the list", words[0])
		}
		for _, imported := range words[1:] {
			if to := slices.Index(floors, imported); to >= 0 && to <= from {
				t.Errorf("%s imports %s, which stands above it", words[0], imported)
			}
			if imported == "github.com/xuri/excelize/v2" && words[0] != "parch/internal/workbook" {
				t.Errorf("%s imports the spreadsheet library; only internal/workbook may", words[0])
			}
		}
	}
}
