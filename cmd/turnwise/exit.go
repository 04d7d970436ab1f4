package main

import (
	"context"
	"errors"
	"fmt"
)

// The exit codes, the same for every command.
const (
	exitDone    = 0
	exitFailed  = 1 // failed while running, or cannot write
	exitWrong   = 2 // wrong brief, design, folder or command line
	exitStopped = 3 // stopped early by a signal, everything kept
	exitUnmet   = 4 // finished, but nothing meets the limits or the target
)

// coded is an error that knows its exit code. quiet errors have been said
// already.
type coded struct {
	code  int
	err   error
	quiet bool
}

func (c *coded) Error() string { return c.err.Error() }
func (c *coded) Unwrap() error { return c.err }

// wrong is an error in what the user gave.
func wrong(err error) error {
	if err == nil {
		return nil
	}
	return &coded{code: exitWrong, err: err}
}

func wrongf(format string, a ...any) error { return wrong(fmt.Errorf(format, a...)) }

// failed is an error while running; one that a signal brought about is none.
func failed(err error) error {
	if err == nil {
		return nil
	}
	if errors.Is(err, context.Canceled) {
		return &coded{code: exitStopped, err: errors.New("stopped by a signal")}
	}
	return &coded{code: exitFailed, err: err}
}

// unmet ends a command that finished without a design that serves.
func unmet(format string, a ...any) error {
	return &coded{code: exitUnmet, err: fmt.Errorf(format, a...)}
}

// stopped ends a command that a signal stopped; what to do next was said.
func stopped(err error) error {
	return &coded{code: exitStopped, err: err, quiet: true}
}

// exitCode is the code an error ends the program with.
func exitCode(err error) int {
	var c *coded
	switch {
	case err == nil:
		return exitDone
	case errors.As(err, &c):
		return c.code
	case errors.Is(err, context.Canceled):
		return exitStopped
	}
	return exitFailed
}
