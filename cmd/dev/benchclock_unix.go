//go:build unix

package main

import (
	"syscall"
	"time"
)

// processorTime is what this process has used of all processors.
func processorTime() time.Duration {
	var use syscall.Rusage
	if err := syscall.Getrusage(syscall.RUSAGE_SELF, &use); err != nil {
		return wallClock()
	}
	return time.Duration(use.Utime.Nano() + use.Stime.Nano())
}
