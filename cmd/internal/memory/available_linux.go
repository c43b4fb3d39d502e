package memory

import (
	"bytes"
	"os"
	"strconv"
	"strings"
)

// available returns the bytes that can be taken without pushing anything out:
// MemAvailable of /proc/meminfo, or less where a control group (version 2) sets
// a limit.
func available() (uint64, bool) {
	text, err := os.ReadFile("/proc/meminfo")
	if err != nil {
		return 0, false
	}
	free, ok := meminfo(text)
	if !ok {
		return 0, false
	}
	if left, ok := groupLeft("/sys/fs/cgroup"); ok {
		free = min(free, left)
	}
	return free, true
}

// meminfo reads the line "MemAvailable:   24075412 kB".
func meminfo(text []byte) (uint64, bool) {
	for line := range bytes.Lines(text) {
		f := bytes.Fields(line)
		if len(f) >= 2 && string(f[0]) == "MemAvailable:" {
			kib, err := strconv.ParseUint(string(f[1]), 10, 54)
			return kib << 10, err == nil
		}
	}
	return 0, false
}

// groupLeft returns what the control group in folder leaves: its limit less
// what is used of it. There is no answer where no limit is set.
func groupLeft(folder string) (uint64, bool) {
	limit, ok := readNumber(folder + "/memory.max")
	if !ok {
		return 0, false
	}
	used, ok := readNumber(folder + "/memory.current")
	if !ok || used > limit {
		return 0, ok
	}
	return limit - used, true
}

// readNumber reads a file that holds one number; "max" is none.
func readNumber(name string) (uint64, bool) {
	text, err := os.ReadFile(name)
	if err != nil {
		return 0, false
	}
	n, err := strconv.ParseUint(strings.TrimSpace(string(text)), 10, 64)
	return n, err == nil
}
