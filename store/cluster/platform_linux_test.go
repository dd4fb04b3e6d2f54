package cluster

import (
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"runtime"
	"syscall"
	"testing"
	"time"
)

const diesWithParent = true

func leaveServer() { deathSignal = 0 }

// The server must not hang on the thread of whoever called Start: the kernel's death signal comes
// when the thread that forked it ends.
func TestOutlivesTheCallersThread(t *testing.T) {
	t.Parallel()
	dir := filepath.Join(tempDir(t), "db")
	var c *Cluster
	var err error
	thread := onThreadThatEnds(func() { c, err = Start(t.Context(), Config{Dir: dir, Throwaway: true}) })
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { stop(t, c) })
	for deadline := time.Now().Add(time.Minute); ; <-time.After(orphanPoll) {
		if _, err := os.Stat(fmt.Sprintf("/proc/self/task/%d", thread)); errors.Is(err, fs.ErrNotExist) {
			break
		}
		if time.Now().After(deadline) {
			t.Fatal("the thread does not end: this test shows nothing")
		}
	}
	// Only now can a signal have been sent; a server that got one lets nobody in any more.
	select {
	case <-c.Done():
		t.Fatal("the server ended with the thread that called Start")
	case <-time.After(2 * time.Second):
	}
	if n := ask[int](t, c, "SELECT 1"); n != 1 {
		t.Error(n)
	}
}

// onThreadThatEnds runs work on a thread of its own and returns the thread's number. The runtime ends
// a thread whose goroutine ends without unlocking it, but not the process's first one.
func onThreadThatEnds(work func()) (thread int) {
	done := make(chan struct{})
	go func() {
		defer close(done)
		runtime.LockOSThread()
		if thread = syscall.Gettid(); thread == os.Getpid() {
			thread = onThreadThatEnds(work) // the first one is taken now
			return
		}
		work()
	}()
	<-done
	return thread
}
