//go:build unix

package desk

import (
	"context"
	"strconv"
	"syscall"
	"testing"
	"time"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/test"

	"weighhouse/app/practice"
	"weighhouse/model"
	"weighhouse/store"
)

// deskOn is the window of the practice branch in a folder, at the size of a
// small old screen, with a whole application on its page.
func deskOn(tb testing.TB, folder string) *Desk {
	tb.Helper()
	session, err := practice.Open(context.Background(), folder)
	if err != nil {
		tb.Fatal(err)
	}
	tb.Cleanup(func() { session.Branch().Close() })
	a := test.NewTempApp(tb)
	posts := &posted{}
	d := &Desk{app: a, post: posts.add, window: test.NewTempWindow(tb, nil)}
	d.begin(session, Options{Language: "en"})
	d.window.SetPadded(false)
	d.window.Resize(fyne.NewSize(1366, 768))
	iv := d.interview
	for _, past := range pastApplications(tb, session) {
		if past.Answers.Edition() == iv.edition {
			iv.answers, iv.who = past.Answers, past.Name
		}
	}
	iv.weighAll()
	if !iv.complete {
		tb.Fatal("the application is not whole")
	}
	d.leave()
	<-d.written
	posts.run()
	d.show("interview")
	return d
}

func pastApplications(tb testing.TB, session *store.Session) []practice.Application {
	tb.Helper()
	released, err := session.Editions(context.Background())
	if err != nil {
		tb.Fatal(err)
	}
	editions := map[string]*model.Edition{}
	for _, r := range released {
		if editions[r.Card.ProductCode], err = session.Edition(context.Background(), r.Fingerprint); err != nil {
			tb.Fatal(err)
		}
	}
	past, err := practice.Applications(editions)
	if err != nil {
		tb.Fatal(err)
	}
	return past
}

// A changed answer on the page of a whole application: the handler, and then
// what a frame lays out.
func BenchmarkChangedAnswer(b *testing.B) {
	d := deskOn(b, b.TempDir())
	canvas, page := d.window.Canvas(), d.page.(*interviewPage)
	boxOf := func(code string) box {
		item, ok := page.iv.edition.Item(code)
		if !ok {
			b.Fatal("no question ", code)
		}
		return page.rows[item.Index].box
	}
	run := func(name, code string, change func(i int)) {
		boxOf(code).focus()
		bench(b, name+"/handler", change)
		bench(b, name+"/and layout", func(i int) {
			change(i)
			settle(canvas.Content())
		})
	}
	digits := func(i int) { // numbers of five digits, one digit a call, each another number
		if i%5 == 0 {
			for range 5 {
				press(canvas, string(fyne.KeyBackspace))
			}
		}
		typeText(canvas, strconv.Itoa(10_000 + i/5*7919%90_000)[i%5:][:1])
	}
	run("yes or no", "books", func(i int) { typeText(canvas, "ny"[i%2:i%2+1]) })
	run("yes or no that asks another", "borrowed_before", func(i int) { typeText(canvas, "ny"[i%2:i%2+1]) })
	run("choice", "premises", func(i int) { boxOf("premises").(*picker).choose(i % 2) })
	run("number typed", "amount", digits)
	run("line of a worksheet", "surplus", digits)
	bench(b, "layout with nothing changed", func(int) { settle(canvas.Content()) })
}

// Opening each page, up to where a frame is drawn.
func BenchmarkPage(b *testing.B) {
	d := deskOn(b, b.TempDir())
	for _, name := range []string{"interview", "why", "details", "fits", "kept", "scorecards", "keys"} {
		bench(b, name, func(int) {
			d.show(name)
			settle(d.window.Canvas().Content())
		})
	}
}

// The list of 200,000 kept results, the size that the promises are for.
func BenchmarkKeptLarge(b *testing.B) {
	folder := b.TempDir()
	Fill(b, folder, 200_000)
	d := deskOn(b, folder)
	canvas := d.window.Canvas()
	bench(b, "opened", func(int) {
		d.show("kept")
		settle(canvas.Content())
	})
	page := d.page.(*keptPage)
	bench(b, "a page further", func(int) {
		press(canvas, string(fyne.KeyPageDown))
		settle(canvas.Content())
	})
	bench(b, "any page", func(i int) {
		page.list.choose(i * 104729 % page.list.count)
		settle(canvas.Content())
	})
}

// Fill makes a practice branch in a folder and keeps its past applications
// over and over, until there are that many results.
func Fill(tb testing.TB, folder string, results int) {
	tb.Helper()
	session, err := practice.Open(context.Background(), folder)
	if err != nil {
		tb.Fatal(err)
	}
	defer session.Branch().Close()
	past := pastApplications(tb, session)
	for results -= len(past); results > 0; results -= 5000 {
		var all []store.Complete
		for n := range min(results, 5000) {
			a := past[n%len(past)]
			all = append(all, store.Complete{Applicant: a.Name, Answers: a.Answers})
		}
		if _, err := session.KeepResults(context.Background(), all); err != nil {
			tb.Fatal(err)
		}
	}
}

// bench also tells the processor's own time, which other programs at work on
// the machine do not stretch.
func bench(b *testing.B, name string, do func(i int)) {
	b.Run(name, func(b *testing.B) {
		begin := processorTime()
		i := 0
		for b.Loop() {
			do(i)
			i++
		}
		b.ReportMetric(float64(processorTime()-begin)/float64(i), "cpu-ns/op")
	})
}

func processorTime() time.Duration {
	var u syscall.Rusage
	syscall.Getrusage(syscall.RUSAGE_SELF, &u)
	return time.Duration(u.Utime.Nano() + u.Stime.Nano())
}
