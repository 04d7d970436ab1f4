package main

import (
	"context"
	"fmt"
	"io"
	"os"
	"runtime"
	"time"

	"github.com/spf13/cobra"

	"turnwise/configs"
	"turnwise/models"
	"turnwise/models/external"
	"turnwise/models/moment"
	"turnwise/models/remote"
)

// employment is what a worker is asked for.
type employment struct {
	queue, name string
	slots       int
	access      remote.Access
	program     []string // an external model, with its arguments
	timeout     time.Duration
}

func workerCommand(s streams) *cobra.Command {
	var o employment
	c := &cobra.Command{
		Use:   "worker --queue URL [-- PROGRAM ARGUMENT…]",
		Short: "Takes evaluations for a search on another machine",
		Long: `Takes the evaluations that a search hands out, simulates and answers, until a
signal ends it; what it was at is then handed to another worker. Any number of
workers, on any machine, may join and leave at any time, before a search or in
the middle of one.

It answers with the models of this program and runs nothing else, save a
PROGRAM that stands on its own command line, for briefs whose external model
is that very command. A search whose model it does not have, to the version,
refuses it.

A queue on another machine demands a token and TLS.`,
		Args: arguments(cobra.ArbitraryArgs),
		RunE: func(c *cobra.Command, args []string) error {
			if len(args) > 0 && c.ArgsLenAtDash() != 0 {
				return wrongf("%q is no option of worker; a program of your own comes after --", args[0])
			}
			o.program = args
			return work(c.Context(), s, o)
		},
	}
	host, _ := os.Hostname()
	f := c.Flags()
	f.StringVar(&o.queue, "queue", "", "where the search's queue is, such as nats://127.0.0.1:4222")
	f.StringVar(&o.name, "name", host, "what the search calls this worker")
	f.IntVar(&o.slots, "workers", runtime.NumCPU(), "how many evaluations at a time")
	f.DurationVar(&o.timeout, "timeout", time.Minute, "the longest that PROGRAM may take over a question")
	accessFlags(f, &o.access)
	return c
}

// work answers questions until a signal comes.
func work(ctx context.Context, s streams, o employment) error {
	switch {
	case o.queue == "":
		return wrongf("--queue is missing: name the search's queue, such as --queue nats://127.0.0.1:4222")
	case o.slots < 1 || o.slots > mostPrograms:
		return wrongf("--workers %d: write 1 to %d", o.slots, mostPrograms)
	case len(o.name) > 100:
		return wrongf("--name: at most 100 bytes are due")
	}
	ms, err := o.models(ctx)
	if err != nil {
		return wrong(err)
	}
	defer func() {
		for _, m := range ms {
			if c, ok := m.(io.Closer); ok {
				c.Close()
			}
		}
	}()
	w := &remote.Worker{Name: o.name, Slots: o.slots, Models: ms, Say: func(text string) { fmt.Fprintln(s.err, text) }}
	if err := w.Run(ctx, o.queue, o.access); err != nil && ctx.Err() == nil {
		return wrong(fmt.Errorf("--queue: %w", err))
	}
	return nil
}

// models are those that the worker answers with.
func (o employment) models(ctx context.Context) ([]models.Simulator, error) {
	cheap, err := newRung(configs.ClosedForm, "")
	if err != nil {
		return nil, err
	}
	ms := []models.Simulator{cheap.Simulator}
	for _, fidelity := range []moment.Fidelity{moment.Draft, moment.Standard, moment.Fine} {
		rung, err := newRung(configs.FullWave, string(fidelity))
		if err != nil {
			return nil, err
		}
		ms = append(ms, rung.Simulator)
	}
	if len(o.program) > 0 {
		program, err := external.Start(ctx, o.program, external.Options{Workers: o.slots, Timeout: o.timeout})
		if err != nil {
			return nil, err
		}
		ms = append(ms, program)
	}
	return ms, nil
}
