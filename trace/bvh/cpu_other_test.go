//go:build !unix

package bvh

import "time"

var started = time.Now()

// cpuSeconds is wall time, for want of a portable clock of CPU time.
func cpuSeconds() float64 { return time.Since(started).Seconds() }
