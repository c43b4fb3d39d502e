package outfile

import (
	"bytes"
	"errors"
	"fmt"
	"runtime"
	"testing"
)

func TestBlocksAreWrittenInOrder(t *testing.T) {
	text := func(i int, buf []byte) ([]byte, error) {
		if i%3 == 0 {
			runtime.Gosched()
		}
		return fmt.Appendf(buf, "%d,", i), nil
	}
	for _, n := range []int{0, 1, 2, 7, 1000} {
		var want bytes.Buffer
		for i := range n {
			fmt.Fprintf(&want, "%d,", i)
		}
		for _, workers := range []int{0, 1, 2, 3, 8} {
			var got bytes.Buffer
			if err := WriteBlocks(&got, n, workers, text); err != nil || got.String() != want.String() {
				t.Errorf("%d blocks, %d workers: %v, %.60q", n, workers, err, got.String())
			}
		}
	}
}

// limited takes so many bytes, then fails.
type limited int

func (l *limited) Write(p []byte) (int, error) {
	if *l -= limited(len(p)); *l < 0 {
		return 0, errors.New("full")
	}
	return len(p), nil
}

func TestFirstErrorEndsTheBlocks(t *testing.T) {
	for _, workers := range []int{1, 2, 5} {
		var got bytes.Buffer
		err := WriteBlocks(&got, 100, workers, func(i int, buf []byte) ([]byte, error) {
			if i >= 10 {
				return buf, fmt.Errorf("block %d", i)
			}
			return append(buf, 'x'), nil
		})
		if err == nil || err.Error() != "block 10" || got.Len() != 10 {
			t.Errorf("%d workers: %v after %d blocks", workers, err, got.Len())
		}
		room := limited(5)
		err = WriteBlocks(&room, 100, workers, func(i int, buf []byte) ([]byte, error) { return append(buf, 'x'), nil })
		if err == nil || err.Error() != "full" {
			t.Errorf("%d workers: %v", workers, err)
		}
	}
}
