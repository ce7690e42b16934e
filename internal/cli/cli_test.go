package cli_test

import (
	"bytes"
	"context"
	"os"
	"path/filepath"
	"strings"
	"testing"

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
