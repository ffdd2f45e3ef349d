package batch

import "context"

// Ordered calls work(i) for every i below n on the given number of workers
// and emit(i, result) in the order of i, on the caller's goroutine, as soon
// as every earlier one is done. At most twice as many results as workers wait
// for their turn, so that the memory in use does not grow with n. When ctx
// ends, no new work starts, what has started is still emitted in order, and
// the error of ctx is returned.
func Ordered[T any](ctx context.Context, n, workers int, work func(i int) T, emit func(i int, result T)) error {
	workers = max(1, min(workers, n))
	type ticket struct {
		i    int
		done chan T
	}
	jobs := make(chan ticket)
	queue := make(chan ticket, 2*workers) // in order, at most this far ahead
	go func() {
		defer close(queue)
		defer close(jobs)
		for i := range n {
			t := ticket{i, make(chan T, 1)}
			if ctx.Err() != nil {
				return
			}
			select {
			case queue <- t:
			case <-ctx.Done():
				return
			}
			jobs <- t // a worker is always coming free
		}
	}()
	for range workers {
		go func() {
			for t := range jobs {
				t.done <- work(t.i)
			}
		}()
	}
	for t := range queue {
		emit(t.i, <-t.done)
	}
	return ctx.Err()
}
