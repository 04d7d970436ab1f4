package main

import (
	"fmt"
	"io"
	"time"

	"github.com/schollz/progressbar/v3"
)

// progress shows how a search stands: a bar on a terminal, a plain line a
// minute elsewhere.
type progress struct {
	w     io.Writer
	bar   *progressbar.ProgressBar
	every time.Duration
	next  time.Time
	now   func() time.Time
}

// standing is what is shown.
type standing struct {
	stage       string
	done, total int
	rate        float64 // evaluations per second
	left        time.Duration
	front       int
	hypervolume float64
	failed      int
	best        string
}

func newProgress(s streams) *progress {
	p := &progress{w: s.err, every: time.Minute, now: time.Now}
	if s.live {
		p.bar = progressbar.NewOptions(1,
			progressbar.OptionSetWriter(s.err), progressbar.OptionSetWidth(20), progressbar.OptionThrottle(100*time.Millisecond),
			progressbar.OptionClearOnFinish(), progressbar.OptionSetPredictTime(false), progressbar.OptionSetElapsedTime(false))
	}
	p.next = p.now().Add(2 * time.Second)
	return p
}

// show takes in how the search stands; it draws only when it is time to.
func (p *progress) show(s standing) { p.tell(s.done, s.total, s.line) }

// tell takes in how far anything has come, with a line for when it is time to
// draw.
func (p *progress) tell(done, total int, line func() string) {
	if p.bar != nil {
		if total != p.bar.GetMax() && total > 0 {
			p.bar.ChangeMax(total)
		}
		p.bar.Describe(line())
		p.bar.Set(min(done, max(total-1, 0)))
		return
	}
	if now := p.now(); !now.Before(p.next) {
		p.next = now.Add(p.every)
		fmt.Fprintf(p.w, "%s  %d of %d  %s\n", now.Format(time.TimeOnly), done, total, line())
	}
}

// line is all but the counts.
func (s standing) line() string {
	text := s.stage
	if s.rate > 0 {
		text += fmt.Sprintf("  %s/s", significant(s.rate))
	}
	if s.left > 0 {
		text += "  " + clock(s.left) + " left"
	}
	text += fmt.Sprintf("  front %d", s.front)
	if s.hypervolume > 0 {
		text += fmt.Sprintf("  hypervolume %.4f", s.hypervolume)
	}
	if s.failed > 0 {
		text += fmt.Sprintf("  failed %d", s.failed)
	}
	if s.best != "" {
		text += "  best " + s.best
	}
	return text
}

// end takes the bar off the terminal.
func (p *progress) end() {
	if p.bar != nil {
		p.bar.Clear()
	}
}

// significant is a rate in three digits at the most.
func significant(x float64) string {
	if x >= 100 {
		return fmt.Sprintf("%.0f", x)
	}
	return fmt.Sprintf("%.3g", x)
}

// clock is a duration to the second, or to the minute from an hour.
func clock(d time.Duration) string {
	if d >= time.Hour {
		return fmt.Sprintf("%dh%02dm", int(d.Hours()), int(d.Minutes())%60)
	}
	if d >= time.Minute {
		return fmt.Sprintf("%dm%02ds", int(d.Minutes()), int(d.Seconds())%60)
	}
	return fmt.Sprintf("%ds", int(d.Seconds()+0.5))
}
