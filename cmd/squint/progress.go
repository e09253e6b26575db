package main

import (
	"fmt"
	"io"
	"sync"
	"time"

	"github.com/vbauerster/mpb/v8"
	"github.com/vbauerster/mpb/v8/decor"

	"squint/cmd/squint/internal/study"
)

// progress shows how far a run is: bars on a terminal, else a line every few
// seconds, since bars print nothing there.
type progress interface {
	// Report may be called from several goroutines at once.
	Report(stage study.Stage, done, total int)
	// Close ends it before anything else is printed; completed is false where
	// the run was stopped.
	Close(completed bool)
}

func newProgress(h host) progress {
	if h.terminal {
		return newBars(h.err)
	}
	return newLines(h.err, h.now)
}

// lines writes a line at most every linesEvery.
type lines struct {
	mu     sync.Mutex
	w      io.Writer
	now    func() time.Time
	start  time.Time
	last   time.Time
	closed bool
}

const linesEvery = 5 * time.Second

func newLines(w io.Writer, now func() time.Time) *lines {
	t := now()
	return &lines{w: w, now: now, start: t, last: t}
}

func (l *lines) Report(stage study.Stage, done, total int) {
	l.mu.Lock()
	defer l.mu.Unlock()
	t := l.now()
	if l.closed || t.Sub(l.last) < linesEvery {
		return
	}
	l.last = t
	fmt.Fprintf(l.w, "%4.0f s  %s: %d of %d\n", t.Sub(l.start).Seconds(), stage, done, total)
}

func (l *lines) Close(bool) {
	l.mu.Lock()
	defer l.mu.Unlock()
	l.closed = true
}

// bars shows one bar a stage. Reports may arrive out of order.
type bars struct {
	mu     sync.Mutex
	all    *mpb.Progress
	stage  study.Stage
	bar    *mpb.Bar
	done   int
	closed bool
}

func newBars(w io.Writer) *bars {
	return &bars{all: mpb.New(mpb.WithOutput(w), mpb.WithWidth(78), mpb.WithAutoRefresh())}
}

func (b *bars) Report(stage study.Stage, done, total int) {
	b.mu.Lock()
	defer b.mu.Unlock()
	if b.closed {
		return
	}
	if stage != b.stage || b.bar == nil {
		b.finish()
		b.stage, b.done = stage, 0
		// A bar made without a total does not complete by itself: the total of
		// a stage may grow. The next stage or Close completes it.
		b.bar = b.all.AddBar(0,
			mpb.PrependDecorators(decor.Name(string(stage), decor.WC{W: 34, C: decor.DindentRight})),
			mpb.AppendDecorators(decor.Percentage(decor.WC{W: 5}), decor.Elapsed(decor.ET_STYLE_MMSS, decor.WC{W: 7})))
	}
	b.done = max(b.done, done)
	b.bar.SetTotal(int64(max(total, b.done)), false)
	b.bar.SetCurrent(int64(b.done))
}

// finish fills the bar that is shown.
func (b *bars) finish() {
	if b.bar != nil {
		b.bar.SetTotal(-1, true)
	}
}

func (b *bars) Close(completed bool) {
	b.mu.Lock()
	b.closed = true
	if completed {
		b.finish()
	} else if b.bar != nil {
		b.bar.Abort(false)
	}
	b.mu.Unlock()
	b.all.Wait()
}
