package external

import (
	"context"
	"errors"
	"fmt"
	"strings"
	"sync/atomic"
	"time"

	"turnwise/models"
)

// Options say how a program is used. Zero fields are read as their defaults.
type Options struct {
	Workers int           // processes at most; 1
	Timeout time.Duration // for one question; a minute
	Hello   time.Duration // for a program to present itself; 30 s
}

// Program is another program as a simulator. It is safe for concurrent use;
// it needs a Close.
type Program struct {
	command []string
	options Options
	hello   hello
	pool    *pool
	asked   atomic.Uint64
}

var _ models.Simulator = (*Program)(nil)

// Start starts a program, a command with its arguments that no shell looks
// at, and waits until it has presented itself. More processes follow as
// questions need them. It panics in a program whose main does not call
// [Guard].
func Start(ctx context.Context, command []string, o Options) (*Program, error) {
	if !guarded {
		panic("external: main does not call Guard")
	}
	if len(command) == 0 || command[0] == "" {
		return nil, errors.New("external model: no program is named; give its command")
	}
	if o.Timeout <= 0 {
		o.Timeout = time.Minute
	}
	if o.Hello <= 0 {
		o.Hello = 30 * time.Second
	}
	p := &Program{command: append([]string(nil), command...), options: o}
	p.pool = newPool(max(o.Workers, 1), p.launch)
	proc, err := p.pool.launch(ctx)
	if err != nil {
		p.pool.close()
		return nil, fmt.Errorf("external model %s: %w", strings.Join(command, " "), err)
	}
	p.pool.give(proc)
	return p, nil
}

// launch starts one process and hears its hello, which is the same for all.
func (p *Program) launch(ctx context.Context) (*process, error) {
	proc, err := launch(p.command)
	if err != nil {
		return nil, &lost{err.Error()}
	}
	if err := p.pool.adopt(proc); err != nil {
		return nil, err
	}
	l, err := proc.exchange(ctx, p.options.Hello, nil)
	if err != nil {
		return nil, fmt.Errorf("no hello: %w", err)
	}
	h, err := readHello(l.text)
	switch {
	case err != nil:
		return nil, proc.lost("did not present itself: " + err.Error())
	case l.more:
		return nil, proc.lost("wrote more than its hello before it was asked")
	case p.hello == hello{}:
		p.hello = h
	case p.hello != h:
		return nil, proc.lost(fmt.Sprintf("was %s %s and presents itself as %s %s, or with other outputs, now", p.hello.name, p.hello.version, h.name, h.version))
	}
	return proc, nil
}

// Identity names the protocol, the program as it presented itself, and its
// command.
func (p *Program) Identity() string {
	return fmt.Sprintf("external %d %q %q %q", protocol, p.hello.name, p.hello.version, p.command)
}

// Indicative reports whether the program calls its impedances and axial
// ratios rules of thumb.
func (p *Program) Indicative() bool { return p.hello.indicative }

// Close ends all processes and waits for their end. Questions under way are
// answered with an error, and so are later ones.
func (p *Program) Close() error {
	p.pool.close()
	return nil
}

// Simulate puts the question to a process. A process that is lost over it is
// replaced and the question asked once more; losing that one too is a failure
// of the design.
func (p *Program) Simulate(ctx context.Context, d models.Design, q models.Question) (models.Response, error) {
	r, err := p.simulate(ctx, d, q)
	if err != nil {
		return models.Response{}, fmt.Errorf("%s: %w", p.hello.name, err)
	}
	r.Indicative, r.Statement = p.hello.indicative, p.hello.statement
	return r, nil
}

func (p *Program) simulate(ctx context.Context, d models.Design, q models.Question) (models.Response, error) {
	ask, err := newQuestion(d, q, p.hello.outputs)
	if err != nil {
		return models.Response{}, err
	}
	if err := p.pool.enter(ctx); err != nil {
		return models.Response{}, err
	}
	defer p.pool.leave()
	r, err := p.attempt(ctx, &ask)
	if loss := (*lost)(nil); errors.As(err, &loss) {
		if r, err = p.attempt(ctx, &ask); errors.As(err, &loss) {
			err = fmt.Errorf("twice in a row %w", err)
		}
	}
	return r, err
}

// attempt asks one process.
func (p *Program) attempt(ctx context.Context, ask *question) (models.Response, error) {
	proc, err := p.pool.take(ctx)
	if err != nil {
		return models.Response{}, err
	}
	id := p.asked.Add(1)
	text, err := ask.line(id)
	if err != nil {
		p.pool.give(proc)
		return models.Response{}, err
	}
	l, err := proc.exchange(ctx, p.options.Timeout, text)
	if err != nil {
		if loss := (*lost)(nil); errors.As(err, &loss) {
			p.pool.lose()
		}
		return models.Response{}, err
	}
	r, err := readAnswer(l.text, id, ask)
	if step := (*outOfStep)(nil); errors.As(err, &step) {
		err = proc.lost(step.what)
	} else if l.more {
		err = proc.lost("wrote more than one line for one question")
	} else {
		p.pool.give(proc)
		return r, err
	}
	p.pool.lose()
	return models.Response{}, err
}
