// Command parch compares ways to dry bulk solvents and writes a workbook of them.
package main

import (
	"context"
	"os"
	"os/signal"
	"runtime/debug"
	"syscall"

	"parch/internal/cli"
)

func main() { os.Exit(run()) }

// fewCollections lets the heap grow further than Go's default of 100 % before
// garbage is collected: a short command ends before the first time.
const fewCollections = 400 // %

func run() int {
	if os.Getenv("GOGC") == "" {
		debug.SetGCPercent(fewCollections)
	}
	ctx, stop := signal.NotifyContext(context.Background(), os.Interrupt, syscall.SIGTERM)
	defer stop()
	return cli.Run(ctx, os.Args[1:], os.Stdin, os.Stdout, os.Stderr)
}
