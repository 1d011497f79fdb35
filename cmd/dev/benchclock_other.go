//go:build !unix

package main

import "time"

// processorTime is the clock where the system is not asked for more.
func processorTime() time.Duration { return wallClock() }
