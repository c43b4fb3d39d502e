package main

import (
	"crypto/sha256"
	"encoding/hex"
	"io"
	"os"
	"strings"
	"sync"

	"isofacet/cmd/internal/job"
	"isofacet/cmd/internal/record"
)

// What a run may leave as it is: steps that are done with the same version, command,
// options and inputs, and whose outputs are still the same bytes.

// fileHashes has the hashes of files, each worked out once a run.
type fileHashes struct {
	mu sync.Mutex
	of map[string]string
}

// hash returns the hash of a file or a sample, "" for one that cannot be read.
func (h *fileHashes) hash(name string) string {
	h.mu.Lock()
	defer h.mu.Unlock()
	if sum, ok := h.of[name]; ok {
		return sum
	}
	if h.of == nil {
		h.of = map[string]string{}
	}
	h.of[name] = hashFile(name)
	return h.of[name]
}

// hashFile hashes a file or a sample.
func hashFile(name string) string {
	sum := sha256.New()
	if sample, ok := strings.CutPrefix(name, samplePrefix); ok {
		data, err := readSample(sample)
		if err != nil {
			return ""
		}
		sum.Write(data)
		return hex.EncodeToString(sum.Sum(nil))
	}
	f, err := os.Open(name)
	if err != nil {
		return ""
	}
	defer f.Close()
	if _, err := io.Copy(sum, f); err != nil {
		return ""
	}
	return hex.EncodeToString(sum.Sum(nil))
}

// versionKey tells builds apart: by version and commit, and by the program's own
// bytes where these do not say what it was built from.
func versionKey() string {
	v := buildVersion()
	key := v.Version + " " + v.Commit
	if v.Commit == "" || v.Changed {
		if path, err := os.Executable(); err == nil {
			key += " " + hashFile(path)
		}
	}
	return key
}

// stepKey is a hash of what a step is.
func (b *batch) stepKey(s *step) string {
	sum := sha256.New()
	io.WriteString(sum, b.key+"\x00"+strings.Join(s.args, "\x00")) // never fails
	return hex.EncodeToString(sum.Sum(nil))
}

// unchanged tells whether a step has nothing to do.
func (b *batch) unchanged(s *step, e job.Entry) bool {
	if e.Key != b.stepKey(s) || s.standard {
		return false
	}
	stable, err := record.ReadStable(e.Stable)
	if err != nil {
		return false
	}
	for _, in := range stable.Inputs {
		if b.hashes.hash(in.Name) != in.SHA256 {
			return false
		}
	}
	for _, out := range stable.Outputs {
		if hashFile(out.Name) != out.SHA256 {
			return false
		}
	}
	for _, path := range s.writes {
		if _, err := os.Stat(path); err != nil {
			return false
		}
	}
	return true
}
