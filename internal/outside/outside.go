// Package outside finds the other programs that check this one's results in tests.
package outside

import (
	"os"
	"os/exec"
	"testing"
)

// Program is the path of a program. Without it a test is skipped, and fails where
// the variable CI is set: there the check must not go missing.
func Program(t testing.TB, name string) string {
	t.Helper()
	path, err := exec.LookPath(name)
	if err == nil {
		return path
	}
	if os.Getenv("CI") != "" {
		t.Fatalf("%s is not installed: what it checks would go unchecked", name)
	}
	t.Skipf("%s is not installed", name)
	return ""
}
