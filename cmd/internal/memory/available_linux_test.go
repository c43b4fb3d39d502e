package memory

import (
	"os"
	"path/filepath"
	"testing"
)

func TestMeminfo(t *testing.T) {
	for _, row := range []struct {
		name, text string
		want       uint64
		ok         bool
	}{
		{"as the kernel writes it", "MemTotal: 24 kB\nMemFree:  7 kB\nMemAvailable:   16 kB\n", 16 << 10, true},
		{"a kernel that does not say", "MemTotal: 24 kB\n", 0, false},
		{"not a number", "MemAvailable: much kB\n", 0, false},
		{"cut off", "MemAvailable:", 0, false},
	} {
		got, ok := meminfo([]byte(row.text))
		if got != row.want || ok != row.ok {
			t.Errorf("%s: %d, %v, want %d, %v", row.name, got, ok, row.want, row.ok)
		}
	}
}

func TestGroupLeft(t *testing.T) {
	for _, row := range []struct {
		name, limit, used string
		want              uint64
		ok                bool
	}{
		{"a limit", "1000\n", "400\n", 600, true},
		{"no limit", "max\n", "400\n", 0, false},
		{"over the limit", "1000\n", "1400\n", 0, true},
	} {
		dir := t.TempDir()
		for name, text := range map[string]string{"memory.max": row.limit, "memory.current": row.used} {
			if err := os.WriteFile(filepath.Join(dir, name), []byte(text), 0o600); err != nil {
				t.Fatal(err)
			}
		}
		if got, ok := groupLeft(dir); got != row.want || ok != row.ok {
			t.Errorf("%s: %d, %v, want %d, %v", row.name, got, ok, row.want, row.ok)
		}
	}
	if _, ok := groupLeft(t.TempDir()); ok {
		t.Error("a folder without a group has an answer")
	}
}
