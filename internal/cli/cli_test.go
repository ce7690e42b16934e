package cli_test

import (
	"bytes"
	"context"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"parch/internal/cli"
)

func TestInterruptLeavesNothingBehind(t *testing.T) {
	dir := t.TempDir()
	ctx, cancel := context.WithCancel(t.Context())
	cancel()
	var stdout, stderr bytes.Buffer
	status := cli.Run(ctx, []string{"compare", "--demo", "--workbook", filepath.Join(dir, "a.xlsx")}, strings.NewReader(""), &stdout, &stderr)
	if status != 1 || !strings.Contains(stderr.String(), "interrupted") {
		t.Errorf("status %d, %q", status, stderr.String())
	}
	left, err := os.ReadDir(dir)
	if err != nil || len(left) > 0 {
		t.Errorf("left behind: %v, %v", left, err)
	}
}

// Ethanol is tuned with carriers, whose single runs take long: an interrupt in the
// midst of it is answered at once. The bound leaves room for a busy machine; on a
// quiet one it takes a few milliseconds.
func TestInterruptIsAnsweredAtOnce(t *testing.T) {
	const after, bound = 500 * time.Millisecond, 300 * time.Millisecond
	dir := t.TempDir()
	job := filepath.Join(dir, "job.yaml")
	if err := os.WriteFile(job, []byte("lots:\n- {solvent: ethanol, batch: 10 L, water: 5 %, target: 300 mg/kg}\n"), 0o600); err != nil {
		t.Fatal(err)
	}
	ctx, cancel := context.WithCancel(t.Context())
	defer cancel()
	var asked time.Time
	time.AfterFunc(after, func() { asked = time.Now(); cancel() })
	var stdout, stderr bytes.Buffer
	status := cli.Run(ctx, []string{"compare", job, "--workbook", filepath.Join(dir, "a.xlsx"), "--json", filepath.Join(dir, "a.json"), "--csv", filepath.Join(dir, "csv")},
		strings.NewReader(""), &stdout, &stderr)
	took := time.Since(asked)
	t.Logf("answered after %v", took)
	if status != 1 || !strings.Contains(stderr.String(), "interrupted") || stdout.Len() > 0 {
		t.Errorf("status %d, %q, printed %q", status, stderr.String(), stdout.String())
	}
	if took > bound {
		t.Errorf("answered after %v, want %v", took, bound)
	}
	if left, err := os.ReadDir(dir); err != nil || len(left) != 1 {
		t.Errorf("left behind beside the job: %v, %v", left, err)
	}
}

func TestFilesCanBeReadByOthers(t *testing.T) {
	path := filepath.Join(t.TempDir(), "job.yaml")
	var stdout, stderr bytes.Buffer
	if status := cli.Run(t.Context(), []string{"new", "--output", path}, strings.NewReader(""), &stdout, &stderr); status != 0 {
		t.Fatalf("status %d, %s", status, stderr.String())
	}
	info, err := os.Stat(path)
	if err != nil {
		t.Fatal(err)
	}
	if mode := info.Mode().Perm(); mode&0o600 != 0o600 || mode&0o133 != 0 {
		t.Errorf("mode %v", mode)
	}
}
