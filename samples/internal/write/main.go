package main

import (
	"bytes"
	"fmt"
	"os"
	"path/filepath"

	"isofacet/samples/internal/gen"
)

func main() {
	if err := write(); err != nil {
		fmt.Fprintln(os.Stderr, "samples:", err)
		os.Exit(1)
	}
}

func write() error {
	for name, text := range gen.Files() {
		path := filepath.FromSlash(name)
		if old, err := os.ReadFile(path); err == nil && bytes.Equal(old, text) {
			continue
		}
		if err := os.MkdirAll(filepath.Dir(path), 0o777); err != nil {
			return err
		}
		if err := os.WriteFile(path, text, 0o666); err != nil {
			return err
		}
	}
	return nil
}
