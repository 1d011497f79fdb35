package app

import (
	"syscall"
	"time"
)

// threadTime is the processor's time of this thread (getrusage(2), RUSAGE_THREAD).
func threadTime() time.Duration {
	const thread = 1
	var u syscall.Rusage
	if err := syscall.Getrusage(thread, &u); err != nil {
		panic(err)
	}
	return time.Duration(u.Utime.Nano() + u.Stime.Nano())
}
