//go:build !linux

package memory

// available has no answer here: asking would take a call that only one system
// has, for a default that --memory overrides.
func available() (uint64, bool) { return 0, false }
