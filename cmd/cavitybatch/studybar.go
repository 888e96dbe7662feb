package main

import (
	"github.com/vbauerster/mpb/v8"
	"github.com/vbauerster/mpb/v8/decor"
)

// taskBar shows how many tasks of many are done, and the time left, where
// standard error is a terminal.
type taskBar struct {
	all *mpb.Progress // nil where nobody watches
	bar *mpb.Bar
}

func newTaskBar(std streams, title string, tasks int) *taskBar {
	if !isTerminal(std.err) || tasks == 0 {
		return &taskBar{}
	}
	all := mpb.New(mpb.WithOutput(std.err), mpb.WithWidth(60))
	return &taskBar{all, all.New(int64(tasks), mpb.BarStyle(), mpb.BarRemoveOnComplete(),
		mpb.PrependDecorators(decor.Name(title, decor.WC{W: 18, C: decor.DindentRight}), decor.CountersNoUnit("%d/%d")),
		mpb.AppendDecorators(decor.Name("time left "), decor.AverageETA(decor.ET_STYLE_GO)))}
}

// step counts a task as done.
func (b *taskBar) step() {
	if b.bar != nil {
		b.bar.Increment()
	}
}

// close takes the bar off the terminal.
func (b *taskBar) close() {
	if b.bar != nil {
		b.bar.Abort(true)
		b.all.Wait()
	}
}
