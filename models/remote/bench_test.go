package remote

import (
	"context"
	"testing"
)

// BenchmarkOverhead is what one evaluation costs above the model's own time,
// one after the other and many at once, over loopback.
func BenchmarkOverhead(b *testing.B) {
	for _, slots := range []int{1, 16} {
		b.Run(map[int]string{1: "one", 16: "sixteen"}[slots], func(b *testing.B) {
			bench := newBench(b, Options{})
			bench.hire("worker", slots, &fake{name: "made"})
			s := bench.simulator(&fake{name: "made"})
			places := make(chan int)
			done := make(chan error)
			for range slots {
				go func() {
					for i := range places {
						if _, err := s.Simulate(context.Background(), winding(i), axis); err != nil {
							b.Error(err)
						}
					}
					done <- nil
				}()
			}
			places <- -1 // the worker has come
			b.ResetTimer()
			for i := range b.N {
				places <- i
			}
			close(places)
			for range slots {
				<-done
			}
		})
	}
}
