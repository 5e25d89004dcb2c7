package main

import (
	"fmt"
	"io"
	"os"
	"sync"
	"time"

	"github.com/schollz/progressbar/v3"
	"golang.org/x/term"

	"shearbook/profile"
	"shearbook/report/batch"
)

// show tells how far a batch is: a bar on a terminal, elsewhere a line from
// time to time, nothing where quiet.
type show struct {
	out   io.Writer
	quiet bool
	bar   *progressbar.ProgressBar // nil where there is none

	mu   sync.Mutex
	told time.Time
}

// between is the time between two lines.
const between = 10 * time.Second

func newShow(out io.Writer, quiet bool) *show {
	s := &show{out: out, quiet: quiet, told: time.Now()}
	if f, ok := out.(*os.File); ok && !quiet && term.IsTerminal(int(f.Fd())) {
		s.bar = progressbar.NewOptions64(-1,
			progressbar.OptionSetWriter(out), progressbar.OptionSetDescription("profiles"), progressbar.OptionShowCount(),
			progressbar.OptionShowIts(), progressbar.OptionSetItsString("profiles"), progressbar.OptionSetPredictTime(true),
			progressbar.OptionThrottle(100*time.Millisecond), progressbar.OptionClearOnFinish(), progressbar.OptionSetWidth(20))
	}
	return s
}

// progress tells how far the batch is. The total is guessed from the bytes.
func (s *show) progress(p batch.Progress) {
	switch {
	case s.quiet:
	case s.bar != nil:
		if p.Total > 0 && p.Bytes > 0 {
			s.bar.ChangeMax64(max(int64(p.Units), int64(float64(p.Units)*float64(p.Total)/float64(p.Bytes))))
		}
		_ = s.bar.Set(p.Units) // a bar that cannot be drawn keeps nobody
	case time.Since(s.told) >= between:
		s.told = time.Now()
		text := profile.Plural(p.Units, "profile") + " done"
		if p.Total > 0 {
			text += fmt.Sprintf(", %d %% of the input", 100*p.Bytes/p.Total)
		}
		fmt.Fprintf(s.out, "shearbook: %s\n", text)
	}
}

// say tells something in between.
func (s *show) say(text, hint string) {
	s.mu.Lock()
	defer s.mu.Unlock()
	if s.bar != nil {
		_ = s.bar.Clear() // a bar that cannot be drawn keeps nobody
	}
	say(s.out, text, hint)
}

// end takes the bar away.
func (s *show) end() {
	if s.bar != nil {
		_ = s.bar.Clear() // a bar that cannot be drawn keeps nobody
	}
}
