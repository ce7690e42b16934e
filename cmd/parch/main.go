// Command parch compares ways to dry bulk solvents and writes a workbook of them.
package main

import (
	"context"
	"os"
	"os/signal"
	"syscall"

	"parch/internal/cli"
)

func main() { os.Exit(run()) }

func run() int {
	ctx, stop := signal.NotifyContext(context.Background(), os.Interrupt, syscall.SIGTERM)
	defer stop()
	return cli.Run(ctx, os.Args[1:], os.Stdin, os.Stdout, os.Stderr)
}
