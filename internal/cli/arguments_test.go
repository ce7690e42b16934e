package cli

import (
	"strings"
	"testing"
)

func TestFlagsFirst(t *testing.T) {
	app := (&program{}).app()
	for _, c := range []struct{ args, want string }{
		{"", ""},
		{"--version", "--version"},
		{"compare job.yaml --force", "compare --force -- job.yaml"},
		{"compare job.yaml --workbook x.xlsx --quiet", "compare --workbook x.xlsx --quiet -- job.yaml"},
		{"compare --workbook=x.xlsx job.yaml", "compare --workbook=x.xlsx -- job.yaml"},
		{"compare - --json -", "compare --json - -- -"},
		{"compare --demo job.yaml", "compare --demo -- job.yaml"},
		{"compare --force -- --odd-name.yaml", "compare --force -- --odd-name.yaml"},
		{"compare --unknown job.yaml", "compare --unknown -- job.yaml"},
		{"unheard of", "unheard of"},
	} {
		got, err := flagsFirst(app, strings.Fields(c.args))
		if err != nil || strings.Join(got, " ") != c.want {
			t.Errorf("%q: got %q, %v; want %q", c.args, strings.Join(got, " "), err, c.want)
		}
	}
	for args, want := range map[string]string{
		"compare --force job.yaml --force": "--force is given twice",
		"compare job.yaml --json":          "--json needs a value",
	} {
		if _, err := flagsFirst(app, strings.Fields(args)); err == nil || err.Error() != want {
			t.Errorf("%q: got %v, want %q", args, err, want)
		}
	}
}
