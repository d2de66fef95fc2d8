//go:build window

package main

import (
	"flag"
	"fmt"
	"image"
	"os"
	"slices"
	"strconv"
	"sync"
	"testing"
	"time"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/app"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"
	"golang.org/x/sys/unix"

	"weighhouse/app/desk"
)

// Frames of the real window, on the display of the environment:
//
//	xvfb-run -a -s "-screen 0 1366x768x24" go test -tags window,migrated_fynedo,no_animations -bench . -benchtime 100x ./app

var folder = flag.String("folder", "", "the folder of a practice branch (default: a new one)")

// The window has the first thread, and the benchmarks stand beside it.
func TestMain(m *testing.M) {
	flag.Parse()
	if *folder == "" {
		dir, err := os.MkdirTemp("", "weighhouse")
		if err != nil {
			panic(err)
		}
		defer os.RemoveAll(dir)
		*folder = dir
	}
	painted := make(chan struct{})
	go func() {
		<-painted
		m.Run()
		fyne.Do(fyne.CurrentApp().Quit)
	}()
	options := desk.Options{Practice: true, Folder: *folder, Language: "en"}
	if err := desk.Run(app.NewWithID("weighhouse.desk"), options, func() { close(painted) }); err != nil {
		fmt.Fprintln(os.Stderr, err)
		os.Exit(1)
	}
}

// A probe hears frames begin: before one is drawn the window asks its parts
// how much room they need, the first part first.
type probe struct {
	widget.BaseWidget
	spot  *canvas.Raster // a pixel, to be painted anew
	asked []time.Time    // in this frame and those after it
	began chan struct{}  // hears the first
}

func (p *probe) CreateRenderer() fyne.WidgetRenderer {
	p.spot.Resize(fyne.NewSize(1, 1))
	return widget.NewSimpleRenderer(container.NewWithoutLayout(p.spot))
}

func (p *probe) MinSize() fyne.Size {
	p.asked = append(p.asked, time.Now())
	if len(p.asked) == 1 {
		close(p.began)
	}
	return fyne.Size{}
}

// askedInFrame is how often the window asks a first part in one frame.
const askedInFrame = 3

// A stage is the window on a page.
type stage struct {
	canvas fyne.Canvas
	probe  *probe
}

// onStage waits for the first page and answers all of its questions, once, so
// that the last line of its worksheet has the focus.
var onStage = sync.OnceValue(func() *stage {
	s := &stage{probe: &probe{spot: canvas.NewRaster(func(int, int) image.Image { return image.NewUniform(image.Black.C) })}}
	s.probe.ExtendBaseWidget(s.probe)
	for ready := false; !ready; time.Sleep(20 * time.Millisecond) {
		fyne.DoAndWait(func() {
			w := fyne.CurrentApp().Driver().AllWindows()[0]
			w.Resize(fyne.NewSize(1366, 768))
			s.canvas = w.Canvas()
			ready = s.canvas.Focused() != nil
		})
	}
	for _, text := range []string{"Ana Example", "", "", "3000", "12", "1985", "m", "y", "0", "w", "2015", "o", "6", "y", "200", "100",
		"800", "0", "0", "0", "500", "50", "10", "80", "20"} {
		fyne.DoAndWait(func() { s.text(text); s.key(fyne.KeyReturn) })
	}
	fyne.DoAndWait(func() { s.text("50"); s.enter() })
	return s
})

// enter puts the probe first on the page.
func (s *stage) enter() {
	s.probe.began = make(chan struct{})
	page := s.canvas.Content().(*fyne.Container)
	page.Objects = append([]fyne.CanvasObject{s.probe}, page.Objects...)
}

func (s *stage) text(text string) {
	for _, r := range text {
		s.canvas.Focused().TypedRune(r)
	}
}

func (s *stage) key(name fyne.KeyName) { s.canvas.Focused().TypedKey(&fyne.KeyEvent{Name: name}) }

// A frame is what a change costs: the change itself, the frame that shows it,
// how many frames there were until the window was at rest, and the processor's
// time for all of them.
type frame struct {
	change, drawn, worked time.Duration
	frames                int
}

func (s *stage) frame(change func()) (f frame) {
	var before time.Duration
	began := make(chan struct{})
	fyne.DoAndWait(func() {
		begin := time.Now()
		change()
		f.change = time.Since(begin)
		s.probe.asked, s.probe.began = nil, began
		canvas.Refresh(s.probe.spot)
		before = processorTime()
	})
	<-began
	var end time.Time
	fyne.DoAndWait(func() { end = time.Now() })
	time.Sleep(50 * time.Millisecond)
	fyne.DoAndWait(func() {
		f.worked = processorTime() - before
		f.frames = len(s.probe.asked) / askedInFrame
		if f.frames > 1 && s.probe.asked[askedInFrame].Before(end) {
			end = s.probe.asked[askedInFrame]
		}
		f.drawn = end.Sub(s.probe.asked[0])
	})
	return f
}

func processorTime() time.Duration {
	var t unix.Timespec
	if err := unix.ClockGettime(unix.CLOCK_PROCESS_CPUTIME_ID, &t); err != nil {
		panic(err)
	}
	return time.Duration(t.Nano())
}

// median is that of a part of frames, in microseconds.
func median(frames []frame, part func(frame) time.Duration) float64 {
	slices.SortFunc(frames, func(a, b frame) int { return int(part(a) - part(b)) })
	return float64(part(frames[len(frames)/2])) / 1000
}

// With the focus in a box and nothing done, nothing is drawn.
func TestRest(t *testing.T) {
	s := onStage()
	time.Sleep(time.Second)
	fyne.DoAndWait(func() { s.probe.asked, s.probe.began = nil, make(chan struct{}) })
	time.Sleep(3 * time.Second)
	fyne.DoAndWait(func() {
		if n := len(s.probe.asked) / askedInFrame; n > 0 {
			t.Errorf("%d frames in three seconds of rest", n)
		}
		canvas.Refresh(s.probe.spot)
	})
	time.Sleep(time.Second)
	fyne.DoAndWait(func() {
		if n := len(s.probe.asked); n != askedInFrame {
			t.Errorf("one frame asks %d times, not %d", n, askedInFrame)
		}
	})
}

// BenchmarkFrame sets the frame after a changed answer against a repaint of
// the same page, turn by turn.
func BenchmarkFrame(b *testing.B) {
	s := onStage()
	back := func(questions int) {
		fyne.DoAndWait(func() {
			for range questions {
				s.canvas.(interface{ FocusPrevious() }).FocusPrevious()
			}
		})
	}
	run := func(name string, change func(i int)) {
		b.Run(name, func(b *testing.B) {
			var same, changed []frame
			for i := 0; b.Loop(); i++ {
				same = append(same, s.frame(func() {}))
				changed = append(changed, s.frame(func() { change(i) }))
			}
			drawn, worked := func(f frame) time.Duration { return f.drawn }, func(f frame) time.Duration { return f.worked }
			b.ReportMetric(median(changed, func(f frame) time.Duration { return f.change }), "change-µs")
			b.ReportMetric(median(same, drawn), "same-µs")
			b.ReportMetric(median(changed, drawn), "changed-µs")
			b.ReportMetric(median(changed, drawn)/median(same, drawn), "ratio")
			b.ReportMetric(median(changed, worked)/median(same, worked), "cpu-ratio")
			b.ReportMetric(median(same, worked), "same-cpu-µs")
			frames := median(changed, func(f frame) time.Duration { return time.Duration(f.frames) }) * 1000
			b.ReportMetric(frames, "frames")
			b.ReportMetric(0, "ns/op")
			if frames > 1 {
				b.Error("a changed answer draws more than one frame")
			}
		})
	}
	run("worksheet line typed", func(i int) { s.digit(i) })
	back(9 + 3)
	run("yes or no", func(i int) { s.text("ny"[i%2 : i%2+1]) })
}

// BenchmarkPage opens pages, and goes through the list of kept results, until
// the frame that shows it.
func BenchmarkPage(b *testing.B) {
	s := onStage()
	run := func(name string, change func(i int)) {
		b.Run(name, func(b *testing.B) {
			var all []frame
			for i := 0; b.Loop(); i++ {
				all = append(all, s.frame(func() { change(i) }))
			}
			b.ReportMetric(median(all, func(f frame) time.Duration { return f.change }), "change-µs")
			b.ReportMetric(median(all, func(f frame) time.Duration { return f.drawn }), "drawn-µs")
			b.ReportMetric(median(all, func(f frame) time.Duration { return f.worked }), "cpu-µs")
			b.ReportMetric(median(all, func(f frame) time.Duration { return time.Duration(f.frames) })*1000, "frames")
			b.ReportMetric(0, "ns/op")
		})
	}
	run("kept and back", func(i int) { s.window([]fyne.KeyName{fyne.KeyF3, fyne.KeyEscape}[i%2]); s.enter() })
	fyne.DoAndWait(func() { s.window(fyne.KeyF3); s.enter() })
	run("kept, a page further", func(int) { s.key(fyne.KeyPageDown) })
	run("kept, its other end", func(i int) { s.key([]fyne.KeyName{fyne.KeyEnd, fyne.KeyHome}[i%2]) })
	fyne.DoAndWait(func() { s.window(fyne.KeyEscape); s.enter() })
}

// window presses a key of the window.
func (s *stage) window(name fyne.KeyName) {
	if s.canvas.Focused() != nil {
		s.key(name)
	} else {
		s.canvas.OnTypedKey()(&fyne.KeyEvent{Name: name})
	}
}

// digit types numbers of five digits, one digit a call, each another number.
func (s *stage) digit(i int) {
	if i%5 == 0 {
		for range 5 {
			s.key(fyne.KeyBackspace)
		}
	}
	s.text(strconv.Itoa(10_000 + i/5*7919%90_000)[i%5:][:1])
}
