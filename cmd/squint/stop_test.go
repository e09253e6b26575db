//go:build unix

package main

import (
	"bytes"
	"context"
	"errors"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"syscall"
	"testing"
	"time"
)

// Ctrl-C in the middle of a run ends the real program with its own status,
// says so and leaves nothing behind.
func TestStopped(t *testing.T) {
	for _, signal := range []syscall.Signal{syscall.SIGINT, syscall.SIGTERM} {
		t.Run(signal.String(), func(t *testing.T) {
			self, err := os.Executable()
			if err != nil {
				t.Fatal(err)
			}
			dir := t.TempDir()
			ctx, cancel := context.WithTimeout(context.Background(), 2*time.Minute)
			defer cancel()
			// The name decides what the test binary does: see TestMain. The
			// demo takes far longer than the signal.
			cmd := exec.CommandContext(ctx, self)
			cmd.Args = []string{"squint", "check"}
			cmd.Dir = dir
			var stderr bytes.Buffer
			cmd.Stderr = &stderr
			stdout, err := cmd.StdoutPipe()
			if err != nil {
				t.Fatal(err)
			}
			if err := cmd.Start(); err != nil {
				t.Fatal(err)
			}
			// The first line stands before the run.
			var began bytes.Buffer
			buf := make([]byte, 4096)
			for !strings.Contains(began.String(), "\n") {
				n, err := stdout.Read(buf)
				began.Write(buf[:n])
				if err != nil {
					t.Fatalf("the program ended before it began: %v, %s", err, stderr.String())
				}
			}
			if err := cmd.Process.Signal(signal); err != nil {
				t.Fatal(err)
			}
			for {
				if _, err := stdout.Read(buf); err != nil {
					break
				}
			}
			err = cmd.Wait()
			var exit *exec.ExitError
			if !errors.As(err, &exit) || exit.ExitCode() != int(statusCancelled) {
				t.Errorf("ended with %v, want status %d", err, statusCancelled)
			}
			if want := "squint: stopped; no results were written.\n"; !strings.HasSuffix(stderr.String(), want) {
				t.Errorf("said %q, want %q", stderr.String(), want)
			}
			left, err := os.ReadDir(dir)
			if err != nil || len(left) > 0 {
				t.Errorf("left %v (%v), want nothing", left, err)
			}
		})
	}
}

// A run that is stopped before it starts writes nothing either.
func TestStoppedAtOnce(t *testing.T) {
	dir := t.TempDir()
	if err := writeSmall(dir); err != nil {
		t.Fatal(err)
	}
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	var out, errs bytes.Buffer
	if got := run(ctx, testHost(&out, &errs), []string{"check", filepath.Join(dir, "project.toml")}); got != statusCancelled {
		t.Errorf("got status %d, want %d: %s", got, statusCancelled, errs.String())
	}
	if _, err := os.Stat(filepath.Join(dir, "results")); !errors.Is(err, os.ErrNotExist) {
		t.Errorf("results are there: %v", err)
	}
}
