package desk

import (
	"bytes"
	"context"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"
	"time"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/storage"
	"fyne.io/fyne/v2/test"

	"weighhouse/app/practice"
	"weighhouse/assets"
	"weighhouse/model"
	"weighhouse/store"
	"weighhouse/store/workbook"
)

// window is the practice branch's window under Fyne's test driver.
type window struct {
	*testing.T
	*Desk
	canvas fyne.Canvas
	posts  *posted
}

func opened(t *testing.T, change ...func(*store.Session)) *window {
	t.Helper()
	session, err := practice.Open(context.Background(), t.TempDir())
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { session.Branch().Close() })
	for _, c := range change {
		c(session)
	}
	lastEntry = nil
	posts := &posted{}
	d := &Desk{app: test.NewTempApp(t), post: posts.add, window: test.NewTempWindow(t, nil)}
	d.window.Resize(fyne.NewSize(1024, 700))
	d.begin(session, Options{Language: "en"})
	w := &window{t, d, d.window.Canvas(), posts}
	t.Cleanup(w.wait)
	return w
}

// wait lets every act be written, and what it asks of the window come.
func (w *window) wait() {
	for {
		if w.written != nil {
			<-w.written
		}
		if !w.posts.run() {
			return
		}
	}
}

func (w *window) keys(names ...string) { press(w.canvas, names...) }

// answers types each answer and goes on with Enter.
func (w *window) answers(texts ...string) {
	for _, text := range texts {
		typeText(w.canvas, text)
		w.keys("Return")
	}
}

// everything answers all questions of the working capital loan but the last
// line of its worksheet, by the keys an officer would press.
func (w *window) everything() {
	w.answers("Ana Example", "", "", "3000", "12", "1985", "m", "y", "0", "w", "2015")
	w.keys("Down", "Return")
	w.answers("6", "y", "200", "100", "800", "0", "0", "0", "500", "50", "10", "80", "20")
	typeText(w.canvas, "50")
	w.keys("F12")
}

func (w *window) box(code string) box {
	w.Helper()
	p := w.page.(*interviewPage)
	item, ok := p.iv.edition.Item(code)
	if !ok {
		w.Fatal("no question ", code)
	}
	return p.rowAt(item.Index).box
}

// answer is one answer's canonical text.
func (w *window) answer(code string) string {
	w.Helper()
	item, ok := w.interview.edition.Item(code)
	if !ok {
		w.Fatal("no question ", code)
	}
	return w.interview.edition.AnswerText(item.Index, w.interview.answers.At(item.Index))
}

// text is every text drawn, and what is over the page, parted by spaces.
func (w *window) text() string {
	var all []string
	var walk func(o fyne.CanvasObject)
	walk = func(o fyne.CanvasObject) {
		if !o.Visible() {
			return
		}
		switch o := o.(type) {
		case *canvas.Text:
			all = append(all, o.Text)
		case *fyne.Container:
			for _, part := range o.Objects {
				walk(part)
			}
		case fyne.Widget:
			for _, part := range test.WidgetRenderer(o).Objects() {
				walk(part)
			}
		}
	}
	settle(w.canvas.Content())
	walk(w.canvas.Content())
	return strings.ReplaceAll(strings.Join(all, " "), "\u00a0", " ")
}

func (w *window) says(texts ...string) {
	w.Helper()
	all := w.text()
	for _, text := range texts {
		if !strings.Contains(all, text) {
			w.Errorf("nothing says %q in: %s", text, all)
		}
	}
}

func (w *window) silentOn(texts ...string) {
	w.Helper()
	all := w.text()
	for _, text := range texts {
		if strings.Contains(all, text) {
			w.Errorf("%q is said in: %s", text, all)
		}
	}
}

// kept is the newest of so many more results than the practice branch begins
// with.
func (w *window) kept(more int) store.Kept {
	w.Helper()
	w.wait()
	n, err := w.session.ResultCount(context.Background())
	if err != nil || n != 200+more {
		w.Fatalf("%d results are kept, want %d (%v)", n, 200+more, err)
	}
	list, err := w.session.Results(context.Background(), 0, 1)
	if err != nil {
		w.Fatal(err)
	}
	return list[0]
}

// A whole application by keys: it is kept when the last answer is in, and is
// said to be saved only then.
func TestApplication(t *testing.T) {
	w := opened(t)
	w.says("Practice branch Sedgebrook", "0 of 14 questions answered", "not saved yet")
	w.everything()
	w.says("14 of 14 questions answered", "Approve", "All answered. F10 hands it in.", "About 1 in 85", "not saved yet")
	w.keys("Return")
	w.says("That was the last question. F10 hands it in.", "not saved yet")
	k := w.kept(1)
	w.says("saved ")
	if k.Applicant != "Ana Example" || k.PD != w.interview.result.PD || k.Recommendation != model.Approve || !strings.Contains(k.Answers, "/fortnight") && !strings.Contains(k.Answers, "sales:800") {
		t.Errorf("kept %+v", k)
	}
	w.keys("F10")
	w.says("Handed in.")
	if k = w.kept(1); k.Cleared() {
		t.Error("what is handed in counts as cleared")
	}
	w.keys("F2")
	w.wait()
	w.says("No name yet", "0 of 14")
	if k = w.kept(1); k.Cleared() {
		t.Error("what was handed in was cleared by the next application")
	}
}

// A worksheet on the way through its lines is no answer yet.
func TestNoResultFromHalfAWorksheet(t *testing.T) {
	w := opened(t)
	w.answers("Ana Example", "", "", "3000", "12", "1985", "m", "y", "0", "w", "2015")
	w.keys("Down", "Return")
	w.answers("6", "y", "200", "100", "800")
	w.says("13 of 14 questions answered")
	if w.interview.complete {
		t.Fatal("one line of ten makes a result")
	}
	w.keys("Shift+Tab", "Shift+Tab")
	w.says("Some lines are empty.")
	w.keys("Tab", "Tab", "Return", "Return", "Return", "Return", "Return", "Return", "Return", "Return", "Return")
	if !w.interview.complete || w.answer("surplus") != "sales:800/week" {
		t.Errorf("Enter on the last line: %q", w.answer("surplus"))
	}
}

func TestConditionalQuestionGreysAndKeeps(t *testing.T) {
	w := opened(t)
	w.answers("", "", "", "3000", "12", "1985", "m", "y", "30")
	if w.answer("worst_delay") != "30" {
		t.Fatalf("answered %q", w.answer("worst_delay"))
	}
	w.box("borrowed_before").focus()
	typeText(w.canvas, "n")
	late := w.box("worst_delay")
	if !late.Disabled() || late.line().text != "Not asked of this applicant." {
		t.Errorf("not asked: disabled %t, %q", late.Disabled(), late.line().text)
	}
	w.says("5 of 13")
	w.keys("Return")
	if w.canvas.Focused() == late.(*typedBox).entry {
		t.Error("Enter goes to a question that is not asked")
	}
	w.box("borrowed_before").focus()
	typeText(w.canvas, "y")
	if late = w.box("worst_delay"); late.Disabled() || w.answer("worst_delay") != "30" || late.(*typedBox).entry.Text != "30" {
		t.Errorf("asked again: disabled %t, %q", late.Disabled(), w.answer("worst_delay"))
	}
}

func TestRefusedAmountBlocksTheResult(t *testing.T) {
	w := opened(t)
	w.everything()
	w.keys("F10")
	w.wait()
	w.box("amount").focus()
	w.keys("Ctrl+A")
	typeText(w.canvas, "9999")
	w.says("First mend the answer that cannot stand.", "not saved yet")
	w.silentOn("Approve")
	w.keys("F5")
	w.says("First mend the answer that cannot stand.")
	w.keys("F10")
	if e := w.box("amount").(*typedBox).entry; w.canvas.Focused() != e {
		t.Error("F10 does not go to the answer that cannot stand")
	}
	w.kept(1)
}

// F10 goes to what is open, and says so.
func TestHandInWantsEveryAnswer(t *testing.T) {
	w := opened(t)
	w.answers("Ana Example", "", "", "3000")
	w.box("sex").focus()
	w.keys("F10")
	if e := w.box("term").(*typedBox).entry; w.canvas.Focused() != e {
		t.Error("F10 does not go to the first open question")
	}
	w.says("This question is still open.")
	w.box("surplus").focus()
	for range 10 {
		w.keys("Return")
	}
	w.says("Question 2 is still open. F10 goes there.")
	w.kept(0)
}

func TestRuleIsSaidAtOnce(t *testing.T) {
	w := opened(t, whenShown(t, model.WhenHandedIn))
	w.answers("", "", "", "3000", "12", "2012")
	w.says("Decline: ", "Shown once it is handed in.")
	w.silentOn("PD between", "Settled")
}

// whenShown releases the practice card again with another rule of when its
// result is shown.
func whenShown(t *testing.T, shown model.Shown) func(*store.Session) {
	return func(session *store.Session) {
		t.Helper()
		card := practiceCard(t)
		card.Card.Edition++
		card.Card.ResultShown = shown
		if _, err := session.ReleaseEdition(context.Background(), card); err != nil {
			t.Fatal(err)
		}
	}
}

// practiceCard is the working capital loan's scorecard.
func practiceCard(t *testing.T) model.Scorecard {
	t.Helper()
	for _, b := range assets.PracticeWorkbooks() {
		reading, err := workbook.Read(bytes.NewReader(b))
		if err != nil {
			t.Fatal(err)
		}
		if reading.Scorecard.Card.ProductCode == "working_capital" {
			return reading.Scorecard
		}
	}
	t.Fatal("no such card")
	return model.Scorecard{}
}

// The lender chooses when a result is shown; until then no page has it and
// nothing is kept.
func TestWhenTheResultIsShown(t *testing.T) {
	for _, c := range []struct {
		shown                     model.Shown
		begun, complete, handedIn string
		kept                      int // before it is handed in
	}{
		{model.WhileAnswering, "a PD between", "Approve", "Approve", 1},
		{model.WhenComplete, "Shown once every question is answered.", "Approve", "Approve", 1},
		{model.WhenHandedIn, "Shown once it is handed in.", "F10 hands it in and shows the result.", "Approve", 0},
	} {
		t.Run(string(c.shown), func(t *testing.T) {
			w := opened(t, whenShown(t, c.shown))
			w.says(c.begun)
			w.everything()
			w.keys("Return")
			w.says(c.complete)
			w.kept(c.kept)
			for _, page := range []string{"F5", "F6", "F7"} {
				w.keys(page)
				if c.kept == 0 {
					w.silentOn("1.18%", "583", "Approve", "Principal reasons")
				}
			}
			w.keys("Escape", "F10")
			w.says(c.handedIn, "Handed in.", "1.18%")
			w.kept(1)
		})
	}
}

// What was seen and not handed in stays, marked; the list says so.
func TestNewApplicationClearsWhatWasSeen(t *testing.T) {
	w := opened(t)
	w.everything()
	w.keys("F2")
	if k := w.kept(1); !k.Cleared() || k.Applicant != "Ana Example" {
		t.Fatalf("kept %+v", k)
	}
	w.keys("F3")
	w.says("Results kept at this desk: 201", "Ana Example (cleared)", "it was seen, and not handed in.", "About 1 in 85")
}

// Each result seen on the way to the one handed in is marked.
func TestSteeringLeavesItsTrace(t *testing.T) {
	w := opened(t)
	w.everything()
	w.box("books").focus()
	typeText(w.canvas, "n")
	w.keys("Return", "F10")
	w.wait()
	w.keys("F2")
	newest := w.kept(2)
	list, err := w.session.Results(context.Background(), 0, 2)
	if err != nil || newest.Cleared() || !list[1].Cleared() {
		t.Errorf("%+v %v", list, err)
	}
}

// A slip of the key loses nothing: what is unfinished is asked about first.
func TestUnfinishedAnswersAreAskedAbout(t *testing.T) {
	w := opened(t)
	w.answers("Ana Example", "", "", "3000")
	typeText(w.canvas, "1")
	w.keys("F2")
	w.says("Ana Example", "These answers are not kept yet. Once more, and they are gone.")
	typeText(w.canvas, "2")
	if w.answer("amount") != "3000" || w.answer("term") != "12" {
		t.Fatalf("answered %q, %q", w.answer("amount"), w.answer("term"))
	}
	w.keys("F3", "F2")
	w.says("Once more, and they are gone.")
	w.keys("F2")
	w.says("No name yet", "0 of 14")
	w.silentOn("Ana Example")
	w.kept(0)
}

// Where the store refuses, that is said, and the application stays.
func TestNotSavedIsSaid(t *testing.T) {
	w := opened(t)
	w.everything()
	w.session.Branch().Close()
	w.keys("Return")
	w.wait()
	w.says("not saved yet", "Something unexpected happened")
	w.keys("F2")
	w.wait()
	w.says("Ana Example", "14 of 14", "Once more, and they are gone.")
	w.close()
	w.wait()
	w.says("Ana Example", "14 of 14", "Something unexpected happened")
}

func TestChangedProductCarriesAnswers(t *testing.T) {
	w := opened(t)
	w.answers("Ana Example", "", "", "3000", "12", "1985", "m")
	p := w.page.(*interviewPage)
	p.what.box.focus()
	typeText(w.canvas, "F")
	w.keys("Return")
	if got := w.interview.edition.Scorecard().Card.ProductCode; got != "farm_season" {
		t.Fatalf("the product is %s", got)
	}
	w.says("Ana Example", "Farm season loan")
	if w.answer("amount") != "3000" || w.answer("birth_date") != "1985" || w.answer("sex") != "man" {
		t.Errorf("carried %q, %q, %q", w.answer("amount"), w.answer("birth_date"), w.answer("sex"))
	}
	if w.answer("term") != "" {
		t.Errorf("12 months became %s fortnights", w.answer("term"))
	}
	if e := w.box("amount").(*typedBox).entry; w.canvas.Focused() != e {
		t.Errorf("after the product the focus is at %T", w.canvas.Focused())
	}
}

// F9 leaves nothing of the person or the result in any text drawn.
func TestHidden(t *testing.T) {
	w := opened(t)
	w.everything()
	w.keys("F10")
	w.wait()
	w.keys("F9")
	for _, page := range []string{"Escape", "F5", "F6", "F7", "F3", "F4", "F1", "Escape", "F8", "F11"} {
		w.keys(page)
		w.silentOn("Ana Example", "Approve", "Approuver", "1.18", "1,18", "583", "1 in 85", "Roswyle")
	}
	w.keys("F8", "F8", "F9")
	w.says("Ana Example", "Approve", "1.18%")
	w.keys("F3")
	w.says("Ana Example", "Roswyle Pikewater")
	w.keys("F9")
	w.silentOn("Ana Example", "Roswyle")
}

// A change of language keeps the answers, where the officer is, and what is
// half typed.
func TestLanguageKeepsThePlace(t *testing.T) {
	w := opened(t)
	w.everything()
	w.box("owed_shops").focus()
	p := w.page.(*interviewPage)
	offset := p.scroll.Offset.Y
	before := w.interview.text()
	if offset == 0 {
		t.Fatal("the page is not scrolled")
	}
	w.keys("F8")
	w.says("Ana Example", "Réponses : 14 sur 14", "Approuver", "couronnes")
	w.silentOn("crowns")
	if w.canvas.Focused() != w.box("owed_shops").(*typedBox).entry || w.interview.text() != before {
		t.Error("the focus or an answer is lost")
	}
	p = w.page.(*interviewPage)
	if at := p.now.Position().Y; at < p.scroll.Offset.Y || at+p.now.Size().Height > p.scroll.Offset.Y+p.scroll.Size().Height {
		t.Errorf("the row at %v is out of sight of %v", at, p.scroll.Offset.Y)
	}
	w.keys("F8", "F8")
	if got := w.page.(*interviewPage).scroll.Offset.Y; got != offset {
		t.Errorf("scrolled to %v, was %v", got, offset)
	}
}

// What is half typed, does not read, or is questioned outlives every change of
// the page.
func TestHalfTypedTextStays(t *testing.T) {
	w := opened(t)
	w.answers("", "", "")
	typeText(w.canvas, "1,2")
	w.keys("Tab", "Tab")
	typeText(w.canvas, "31.2.19")
	w.box("owed_lenders").focus()
	typeText(w.canvas, "12.5x")
	w.box("surplus").focus()
	typeText(w.canvas, "800")
	w.keys("Return")
	typeText(w.canvas, "4")
	check := func(after string) {
		t.Helper()
		surplus := w.box("surplus").(*worksheetBox)
		got := []string{w.box("amount").(*typedBox).entry.Text, w.box("birth_date").(*typedBox).entry.Text,
			w.box("owed_lenders").(*typedBox).entry.Text, surplus.rows[0].entry.Text, surplus.rows[1].entry.Text}
		if want := []string{"1,2", "31.2.19", "12.5x", "800", "4"}; !slices.Equal(got, want) {
			t.Errorf("after %s: %q", after, got)
		}
		if w.canvas.Focused() != surplus.rows[1].entry || surplus.rows[1].entry.SelectedText() != "" {
			t.Errorf("after %s: the focus is at %T, or the next key wipes out what is typed", after, w.canvas.Focused())
		}
		if note := w.box("owed_lenders").line(); note.text == "" || w.interview.complete {
			t.Errorf("after %s: what does not read is not refused", after)
		}
	}
	check("typing")
	for _, keys := range [][]string{{"F9"}, {"F9"}, {"F11"}, {"F11"}, {"F5", "Escape"}, {"F3", "F4", "F8", "F8", "F8", "Escape"}} {
		w.keys(keys...)
		check(strings.Join(keys, " "))
	}
}

// A questioned figure stays questioned, and is written as the language has it.
func TestQuestionedFigureStays(t *testing.T) {
	w := opened(t)
	w.box("work_days").focus()
	typeText(w.canvas, "9")
	if w.answer("work_days") != "" {
		t.Fatal("a questioned figure counts")
	}
	w.keys("F8")
	days := w.box("work_days").(*typedBox)
	if days.entry.Text != "9" || w.answer("work_days") != "" || days.note.text == "" {
		t.Errorf("%q, %q, %q", days.entry.Text, w.answer("work_days"), days.note.text)
	}
	w.keys("Return")
	if w.answer("work_days") != "" {
		t.Error("one Enter confirmed it")
	}
	w.keys("Return")
	if w.answer("work_days") != "9" {
		t.Error("two Enters did not confirm it")
	}
}

func TestDarkAndLight(t *testing.T) {
	w := opened(t)
	ground := func() any { return w.app.Settings().Theme().Color("background", 0) }
	light := ground()
	w.keys("F11")
	if ground() == light {
		t.Error("F11 does not darken")
	}
	w.wait()
	if w.remembered("light") != "dark" {
		t.Error("the light is not remembered")
	}
	w.keys("F11")
	if ground() != light {
		t.Error("F11 does not lighten")
	}
}

// The list of kept results, page by page, and the answers of the chosen one.
func TestKeptPages(t *testing.T) {
	w := opened(t)
	w.keys("F3")
	p := w.page.(*keptPage)
	w.says("Results kept at this desk: 200", "Roswyle Pikewater", "Kept by Tamsin Oake.")
	w.keys(string(fyne.KeyPageDown), string(fyne.KeyPageDown))
	if p.list.chosen != 2*p.list.page() {
		t.Errorf("row %d after two pages of %d", p.list.chosen, p.list.page())
	}
	w.keys("End")
	oldest, err := w.session.Results(context.Background(), 199, 1)
	if err != nil {
		t.Fatal(err)
	}
	w.says(oldest[0].Applicant)
	w.keys("Down", "F11")
	if p.list.chosen != 199 {
		t.Errorf("at row %d", p.list.chosen)
	}
	w.says(oldest[0].Applicant)
	w.keys("Home")
	w.silentOn(oldest[0].Applicant)
}

// The balance as text has a line for every step, and where it starts and ends.
func TestBalanceAsText(t *testing.T) {
	w := opened(t)
	w.everything()
	w.keys("F5")
	b := w.page.(*whyPage).balance
	steps := w.interview.edition.Steps(w.interview.answers)
	if len(b.rows) != len(steps) || len(b.text()) != len(steps)+2 {
		t.Fatalf("%d rows and %d lines for %d steps", len(b.rows), len(b.text()), len(steps))
	}
	w.keys("T")
	w.says(append(b.text()[:0:0], "All answers together: a PD of 1.18%.", "Owed to others altogether: Under 500.", "the odds of default are")...)
	w.keys("F8")
	w.says("Dettes en tout :")
	w.keys("F8", "F8", "T", "Down", "Down")
	if b = w.page.(*whyPage).balance; b.chosen != 2 {
		t.Errorf("row %d is chosen", b.chosen)
	}
	w.says(b.rows[2].words)
	w.keys("End")
	w.says(b.rows[len(steps)-1].words)
}

// What is unknown widens the balance: the lowest and the highest part, and
// never come nearer again.
func TestBalanceWidens(t *testing.T) {
	w := opened(t)
	w.answers("", "", "", "3000", "12")
	w.keys("F5")
	b := w.page.(*whyPage).balance
	width := 0.0
	for _, r := range b.rows {
		if next := r.toHi - r.toLo; next < width-1e-9 {
			t.Errorf("%s narrows it", r.label)
		} else if (next > width+1e-9) != r.step.Open() {
			t.Errorf("%s: open %t, but %v after %v", r.label, r.step.Open(), next, width)
		} else {
			width = next
		}
	}
	lo, hi := b.ends()
	if got := w.interview.bounds; pdAt(lo) != got.LowestPD || pdAt(hi) != got.HighestPD {
		t.Errorf("ends at %v and %v, bounds are %v and %v", pdAt(lo), pdAt(hi), got.LowestPD, got.HighestPD)
	}
	w.says("Between 0.458% and")
}

// At 700 pixels all of the balance stands within its width, and each row is
// named.
func TestBalanceNarrow(t *testing.T) {
	w := opened(t)
	w.everything()
	w.keys("F5")
	b := w.page.(*whyPage).balance
	if least := b.MinSize().Width; least > 700 {
		t.Fatalf("wants %v", least)
	}
	b.Resize(fyne.NewSize(700, b.MinSize().Height))
	for _, o := range test.WidgetRenderer(b).Objects() {
		if right := o.Position().X + o.Size().Width; o.Position().X < 0 || right > 701 {
			t.Errorf("%T from %v to %v", o, o.Position().X, right)
		}
		if text, ok := o.(*canvas.Text); ok && text.MinSize().Width > o.Size().Width+1 {
			t.Errorf("%q is cut", text.Text)
		}
	}
}

// scorecardFile writes a card, changed, into a folder.
func scorecardFile(t *testing.T, name string, change func(*model.Scorecard)) string {
	t.Helper()
	card := practiceCard(t)
	card.Card.Edition++
	change(&card)
	var b bytes.Buffer
	if err := workbook.Write(&b, card); err != nil {
		t.Fatal(err)
	}
	path := filepath.Join(t.TempDir(), name)
	if err := os.WriteFile(path, b.Bytes(), 0o644); err != nil {
		t.Fatal(err)
	}
	return path
}

// take types a path on the page of scorecards and waits for the verdict.
func (w *window) take(path string) {
	w.Helper()
	w.keys("F4", "Shift+Tab", "Ctrl+A")
	w.answers(path)
	w.untilRead()
}

func (w *window) untilRead() {
	w.Helper()
	p := w.page.(*scorecardsPage)
	for range 1000 {
		w.wait()
		if p.reading != nil || !strings.HasPrefix(p.said, "Reading") {
			return
		}
		time.Sleep(5 * time.Millisecond)
	}
	w.Fatal("the workbook is not read")
}

func TestScorecardRefused(t *testing.T) {
	w := opened(t)
	path := scorecardFile(t, "slipped.xlsx", func(s *model.Scorecard) {
		s.Attributes = slices.Clone(s.Attributes)
		for i := range s.Attributes {
			if l := &s.Attributes[i].LogOdds; l.Set {
				l.Value = -l.Value // swapped signs
			}
		}
	})
	w.take(path)
	p := w.page.(*scorecardsPage)
	if p.reading == nil || p.reading.Edition != nil || len(p.reading.Problems) < 2 {
		t.Fatalf("%+v", p.reading)
	}
	w.says("Refused, and nothing changed", "Checks!")
	w.keys("Down")
	w.says(strings.Fields(w.reader.Problem(p.reading.Problems[1]))[0])
	// The verdict stays when the language changes.
	w.keys("F8")
	w.says("Refus")
	w.keys("F8", "F8")

	tapPush(w, "Save the list")
	list, err := os.ReadFile(strings.TrimSuffix(path, ".xlsx") + "-problems.txt")
	if err != nil || strings.Count(string(list), "\n") != len(p.reading.Problems) {
		t.Errorf("the list: %v\n%s", err, list)
	}
	w.says("Written: ")
	if p.list.chosen != 1 {
		t.Errorf("writing moved the list to row %d", p.list.chosen)
	}
	tapPush(w, "Save the list")
	w.says("Nothing was written: there is already a file")
	tapPush(w, "Save a copy with notes")
	f, err := os.Open(strings.TrimSuffix(path, ".xlsx") + "-with-notes.xlsx")
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	if again, err := workbook.Read(f); err != nil || len(again.Problems) != len(p.reading.Problems) {
		t.Errorf("the copy with notes: %v", err)
	}
	if editions, err := w.session.Editions(context.Background()); err != nil || len(editions) != 2 {
		t.Errorf("%d editions (%v)", len(editions), err)
	}
	w.keys("Escape")
	w.says("Bring in a scorecard")
}

func TestScorecardAccepted(t *testing.T) {
	w := opened(t)
	w.answers("Ana Example", "", "", "3000")
	path := scorecardFile(t, "next.xlsx", func(*model.Scorecard) {})
	w.keys("F4")
	// As a file let fall on the window.
	w.page.(*scorecardsPage).read(storage.NewFileURI(path).Path())
	w.says("Reading " + path)
	w.untilRead()
	p := w.page.(*scorecardsPage)
	w.says("This workbook is sound", "Telephone code "+p.reading.Edition.TelephoneCode(), "Read this code to head office")
	w.keys("Shift+Tab", "Return") // a second Enter alone accepts nothing
	w.says("Accepted: Working capital loan scorecard", "scorecard edition 2")
	if n := w.interview.edition.Scorecard().Card.Edition; n != 1 {
		t.Error("work at hand went over to another edition")
	}
	w.keys("Escape")
	w.says("Ana Example")
	w.keys("F2", "F2")
	if n := w.interview.edition.Scorecard().Card.Edition; n != 2 {
		t.Errorf("the next application gets edition %d", n)
	}
}

// What cannot be read as a workbook, or at all, is said.
func TestScorecardThatIsNone(t *testing.T) {
	w := opened(t)
	path := filepath.Join(t.TempDir(), "none.xlsx")
	if err := os.WriteFile(path, []byte("not a workbook"), 0o644); err != nil {
		t.Fatal(err)
	}
	w.take(path)
	w.says("Refused, and nothing changed: 1 thing to look at")
	w.keys("Escape", "Shift+Tab", "Ctrl+A")
	w.answers(path + "x")
	w.says("There is no file or folder of that name.")
}

func TestScorecardsAreWrittenOut(t *testing.T) {
	w := opened(t)
	folder := t.TempDir()
	w.take(folder)
	tapPush(w, "Write out the edition in force")
	tapPush(w, "Write a blank workbook")
	w.says("Written: ", "scorecard-blank.xlsx")
	f, err := os.Open(filepath.Join(folder, workbook.FileName(w.interview.edition.Scorecard().Card)))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	if reading, err := workbook.Read(f); err != nil || reading.Edition == nil || reading.Edition.Fingerprint() != w.interview.edition.Fingerprint() {
		t.Errorf("written out it is another edition: %v", err)
	}
}

// A double tap takes the row that it falls on.
func TestListingDoubleTap(t *testing.T) {
	w := opened(t)
	folder := t.TempDir()
	for _, name := range []string{"a", "b", "c"} {
		if err := os.Mkdir(filepath.Join(folder, name), 0o755); err != nil {
			t.Fatal(err)
		}
	}
	w.take(folder)
	p := w.page.(*scorecardsPage)
	p.list.DoubleTapped(&fyne.PointEvent{Position: fyne.NewPos(20, 2.5*listRowHeight)})
	if p.folder != filepath.Join(folder, "c") {
		t.Errorf("went to %s", p.folder)
	}
}

// tapPush presses the button of that label.
func tapPush(w *window, label string) {
	w.Helper()
	var find func(o fyne.CanvasObject) *push
	find = func(o fyne.CanvasObject) *push {
		var parts []fyne.CanvasObject
		switch o := o.(type) {
		case *push:
			if o.text.Text == label {
				return o
			}
		case *fyne.Container:
			parts = o.Objects
		case fyne.Widget:
			parts = test.WidgetRenderer(o).Objects()
		}
		for _, part := range parts {
			if p := find(part); p != nil {
				return p
			}
		}
		return nil
	}
	b := find(w.canvas.Content())
	if b == nil {
		w.Fatalf("no button %q", label)
	}
	b.Tapped(nil)
	w.wait()
}
