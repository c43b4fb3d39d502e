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
}

// New returns a reporter that writes to w.
func New(w io.Writer, format Format, quiet bool) *Reporter {
	least := slog.LevelInfo
	if quiet {
		least = slog.LevelWarn
	}
	var h slog.Handler = &lines{w: w, least: least}
	if format == JSON {
		h = slog.NewJSONHandler(w, &slog.HandlerOptions{Level: least})
	}
	return &Reporter{log: slog.New(h)}
}

// Note says something for information. The fields are pairs of a name and a
// value that only JSON shows: the text says them in words already.
func (r *Reporter) Note(text string, fields ...any) { r.log.Info(text, fields...) }

// Warn says and keeps a warning.
func (r *Reporter) Warn(code, text string, fields ...any) {
	r.mu.Lock()
	r.warnings = append(r.warnings, Warning{code, text})
	r.mu.Unlock()
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
	mu    sync.Mutex
}

func (h *lines) Enabled(_ context.Context, level slog.Level) bool { return level >= h.least }

func (h *lines) Handle(_ context.Context, rec slog.Record) error {
	var b strings.Builder
	switch {
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
