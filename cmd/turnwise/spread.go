package main

import (
	"context"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"os"
	"sync"
	"time"

	"github.com/spf13/cobra"
	"github.com/spf13/pflag"

	"turnwise/cmd/internal/folder"
	"turnwise/models"
	"turnwise/models/remote"
)

// spread says where a search has its questions answered. The zero spread is
// this program alone: nothing listens.
type spread struct {
	serve, queue string
	lease        time.Duration
	access       remote.Access
}

// A lease is renewed three times before it runs out, so it must leave room
// for the network.
const (
	usualLease = 10 * time.Second
	leastLease = 200 * time.Millisecond
)

func (d *spread) flags(f *pflag.FlagSet) {
	f.StringVar(&d.serve, "serve", "", "have workers answer: open a queue for them at this address, such as 127.0.0.1:4222")
	f.StringVar(&d.queue, "queue", "", "have workers answer: use the queue that is there, such as nats://127.0.0.1:4222")
	f.DurationVar(&d.lease, "lease", usualLease, "how long a worker may be silent before what it has is handed to another")
	accessFlags(f, &d.access)
}

// accessFlags are the options of everyone who meets at a queue.
func accessFlags(f *pflag.FlagSet, a *remote.Access) {
	f.StringVar(&a.TokenFile, "token-file", "", "the file with the queue's token (a must beyond this machine)")
	f.StringVar(&a.Cert, "tls-cert", "", "PEM file of one's own certificate (a must to --serve beyond this machine)")
	f.StringVar(&a.Key, "tls-key", "", "PEM file of its key")
	f.StringVar(&a.CA, "tls-ca", "", "PEM file of the authority to know the other side by")
}

// outpost is a search's queue. The nil outpost is none.
type outpost struct {
	s      streams
	server *remote.Server // nil: another's
	queue  *remote.Queue
	done   chan struct{}
	wg     sync.WaitGroup
}

// open opens the queue that the options name, if they do.
func (d spread) open(ctx context.Context, s streams) (*outpost, error) {
	switch {
	case d.serve == "" && d.queue == "":
		if d.access != (remote.Access{}) {
			return nil, wrongf("--token-file and --tls-… are for a queue: give --serve or --queue too")
		}
		return nil, nil
	case d.lease < leastLease:
		return nil, wrongf("--lease %v: write at least %v, such as 10s", d.lease, leastLease)
	case d.serve != "" && d.queue != "":
		return nil, wrongf("--serve opens a queue and --queue uses another: give one of them")
	}
	far := &outpost{s: s, done: make(chan struct{})}
	o := remote.Options{Lease: d.lease, Say: func(text string) { fmt.Fprintln(s.err, text) }}
	var err error
	if d.queue != "" {
		if far.queue, err = remote.Open(ctx, d.queue, d.access, o); err != nil {
			return nil, refused("--queue", err)
		}
		return far, nil
	}
	if far.server, err = remote.Serve(d.serve, d.access); err != nil {
		return nil, wrong(fmt.Errorf("--serve %s: %w", d.serve, err))
	}
	if far.queue, err = far.server.Open(o); err != nil {
		far.close()
		return nil, failed(err)
	}
	fmt.Fprintf(s.err, "workers are waited for: turnwise worker --queue %s%s\n", far.server.URL(), d.needs())
	return far, nil
}

// needs are the options that a worker has to give besides.
func (d spread) needs() string {
	text := ""
	if d.access.TokenFile != "" {
		text += " --token-file FILE"
	}
	if d.access.Cert != "" {
		text += " --tls-ca FILE"
	}
	if d.access.CA != "" {
		text += " --tls-cert FILE --tls-key FILE"
	}
	return text
}

// refused is a queue that does not serve; one that a signal kept from coming
// is none.
func refused(option string, err error) error {
	if errors.Is(err, context.Canceled) {
		return failed(err)
	}
	return wrong(fmt.Errorf("%s: %w", option, err))
}

// mostAsked is how many questions lie in the queue at a time, unless
// --workers says otherwise: no batch is larger.
const mostAsked = 256

// join has a session's questions answered by workers.
func (far *outpost) join(c *cobra.Command, ses *session) error {
	if far == nil || ses.done {
		// A session that was killed has left one.
		os.Remove(ses.folder.Path(workersFile))
		return nil
	}
	if !c.Flags().Changed("workers") && os.Getenv("TURNWISE_WORKERS") == "" {
		ses.set.Workers = mostAsked
	}
	err := ses.problem.Wrap(func(m models.Simulator) (models.Simulator, error) { return far.queue.Simulator(c.Context(), m) })
	if err != nil {
		return failed(err)
	}
	far.wg.Go(func() { far.keep(ses.folder) })
	return nil
}

// close lets go of the queue.
func (far *outpost) close() {
	if far == nil {
		return
	}
	close(far.done)
	far.wg.Wait()
	if far.queue != nil {
		far.queue.Close()
	}
	if far.server != nil {
		far.server.Close()
	}
}

// workersFile is how the queue stands, for watch. It is there while the
// search runs.
const workersFile = "workers.json"

// keep writes how the queue stands into the run's folder.
func (far *outpost) keep(f folder.Folder) {
	defer os.Remove(f.Path(workersFile))
	tick := time.NewTicker(watchEvery)
	defer tick.Stop()
	for {
		if text, err := json.Marshal(far.queue.Standing()); err == nil {
			// What cannot be written is missed by nobody but watch.
			_ = folder.WriteFile(f.Path(workersFile), append(text, '\n'))
		}
		select {
		case <-far.done:
			return
		case <-tick.C:
		}
	}
}

// readStanding reads how a run's queue stands; nil where there is none.
func readStanding(f folder.Folder) *remote.Standing {
	text, err := os.ReadFile(f.Path(workersFile))
	if err != nil {
		return nil
	}
	s := new(remote.Standing)
	if json.Unmarshal(text, s) != nil {
		return nil
	}
	return s
}

// writeStanding shows it to a person.
func writeStanding(w io.Writer, s *remote.Standing) {
	for _, m := range s.Workers {
		state := ""
		if !m.Present {
			state = "silent"
		}
		fmt.Fprintf(w, "  worker %q\t%s/s\t%d answered, %d failed\t%s\n", m.Name, significant(m.Rate), m.Answered, m.Failed, state)
	}
	fmt.Fprintf(w, "  queue\t%d waiting\t%d refused, %d late, %d malformed\t\n", s.Waiting, s.Refused, s.Dropped, s.Malformed)
}
