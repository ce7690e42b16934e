package study

import (
	"context"
	"runtime"

	"golang.org/x/sync/errgroup"
)

// atOnce does n things of which each writes to a place of its own, as many at a time
// as there are processors. The first error, or an interrupt, keeps the rest from being
// started.
func atOnce(ctx context.Context, n int, do func(i int) error) error {
	group, ctx := errgroup.WithContext(ctx)
	group.SetLimit(runtime.GOMAXPROCS(0))
	for i := range n {
		group.Go(func() error {
			if err := ctx.Err(); err != nil {
				return err
			}
			return do(i)
		})
	}
	return group.Wait()
}
