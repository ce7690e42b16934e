package cli

import (
	"fmt"
	"runtime/debug"

	"parch/catalog"
	"parch/internal/study"
)

// commitDigits of a commit are enough to find it.
const commitDigits = 12

// printVersion prints the version, the commit that it was built from, and the
// date of the catalog.
func (p *program) printVersion() error {
	cat, err := catalog.Load()
	if err != nil {
		return err
	}
	_, err = fmt.Fprintf(p.stdout, "parch %s (%s), catalog of %s\n", study.Version, builtFrom(), cat.Date)
	return err
}

// builtFrom is the commit as the compiler recorded it.
func builtFrom() string {
	info, ok := debug.ReadBuildInfo()
	if !ok {
		return "commit not recorded"
	}
	commit, changed := "", ""
	for _, s := range info.Settings {
		switch {
		case s.Key == "vcs.revision":
			commit = s.Value[:min(len(s.Value), commitDigits)]
		case s.Key == "vcs.modified" && s.Value == "true":
			changed = ", changed since"
		}
	}
	if commit == "" {
		return "commit not recorded"
	}
	return "commit " + commit + changed
}
