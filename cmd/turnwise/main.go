// Command turnwise designs axial-mode helical antennas: it searches for the
// ones that a brief asks for and hands over what is needed to choose, trust
// and wind them.
package main

import (
	"context"
	"errors"
	"fmt"
	"io"
	"os"
	"os/signal"
	"syscall"

	"golang.org/x/term"

	"turnwise/models/external"
)

// streams are where a command reads and writes. Results go to out alone,
// everything else to err.
type streams struct {
	out, err io.Writer
	// live is set where err is a terminal that may be drawn on.
	live bool
}

func main() {
	external.Guard()
	ctx, stop := signal.NotifyContext(context.Background(), os.Interrupt, syscall.SIGTERM, syscall.SIGHUP)
	// The first signal asks the search to finish; after it the signals are
	// the system's again, so that a second one ends the program at once.
	context.AfterFunc(ctx, stop)
	os.Exit(run(ctx, os.Args[1:], streams{
		out:  os.Stdout,
		err:  os.Stderr,
		live: term.IsTerminal(int(os.Stderr.Fd())) && os.Getenv("TERM") != "dumb",
	}))
}

// run is the whole program: it returns the exit code.
func run(ctx context.Context, args []string, s streams) int {
	root := newRoot(s)
	root.SetArgs(args)
	err := root.ExecuteContext(ctx)
	var c *coded
	if err != nil && !(errors.As(err, &c) && c.quiet) {
		fmt.Fprintf(s.err, "turnwise: %v\n", err)
	}
	return exitCode(err)
}
