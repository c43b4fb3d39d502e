package main

import (
	"os/exec"
	"runtime"
	"strings"
	"testing"
)

// Every example of every help page runs, on the samples, from an empty folder.
func TestExamplesRun(t *testing.T) {
	if runtime.GOOS == "windows" {
		t.Skip("the examples are written for a POSIX shell")
	}
	n := 0
	root := tree(t)
	for _, cmd := range append(root.Commands(), root) {
		dir := t.TempDir()
		for line := range strings.Lines(cmd.Example) {
			n++
			var out, words strings.Builder
			c := exec.Command("sh", "-e", "-c", line)
			c.Dir = dir
			c.Stdout, c.Stderr = &out, &words
			if err := c.Run(); err != nil {
				t.Errorf("%s: %v\n%s", strings.TrimSpace(line), err, &words)
			}
			if strings.Contains(words.String(), "isofacet: ") {
				t.Errorf("%s: says %s", strings.TrimSpace(line), &words)
			}
			if out.Len() == 0 && !strings.Contains(line, "--out ") && !strings.Contains(line, ">") && !strings.Contains(line, "--folder") && cmd.Name() != "run" {
				t.Errorf("%s: writes nothing", strings.TrimSpace(line))
			}
		}
	}
	if n < 10 {
		t.Errorf("only %d examples found", n)
	}
}
