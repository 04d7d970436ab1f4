package remote

import (
	"container/heap"
	"context"
	"fmt"
	"math"
	"math/rand/v2"
	"slices"
	"sync"
	"testing"
	"time"

	"turnwise/models"
)

// A study of how a search scales: what is simulated is one searcher that asks
// in batches and waits for the whole of each, evaluations that take their
// time, a network with its delay, and a queue that takes a moment over each
// question. Times are in seconds.
type study struct {
	workers int
	batch   int     // questions that are asked together
	median  float64 // of an evaluation
	sigma   float64 // of its logarithm
	delay   float64 // of a message, one way between a worker and the queue
	queue   float64 // that the search and its queue spend on a question, one after the other
}

// evaluations of a study.
const studied = 4000

// run gives the time a study takes, and the work that is in it.
func (s study) run() (took, work float64) {
	r := rand.New(rand.NewPCG(1, 2))
	free := make(clocks, s.workers) // when each worker's pull is at the queue
	now, last := 0.0, 0.0
	for done := 0; done < studied; done += s.batch {
		for i := range min(s.batch, studied-done) {
			asked := now + float64(i+1)*s.queue
			one := s.median * math.Exp(s.sigma*r.NormFloat64())
			work += one
			// The question goes out, is simulated; the answer comes back and
			// with it the pull for the next.
			back := max(asked, free[0]) + s.delay + one + s.delay
			free[0] = back
			heap.Fix(&free, 0)
			last = max(last, back)
		}
		now = last
	}
	return now, work
}

func (s study) efficiency() float64 {
	took, work := s.run()
	return work / (took * float64(s.workers))
}

// clocks is a heap of times.
type clocks []float64

func (c clocks) Len() int           { return len(c) }
func (c clocks) Less(i, j int) bool { return c[i] < c[j] }
func (c clocks) Swap(i, j int)      { c[i], c[j] = c[j], c[i] }
func (c *clocks) Push(x any)        { *c = append(*c, x.(float64)) }
func (c *clocks) Pop() any          { panic("remote: a worker never leaves the study") }

// The scenes of the study: batches of the genetic searcher's 100, of 400, and
// of the 16 of the simplexes and the learned searcher; evaluations of 80 ms
// and of 2 s, spread as a search spreads turns and spacing; workers in the
// room and across an ocean. The queue's share is BenchmarkOverhead's.
var scenes = []struct {
	name string
	study
}{
	{"batch 100, 80 ms, in the room", study{batch: 100, median: 0.08, sigma: 0.5, delay: 0.0002, queue: 0.0004}},
	{"batch 100, 2 s, in the room", study{batch: 100, median: 2, sigma: 0.5, delay: 0.0002, queue: 0.0004}},
	{"batch 100, 80 ms, an ocean", study{batch: 100, median: 0.08, sigma: 0.5, delay: 0.05, queue: 0.0004}},
	{"batch 100, 2 s, an ocean", study{batch: 100, median: 2, sigma: 0.5, delay: 0.05, queue: 0.0004}},
	{"batch 100, 2 s, all alike", study{batch: 100, median: 2, sigma: 0, delay: 0.0002, queue: 0.0004}},
	{"batch 400, 2 s, in the room", study{batch: 400, median: 2, sigma: 0.5, delay: 0.0002, queue: 0.0004}},
	{"batch 16, 2 s, in the room", study{batch: 16, median: 2, sigma: 0.5, delay: 0.0002, queue: 0.0004}},
}

var crews = []int{1, 4, 16, 64, 256}

// BenchmarkScaling reports the study: the share of the workers' time that is
// spent on evaluations.
func BenchmarkScaling(b *testing.B) {
	for _, scene := range scenes {
		for _, workers := range crews {
			b.Run(fmt.Sprintf("%s/%d", scene.name, workers), func(b *testing.B) {
				s := scene.study
				s.workers = workers
				var share float64
				for b.Loop() {
					share = s.efficiency()
				}
				took, _ := s.run()
				b.ReportMetric(100*share, "%efficient")
				b.ReportMetric(studied/took, "evaluations/s")
			})
		}
	}
}

// BenchmarkReal is the study's check: the same scene over a real queue with
// workers that sleep, 400 evaluations of 100 ms at the median in batches of
// 100.
func BenchmarkReal(b *testing.B) {
	for _, workers := range crews {
		b.Run(fmt.Sprint(workers), func(b *testing.B) {
			bench := newBench(b, Options{})
			times := rand.New(rand.NewPCG(1, 2))
			naps := map[float64]time.Duration{}
			for i := range 400 {
				naps[winding(i).Turns] = time.Duration(0.1 * math.Exp(0.5*times.NormFloat64()) * float64(time.Second))
			}
			var leaving sync.WaitGroup
			defer leaving.Wait()
			for range workers {
				leave := bench.hire("w", 1, &fake{name: "made", answer: func(_ context.Context, d models.Design, _ models.Question) error {
					time.Sleep(naps[d.Turns])
					return nil
				}})
				defer leaving.Go(func() { leave() })
			}
			s := bench.simulator(&fake{name: "made"})
			soon(b, "every worker", func() bool { return len(bench.queue.Standing().Workers) == workers })
			time.Sleep(helloEvery)
			var work, took float64
			for b.Loop() {
				began := time.Now()
				for first := 0; first < 400; first += 100 {
					var batch sync.WaitGroup
					for i := first; i < first+100; i++ {
						work += naps[winding(i).Turns].Seconds()
						batch.Go(func() {
							if _, err := s.Simulate(context.Background(), winding(i), axis); err != nil {
								b.Error(err)
							}
						})
					}
					batch.Wait()
				}
				took += time.Since(began).Seconds()
			}
			b.ReportMetric(100*work/(took*float64(workers)), "%efficient")
		})
	}
}

// TestStudy holds the study against what can be known without it.
func TestStudy(t *testing.T) {
	alike := study{workers: 1, batch: 100, median: 2}
	if e := alike.efficiency(); math.Abs(e-1) > 1e-9 {
		t.Errorf("one worker without delays is %g efficient", e)
	}
	alike.workers = 64 // a batch of 100 takes two rounds of 64
	if e, want := alike.efficiency(), 100.0/128; math.Abs(e-want) > 1e-9 {
		t.Errorf("64 workers at batches of 100 alike are %g efficient, %g is due", e, want)
	}
	alike.delay = 0.5 // a round trip of 1 s to each evaluation of 2 s
	if e, want := alike.efficiency(), 100.0/128*2/3; math.Abs(e-want) > 1e-9 {
		t.Errorf("with delays they are %g efficient, %g is due", e, want)
	}
	slow := study{workers: 256, batch: 100, median: 1e-6, queue: 1}
	if took, _ := slow.run(); math.Abs(took-studied) > 0.01*studied {
		t.Errorf("a queue of 1 s a question takes %g s over %d", took, studied)
	}
	for _, scene := range scenes {
		var speeds []float64
		for _, workers := range crews {
			scene.workers = workers
			took, _ := scene.run()
			speeds = append(speeds, 1/took)
			if e := scene.efficiency(); !(e > 0 && e <= 1) {
				t.Errorf("%s: %d workers are %g efficient", scene.name, workers, e)
			}
		}
		if !slices.IsSorted(speeds) {
			t.Errorf("%s: more workers are slower: %v", scene.name, speeds)
		}
	}
}
