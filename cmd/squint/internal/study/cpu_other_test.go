//go:build !unix

package study

import (
	"testing"
	"time"
)

var started = time.Now()

// cpuSeconds is the time since the start: the machine has to be otherwise idle.
func cpuSeconds(testing.TB) float64 { return time.Since(started).Seconds() }
