package main

import (
	"context"
	"errors"
	"os"
	"os/signal"
	"syscall"

	"isofacet/cmd/internal/status"
)

// signalContext returns a context that ends when the user interrupts the program
// or the system asks it to end. Its cause carries the exit status.
//
// A write to a closed pipe is left to be an error of that write instead of a
// signal that ends the program: other outputs may still be wanted.
func signalContext() (context.Context, func()) {
	ctx, cancel := context.WithCancelCause(context.Background())
	signals := make(chan os.Signal, 1)
	signal.Notify(signals, os.Interrupt, syscall.SIGTERM)
	signal.Ignore(syscall.SIGPIPE)
	go func() {
		s, ok := <-signals
		if !ok {
			return
		}
		if s == os.Interrupt {
			cancel(status.With(status.Interrupted, errors.New("interrupted: outputs that were not complete are not there")))
			return
		}
		cancel(status.With(status.Terminated, errors.New("asked to end: outputs that were not complete are not there")))
	}()
	return ctx, func() {
		signal.Stop(signals)
		signal.Reset(syscall.SIGPIPE)
		close(signals)
		cancel(nil)
	}
}
