package cli

import (
	"fmt"
	"io"
	"os"
	"strings"
	"sync"
)

// progress is a bar on a terminal's standard error; elsewhere it is silent. Its
// methods may be called by several goroutines.
type progress struct {
	mu     sync.Mutex
	w      io.Writer // nil: silent
	what   string
	n, all int
	shown  int // last percent drawn
}

// progress starts a bar for a number of steps.
func (a *app) progress(what string, all int) *progress {
	p := &progress{what: what, all: all, shown: -1}
	if f, ok := a.err.(*os.File); ok {
		if info, err := f.Stat(); err == nil && info.Mode()&os.ModeCharDevice != 0 && os.Getenv("TERM") != "dumb" {
			p.w = f
		}
	}
	return p
}

// barWidth is the number of cells of the bar.
const barWidth = 40

// step draws one step more, when the percentage changes.
func (p *progress) step() {
	p.mu.Lock()
	defer p.mu.Unlock()
	p.n++
	percent := 100 * p.n / p.all
	if p.w == nil || percent == p.shown {
		return
	}
	p.shown = percent
	done := barWidth * p.n / p.all
	fmt.Fprintf(p.w, "\r%s [%s%s] %3d %%", p.what, strings.Repeat("=", done), strings.Repeat(" ", barWidth-done), percent)
}

// end clears the bar.
func (p *progress) end() {
	p.mu.Lock()
	defer p.mu.Unlock()
	if p.w != nil && p.shown >= 0 {
		fmt.Fprintf(p.w, "\r%s\r", strings.Repeat(" ", len(p.what)+barWidth+10))
	}
	p.w = nil
}
