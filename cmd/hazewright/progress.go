package main

import (
	"fmt"
	"io"
	"sync"
	"time"
)

// progress shows on a terminal how far the work is, once it takes longer than a second.
type progress struct {
	w     io.Writer
	start time.Time
	done  chan struct{}
	ended sync.WaitGroup

	mu    sync.Mutex
	stage string
	n, of int
	shown bool
}

const (
	progressAfter = time.Second
	progressEvery = 200 * time.Millisecond
)

// newProgress starts to show progress on w. The caller must call stop.
func newProgress(w io.Writer) *progress {
	p := &progress{w: w, start: time.Now(), done: make(chan struct{})}
	p.ended.Go(func() {
		tick := time.NewTicker(progressEvery)
		defer tick.Stop()
		for {
			select {
			case <-p.done:
				return
			case now := <-tick.C:
				p.show(now.Sub(p.start))
			}
		}
	})
	return p
}

// report says that n of so many parts of a stage are done. Any goroutine may call it.
func (p *progress) report(stage string, n, of int) {
	p.mu.Lock()
	defer p.mu.Unlock()
	p.stage, p.n, p.of = stage, n, of
}

// show draws the line.
func (p *progress) show(elapsed time.Duration) {
	p.mu.Lock()
	defer p.mu.Unlock()
	if elapsed < progressAfter || p.stage == "" {
		return
	}
	text := p.stage
	if p.of > 0 {
		text += fmt.Sprintf(": %d of %d", p.n, p.of)
	}
	fmt.Fprintf(p.w, "\r\x1b[K%s, %s", text, elapsed.Truncate(time.Second))
	p.shown = true
}

// stop ends the showing and clears the line.
func (p *progress) stop() {
	close(p.done)
	p.ended.Wait()
	if p.shown {
		fmt.Fprint(p.w, "\r\x1b[K")
	}
}
