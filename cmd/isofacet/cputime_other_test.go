//go:build !unix

package main

import "time"

// cpuTime is not known here: benchmarks then leave that figure out.
func cpuTime() time.Duration { return 0 }
