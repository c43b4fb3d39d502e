package outfile

import (
	"errors"
	"fmt"
	"hash/crc32"
	"io/fs"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"sync"
)

// live is every output that has a temporary file. The lock is held over creating, over all renames of a set and
// over RemoveTemporaries, so that a signal finds a set renamed or not renamed.
var live = struct {
	sync.Mutex
	files   map[*File]bool
	targets map[string]bool
	counter int
	stale   map[string][]string // by folder: names of temporary files found there, once a process
}{files: map[*File]bool{}, targets: map[string]bool{}, stale: map[string][]string{}}

const tempSuffix = ".part"

// register creates f's temporary file and notes it.
func register(f *File) error {
	live.Lock()
	defer live.Unlock()
	if live.targets[f.target] {
		return &TargetError{Path: f.path, Seen: "named by two outputs", Expected: "one output a file"}
	}
	dir, base := filepath.Split(f.target)
	removeStale(dir, base)
	for {
		live.counter++
		f.temp = filepath.Join(dir, fmt.Sprintf("%s%s-%d-%d%s", tempPrefix(base), host(), os.Getpid(), live.counter, tempSuffix))
		file, err := os.OpenFile(f.temp, os.O_WRONLY|os.O_CREATE|os.O_EXCL, 0o666)
		if errors.Is(err, fs.ErrExist) {
			continue // left by a dead process that had our number
		}
		if err != nil {
			return naming("create", f.path, err)
		}
		f.sink.to, f.sink.file = file, file
		live.files[f], live.targets[f.target] = true, true
		return nil
	}
}

// withdraw removes f's temporary file.
func withdraw(f *File) {
	live.Lock()
	defer live.Unlock()
	withdrawLocked(f)
}

func withdrawLocked(f *File) {
	if !live.files[f] {
		return
	}
	// An error of Close or Remove changes nothing for the target; the next run removes what may be left.
	f.sink.file.Close()
	os.Remove(f.temp)
	forget(f)
}

func forget(f *File) {
	delete(live.files, f)
	delete(live.targets, f.target)
}

// RemoveTemporaries removes the temporary file of every output that is being written, for a program that a signal ends.
// Outputs that were being written then fail: their Write and Commit return errors that wrap fs.ErrClosed. It may be called from any goroutine.
func RemoveTemporaries() {
	live.Lock()
	defer live.Unlock()
	for f := range live.files {
		withdrawLocked(f)
	}
}

// tempPrefix is what the temporary files of one target begin with. Long names are cut and told apart by a checksum: file systems take 255 bytes.
func tempPrefix(base string) string {
	const longest = 180
	if len(base) > longest {
		base = fmt.Sprintf("%s.%08x", base[:longest], crc32.ChecksumIEEE([]byte(base)))
	}
	return "." + base + "."
}

// host is a checksum of the machine's name: a process number means nothing on another machine.
var host = sync.OnceValue(func() string {
	name, err := os.Hostname()
	if err != nil {
		name = "unnamed"
	}
	return fmt.Sprintf("%08x", crc32.ChecksumIEEE([]byte(name)))
})

// removeStale removes what dead runs on this machine left for the target. The folder is read once a process.
func removeStale(dir, base string) {
	names, known := live.stale[dir]
	if !known {
		names = temporaries(dir)
		live.stale[dir] = names
	}
	prefix := tempPrefix(base)
	for _, name := range names {
		owner, ok := strings.CutPrefix(name, prefix)
		if ok && isStale(owner) && !isOurs(name) {
			os.Remove(filepath.Join(dir, name)) // if it cannot be removed it is no obstacle
		}
	}
}

// isOurs reports whether this process is writing a temporary file of that name.
func isOurs(name string) bool {
	for f := range live.files {
		if filepath.Base(f.temp) == name {
			return true
		}
	}
	return false
}

// isStale judges "HOST-PID-N.part".
func isStale(owner string) bool {
	owner, ok := strings.CutSuffix(owner, tempSuffix)
	parts := strings.Split(owner, "-")
	if !ok || len(parts) != 3 || parts[0] != host() {
		return false
	}
	pid, err := strconv.Atoi(parts[1])
	if err != nil || pid <= 0 {
		return false
	}
	// What has our own number and is not ours is a dead process's: in a container every program may be process 1.
	return pid == os.Getpid() || !alive(pid)
}

// temporaries lists the names in dir that look like temporary files.
func temporaries(dir string) (found []string) {
	d, err := os.Open(dir)
	if err != nil {
		return nil // creating the file will say what is wrong
	}
	defer d.Close()
	for {
		names, err := d.Readdirnames(1024)
		for _, name := range names {
			if strings.HasPrefix(name, ".") && strings.HasSuffix(name, tempSuffix) {
				found = append(found, name)
			}
		}
		if err != nil || len(names) == 0 {
			return found
		}
	}
}
