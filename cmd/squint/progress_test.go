package main

import (
	"bytes"
	"strings"
	"sync"
	"testing"
	"time"

	"squint/cmd/squint/internal/study"
)

// Without a terminal there is a line every few seconds, none in a short run,
// and never a control character.
func TestLines(t *testing.T) {
	var b bytes.Buffer
	at := time.Time{}
	l := newLines(&b, func() time.Time { return at })
	for range 22 {
		l.Report(study.StageYear, 5, 10)
		at = at.Add(time.Second)
	}
	l.Close(true)
	at = at.Add(time.Hour)
	l.Report(study.StageYear, 6, 10)
	want := "   5 s  the year: 5 of 10\n  10 s  the year: 5 of 10\n  15 s  the year: 5 of 10\n  20 s  the year: 5 of 10\n"
	if b.String() != want {
		t.Errorf("got %q, want %q", b.String(), want)
	}
}

// Bars end however reports arrive: out of order, from many goroutines, with a
// growing total, after the end, or not at all. A bar that waits for more would
// hang here.
func TestBarsEnd(t *testing.T) {
	for _, completed := range []bool{true, false} {
		var w locked
		b := newBars(&w)
		for _, stage := range []study.Stage{study.StageViews, study.StageSurfaces, study.StageSensors} {
			var group sync.WaitGroup
			for i := range 50 {
				group.Add(1)
				go func() {
					defer group.Done()
					b.Report(stage, i+1, max(10, i+1))
				}()
			}
			group.Wait()
		}
		ended := make(chan struct{})
		go func() {
			b.Close(completed)
			close(ended)
		}()
		select {
		case <-ended:
		case <-time.After(10 * time.Second):
			t.Fatalf("completed %v: the bars did not end", completed)
		}
		b.Report(study.StageYear, 1, 2)
		if s := w.String(); completed && strings.Count(s[strings.LastIndex(s, string(study.StageViews)):], " 100 % ") != 3 {
			t.Errorf("want three full bars in the last picture: %q", s)
		}
	}
	newBars(&locked{}).Close(true)
}

// locked is a buffer for several goroutines.
type locked struct {
	mu sync.Mutex
	b  bytes.Buffer
}

func (l *locked) Write(p []byte) (int, error) {
	l.mu.Lock()
	defer l.mu.Unlock()
	return l.b.Write(p)
}

func (l *locked) String() string {
	l.mu.Lock()
	defer l.mu.Unlock()
	return l.b.String()
}
