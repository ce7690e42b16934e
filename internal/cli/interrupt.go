package cli

import "context"

// interruptible answers an interrupt at once, wherever the work is: what it has begun
// comes to nothing, as it writes no file. The work itself is told by the context too.
func interruptible[T any](ctx context.Context, work func() (T, error)) (result T, err error) {
	type answer struct {
		result T
		err    error
	}
	done := make(chan answer, 1)
	go func() {
		r, err := work()
		done <- answer{r, err}
	}()
	select {
	case a := <-done:
		return a.result, a.err
	case <-ctx.Done():
		return result, ctx.Err()
	}
}
