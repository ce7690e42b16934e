package main

import (
	"bytes"
	"context"
	"flag"
	"os"
	"regexp"
	"strings"
	"testing"

	"parch/internal/cli"
)

var updateReadme = flag.Bool("update-readme", false, "write what the commands of the README print into it anew")

// said is what a command of the README has printed.
type said struct {
	status        int
	out, messages string
}

// Every command of the README is one that the program takes (a wrong flag or an
// unknown name would end with status 2), and every block that follows a command
// shows what that command prints, word for word.
func TestReadmeCommandsPrintWhatItShows(t *testing.T) {
	file, err := os.ReadFile("../../README.md")
	if err != nil {
		t.Fatal(err)
	}
	page := string(file)
	where, err := os.Getwd()
	if err != nil {
		t.Fatal(err)
	}
	t.Chdir(t.TempDir())
	printed, last := map[string]said{}, ""
	commands, shown, from := 0, 0, "" // from: the comment over a block
	var anew strings.Builder
	lines := strings.SplitAfter(page, "\n")
	for i := 0; i < len(lines); i++ {
		line := lines[i]
		anew.WriteString(line)
		if command, ok := readmeCommand(line); ok {
			commands++
			last = strings.ReplaceAll(command, " --force", "") // makes no difference to what is printed
			if _, known := printed[last]; !known {
				printed[last] = ask(last)
			}
			if s := printed[last]; s.status == 2 {
				t.Errorf("%s: %s", command, s.messages)
			}
		}
		if strings.HasPrefix(line, "<!-- from ") {
			from = line
		}
		if line != "```\n" || from == "" {
			continue
		}
		want := excerpt(t, printed[last].out, from)
		block, end := "", i+1
		for ; end < len(lines) && lines[end] != "```\n"; end++ {
			block += lines[end]
		}
		if block != want && !*updateReadme {
			t.Errorf("the README shows another answer to %q than\n%s\nTo write it anew: go test ./cmd/parch -run Readme -update-readme", last, want)
		}
		anew.WriteString(want + "```\n")
		shown, from, i = shown+1, "", end
	}
	if commands < 8 || shown < 3 {
		t.Errorf("%d commands and %d blocks found: does the README still begin them alike?", commands, shown)
	}
	if *updateReadme && !t.Failed() {
		t.Chdir(where)
		if err := os.WriteFile("../../README.md", []byte(anew.String()), 0o644); err != nil {
			t.Fatal(err)
		}
	}
}

// readmeCommand is the command of an indented line, without its remark.
func readmeCommand(line string) (command string, ok bool) {
	command, ok = strings.CutPrefix(line, "    go run ./cmd/parch ")
	command, _, _ = strings.Cut(command, " # ")
	return strings.TrimSpace(command), ok
}

func ask(command string) said {
	var out, messages bytes.Buffer
	status := cli.Run(context.Background(), words(command), nil, &out, &messages)
	return said{status, out.String(), messages.String()}
}

var bounds = regexp.MustCompile(`^<!-- from "(.+)" to "(.+)" -->\n$`)

// excerpt is the part of an output that a comment over a block names: from the
// first line that begins with one text to the next that begins with the other.
func excerpt(t *testing.T, out, comment string) string {
	t.Helper()
	m := bounds.FindStringSubmatch(comment)
	if m == nil {
		t.Fatalf("%q does not name the beginning and the end of a part", comment)
	}
	_, after, found := strings.Cut("\n"+out, "\n"+m[1])
	part, _, ends := strings.Cut(after, "\n"+m[2])
	if !found || !ends {
		t.Fatalf("no part %q is in\n%s", comment, out)
	}
	return strings.TrimRight(m[1]+part, "\n") + "\n"
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
