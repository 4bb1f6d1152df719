package main

import (
	"io"
	"os"

	"github.com/schollz/progressbar/v3"
	"golang.org/x/term"
)

// progress shows on a terminal how far a stage has come, and nothing when the
// remarks go elsewhere.
type progress struct {
	out   io.Writer // nil = silent
	stage string
	bar   *progressbar.ProgressBar
}

func newProgress(remarks io.Writer) *progress {
	if f, ok := remarks.(*os.File); ok && term.IsTerminal(int(f.Fd())) {
		return &progress{out: f}
	}
	return &progress{}
}

// report is a harmonize.Progress.
func (p *progress) report(stage string, done, total int) {
	if p.out == nil {
		return
	}
	if p.bar == nil || stage != p.stage {
		p.finish()
		p.stage = stage
		p.bar = progressbar.NewOptions(total, progressbar.OptionSetWriter(p.out), progressbar.OptionSetDescription(stage),
			progressbar.OptionClearOnFinish(), progressbar.OptionSetWidth(30), progressbar.OptionSetElapsedTime(false),
			progressbar.OptionSetPredictTime(false))
	}
	_ = p.bar.Set(done) // a progress bar that cannot be drawn stops no merge
}

// finish takes the bar off the screen.
func (p *progress) finish() {
	if p.bar != nil {
		_ = p.bar.Clear()
		p.bar = nil
	}
}
