//go:build unix

package outfile

import (
	"bufio"
	"bytes"
	"errors"
	"fmt"
	"os"
	"os/exec"
	"os/signal"
	"path/filepath"
	"strings"
	"syscall"
	"testing"
)

// The test program runs itself as a child to be killed: with this variable set it writes and waits.
const childVariable = "OUTFILE_TEST_CHILD"

func TestMain(m *testing.M) {
	switch task, path, _ := strings.Cut(os.Getenv(childVariable), "="); task {
	case "hang":
		f, err := Create(path, Options{})
		if err != nil {
			fmt.Println(err)
			os.Exit(1)
		}
		f.Write(make([]byte, 3*bufferBytes))
		fmt.Println("written")
		select {} // until killed
	case "signal":
		stop := make(chan os.Signal, 1)
		signal.Notify(stop, os.Interrupt)
		if _, err := Create(path, Options{}); err != nil {
			fmt.Println(err)
			os.Exit(1)
		}
		fmt.Println("written")
		<-stop
		RemoveTemporaries()
		os.Exit(130)
	case "pipe":
		signal.Ignore(syscall.SIGPIPE)
		f, err := Create("-", Options{})
		if err != nil {
			os.Exit(1)
		}
		for err == nil {
			_, err = f.Write(make([]byte, 1000))
		}
		if err := f.Commit(); !IsClosedPipe(err) {
			os.Exit(2)
		}
		os.Exit(0)
	}
	os.Exit(m.Run())
}

// child starts the test program with a task and waits until it has written.
func child(t *testing.T, task, path string) *exec.Cmd {
	t.Helper()
	cmd := exec.Command(os.Args[0])
	cmd.Env = append(os.Environ(), childVariable+"="+task+"="+path)
	out, err := cmd.StdoutPipe()
	if err != nil {
		t.Fatal(err)
	}
	if err := cmd.Start(); err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() {
		cmd.Process.Kill()
		cmd.Wait()
	})
	if line, err := bufio.NewReader(out).ReadString('\n'); line != "written\n" {
		t.Fatalf("the child says %q, %v", line, err)
	}
	return cmd
}

func TestKilledRunLeavesTheOldFileAndTheNextRunCleansUp(t *testing.T) {
	dir := t.TempDir()
	path := filepath.Join(dir, "out.csv")
	write(t, path, "old")
	foreign := ".out.csv.00000000-1-1.part" // another machine's
	neighbour := fmt.Sprintf(".out.csv.gz.%s-999999999-1.part", host())
	write(t, filepath.Join(dir, foreign), "")
	write(t, filepath.Join(dir, neighbour), "")

	cmd := child(t, "hang", path)
	if got := len(strings.Fields(names(t, dir))); got != 4 {
		t.Fatalf("while writing the folder holds %q", names(t, dir))
	}
	// While it lives nobody removes its file.
	f := create(t, path, Options{})
	f.Abort()
	if got := len(strings.Fields(names(t, dir))); got != 4 {
		t.Errorf("the file of a live process is gone: %q", names(t, dir))
	}
	if err := cmd.Process.Signal(syscall.SIGKILL); err != nil {
		t.Fatal(err)
	}
	cmd.Wait()
	if read(t, path) != "old" || len(strings.Fields(names(t, dir))) != 4 {
		t.Errorf("after kill -9: %q in %q", read(t, path), names(t, dir))
	}
	live.Lock()
	live.stale = map[string][]string{} // as in a new process
	live.Unlock()
	f = create(t, path, Options{})
	fmt.Fprint(f, "new")
	if err := f.Commit(); err != nil {
		t.Fatal(err)
	}
	if got := names(t, dir); got != foreign+" "+neighbour+" out.csv" || read(t, path) != "new" {
		t.Errorf("after the next run the folder holds %q", got)
	}
}

func TestOwnNumberOfADeadProcessIsStale(t *testing.T) {
	dir := t.TempDir()
	left := fmt.Sprintf(".out.csv.%s-%d-7.part", host(), os.Getpid())
	write(t, filepath.Join(dir, left), "")
	f := create(t, filepath.Join(dir, "out.csv"), Options{})
	if got := strings.Fields(names(t, dir)); len(got) != 1 || got[0] == left {
		t.Errorf("the folder holds %q", got)
	}
	create(t, filepath.Join(dir, "other.csv"), Options{})
	if err := f.Commit(); err != nil {
		t.Error(err)
	}
}

func TestSignalledRunLeavesNothing(t *testing.T) {
	dir := t.TempDir()
	path := filepath.Join(dir, "out.csv")
	cmd := child(t, "signal", path)
	if names(t, dir) == "" {
		t.Fatal("nothing is being written")
	}
	if err := cmd.Process.Signal(os.Interrupt); err != nil {
		t.Fatal(err)
	}
	var exit *exec.ExitError
	if err := cmd.Wait(); !errors.As(err, &exit) || exit.ExitCode() != 130 {
		t.Errorf("the child ended with %v", err)
	}
	if got := names(t, dir); got != "" {
		t.Errorf("it left %q", got)
	}
}

func TestClosedStandardOutputEndsQuietly(t *testing.T) {
	cmd := exec.Command(os.Args[0])
	cmd.Env = append(os.Environ(), childVariable+"=pipe=")
	var words bytes.Buffer
	cmd.Stderr = &words
	out, err := cmd.StdoutPipe()
	if err != nil {
		t.Fatal(err)
	}
	if err := cmd.Start(); err != nil {
		t.Fatal(err)
	}
	if _, err := out.Read(make([]byte, 10)); err != nil {
		t.Fatal(err)
	}
	out.Close()
	if err := cmd.Wait(); err != nil || words.Len() != 0 {
		t.Errorf("the child ended with %v and said %q", err, words.String())
	}
}

func TestNamedPipeIsRefused(t *testing.T) {
	path := filepath.Join(t.TempDir(), "pipe")
	if err := syscall.Mkfifo(path, 0o600); err != nil {
		t.Skipf("no named pipes here: %v", err)
	}
	var te *TargetError
	if _, err := Create(path, Options{}); !errors.As(err, &te) || te.Seen != "a named pipe" {
		t.Errorf("error %v", err)
	}
}

func TestProtectedFileIsKept(t *testing.T) {
	if os.Geteuid() == 0 {
		t.Skip("root may write everything")
	}
	path := filepath.Join(t.TempDir(), "out.csv")
	if err := os.WriteFile(path, []byte("old"), 0o444); err != nil {
		t.Fatal(err)
	}
	if _, err := Create(path, Options{}); !errors.Is(err, os.ErrPermission) {
		t.Errorf("error %v", err)
	}
}
