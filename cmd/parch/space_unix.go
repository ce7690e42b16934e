//go:build unix

package main

import (
	"fmt"
	"syscall"
)

// leastSpace is the address space that the largest jobs have been seen to take,
// most of it set aside and never used.
const leastSpace = 1500 << 20

// enoughSpace refuses to begin where the shell limits the address space so far
// that the program would be ended in the middle of its work.
func enoughSpace() error {
	var limit syscall.Rlimit
	if err := syscall.Getrlimit(syscall.RLIMIT_AS, &limit); err != nil || limit.Cur >= leastSpace {
		return nil // not limited as far as is known
	}
	return fmt.Errorf("the memory limit of %d MiB is too low: %d MiB of address space are needed (ulimit -v %d)", limit.Cur>>20, leastSpace>>20, leastSpace>>10)
}
