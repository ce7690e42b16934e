package main

import (
	"bytes"
	"context"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"parch/internal/cli"
)

// The README shows the first lot of the demonstration as the program prints it.
// To write it anew: paste what `go run ./cmd/parch compare --demo` prints.
func TestReadmeShowsTheDemo(t *testing.T) {
	readme, err := os.ReadFile("../../README.md")
	if err != nil {
		t.Fatal(err)
	}
	var out, messages bytes.Buffer
	book := filepath.Join(t.TempDir(), "demo.xlsx")
	if status := cli.Run(context.Background(), []string{"compare", "--demo", "--workbook", book}, nil, &out, &messages); status != 0 {
		t.Fatalf("status %d: %s", status, &messages)
	}
	_, after, found := strings.Cut(out.String(), "\n1. ")
	shown, _, cut := strings.Cut(after, "\n   Routes that do not reach it")
	if !found || !cut {
		t.Fatalf("the demonstration prints otherwise:\n%s", &out)
	}
	if !strings.Contains(string(readme), "\n1. "+strings.TrimRight(shown, "\n")+"\n```") {
		t.Errorf("the README shows another result than\n1. %s", shown)
	}
}

// Every command of the README is one that the program takes: a wrong flag or an
// unknown name would end with status 2.
func TestReadmeCommandsAreTaken(t *testing.T) {
	readme, err := os.ReadFile("../../README.md")
	if err != nil {
		t.Fatal(err)
	}
	t.Chdir(t.TempDir())
	count := 0
	for line := range strings.Lines(string(readme)) {
		command, ok := strings.CutPrefix(strings.TrimSpace(line), "go run ./cmd/parch ")
		if !ok {
			continue
		}
		count++
		command, _, _ = strings.Cut(command, "   #")
		command, _, _ = strings.Cut(command, " # ")
		var out, messages bytes.Buffer
		if status := cli.Run(context.Background(), words(command), nil, &out, &messages); status == 2 {
			t.Errorf("%s: %s", command, &messages)
		}
	}
	if count < 8 {
		t.Errorf("%d commands found: does the README still begin them alike?", count)
	}
}

// words splits a command line; double quotes keep words together.
func words(line string) (all []string) {
	for i, part := range strings.Split(line, `"`) {
		if i%2 == 1 {
			all = append(all, part)
			continue
		}
		all = append(all, strings.Fields(part)...)
	}
	return all
}
