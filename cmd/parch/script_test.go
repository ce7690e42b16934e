package main

import (
	"encoding/json"
	"errors"
	"fmt"
	"math"
	"os"
	"os/exec"
	"strconv"
	"strings"
	"testing"
	"time"

	"github.com/rogpeppe/go-internal/testscript"
)

func TestMain(m *testing.M) {
	testscript.Main(m, map[string]func(){"parch": main})
}

// TestScript runs the program as a user does, one script for each thing that can
// be seen, failures too.
func TestScript(t *testing.T) {
	testscript.Run(t, testscript.Params{
		Dir: "testdata/script",
		Cmds: map[string]func(*testscript.TestScript, bool, []string){
			"status":    status,
			"value":     value,
			"nonsense":  nonsense,
			"edit":      edit,
			"stopwatch": stopwatch,
			"within":    within,
		},
		Condition: func(name string) (bool, error) {
			if name == "root" {
				return os.Geteuid() == 0, nil
			}
			return false, fmt.Errorf("unknown condition %q", name)
		},
		RequireExplicitExec: true,
		RequireUniqueNames:  true,
	})
}

// status N COMMAND... runs a command that must end with exit status N.
func status(ts *testscript.TestScript, neg bool, args []string) {
	if neg || len(args) < 2 {
		ts.Fatalf("usage: status N command...")
	}
	want, err := strconv.Atoi(args[0])
	ts.Check(err)
	got := 0
	if err := ts.Exec(args[1], args[2:]...); err != nil {
		var exit *exec.ExitError
		if !errors.As(err, &exit) {
			ts.Fatalf("%v", err)
		}
		got = exit.ExitCode()
	}
	if got != want {
		ts.Fatalf("exit status %d, want %d", got, want)
	}
}

// edit FILE OLD NEW changes the one place where OLD stands.
func edit(ts *testscript.TestScript, neg bool, args []string) {
	if neg || len(args) != 3 {
		ts.Fatalf("usage: edit file old new")
	}
	text := ts.ReadFile(args[0])
	if n := strings.Count(text, args[1]); n != 1 {
		ts.Fatalf("%q stands in %s %d times", args[1], args[0], n)
	}
	ts.Check(os.WriteFile(ts.MkAbs(args[0]), []byte(strings.Replace(text, args[1], args[2], 1)), 0o644))
}

const startedAt = "STARTED_AT"

// stopwatch begins to count for within.
func stopwatch(ts *testscript.TestScript, _ bool, _ []string) {
	ts.Setenv(startedAt, time.Now().Format(time.RFC3339Nano))
}

// within TIME tells the time since stopwatch, which must not be longer.
func within(ts *testscript.TestScript, neg bool, args []string) {
	if neg || len(args) != 1 {
		ts.Fatalf("usage: within time")
	}
	most, err := time.ParseDuration(args[0])
	ts.Check(err)
	started, err := time.Parse(time.RFC3339Nano, ts.Getenv(startedAt))
	ts.Check(err)
	took := time.Since(started)
	ts.Logf("done after %v", took.Round(time.Millisecond))
	if took > most {
		ts.Fatalf("took %v, longer than %v", took, most)
	}
}

// nonsense FILE MEGABYTES writes a large file that begins like a catalog.
func nonsense(ts *testscript.TestScript, neg bool, args []string) {
	if neg || len(args) != 2 {
		ts.Fatalf("usage: nonsense file megabytes")
	}
	megabytes, err := strconv.Atoi(args[1])
	ts.Check(err)
	const line = "solvents: {a: [\n"
	ts.Check(os.WriteFile(ts.MkAbs(args[0]), []byte(strings.Repeat(line, megabytes<<20/len(line)+1)), 0o644))
}

// value FILE PATH WANT [TOLERANCE] looks at one value of a JSON file, such as
// lots.0.routes.0.rank. WANT is a number with a tolerance, or the JSON text of
// the value.
func value(ts *testscript.TestScript, neg bool, args []string) {
	if neg || len(args) < 3 || len(args) > 4 {
		ts.Fatalf("usage: value file path want [tolerance]")
	}
	found := lookUp(ts, []byte(ts.ReadFile(args[0])), args[1])
	if len(args) == 3 {
		text, err := json.Marshal(found)
		ts.Check(err)
		if string(text) != args[2] {
			ts.Fatalf("%s is %s, want %s", args[1], text, args[2])
		}
		return
	}
	number, ok := found.(float64)
	want, errWant := strconv.ParseFloat(args[2], 64)
	tolerance, errTolerance := strconv.ParseFloat(args[3], 64)
	ts.Check(errors.Join(errWant, errTolerance))
	if !ok || !(math.Abs(number-want) <= tolerance) {
		ts.Fatalf("%s is %v, want %s within %s", args[1], found, args[2], args[3])
	}
}

func lookUp(ts *testscript.TestScript, data []byte, path string) any {
	var at any
	ts.Check(json.Unmarshal(data, &at))
	for _, key := range strings.Split(path, ".") {
		switch node := at.(type) {
		case map[string]any:
			child, ok := node[key]
			if !ok {
				ts.Fatalf("%s: no key %q", path, key)
			}
			at = child
		case []any:
			if key == "len" {
				at = float64(len(node))
				continue
			}
			i, err := strconv.Atoi(key)
			if err != nil || i < 0 || i >= len(node) {
				ts.Fatalf("%s: no element %q in %d", path, key, len(node))
			}
			at = node[i]
		default:
			ts.Fatalf("%s: nothing below %q", path, key)
		}
	}
	return at
}
