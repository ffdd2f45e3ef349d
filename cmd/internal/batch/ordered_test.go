package batch

import (
	"context"
	"math/rand/v2"
	"sync/atomic"
	"testing"
	"time"
)

func TestOrderedEmitsInOrder(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 2))
	delays := make([]time.Duration, 200)
	for i := range delays {
		delays[i] = time.Duration(r.IntN(300)) * time.Microsecond
	}
	for _, workers := range []int{0, 1, 2, 7, 500} {
		next := 0
		err := Ordered(context.Background(), len(delays), workers,
			func(i int) int { time.Sleep(delays[i]); return i * i },
			func(i, got int) {
				if i != next || got != i*i {
					t.Fatalf("workers %d: emitted %d with %d, want %d", workers, i, got, next)
				}
				next++
			})
		if err != nil || next != len(delays) {
			t.Errorf("workers %d: %d of %d emitted, %v", workers, next, len(delays), err)
		}
	}
}

func TestOrderedOfNothing(t *testing.T) {
	err := Ordered(context.Background(), 0, 4, func(int) int { panic("worked") }, func(int, int) { panic("emitted") })
	if err != nil {
		t.Error(err)
	}
}

func TestOrderedBoundsWhatWaits(t *testing.T) {
	const workers = 3
	var ahead, most atomic.Int64
	Ordered(context.Background(), 200, workers,
		func(i int) int {
			n := ahead.Add(1)
			for {
				old := most.Load()
				if n <= old || most.CompareAndSwap(old, n) {
					break
				}
			}
			return i
		},
		func(int, int) { time.Sleep(100 * time.Microsecond); ahead.Add(-1) })
	if most.Load() > 3*workers+2 {
		t.Errorf("%d results waited for their turn", most.Load())
	}
}

func TestOrderedStops(t *testing.T) {
	ctx, cancel := context.WithCancel(context.Background())
	var started atomic.Int64
	emitted := 0
	err := Ordered(ctx, 1000, 2,
		func(i int) int {
			started.Add(1)
			if i == 20 {
				cancel()
			}
			return i
		},
		func(i, _ int) {
			if i != emitted {
				t.Fatalf("emitted %d, want %d", i, emitted)
			}
			emitted++
		})
	if err == nil {
		t.Error("no error from an ended context")
	}
	if int64(emitted) != started.Load() {
		t.Errorf("%d started, %d emitted", started.Load(), emitted)
	}
	if emitted < 20 || emitted > 40 {
		t.Errorf("%d emitted after the end at 20", emitted)
	}
}
