// Command parch compares ways to dry bulk solvents and writes a workbook of them.
package main

import (
	"context"
	"fmt"
	"os"
	"os/signal"
	"runtime/debug"
	"syscall"
	"time"

	"parch/internal/cli"
)

func main() { os.Exit(run()) }

// fewCollections lets the heap grow further than Go's default of 100 % before
// garbage is collected: a short command ends before the first time.
const fewCollections = 400 // %

// roomToGrow is where collections come as often as it takes to stay below: a long
// comparison then does with half the memory for a few per cent more time.
const roomToGrow = 512 << 20 // bytes

// grace is how long the work has after an interrupt to end by itself.
const grace = 2 * time.Second

func run() int {
	if err := enoughSpace(); err != nil {
		fmt.Fprintf(os.Stderr, "parch: %v\n", err)
		return 1
	}
	if os.Getenv("GOGC") == "" {
		debug.SetGCPercent(fewCollections)
	}
	if os.Getenv("GOMEMLIMIT") == "" {
		debug.SetMemoryLimit(roomToGrow)
	}
	ctx, stop := signal.NotifyContext(context.Background(), os.Interrupt, syscall.SIGTERM)
	defer stop()
	context.AfterFunc(ctx, func() {
		time.Sleep(grace)
		cli.HoldFiles()
		fmt.Fprintln(os.Stderr, "parch: interrupted; nothing more was written")
		os.Exit(1)
	})
	return cli.Run(ctx, os.Args[1:], os.Stdin, os.Stdout, os.Stderr)
}
