//go:build unix

package triangulate_test

import (
	"syscall"
	"time"
)

// cpuTime is what this process has used on all cores, system calls included. On
// a busy machine it says more than the clock about work on one core.
func cpuTime() time.Duration {
	var u syscall.Rusage
	if syscall.Getrusage(syscall.RUSAGE_SELF, &u) != nil {
		return 0
	}
	return time.Duration(u.Utime.Nano() + u.Stime.Nano())
}
