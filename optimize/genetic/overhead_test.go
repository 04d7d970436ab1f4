//go:build unix

package genetic_test

import (
	"context"
	"math"
	"syscall"
	"testing"
	"time"

	"turnwise/optimize"
	"turnwise/optimize/genetic"
	"turnwise/optimize/searchtest"
)

// BenchmarkOverhead is what the searcher costs where an evaluation is free:
// 30 variables, population 100. pows is the time of one evaluation in calls
// of math.Pow, in turn with it: processor time, all threads', the least of some
// turns, since whatever else runs on the machine only adds.
func BenchmarkOverhead(b *testing.B) {
	b.Run("zdt1", func(b *testing.B) {
		const evaluations, turns = 25000, 9
		p := searchtest.ProblemByName("zdt1")
		search, pow := time.Duration(math.MaxInt64), time.Duration(math.MaxInt64)
		for b.Loop() {
			for range turns {
				search = min(search, timed(func() { free(p, evaluations) }))
				pow = min(pow, timed(func() { powers(b, evaluations*100) }))
			}
		}
		b.ReportMetric(evaluations/search.Seconds(), "evaluations/s")
		b.ReportMetric(100*search.Seconds()/pow.Seconds(), "pows")
	})
}

// free searches and keeps nothing of what was answered.
func free(p *searchtest.Problem, evaluations int) {
	s := genetic.New(p.Domain, genetic.Config{Population: 100, Evaluations: evaluations, Seed: 1}, nil)
	var told []optimize.Evaluation
	for batch := s.Ask(); len(batch) > 0; batch = s.Ask() {
		told = told[:0]
		for _, c := range batch {
			score, _ := p.Evaluate(context.Background(), c)
			told = append(told, optimize.Evaluation{Candidate: c, Score: score, Status: optimize.OK})
		}
		s.Tell(told)
	}
}

// timed is the processor time of some work.
func timed(work func()) time.Duration {
	start := spent()
	work()
	return spent() - start
}

// spent is the processor time of this process so far.
func spent() time.Duration {
	var u syscall.Rusage
	if err := syscall.Getrusage(syscall.RUSAGE_SELF, &u); err != nil {
		panic(err)
	}
	return time.Duration(u.Utime.Nano() + u.Stime.Nano())
}

// powers calls math.Pow so many times.
func powers(b *testing.B, calls int) {
	sum := 0.0
	for k := range calls {
		sum += math.Pow(0.5+float64(k)/float64(calls), 1.0/11)
	}
	if !(sum > 0) {
		b.Fatal("a sum of roots is not positive")
	}
}
