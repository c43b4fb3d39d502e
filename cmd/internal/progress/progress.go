package progress

import (
	"io"
	"os"
	"sync"
	"sync/atomic"
	"time"

	"github.com/vbauerster/mpb/v8"
	"github.com/vbauerster/mpb/v8/decor"
	"golang.org/x/term"
)

// A Mode is when progress is shown.
type Mode string

const (
	Auto   Mode = "auto"   // on a terminal
	Always Mode = "always" // on anything
	Never  Mode = "never"
)

// delay is how long the display stays quiet after it was made. Work that ends
// sooner needs no bar, and a bar that flashes by only disturbs.
const delay = 300 * time.Millisecond

// batch is the smallest step that reaches a bar, see the cost above.
const batch = 4096

// Shown reports whether progress is drawn on w under mode.
func Shown(mode Mode, w io.Writer) bool {
	switch mode {
	case Always:
		return true
	case Never:
		return false
	}
	f, ok := w.(*os.File)
	return ok && term.IsTerminal(int(f.Fd()))
}

// A Display holds the bars of one run of the program.
type Display struct {
	w     io.Writer
	shown bool
	start time.Time

	mu   sync.Mutex
	bars *mpb.Progress // nil while nothing is drawn
	bar  *mpb.Bar      // the one bar of bars

	stages int       // how many began, and ended
	since  time.Time // when the last one began
}

// New returns a display on w that draws bars only if shown.
func New(w io.Writer, shown bool) *Display {
	return &Display{w: w, shown: shown, start: time.Now()}
}

// Stage begins a stage of work. It returns a function that takes how much is
// done of how much (total 0 where it is not known) and one that ends the stage.
// The first is nil when nothing is shown, so that the work need not count. Work that
// does not count is shown by its name and the seconds that it takes.
func (d *Display) Stage(name string) (report func(done, total int), finish func()) {
	if !d.shown {
		return nil, func() {}
	}
	d.mu.Lock()
	d.stages++
	d.since = time.Now()
	stage := d.stages
	d.mu.Unlock()
	time.AfterFunc(delay, func() {
		d.mu.Lock()
		defer d.mu.Unlock()
		if d.stages == stage && d.bars == nil {
			d.drawLocked(name, 0, 0)
		}
	})
	var last atomic.Int64
	report = func(done, total int) {
		before := last.Load()
		if done != total && int64(done)-before < batch || !last.CompareAndSwap(before, int64(done)) {
			return
		}
		if time.Since(d.start) < delay {
			return
		}
		d.draw(name, int64(done), int64(total))
	}
	return report, d.endStage
}

// draw brings the bar of the stage at work to done of total.
func (d *Display) draw(name string, done, total int64) {
	d.mu.Lock()
	defer d.mu.Unlock()
	d.drawLocked(name, done, total)
}

func (d *Display) drawLocked(name string, done, total int64) {
	if !d.shown {
		return
	}
	if d.bars == nil {
		since := d.since
		d.bars = mpb.New(mpb.WithOutput(d.w), mpb.WithAutoRefresh(), mpb.WithWidth(64))
		d.bar = d.bars.AddBar(0,
			mpb.BarRemoveOnComplete(),
			mpb.PrependDecorators(decor.Name(name, decor.WC{W: 16, C: decor.DindentRight})),
			mpb.AppendDecorators(decor.Any(func(s decor.Statistics) string { return share(s, time.Since(since)) })))
	}
	d.bar.SetTotal(total, false)
	d.bar.SetCurrent(done)
}

// share prints how far a bar has come: a percentage where the total is known, the time it
// took where nothing is.
func share(s decor.Statistics, took time.Duration) string {
	if s.Total <= 0 && s.Current == 0 {
		return " " + thousands(int64(took/time.Second)) + " s"
	}
	if s.Total <= 0 {
		return " " + thousands(s.Current)
	}
	return " " + thousands(s.Current*100/s.Total) + " %"
}

// thousands writes n with a blank between groups of three digits.
func thousands(n int64) string {
	var digits []byte
	for i := 0; n > 0 || i == 0; i++ {
		if i > 0 && i%3 == 0 {
			digits = append(digits, ' ')
		}
		digits = append(digits, byte('0'+n%10))
		n /= 10
	}
	for i, j := 0, len(digits)-1; i < j; i, j = i+1, j-1 {
		digits[i], digits[j] = digits[j], digits[i]
	}
	return string(digits)
}

// endStage takes the bar away.
func (d *Display) endStage() {
	d.mu.Lock()
	defer d.mu.Unlock()
	d.stages++
	d.clear()
}

// clear takes away what is drawn and waits until it is gone. The next report
// draws anew.
func (d *Display) clear() {
	if d.bars == nil {
		return
	}
	d.bar.Abort(true)
	d.bars.Wait()
	d.bars, d.bar = nil, nil
}

// Write takes the bar away and writes text straight to the output. (The library
// can print above a bar, but from a goroutine of its own: a word could come late or,
// on a terminal that tells no size, not at all.)
func (d *Display) Write(text []byte) (int, error) {
	d.mu.Lock()
	defer d.mu.Unlock()
	d.clear()
	return d.w.Write(text)
}

// Close takes away what is drawn; afterwards the display only passes text on.
// Closing twice is harmless.
func (d *Display) Close() {
	d.mu.Lock()
	defer d.mu.Unlock()
	d.clear()
	d.stages++
	d.shown = false
}
