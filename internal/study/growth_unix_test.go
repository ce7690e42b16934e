//go:build unix

package study_test

import (
	"syscall"
	"testing"
)

// processorTime of this process so far, s.
func processorTime(t *testing.T) float64 {
	t.Helper()
	var u syscall.Rusage
	if err := syscall.Getrusage(syscall.RUSAGE_SELF, &u); err != nil {
		t.Fatal(err)
	}
	return float64(u.Utime.Nano()+u.Stime.Nano()) * 1e-9
}
