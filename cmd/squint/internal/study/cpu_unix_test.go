//go:build unix

package study

import (
	"syscall"
	"testing"
)

// cpuSeconds is the CPU time that the process has used.
func cpuSeconds(t testing.TB) float64 {
	t.Helper()
	var u syscall.Rusage
	if err := syscall.Getrusage(syscall.RUSAGE_SELF, &u); err != nil {
		t.Fatal(err)
	}
	return float64(u.Utime.Nano()+u.Stime.Nano()) / 1e9
}
