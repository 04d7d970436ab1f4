package configs

import (
	"strconv"
	"strings"
)

// Fault is one thing that is wrong with what a person gave: where, what, and
// what would be right.
type Fault struct {
	File   string // file, option or variable it stands in
	Line   int    // from 1; 0 where there is none
	Key    string // path of keys, vary.turns.from; empty for the file as a whole
	What   string
	Remedy string
}

func (f *Fault) Error() string {
	var b strings.Builder
	b.WriteString(f.File)
	if f.Line > 0 {
		b.WriteString(":" + strconv.Itoa(f.Line))
	}
	if f.File != "" {
		b.WriteString(": ")
	}
	if f.Key != "" {
		b.WriteString(f.Key + ": ")
	}
	b.WriteString(f.What)
	if f.Remedy != "" {
		b.WriteString("; " + f.Remedy)
	}
	return plain(b.String())
}

// Error is everything that is wrong with a brief, a design or the settings
// of a run, in the order of the lines. It is the user's to mend.
type Error struct{ Faults []Fault }

// mostFaults is the number of faults that a message spells out.
const mostFaults = 20

func (e *Error) Error() string {
	lines := make([]string, 0, mostFaults+1)
	for i := range e.Faults {
		if i == mostFaults {
			lines = append(lines, "and "+strconv.Itoa(len(e.Faults)-i)+" more")
			break
		}
		lines = append(lines, e.Faults[i].Error())
	}
	return strings.Join(lines, "\n")
}

// Unwrap lists the faults as errors.
func (e *Error) Unwrap() []error {
	all := make([]error, len(e.Faults))
	for i := range e.Faults {
		all[i] = &e.Faults[i]
	}
	return all
}
