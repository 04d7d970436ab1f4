//go:build unix

package external

import (
	"errors"
	"fmt"
	"io"
	"os"
	"os/exec"
	"os/signal"
	"runtime"
	"strings"
	"sync"
	"syscall"
)

// guardWord is the first argument of a guard; the rest is the simulator's
// command.
const guardWord = "guard-of-simulator"

// What a guard finds beside its standard streams, which are the simulator's.
const (
	holdFD   = 3 // ends when the parent does
	statusFD = 4 // takes how the simulator ended
)

func guard() {
	if len(os.Args) > 2 && os.Args[1] == guardWord {
		watch(os.Args[2:])
	}
}

// watch is the life of a guard: it starts the simulator, waits for the end of
// either it or the parent, and ends with its whole group.
func watch(argv []string) {
	hold, status := os.NewFile(holdFD, "hold"), os.NewFile(statusFD, "status")
	if !isPipe(hold) || !isPipe(status) || syscall.Getpgrp() != os.Getpid() {
		fmt.Fprintf(os.Stderr, "%s is for the program itself to call\n", guardWord)
		os.Exit(2)
	}
	syscall.CloseOnExec(holdFD)
	syscall.CloseOnExec(statusFD)
	// The simulator may be bound to die with the thread that started it.
	runtime.LockOSThread()
	signals := make(chan os.Signal, 1)
	signal.Notify(signals, syscall.SIGINT, syscall.SIGTERM, syscall.SIGHUP, syscall.SIGQUIT)
	go func() {
		<-signals
		endGroup()
	}()
	go func() {
		_, _ = io.Copy(io.Discard, hold)
		endGroup()
	}()
	cmd := exec.Command(argv[0], argv[1:]...)
	cmd.Stdin, cmd.Stdout, cmd.Stderr = os.Stdin, os.Stdout, os.Stderr
	cmd.SysProcAttr = dieWithGuard()
	err := cmd.Start()
	// The guard's copies would hide from the parent that the simulator has
	// closed its own.
	os.Stdin.Close()
	os.Stdout.Close()
	os.Stderr.Close()
	if err != nil {
		fmt.Fprintf(status, "cannot be started: %v", err)
		endGroup()
	}
	// An error of Wait is in the state already.
	_ = cmd.Wait()
	fmt.Fprint(status, cmd.ProcessState)
	endGroup()
}

func isPipe(f *os.File) bool {
	if f == nil {
		return false
	}
	info, err := f.Stat()
	return err == nil && info.Mode()&os.ModeNamedPipe != 0
}

// endGroup kills the caller's process group, itself included.
func endGroup() {
	_ = syscall.Kill(0, syscall.SIGKILL)
	select {}
}

// leash holds a simulator, its guard and their process group.
type leash struct {
	cmd    *exec.Cmd
	hold   *os.File
	status *os.File
	mu     sync.Mutex
	killed bool
	reaped bool // the group's number may be another's
}

// tie starts a command under a guard on three streams.
func tie(argv []string, in, out, log *os.File) (*leash, error) {
	holdGuard, hold, err := os.Pipe()
	if err != nil {
		return nil, err
	}
	defer holdGuard.Close()
	status, statusGuard, err := os.Pipe()
	if err != nil {
		hold.Close()
		return nil, err
	}
	defer statusGuard.Close()
	self, err := ownBinary()
	if err == nil {
		l := &leash{hold: hold, status: status, cmd: &exec.Cmd{
			Path: self, Args: append([]string{os.Args[0], guardWord}, argv...),
			Stdin: in, Stdout: out, Stderr: log,
			ExtraFiles:  []*os.File{holdGuard, statusGuard},
			SysProcAttr: &syscall.SysProcAttr{Setpgid: true},
		}}
		if err = l.cmd.Start(); err == nil {
			return l, nil
		}
	}
	hold.Close()
	status.Close()
	return nil, err
}

// ownBinary is the running binary, also where its file was replaced since.
func ownBinary() (string, error) {
	const running = "/proc/self/exe"
	if _, err := os.Stat(running); err == nil && runtime.GOOS == "linux" {
		return running, nil
	}
	return os.Executable()
}

// kill ends the simulator and all of its group. It may be called at any time.
func (l *leash) kill() {
	l.mu.Lock()
	defer l.mu.Unlock()
	if !l.reaped {
		l.killed = true
		_ = syscall.Kill(-l.cmd.Process.Pid, syscall.SIGKILL)
	}
}

// wait waits for the end and tells how the simulator came to it; empty where
// it was killed together with its guard. It is called once.
func (l *leash) wait() string {
	var how strings.Builder
	_, _ = io.Copy(&how, io.LimitReader(l.status, 1000))
	err := l.cmd.Wait()
	l.mu.Lock()
	if how.Len() == 0 && !l.killed {
		// Somebody killed the guard alone. Its group lives on, and keeps its
		// number, as long as it has members.
		_ = syscall.Kill(-l.cmd.Process.Pid, syscall.SIGKILL)
	}
	l.reaped = true
	l.mu.Unlock()
	l.hold.Close()
	l.status.Close()
	var exit *exec.ExitError
	if how.Len() == 0 && err != nil && !errors.As(err, &exit) {
		return err.Error()
	}
	return how.String()
}
