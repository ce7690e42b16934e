package main

import (
	"archive/zip"
	"bytes"
	"encoding/json"
	"encoding/xml"
	"fmt"
	"io"
	"math"
	"os"
	"os/exec"
	"path/filepath"
	"strconv"
	"strings"
	"testing"

	"parch/internal/cli"
	"parch/internal/outside"
)

// The lines of bills.csv, added up by awk, are the costs of the JSON and, to the
// cent, those on the sheet Compare, read without the program's own libraries.
func TestTotalsAgreeEverywhere(t *testing.T) {
	jobs, err := filepath.Glob("../../testdata/jobs/*.yaml")
	if err != nil || len(jobs) < 3 {
		t.Fatalf("%d jobs, %v", len(jobs), err)
	}
	for _, what := range append(jobs, "--demo") {
		t.Run(filepath.Base(what), func(t *testing.T) { totalsAgree(t, what) })
	}
}

func totalsAgree(t *testing.T, what string) {
	awk := outside.Program(t, "awk")
	dir := t.TempDir()
	path := func(name string) string { return filepath.Join(dir, name) }
	var stdout, stderr bytes.Buffer
	args := []string{"compare", what, "--quiet", "--draws", "0", "--workbook", path("a.xlsx"), "--json", path("a.json"), "--csv", path("tables")}
	if status := cli.Run(t.Context(), args, strings.NewReader(""), &stdout, &stderr); status != 0 {
		t.Fatalf("status %d: %s", status, stderr.String())
	}
	// The lot stands in column 14; none of the columns before holds a comma.
	out, err := exec.CommandContext(t.Context(), awk, "-F,", `NR > 1 { sum[$14 "|" $1] += $9 } END { for (key in sum) printf "%s|%.10f\n", key, sum[key] }`, path("tables/bills.csv")).Output()
	if err != nil {
		t.Fatal(err)
	}
	sums := map[string]float64{}
	for line := range strings.Lines(string(out)) {
		parts := strings.Split(strings.TrimSpace(line), "|")
		sums[parts[0]+"|"+parts[1]], err = strconv.ParseFloat(parts[2], 64)
		if err != nil {
			t.Fatal(err)
		}
	}
	inJSON := costsInJSON(t, path("a.json"))
	inBook := costsInWorkbook(t, path("a.xlsx"))
	if len(sums) == 0 || len(inJSON) != len(sums) || len(inBook) != len(sums) {
		t.Errorf("%d routes in the CSV, %d in the JSON, %d in the workbook", len(sums), len(inJSON), len(inBook))
	}
	for key, sum := range sums {
		if math.Abs(inJSON[key]/sum-1) > 1e-9 {
			t.Errorf("%s: CSV %.10g, JSON %.10g", key, sum, inJSON[key])
		}
		if !(math.Abs(inBook[key]-sum) < 0.005) {
			t.Errorf("%s: CSV %.6f, workbook %.6f", key, sum, inBook[key])
		}
	}
}

func costsInJSON(t *testing.T, path string) map[string]float64 {
	t.Helper()
	data, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	var doc struct {
		Lots []struct {
			Name   string
			Routes []struct {
				ID   string
				Cost string `json:"cost_per_batch"`
			}
		}
	}
	if err := json.Unmarshal(data, &doc); err != nil {
		t.Fatal(err)
	}
	costs := map[string]float64{}
	for _, lot := range doc.Lots {
		for _, route := range lot.Routes {
			if costs[lot.Name+"|"+route.ID], err = strconv.ParseFloat(route.Cost, 64); err != nil {
				t.Fatal(err)
			}
		}
	}
	return costs
}

// costsInWorkbook reads the cached values of the sheet Compare.
func costsInWorkbook(t *testing.T, path string) map[string]float64 {
	t.Helper()
	z, err := zip.OpenReader(path)
	if err != nil {
		t.Fatal(err)
	}
	defer z.Close()
	read := func(name string, into any) {
		f, err := z.Open(name)
		if err != nil {
			t.Fatal(err)
		}
		defer f.Close()
		data, err := io.ReadAll(f)
		if err != nil {
			t.Fatal(err)
		}
		if err := xml.Unmarshal(data, into); err != nil {
			t.Fatalf("%s: %v", name, err)
		}
	}
	var book struct {
		Sheets []struct {
			Name string `xml:"name,attr"`
		} `xml:"sheets>sheet"`
	}
	read("xl/workbook.xml", &book)
	sheet := ""
	for i, s := range book.Sheets {
		if s.Name == "Compare" {
			sheet = fmt.Sprintf("xl/worksheets/sheet%d.xml", i+1)
		}
	}
	var content struct {
		Rows []struct {
			Cells []struct {
				Place string `xml:"r,attr"`
				Type  string `xml:"t,attr"`
				Value string `xml:"v"`
			} `xml:"c"`
		} `xml:"sheetData>row"`
	}
	read(sheet, &content)
	var shared struct {
		Texts []struct {
			Text string   `xml:"t"`
			Runs []string `xml:"r>t"`
		} `xml:"si"`
	}
	read("xl/sharedStrings.xml", &shared)
	costs := map[string]float64{}
	heads := map[string]string{} // column by heading
	for _, row := range content.Rows {
		cells := map[string]string{}
		for _, c := range row.Cells {
			text := c.Value
			if c.Type == "s" {
				i, err := strconv.Atoi(c.Value)
				if err != nil || i >= len(shared.Texts) {
					t.Fatalf("%s: shared text %q", c.Place, c.Value)
				}
				text = shared.Texts[i].Text + strings.Join(shared.Texts[i].Runs, "")
			}
			cells[strings.TrimRight(c.Place, "0123456789")] = text
		}
		if heads["Cost per batch"] == "" {
			for column, text := range cells {
				heads[text] = column
			}
			continue
		}
		cost, err := strconv.ParseFloat(cells[heads["Cost per batch"]], 64)
		if lot, id := cells[heads["Lot"]], cells[heads["Route id"]]; err == nil && lot != "" && id != "" {
			costs[lot+"|"+id] = cost
		} else {
			break
		}
	}
	return costs
}
