//go:build !linux

package app

import "time"

var started = time.Now()

// threadTime is the time of the clock, where the system does not count a thread's own.
func threadTime() time.Duration { return time.Since(started) }
