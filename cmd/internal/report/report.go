package report

import (
	"context"
	"io"
	"log/slog"
	"strings"
	"sync"
)

// A Format is how messages are written.
type Format string

const (
	Text Format = "text"
	JSON Format = "json"
)

// A Warning is something that the user should know and that does not stop the
// work.
type Warning struct {
	Code string `json:"code"`
	Text string `json:"text"`
}

// A Reporter writes messages. It may be used by several goroutines.
type Reporter struct {
	log *slog.Logger

	mu       sync.Mutex
	warnings []Warning
	events   *[]Event // what is said, while someone keeps it
}

// An Event is something that was said, to be said again by another reporter.
type Event struct {
	code   string // of a warning
	text   string
	fields []any
}

// New returns a reporter that writes to w.
func New(w io.Writer, format Format, quiet bool) *Reporter { return For("", w, format, quiet) }

// For returns a reporter of one task among several: its name stands in front of
// every line, or in the field task.
func For(task string, w io.Writer, format Format, quiet bool) *Reporter {
	least := slog.LevelInfo
	if quiet {
		least = slog.LevelWarn
	}
	var h slog.Handler = &lines{w: w, least: least, task: task}
	if format == JSON {
		h = slog.NewJSONHandler(w, &slog.HandlerOptions{Level: least})
		if task != "" {
			h = h.WithAttrs([]slog.Attr{slog.String("task", task)})
		}
	}
	return &Reporter{log: slog.New(h)}
}

// Note says something for information. The fields are pairs of a name and a
// value that only JSON shows: the text says them in words already.
func (r *Reporter) Note(text string, fields ...any) {
	r.keep(Event{"", text, fields})
	r.log.Info(text, fields...)
}

// Keep has what is said from now on kept, until the returned function is called,
// which returns it.
func (r *Reporter) Keep() func() []Event {
	kept := []Event{}
	r.mu.Lock()
	r.events = &kept
	r.mu.Unlock()
	return func() []Event {
		r.mu.Lock()
		defer r.mu.Unlock()
		r.events = nil
		return kept
	}
}

func (r *Reporter) keep(e Event) {
	r.mu.Lock()
	defer r.mu.Unlock()
	if r.events != nil {
		*r.events = append(*r.events, e)
	}
}

// Replay says again what another reporter said.
func (r *Reporter) Replay(events []Event) {
	for _, e := range events {
		if e.code != "" {
			r.Warn(e.code, e.text, e.fields...)
			continue
		}
		r.Note(e.text, e.fields...)
	}
}

// Warn says and keeps a warning.
func (r *Reporter) Warn(code, text string, fields ...any) {
	r.mu.Lock()
	r.warnings = append(r.warnings, Warning{code, text})
	r.mu.Unlock()
	r.keep(Event{code, text, fields})
	r.log.Warn(text, append([]any{codeField, code}, fields...)...)
}

// Fail says why the run failed, with the ways out.
func (r *Reporter) Fail(err error, hints []string, status int) {
	r.log.Error(err.Error(), hintsField, hints, "status", status)
}

// Warnings returns the warnings so far.
func (r *Reporter) Warnings() []Warning {
	r.mu.Lock()
	defer r.mu.Unlock()
	return append([]Warning{}, r.warnings...)
}

// The fields that the text form shows as well.
const (
	codeField  = "code"
	hintsField = "hints"
)

// lines is a slog handler that writes a message as a person would: no time, no
// level where it is plain, no fields that the message already says.
type lines struct {
	w     io.Writer
	least slog.Level
	task  string
	mu    sync.Mutex
}

func (h *lines) Enabled(_ context.Context, level slog.Level) bool { return level >= h.least }

func (h *lines) Handle(_ context.Context, rec slog.Record) error {
	var b strings.Builder
	if h.task != "" {
		b.WriteString(h.task + ": ")
	}
	switch {
	case rec.Level >= slog.LevelError && h.task != "":
		b.WriteString("failed: ")
	case rec.Level >= slog.LevelError:
		b.WriteString("isofacet: ")
	case rec.Level >= slog.LevelWarn:
		b.WriteString("warning: ")
	}
	b.WriteString(rec.Message)
	rec.Attrs(func(a slog.Attr) bool {
		switch a.Key {
		case codeField:
			b.WriteString(" [" + a.Value.String() + "]")
		case hintsField:
			hints, _ := a.Value.Any().([]string)
			for _, hint := range hints {
				b.WriteString("\n  hint: " + hint)
			}
		}
		return true
	})
	b.WriteByte('\n')
	h.mu.Lock()
	defer h.mu.Unlock()
	_, err := io.WriteString(h.w, b.String())
	return err
}

// WithAttrs and WithGroup complete slog.Handler; the reporter uses neither.
func (h *lines) WithAttrs([]slog.Attr) slog.Handler { return h }
func (h *lines) WithGroup(string) slog.Handler      { return h }
