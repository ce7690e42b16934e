//go:build !unix

package study_test

import "testing"

func processorTime(t *testing.T) float64 {
	t.Skip("processor time is read on Unix only")
	return 0
}
