package localpg

import (
	"context"
	"errors"
	"fmt"
	"os"
	"os/exec"
	"runtime"
	"slices"
	"syscall"
	"time"
)

const (
	// gentle is how long a fast shutdown may take before the server is told to quit.
	gentle = 10 * time.Second
	// abrupt is how long quitting may take before the process is killed.
	abrupt = 5 * time.Second
)

// process is a started server.
type process struct {
	os     *os.Process
	exited chan struct{}
	err    error // how it ended; read after exited is closed
}

// startProcess starts the command on an OS thread of its own that lives until the
// command ends: the kernel sends the parent-death signal when the thread that
// forked ends, not when the program does (prctl(2), PR_SET_PDEATHSIG).
func startProcess(cmd *exec.Cmd) (*process, error) {
	p := &process{exited: make(chan struct{})}
	started := make(chan error, 1)
	go func() {
		runtime.LockOSThread()
		defer runtime.UnlockOSThread()
		err := cmd.Start()
		p.os = cmd.Process
		started <- err
		if err != nil {
			return
		}
		p.err = cmd.Wait()
		if p.err == nil {
			p.err = errors.New("exit status 0")
		}
		close(p.exited)
	}()
	if err := <-started; err != nil {
		return nil, err
	}
	return p, nil
}

// stop asks for a fast shutdown, then for an immediate one, and then kills.
func (p *process) stop(ctx context.Context) error {
	gone := func(ctx context.Context, d time.Duration) bool {
		select {
		case <-p.exited:
			return true
		case <-ctx.Done():
		case <-time.After(d):
		}
		return false
	}
	return end(ctx, p.os, gone)
}

// end signals a server with growing force until gone reports that it has ended.
func end(ctx context.Context, target *os.Process, gone func(context.Context, time.Duration) bool) error {
	late := context.WithoutCancel(ctx)
	steps := []struct {
		ctx    context.Context
		signal os.Signal
		wait   time.Duration
	}{{ctx, syscall.SIGINT, gentle}, {late, syscall.SIGQUIT, abrupt}, {late, os.Kill, abrupt}}
	for _, step := range steps {
		if err := target.Signal(step.signal); err != nil && !errors.Is(err, os.ErrProcessDone) {
			return fmt.Errorf("localpg: stopping process %d: %w", target.Pid, err)
		}
		if gone(step.ctx, step.wait) {
			return nil
		}
	}
	return fmt.Errorf("localpg: process %d does not end", target.Pid)
}

// stopPID ends a server that this program did not start. It is gone when no
// process of that number names the data folder any more, so that a number that
// the system gives to somebody else is not signalled a second time.
func stopPID(ctx context.Context, pid int, data string) error {
	target, err := os.FindProcess(pid)
	if err != nil {
		return fmt.Errorf("localpg: process %d: %w", pid, err)
	}
	defer target.Release()
	gone := func(ctx context.Context, d time.Duration) bool {
		for deadline := time.Now().Add(d); ; {
			pids, err := serversOf(data)
			if err == nil && !slices.Contains(pids, pid) {
				return true
			}
			if time.Now().After(deadline) || pause(ctx, 20*time.Millisecond) != nil {
				return false
			}
		}
	}
	return end(ctx, target, gone)
}
