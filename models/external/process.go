package external

import (
	"bufio"
	"context"
	"errors"
	"fmt"
	"io"
	"os"
	"sync"
	"time"
)

// linger is how long what a dead program left in its pipes is waited for,
// should a process that escaped hold them open, and how long a program that
// was told to end may take.
const linger = time.Second

// process is one running copy of the program. It serves one question at a
// time.
type process struct {
	leash *leash
	in    *os.File      // takes questions
	out   *os.File      // gives answers
	log   *os.File      // gives what the program says to people
	lines chan line     // closed where there will be no more
	fault error         // why there will be none; to be read after that
	words tail          // the end of the log
	once  sync.Once     // over kill
	quit  chan struct{} // closed: killed
	ended chan struct{} // closed: ended, and all it wrote is read
	how   string        // how it ended, if by itself; to be read after that
}

// launch starts a command.
func launch(argv []string) (*process, error) {
	var files []*os.File
	pipe := func() (r, w *os.File, err error) {
		if r, w, err = os.Pipe(); err == nil {
			files = append(files, r, w)
		}
		return r, w, err
	}
	in, inOurs, err1 := pipe()
	outOurs, out, err2 := pipe()
	logOurs, log, err3 := pipe()
	err := errors.Join(err1, err2, err3)
	var l *leash
	if err == nil {
		l, err = tie(argv, in, out, log)
	}
	if err != nil {
		for _, f := range files {
			f.Close()
		}
		return nil, err
	}
	in.Close()
	out.Close()
	log.Close()
	p := &process{leash: l, in: inOurs, out: outOurs, log: logOurs, lines: make(chan line), quit: make(chan struct{}), ended: make(chan struct{})}
	p.attend()
	return p, nil
}

// attend reads what the program writes until it ends.
func (p *process) attend() {
	var readers sync.WaitGroup
	readers.Go(p.read)
	readers.Go(func() { _, _ = io.Copy(&p.words, p.log) })
	go func() {
		how := p.leash.wait()
		select {
		case <-p.quit:
		default:
			p.how = how
		}
		soon := time.Now().Add(linger)
		// Deadlines fail only where a system has none on pipes.
		_ = p.out.SetReadDeadline(soon)
		_ = p.log.SetReadDeadline(soon)
		readers.Wait()
		p.in.Close()
		p.out.Close()
		p.log.Close()
		close(p.ended)
	}()
}

func (p *process) read() {
	defer close(p.lines)
	r := bufio.NewReaderSize(p.out, 64<<10)
	for {
		l, err := readLine(r)
		if err != nil {
			p.fault = err
			return
		}
		select {
		case p.lines <- l:
		case <-p.quit:
			p.fault = os.ErrProcessDone
			return
		}
	}
}

// kill ends the process and its children at once.
func (p *process) kill() {
	p.once.Do(func() {
		close(p.quit)
		p.leash.kill()
		now := time.Now()
		_ = p.in.SetWriteDeadline(now)
		_ = p.out.SetReadDeadline(now)
	})
}

// dismiss asks the process to end, by the end of its input, and kills it if
// it does not.
func (p *process) dismiss() {
	p.in.Close()
	time.AfterFunc(linger, p.kill)
}

// exchange writes a question (none: waits for the hello) and reads a line.
// The process is dead afterwards if ctx or the limit ended first.
func (p *process) exchange(ctx context.Context, limit time.Duration, question []byte) (line, error) {
	limited, cancel := context.WithTimeout(ctx, limit)
	defer cancel()
	stop := context.AfterFunc(limited, p.kill)
	// Where the program does not take the question, what it writes next, or
	// its silence, is the better reason.
	_, _ = p.in.Write(question)
	l, ok := <-p.lines
	if !stop() {
		p.kill()
	}
	switch {
	case ctx.Err() != nil:
		p.kill()
		return line{}, ctx.Err()
	case ok:
		return l, nil
	case limited.Err() != nil:
		return line{}, &slow{limit, p.lastWords()}
	case errors.Is(p.fault, errLong):
		return line{}, p.lost(p.fault.Error())
	}
	// It has ended, or closed its output, which comes to the same.
	p.await(linger / 2)
	if errors.Is(p.fault, errHalf) {
		return line{}, p.lost(p.fault.Error())
	}
	return line{}, p.lost("ended before it answered")
}

// idle reports whether the process waits for a question: it lives and has
// written nothing unasked.
func (p *process) idle() bool {
	select {
	case <-p.lines:
		return false
	case <-p.quit:
		return false
	default:
		return true
	}
}

// lost ends a process that is of no more use and says why.
func (p *process) lost(why string) error {
	p.kill()
	words := p.lastWords()
	select {
	case <-p.ended:
		if p.how != "" {
			why += " (" + p.how + ")"
		}
	default:
	}
	return &lost{"the program " + why + words}
}

// lastWords is the end of the log of an ending process, as the end of an
// error's text.
func (p *process) lastWords() string {
	p.await(2 * linger)
	if w := p.words.String(); w != "" {
		return "; its last words:\n" + w
	}
	return ""
}

// await waits for the end of a process that is ending.
func (p *process) await(most time.Duration) {
	select {
	case <-p.ended:
	case <-time.After(most):
	}
}

// lost is the loss of a process: whoever asked may ask another one.
type lost struct{ why string }

func (l *lost) Error() string { return l.why }

// slow is a question that was not answered in time.
type slow struct {
	limit time.Duration
	words string
}

func (s *slow) Error() string {
	return fmt.Sprintf("the program did not answer within %v%s", s.limit, s.words)
}

// Unwrap makes it a deadline that was exceeded.
func (s *slow) Unwrap() error { return context.DeadlineExceeded }
