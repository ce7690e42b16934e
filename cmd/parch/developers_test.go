package main

import (
	"os"
	"regexp"
	"strings"
	"testing"

	"github.com/rogpeppe/go-internal/txtar"
)

const addSolvent = "## Add a solvent in ten minutes"

// The script addsolvent.txtar follows the section of DEVELOPERS.md to the letter:
// the same files, and every command in the same order.
func TestDevelopersSectionIsTheScript(t *testing.T) {
	page, err := os.ReadFile("../../DEVELOPERS.md")
	if err != nil {
		t.Fatal(err)
	}
	_, section, found := strings.Cut(string(page), addSolvent+"\n")
	if !found {
		t.Fatalf("DEVELOPERS.md has no section %q", addSolvent)
	}
	section, _, _ = strings.Cut(section, "\n## ")
	script, err := txtar.ParseFile("testdata/script/addsolvent.txtar")
	if err != nil {
		t.Fatal(err)
	}
	files := map[string]string{}
	for _, f := range script.Files {
		files[f.Name] = string(f.Data)
	}
	blocks := regexp.MustCompile("(?s)`([a-z.-]+)`:\n\n```yaml\n(.*?)```").FindAllStringSubmatch(section, -1)
	if len(blocks) < 2 {
		t.Fatalf("the section shows %d files", len(blocks))
	}
	for _, b := range blocks {
		if files[b[1]] != b[2] {
			t.Errorf("%s of the section is not that of the script:\n%s\nscript:\n%s", b[1], b[2], files[b[1]])
		}
	}
	rest := string(script.Comment)
	for _, c := range regexp.MustCompile(`(?m)^    (parch .*)$`).FindAllStringSubmatch(section, -1) {
		_, after, found := strings.Cut(rest, "exec "+c[1])
		if !found {
			t.Errorf("the script does not run %q in its turn", c[1])
			continue
		}
		rest = after
	}
}
