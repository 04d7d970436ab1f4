package external

import (
	"context"
	"errors"
	"sync"
	"time"
)

var errClosed = errors.New("the program was closed")

// pool keeps the processes: at most as many as it has slots, started when
// they are needed, used again while they are sound.
type pool struct {
	start func(ctx context.Context) (*process, error)
	slots chan struct{}

	mu     sync.Mutex
	closed bool
	free   []*process
	live   map[*process]bool // true: busy
	losses int               // in a row, since the last answer
	dying  sync.WaitGroup
}

func newPool(most int, start func(ctx context.Context) (*process, error)) *pool {
	return &pool{start: start, slots: make(chan struct{}, most), live: map[*process]bool{}}
}

// enter waits for a slot, under which one process at a time may be taken.
func (p *pool) enter(ctx context.Context) error {
	if err := ctx.Err(); err != nil {
		return err
	}
	select {
	case p.slots <- struct{}{}:
		return nil
	case <-ctx.Done():
		return ctx.Err()
	}
}

func (p *pool) leave() { <-p.slots }

// take gives a process that waits for a question: the one used last, or a
// new one.
func (p *pool) take(ctx context.Context) (*process, error) {
	for {
		proc, err := p.pick()
		if err != nil {
			return nil, err
		}
		if proc == nil {
			return p.launch(ctx)
		}
		if proc.idle() {
			return proc, nil
		}
		p.drop(proc)
	}
}

// pick takes a free process, if there is one.
func (p *pool) pick() (*process, error) {
	p.mu.Lock()
	defer p.mu.Unlock()
	if p.closed {
		return nil, errClosed
	}
	if len(p.free) == 0 {
		return nil, nil
	}
	last := len(p.free) - 1
	proc := p.free[last]
	p.free = p.free[:last]
	p.live[proc] = true
	return proc, nil
}

// launch starts a process, after a pause where others were lost.
func (p *pool) launch(ctx context.Context) (*process, error) {
	p.mu.Lock()
	wait := pause(p.losses)
	p.mu.Unlock()
	select {
	case <-time.After(wait):
	case <-ctx.Done():
		return nil, ctx.Err()
	}
	proc, err := p.start(ctx)
	if err != nil {
		var l *lost
		if errors.As(err, &l) {
			p.lose()
		}
		return nil, err
	}
	return proc, nil
}

// adopt makes a process just launched one of the pool's, which it stays
// until it has ended.
func (p *pool) adopt(proc *process) error {
	p.mu.Lock()
	defer p.mu.Unlock()
	if p.closed {
		proc.kill()
		return errClosed
	}
	p.live[proc] = true
	p.dying.Go(func() {
		<-proc.ended
		p.mu.Lock()
		delete(p.live, proc)
		p.mu.Unlock()
	})
	return nil
}

// give puts a process back that has answered.
func (p *pool) give(proc *process) {
	p.mu.Lock()
	defer p.mu.Unlock()
	p.losses = 0
	if p.closed {
		proc.kill()
		return
	}
	if _, lives := p.live[proc]; lives {
		p.live[proc] = false
		p.free = append(p.free, proc)
	}
}

// drop ends a process that is lost.
func (p *pool) drop(proc *process) {
	proc.kill()
	p.lose()
}

func (p *pool) lose() {
	p.mu.Lock()
	p.losses++
	p.mu.Unlock()
}

// close ends every process: idle ones by the end of their input, busy ones
// at once.
func (p *pool) close() {
	p.mu.Lock()
	p.closed = true
	for proc, busy := range p.live {
		if busy {
			proc.kill()
		} else {
			proc.dismiss()
		}
	}
	p.mu.Unlock()
	p.dying.Wait()
}

// The pauses before a start: none after one loss, since a design may do
// that, and then ever longer ones.
const (
	leastPause = 50 * time.Millisecond
	mostPause  = 5 * time.Second
)

// pause is the wait before a process is started after some losses in a row.
func pause(losses int) time.Duration {
	if losses < 2 {
		return 0
	}
	return min(leastPause<<min(losses-2, 20), mostPause)
}
