package external

import (
	"fmt"
	"os"
	"os/exec"
	"sync"
	"unsafe"

	"golang.org/x/sys/windows"
)

// guard puts the running program into a job that ends with its last handle,
// that is with this program: whatever is started later is born into the job
// and ends too, however this program ended. Where the system refuses (inside
// a job that allows none below it) simulators are still ended on every
// ordinary way out.
func guard() {
	if job, err := newJob(); err == nil {
		_ = windows.AssignProcessToJobObject(job, windows.CurrentProcess())
	}
}

// newJob is a job whose members end when its last handle closes.
func newJob() (windows.Handle, error) {
	job, err := windows.CreateJobObject(nil, nil)
	if err != nil {
		return 0, err
	}
	var limits windows.JOBOBJECT_EXTENDED_LIMIT_INFORMATION
	limits.BasicLimitInformation.LimitFlags = windows.JOB_OBJECT_LIMIT_KILL_ON_JOB_CLOSE
	_, err = windows.SetInformationJobObject(job, windows.JobObjectExtendedLimitInformation,
		uintptr(unsafe.Pointer(&limits)), uint32(unsafe.Sizeof(limits)))
	if err != nil {
		_ = windows.CloseHandle(job)
		return 0, err
	}
	return job, nil
}

// leash holds a simulator and the job that it and its children run in.
type leash struct {
	cmd    *exec.Cmd
	job    windows.Handle
	mu     sync.Mutex
	closed bool // the job's handle is no more
}

// tie starts a command on three streams. A child that the simulator starts
// before it is in its job ends with this program only.
func tie(argv []string, in, out, log *os.File) (*leash, error) {
	job, err := newJob()
	if err != nil {
		return nil, err
	}
	l := &leash{cmd: exec.Command(argv[0], argv[1:]...), job: job}
	l.cmd.Stdin, l.cmd.Stdout, l.cmd.Stderr = in, out, log
	if err := l.cmd.Start(); err != nil {
		_ = windows.CloseHandle(job)
		return nil, fmt.Errorf("cannot be started: %w", err)
	}
	if err := l.join(); err != nil {
		_ = l.cmd.Process.Kill()
		_ = l.cmd.Wait()
		_ = windows.CloseHandle(job)
		return nil, err
	}
	return l, nil
}

// join puts the started simulator into its job.
func (l *leash) join() error {
	h, err := windows.OpenProcess(windows.PROCESS_SET_QUOTA|windows.PROCESS_TERMINATE, false, uint32(l.cmd.Process.Pid))
	if err != nil {
		return err
	}
	defer func() { _ = windows.CloseHandle(h) }()
	return windows.AssignProcessToJobObject(l.job, h)
}

// kill ends the simulator and its children. It may be called at any time.
func (l *leash) kill() {
	l.mu.Lock()
	defer l.mu.Unlock()
	if !l.closed {
		_ = windows.TerminateJobObject(l.job, 1)
	}
}

// wait waits for the end, ends what children are left, and tells how the
// simulator came to it. It is called once.
func (l *leash) wait() string {
	err := l.cmd.Wait()
	l.kill()
	l.mu.Lock()
	l.closed = true
	_ = windows.CloseHandle(l.job)
	l.mu.Unlock()
	if err != nil {
		return err.Error()
	}
	return l.cmd.ProcessState.String()
}
