package main

import (
	"os"
	"os/exec"
	"path/filepath"
	"regexp"
	"strings"
	"testing"
)

// marks of a licence in its own text. Two clauses or three tell the BSD licences apart.
var marks = map[string]*regexp.Regexp{
	"MIT":          regexp.MustCompile(`(?is)permission is hereby granted, free of charge, to any person`),
	"Apache-2.0":   regexp.MustCompile(`(?is)apache.*version 2\.0|apache\.org/licenses/LICENSE-2\.0`),
	"BSD-2-Clause": regexp.MustCompile(`(?is)redistribution and use in source and binary forms`),
	"BSD-3-Clause": regexp.MustCompile(`(?is)redistribution and use in source and binary forms.*neither the name`),
}

// Every module that is compiled in stands in LICENSES.md with the licence that its
// own text names, and no other module does.
func TestLicencesAreListed(t *testing.T) {
	text, err := os.ReadFile("../../LICENSES.md")
	if err != nil {
		t.Fatal(err)
	}
	listed := map[string]string{}
	for _, row := range regexp.MustCompile(`(?m)^\| (\S+\.\S+) \| (.+) \|$`).FindAllStringSubmatch(string(text), -1) {
		listed[row[1]] = row[2]
	}
	out, err := exec.Command("go", "list", "-deps", "-f", `{{with .Module}}{{if not .Main}}{{.Path}} {{.Dir}}{{end}}{{end}}`, ".").Output()
	if err != nil {
		t.Fatal(err)
	}
	for line := range strings.Lines(string(out)) {
		module, folder, _ := strings.Cut(strings.TrimSpace(line), " ")
		licence, ok := listed[module]
		if module == "" || ok && licence == "" {
			continue // seen already
		}
		if !ok {
			t.Errorf("%s is compiled in and not listed", module)
			continue
		}
		listed[module] = ""
		files, err := filepath.Glob(filepath.Join(folder, "[Ll][Ii][Cc][Ee][Nn][SsCc][Ee]*"))
		if err != nil || len(files) == 0 {
			t.Errorf("%s: no text of its licence in %s", module, folder)
			continue
		}
		own, err := os.ReadFile(files[0])
		if err != nil {
			t.Fatal(err)
		}
		for _, name := range strings.Split(licence, " and ") {
			if mark := marks[name]; mark == nil || !mark.Match(own) {
				t.Errorf("%s is listed under %q, which its text does not say", module, name)
			}
		}
	}
	for module, licence := range listed {
		if licence != "" {
			t.Errorf("%s is listed and not compiled in", module)
		}
	}
}
