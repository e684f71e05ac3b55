package main

import (
	"fmt"
	"io"
	"sync"
	"time"
)

// progress keeps one line on standard error up to date, where that is a
// terminal. It is safe for use by several goroutines.
type progress struct {
	mu    sync.Mutex
	w     io.Writer // nil where nothing is shown
	total int
	done  int
	last  time.Time
	shown bool
	ended bool
}

// pace is the least time between two states of the line.
const pace = 100 * time.Millisecond

func newProgress(s streams, total int) *progress {
	p := &progress{total: total, last: time.Now()}
	if s.progress {
		p.w = s.err
	}
	return p
}

// inside reports on work within one claim or surface.
func (p *progress) inside(name string, done, total int64) {
	if p.w == nil {
		return
	}
	p.mu.Lock()
	defer p.mu.Unlock()
	if p.ended || time.Since(p.last) < pace {
		return
	}
	p.last, p.shown = time.Now(), true
	part := ""
	if total > 0 {
		part = fmt.Sprintf(" %d%%", done*100/total)
	}
	fmt.Fprintf(p.w, "\r\x1b[K%d of %d; %s%s", p.done, p.total, clip(name, 50), part)
}

// report counts one claim or surface and writes what there is to say of it,
// with the line out of the way.
func (p *progress) report(write func()) {
	p.mu.Lock()
	defer p.mu.Unlock()
	p.clear()
	write()
	p.done++
	p.ended = p.done == p.total
}

// end takes the line away for good.
func (p *progress) end() {
	p.mu.Lock()
	defer p.mu.Unlock()
	p.clear()
	p.ended = true
}

func (p *progress) clear() {
	if p.shown {
		io.WriteString(p.w, "\r\x1b[K")
		p.shown = false
	}
}
