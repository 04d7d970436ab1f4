package main

import (
	"context"
	"errors"
	"math"
	"net"
	"os"
	"os/exec"
	"strconv"
	"testing"
	"time"

	"github.com/rogpeppe/go-internal/testscript"

	"turnwise/configs"
	"turnwise/models"
	"turnwise/models/external"
	"turnwise/models/moment"
)

func TestMain(m *testing.M) {
	external.Guard()
	testscript.Main(m, map[string]func(){"turnwise": main, "slowmodel": slowModel})
}

// Every script is what a user does, told by its file's name.
func TestScripts(t *testing.T) {
	testscript.Run(t, testscript.Params{
		Dir: "testdata/script",
		Cmds: map[string]func(*testscript.TestScript, bool, []string){
			"exits":  exits,
			"port":   port,
			"rows":   rows,
			"shared": shared,
			"until":  until,
			"purely": purely,
		},
		Condition: func(cond string) (bool, error) {
			if cond == "root" {
				return os.Geteuid() == 0, nil
			}
			return false, errors.New("unknown condition")
		},
		RequireExplicitExec: true,
	})
}

// exits CODE PROGRAM ARGS… runs a program that must end with the code.
func exits(ts *testscript.TestScript, neg bool, args []string) {
	if neg || len(args) < 2 {
		ts.Fatalf("usage: exits code program args…")
	}
	want, err := strconv.Atoi(args[0])
	ts.Check(err)
	code := 0
	var exit *exec.ExitError
	if err := ts.Exec(args[1], args[2:]...); errors.As(err, &exit) {
		code = exit.ExitCode()
	} else {
		ts.Check(err)
	}
	if code != want {
		ts.Fatalf("exit code %d, %d is due", code, want)
	}
}

// port NAME sets a variable to a port of loopback that is free.
func port(ts *testscript.TestScript, neg bool, args []string) {
	if neg || len(args) != 1 {
		ts.Fatalf("usage: port name")
	}
	address, err := freeAddress()
	ts.Check(err)
	ts.Setenv(args[0], strconv.Itoa(address.Port))
}

// freeAddress is an address of loopback that is free.
func freeAddress() (*net.TCPAddr, error) {
	l, err := net.ListenTCP("tcp", &net.TCPAddr{IP: net.IPv4(127, 0, 0, 1)})
	if err != nil {
		return nil, err
	}
	return l.Addr().(*net.TCPAddr), l.Close()
}

// rows FILE LEAST MOST counts the rows of a table under its header.
func rows(ts *testscript.TestScript, neg bool, args []string) {
	if neg || len(args) != 3 {
		ts.Fatalf("usage: rows file least most")
	}
	least, err := strconv.Atoi(args[1])
	ts.Check(err)
	most, err := strconv.Atoi(args[2])
	ts.Check(err)
	n := -1
	for _, c := range ts.ReadFile(args[0]) {
		if c == '\n' {
			n++
		}
	}
	if n < least || n > most {
		ts.Fatalf("%d rows, %d to %d are due", n, least, most)
	}
}

// shared copies a file of testdata into the script's folder.
func shared(ts *testscript.TestScript, neg bool, args []string) {
	for _, name := range args {
		data, err := os.ReadFile("testdata/" + name)
		ts.Check(err)
		ts.Check(os.WriteFile(ts.MkAbs(name), data, 0o644))
	}
}

// until FILE waits until there is such a file.
func until(ts *testscript.TestScript, neg bool, args []string) {
	for range 6000 {
		if _, err := os.Stat(ts.MkAbs(args[0])); err == nil {
			return
		}
		time.Sleep(10 * time.Millisecond)
	}
	ts.Fatalf("%s does not come", args[0])
}

// purely DESIGN SENSE DB simulates a design: on the axis its gain in the sense
// must exceed that in the other by so many decibels.
func purely(ts *testscript.TestScript, neg bool, args []string) {
	d, err := configs.ReadDesign(ts.MkAbs(args[0]))
	ts.Check(err)
	least, err := strconv.ParseFloat(args[2], 64)
	ts.Check(err)
	solver, err := moment.New(moment.Draft)
	ts.Check(err)
	r, err := solver.Simulate(context.Background(), d, models.Question{Hz: d.Band.Hz()})
	ts.Check(err)
	for _, s := range r.Samples {
		ratio := s.Gain.Right / s.Gain.Left
		if args[1] == "left" {
			ratio = 1 / ratio
		}
		if db := 10 * math.Log10(ratio); db < least {
			ts.Fatalf("%s exceeds the other sense by %.1f dB at %g Hz, %g dB are due", args[1], db, s.Hz, least)
		}
	}
}
