package main

import (
	"os/exec"
	"path/filepath"
	"testing"
	"time"
)

var benchQuestion = []string{"step", "soak", "--solvent", "toluene", "--water", "225 mg/kg", "--agent", "sieve-3a", "--dose", "100 g/L", "--hours", "24"}

func built(t testing.TB) string {
	t.Helper()
	program := filepath.Join(t.TempDir(), "parch")
	if out, err := exec.Command("go", "build", "-o", program, ".").CombinedOutput(); err != nil {
		t.Fatalf("%v: %s", err, out)
	}
	return program
}

// computing is the processor time of one process, in user and system mode.
func computing(t testing.TB, program string, args ...string) time.Duration {
	t.Helper()
	cmd := exec.Command(program, args...)
	if out, err := cmd.CombinedOutput(); err != nil {
		t.Fatalf("%v: %s", err, out)
	}
	return cmd.ProcessState.UserTime() + cmd.ProcessState.SystemTime()
}

// An answer at the bench takes under 50 ms as a process on a quiet machine. The
// least of several runs is held to twice that, as a machine that is busy counts
// more time for the same work.
func TestAnAnswerIsQuick(t *testing.T) {
	if testing.Short() {
		t.Skip("builds the program")
	}
	const runs, bound = 9, 100 * time.Millisecond
	program := built(t)
	least := time.Hour
	for range runs {
		least = min(least, computing(t, program, benchQuestion...))
	}
	t.Logf("%v", least)
	if least > bound {
		t.Errorf("%v of processor time for one answer, want under %v", least, bound)
	}
}

func BenchmarkAnswer(b *testing.B) {
	program := built(b)
	for b.Loop() {
		computing(b, program, benchQuestion...)
	}
}
