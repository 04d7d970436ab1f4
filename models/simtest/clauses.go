package simtest

import (
	"context"
	"errors"
	"fmt"
	"reflect"
	"strings"
	"sync"

	"turnwise/models"
)

func identity(make func() models.Simulator) error {
	s, other := make(), make()
	name := s.Identity()
	if strings.TrimSpace(name) == "" || strings.ContainsAny(name, "\n\r") {
		return fmt.Errorf("the identity is %q; one line with something in it is due", name)
	}
	if _, err := answer(s, good()[0], sweep(models.Axis)); err != nil {
		return err
	}
	if again := s.Identity(); again != name {
		return fmt.Errorf("the identity was %q and is %q after an answer", name, again)
	}
	if o := other.Identity(); o != name {
		return fmt.Errorf("two simulators made alike are %q and %q", name, o)
	}
	return nil
}

func order(make func() models.Simulator) error {
	s := make()
	for _, hz := range [][]float64{{1e9}, {0.97e9, 0.99e9, 1e9, 1.002e9, 1.04e9}} {
		if _, err := answer(s, good()[0], models.Question{Hz: hz, Outputs: models.Axis}); err != nil {
			return err
		}
	}
	return nil
}

// outputs asks for each output alone and for all of them: what is answered
// alone is answered among others, and what else is asked moves no figure on
// the axis.
func outputs(make func() models.Simulator) error {
	s := make()
	for _, d := range good() {
		all, err := answer(s, d, sweep(everything))
		if err != nil {
			return err
		}
		for o := models.Axis; o <= models.Pattern; o <<= 1 {
			alone, err := answer(s, d, sweep(o))
			if err != nil {
				return fmt.Errorf("output %b alone: %w", o, err)
			}
			if alone.Answered&o != all.Answered&o {
				return fmt.Errorf("output %b is answered either alone or among all, not both", o)
			}
			for i := range alone.Samples {
				if !sameAxis(&alone.Samples[i], &all.Samples[i]) {
					return fmt.Errorf("asked for output %b alone the axis reads %+v, for all outputs %+v", o, alone.Samples[i], all.Samples[i])
				}
			}
		}
	}
	return nil
}

// sameAxis allows for sums in another order.
func sameAxis(a, b *models.Sample) bool {
	near := func(x, y float64) bool { return x == y || abs(x-y) <= 1e-6*max(abs(x), abs(y)) }
	return near(real(a.Port), real(b.Port)) && near(imag(a.Port), imag(b.Port)) && near(a.Directivity, b.Directivity) &&
		near(a.Efficiency, b.Efficiency) && near(a.Gain.Right+a.Gain.Left, b.Gain.Right+b.Gain.Left)
}

func abs(x float64) float64 { return max(x, -x) }

// all is every good question about every good design, answered one by one.
func all(s models.Simulator) (map[int]string, error) {
	out := map[int]string{}
	for i := range questions() {
		text, err := one(s, i)
		if err != nil {
			return nil, err
		}
		out[i] = text
	}
	return out, nil
}

type asked struct {
	d models.Design
	q models.Question
}

func questions() []asked {
	var out []asked
	for _, d := range good() {
		for _, o := range []models.Outputs{models.Axis, models.Cone | models.Cuts, everything} {
			out = append(out, asked{d, sweep(o)})
		}
	}
	return out
}

func one(s models.Simulator, i int) (string, error) {
	a := questions()[i]
	r, err := answer(s, a.d, a.q)
	if err != nil {
		return "", err
	}
	return bits(r)
}

func repeats(make func() models.Simulator) error {
	s, other := make(), make()
	first, err := all(s)
	if err != nil {
		return err
	}
	for _, again := range []models.Simulator{s, other} {
		second, err := all(again)
		if err != nil {
			return err
		}
		for i := range first {
			if first[i] != second[i] {
				return fmt.Errorf("the same question got\n%s\nand then\n%s", first[i], second[i])
			}
		}
	}
	return nil
}

// askers is how many ask at once.
const askers = 6

func concurrent(make func() models.Simulator) error {
	want, err := all(make())
	if err != nil {
		return err
	}
	s := make()
	var wg sync.WaitGroup
	var faults [askers]error
	for a := range askers {
		wg.Go(func() {
			for k := range want {
				i := (k + a) % len(want)
				got, err := one(s, i)
				if err == nil && got != want[i] {
					err = fmt.Errorf("among others a question got\n%s\nand alone\n%s", got, want[i])
				}
				if err != nil {
					faults[a] = err
					return
				}
			}
		})
	}
	wg.Wait()
	return errors.Join(faults[:]...)
}

// cancelled ends contexts before and during a question; the simulator goes
// on after that as if nothing had been.
func cancelled(make func() models.Simulator) error {
	s := make()
	want, err := one(s, 0)
	if err != nil {
		return err
	}
	gone, cancel := context.WithCancel(context.Background())
	cancel()
	if _, err := ask(gone, s, good()[0], sweep(models.Axis)); !errors.Is(err, context.Canceled) {
		return fmt.Errorf("a context that was cancelled before: %v, not its error", err)
	}
	late, stop := context.WithTimeout(context.Background(), 0)
	defer stop()
	if _, err := ask(late, s, good()[0], sweep(models.Axis)); !errors.Is(err, context.DeadlineExceeded) {
		return fmt.Errorf("a context whose time was over: %v, not its error", err)
	}
	if err := cancelledAmid(s); err != nil {
		return err
	}
	got, err := one(s, 0)
	if err == nil && got != want {
		err = errors.New("the answer is another")
	}
	if err != nil {
		return fmt.Errorf("after a cancelled question: %w", err)
	}
	return nil
}

// cancelledAmid cancels while a long question runs.
func cancelledAmid(s models.Simulator) error {
	long := models.Question{Outputs: everything, Cone: sweep(models.Cone).Cone}
	for i := range 2000 {
		long.Hz = append(long.Hz, 0.9e9+1e5*float64(i))
	}
	ctx, cancel := context.WithCancel(context.Background())
	defer cancel()
	if _, err := ask(&signalled{Context: ctx, looked: cancel}, s, good()[0], long); !errors.Is(err, context.Canceled) {
		return fmt.Errorf("a context that was cancelled at the start of %d frequencies: %v, not its error", len(long.Hz), err)
	}
	return nil
}

// signalled is a context that is cancelled when its user has looked at it
// for the second time, so that a question is surely under way.
type signalled struct {
	context.Context
	looked context.CancelFunc
	mu     sync.Mutex
	times  int
}

func (s *signalled) look() {
	s.mu.Lock()
	s.times++
	now := s.times == 2
	s.mu.Unlock()
	if now {
		s.looked()
	}
}

func (s *signalled) Err() error {
	s.look()
	return s.Context.Err()
}

func (s *signalled) Done() <-chan struct{} {
	s.look()
	return s.Context.Done()
}

func badQuestions(make func() models.Simulator) error {
	s := make()
	for what, q := range badly() {
		if err := refused(s, good()[0], q); err != nil {
			return fmt.Errorf("a question with %s: %w", what, err)
		}
	}
	_, err := one(s, 0)
	return err
}

func badDesigns(make func() models.Simulator) error {
	s := make()
	for what, d := range bad() {
		if err := refused(s, d, sweep(models.Axis)); err != nil {
			return fmt.Errorf("a design with %s: %w", what, err)
		}
	}
	_, err := one(s, 0)
	return err
}

// refused demands an error with words.
func refused(s models.Simulator, d models.Design, q models.Question) error {
	_, err := ask(context.Background(), s, d, q)
	var fault *broken
	switch {
	case err == nil:
		return errors.New("is answered")
	case errors.As(err, &fault):
		return err
	case strings.TrimSpace(err.Error()) == "":
		return errors.New("is refused without a reason")
	}
	return nil
}

// untouched demands that nothing is shared between the asker, the simulator
// and its answers.
func untouched(make func() models.Simulator) error {
	s := make()
	for _, d := range good() {
		given, q := clone(d), sweep(everything)
		r, err := answer(s, given, q)
		if err != nil {
			return err
		}
		if !reflect.DeepEqual(given, clone(d)) || !reflect.DeepEqual(q, sweep(everything)) {
			return errors.New("the design or the question is another after the answer")
		}
		want, err := bits(r)
		if err != nil {
			return err
		}
		scribble(&r)
		again, err := answer(s, given, q)
		if err != nil {
			return err
		}
		if got, err := bits(again); err != nil || got != want {
			return errors.New("what is done to an answer reaches the next one")
		}
	}
	return nil
}

// scribble spoils an answer.
func scribble(r *models.Response) {
	for i := range r.Samples {
		for _, c := range r.Samples[i].Pattern {
			clear(c.Rays)
		}
		r.Samples[i] = models.Sample{}
	}
	for i := range r.Warnings {
		r.Warnings[i] = "spoilt"
	}
}
