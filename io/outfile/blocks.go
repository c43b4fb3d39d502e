package outfile

import (
	"io"
	"runtime"
	"sync"
)

// WriteBlocks writes n blocks to w in order, made by several workers at a time; 0 workers means one per CPU.
//
// make is called once for each i from 0 to n-1, from several goroutines, with a buffer whose content is to be
// overwritten; it returns the block, which may be the buffer grown. What is written does not depend on the number
// of workers. At most two blocks a worker are in memory.
//
// The first error, in the order of blocks, of make or of w ends the work and is returned. A make that watches a context is
// how to stop it from outside.
func WriteBlocks(w io.Writer, n, workers int, make func(i int, buf []byte) ([]byte, error)) error {
	if workers <= 0 {
		workers = runtime.GOMAXPROCS(0)
	}
	if workers = min(workers, n); workers <= 1 {
		var buf []byte
		for i := range n {
			var err error
			if buf, err = make(i, buf[:0]); err != nil {
				return err
			}
			if _, err := w.Write(buf); err != nil {
				return err
			}
		}
		return nil
	}
	return writeInOrder(w, n, workers, make)
}

type block struct {
	i   int
	buf []byte
	err error
}

// writeInOrder hands out block i only when block i - slots is written: slot i mod slots holds its buffer and its result.
func writeInOrder(w io.Writer, n, workers int, makeBlock func(i int, buf []byte) ([]byte, error)) error {
	slots := 2 * workers
	jobs := make(chan block, slots)
	results := make([]chan block, slots)
	buffers := make([][]byte, slots)
	for i := range results {
		results[i] = make(chan block, 1)
	}
	var wg sync.WaitGroup
	for range workers {
		wg.Go(func() {
			for job := range jobs {
				job.buf, job.err = makeBlock(job.i, job.buf[:0])
				results[job.i%slots] <- job
			}
		})
	}
	defer wg.Wait()
	defer close(jobs)

	handedOut := 0
	for i := range n {
		for ; handedOut < n && handedOut < i+slots; handedOut++ {
			jobs <- block{i: handedOut, buf: buffers[handedOut%slots]}
		}
		done := <-results[i%slots]
		if done.err != nil {
			return done.err
		}
		if _, err := w.Write(done.buf); err != nil {
			return err
		}
		buffers[i%slots] = done.buf
	}
	return nil
}
