package main

import (
	"bufio"
	"bytes"
	"context"
	"encoding/json"
	"errors"
	"fmt"
	"io"
	"net/http"
	"os"
	"os/exec"
	"path/filepath"
	"strconv"
	"strings"
	"sync"
	"syscall"
	"testing"
	"time"
)

// asProgram makes this test binary the program itself: what is started, killed and asked for its exit
// code in tests is a process like any other.
const asProgram = "RATEHOUSE_TEST_PROGRAM"

func TestMain(m *testing.M) {
	if os.Getenv(asProgram) != "" {
		main()
	}
	os.Exit(m.Run())
}

// dataDir is a folder that the account of the database server can pass through, gone with the test.
func dataDir(t testing.TB) string {
	t.Helper()
	dir, err := os.MkdirTemp("", "serve-test-")
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() {
		if err := os.RemoveAll(dir); err != nil {
			t.Error(err)
		}
	})
	if err := os.Chmod(dir, 0o711); err != nil {
		t.Fatal(err)
	}
	return dir
}

// process is the program with arguments, in an environment of its own.
func process(env []string, args ...string) *exec.Cmd {
	exe, err := os.Executable()
	if err != nil {
		panic(err)
	}
	cmd := exec.Command(exe, args...)
	for _, kept := range []string{"PATH", "HOME", "TMPDIR", "PG_BIN"} {
		if v, ok := os.LookupEnv(kept); ok {
			cmd.Env = append(cmd.Env, kept+"="+v)
		}
	}
	cmd.Env = append(append(cmd.Env, asProgram+"=1"), env...)
	return cmd
}

// ran is what a command left behind.
type ran struct {
	code           int
	stdout, stderr string
}

// runs runs the program to its end.
func runs(t testing.TB, stdin string, env []string, args ...string) ran {
	t.Helper()
	cmd := process(env, args...)
	giveUp := time.AfterFunc(time.Minute, func() { cmd.Process.Kill() }) // one that should have been refused runs on
	defer giveUp.Stop()
	var out, errs bytes.Buffer
	cmd.Stdin, cmd.Stdout, cmd.Stderr = strings.NewReader(stdin), &out, &errs
	err := cmd.Run()
	if _, exited := errors.AsType[*exec.ExitError](err); err != nil && !exited {
		t.Fatal(err)
	}
	return ran{cmd.ProcessState.ExitCode(), out.String(), errs.String()}
}

func (r ran) want(t testing.TB, code int, said string) ran {
	t.Helper()
	if r.code != code || !strings.Contains(r.stdout+r.stderr, said) {
		t.Errorf("exit code %d, want %d and %q in:\n%s%s", r.code, code, said, r.stdout, r.stderr)
	}
	return r
}

// serving is a running service.
type serving struct {
	cmd     *exec.Cmd
	base    string
	metrics chan string // the line that says where they are
	mu      sync.Mutex
	log     bytes.Buffer
	ended   chan struct{}
}

func (s *serving) Write(p []byte) (int, error) {
	s.mu.Lock()
	defer s.mu.Unlock()
	return s.log.Write(p)
}

// said is its log.
func (s *serving) said() string {
	s.mu.Lock()
	defer s.mu.Unlock()
	return s.log.String()
}

// serve starts the service and waits until it listens.
func serve(t testing.TB, env []string, args ...string) *serving {
	t.Helper()
	s := &serving{cmd: process(append([]string{"RATEHOUSE_ADDR=127.0.0.1:0"}, env...), append([]string{"serve"}, args...)...),
		metrics: make(chan string, 1), ended: make(chan struct{})}
	out, err := s.cmd.StdoutPipe()
	if err != nil {
		t.Fatal(err)
	}
	s.cmd.Stderr = s
	if err := s.cmd.Start(); err != nil {
		t.Fatal(err)
	}
	listening := make(chan string, 1)
	go func() {
		for lines := bufio.NewScanner(out); lines.Scan(); {
			if address, ok := strings.CutPrefix(lines.Text(), "listening on "); ok {
				listening <- address
			} else {
				s.metrics <- lines.Text()
			}
		}
		close(listening)
		_ = s.cmd.Wait() // its code is read by who asks
		close(s.ended)
	}()
	t.Cleanup(func() {
		_ = s.cmd.Process.Signal(syscall.SIGTERM) // fails only when it is gone
		<-s.ended
	})
	var ok bool
	if s.base, ok = <-listening; !ok {
		t.Fatalf("the service ended before it listened:\n%s", s.said())
	}
	return s
}

// wait gives its exit code once it has ended.
func (s *serving) wait(t testing.TB) int {
	t.Helper()
	select {
	case <-s.ended:
		return s.cmd.ProcessState.ExitCode()
	case <-time.After(time.Minute):
		t.Fatalf("the service does not end:\n%s", s.said())
		return -1
	}
}

// postmaster is the process of the private database in a data folder.
func postmaster(t testing.TB, data string) int {
	t.Helper()
	text, err := os.ReadFile(filepath.Join(data, "postgres", "data", "postmaster.pid"))
	if err != nil {
		t.Fatal(err)
	}
	first, _, _ := strings.Cut(string(text), "\n")
	pid, err := strconv.Atoi(first)
	if err != nil {
		t.Fatal(err)
	}
	return pid
}

// client gives up soon, and on one connection each: a killed server must not be waited for.
var client = &http.Client{Timeout: 20 * time.Second, Transport: &http.Transport{MaxIdleConnsPerHost: 32}}

// ask calls the API with a token; into, if not nil, takes the answer.
func ask(ctx context.Context, method, url, token string, body, into any, headers ...string) (int, error) {
	var in io.Reader
	if body != nil {
		text, err := json.Marshal(body)
		if err != nil {
			return 0, err
		}
		in = bytes.NewReader(text)
	}
	r, err := http.NewRequestWithContext(ctx, method, url, in)
	if err != nil {
		return 0, err
	}
	r.Header.Set("Authorization", "Bearer "+token)
	r.Header.Set("Content-Type", "application/json")
	for i := 0; i+1 < len(headers); i += 2 {
		r.Header.Set(headers[i], headers[i+1])
	}
	a, err := client.Do(r)
	if err != nil {
		return 0, err
	}
	defer a.Body.Close()
	text, err := io.ReadAll(a.Body)
	if err != nil {
		return 0, err
	}
	if into != nil && a.StatusCode < 300 {
		return a.StatusCode, json.Unmarshal(text, into)
	}
	if a.StatusCode >= 300 {
		return a.StatusCode, fmt.Errorf("status %d: %.300s", a.StatusCode, text)
	}
	return a.StatusCode, nil
}
