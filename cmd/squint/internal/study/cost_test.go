package study

import (
	"os"
	"runtime"
	"runtime/debug"
	"strconv"
	"strings"
	"sync"
	"testing"
)

// forgetPeak has peakMiB count from now on, where the system can do that.
func forgetPeak() {
	debug.FreeOSMemory()
	os.WriteFile("/proc/self/clear_refs", []byte("5"), 0) // proc(5): resets VmHWM
}

// peakMiB is the largest memory in use since forgetPeak; elsewhere than on
// Linux what the program has ever taken from the system.
func peakMiB() float64 {
	status, _ := os.ReadFile("/proc/self/status")
	for _, l := range strings.Split(string(status), "\n") {
		if f := strings.Fields(l); len(f) == 3 && f[0] == "VmHWM:" {
			if kib, err := strconv.ParseFloat(f[1], 64); err == nil {
				return kib / 1024
			}
		}
	}
	var m runtime.MemStats
	runtime.ReadMemStats(&m)
	return float64(m.Sys) / (1 << 20)
}

// stageCosts hears of a run's progress and tells the CPU seconds by stage and
// by standing, of which each begins with looking out of the viewpoints.
type stageCosts struct {
	t    testing.TB
	mu   sync.Mutex
	last float64
	rows []stageCost
}

type stageCost struct {
	stage   Stage
	seconds float64
}

func (s *stageCosts) hear(stage Stage, _, _ int) {
	s.mu.Lock()
	defer s.mu.Unlock()
	now := cpuSeconds(s.t)
	if n := len(s.rows); n == 0 || s.rows[n-1].stage != stage {
		s.rows = append(s.rows, stageCost{stage: stage})
	}
	s.rows[len(s.rows)-1].seconds += now - s.last
	s.last = now
}
