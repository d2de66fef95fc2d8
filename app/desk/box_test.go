package desk

import (
	"slices"
	"strings"
	"testing"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/driver/desktop"
	"fyne.io/fyne/v2/test"

	"weighhouse/app/words"
	"weighhouse/model"
)

// shown puts boxes with their notes in a window, the last one followed by a
// plain entry, and gives the focus to the first.
func shown(t *testing.T, boxes ...box) (fyne.Canvas, *entry) {
	t.Helper()
	app := test.NewTempApp(t)
	app.Settings().SetTheme(look{})
	after := newEntry(nil, 10)
	column := container.NewVBox()
	for _, b := range boxes {
		column.Add(b)
		column.Add(b.line())
	}
	column.Add(after)
	w := test.NewTempWindow(t, column)
	w.Resize(fyne.NewSize(500, 400))
	lastEntry = nil
	boxes[0].focus()
	return w.Canvas(), after
}

func english() *words.Reader { return words.New(words.Style{}) }

// heard records the answers that a box tells.
func heard(b box) *[]model.Answer {
	var all []model.Answer
	b.on().changed = func(a model.Answer) { all = append(all, a) }
	return &all
}

func given(n int64) model.Answer {
	return model.Answer{State: model.Given, Number: model.Whole(n)}
}

func TestMoneyBox(t *testing.T) {
	b := newNumberBox(english(), nil, numberKind{decimals: 2, unit: "crowns", money: true})
	told := heard(b)
	c, after := shown(t, b)
	typeText(c, "1,2")
	if b.note.text != "" || b.answer().State != model.Missing {
		t.Errorf("half typed: %q, %v", b.note.text, b.answer())
	}
	typeText(c, "50")
	if b.note.text != "one thousand two hundred and fifty crowns" || !same(b.answer(), given(1250)) {
		t.Errorf("%q, %v", b.note.text, b.answer())
	}
	press(c, "Return")
	if c.Focused() != after {
		t.Error("Enter did not go on")
	}
	if b.entry.Text != "1,250" {
		t.Errorf("left as %q", b.entry.Text)
	}
	if !same((*told)[len(*told)-1], given(1250)) {
		t.Errorf("told %v", *told)
	}
	press(c, "Shift+Tab")
	if c.Focused() != b.entry || b.entry.SelectedText() != "1,250" {
		t.Errorf("coming back, %q is selected", b.entry.SelectedText())
	}
	typeText(c, "7")
	if !same(b.answer(), given(7)) {
		t.Errorf("typing over: %v", b.answer())
	}
}

func TestNumberBoxRefuses(t *testing.T) {
	for text, want := range map[string]string{
		"1.250,50": "“1.250,50” does not read here. If it is 1,250.5, write that.",
		"-5":       "“-5” is below zero. Enter zero or more.",
		"1e5":      "“1e5” is short for a longer number. Write it in full.",
		"abc":      "“abc” is not a number. Use the digits 0 to 9 only.",
	} {
		b := newNumberBox(english(), nil, numberKind{decimals: 2})
		c, _ := shown(t, b)
		typeText(c, text)
		if b.note.text != want {
			t.Errorf("%s: %q, want %q", text, b.note.text, want)
		}
		press(c, "Return")
		if c.Focused() != b.entry || b.answer().State != model.Missing || b.entry.Text != text {
			t.Errorf("%s: Enter left the box with %v, %q", text, b.answer(), b.entry.Text)
		}
		press(c, "Tab")
		if c.Focused() == b.entry || b.entry.Text != text || b.note.text != want {
			t.Errorf("%s: Tab lost the text or the message: %q, %q", text, b.entry.Text, b.note.text)
		}
	}
}

func TestNegativeNumber(t *testing.T) {
	b := newNumberBox(english(), nil, numberKind{negative: true})
	c, _ := shown(t, b)
	typeText(c, "-5")
	if !same(b.answer(), given(-5)) {
		t.Errorf("%v, %q", b.answer(), b.note.text)
	}
}

// A figure beyond what is usual counts only once it is confirmed.
func TestSure(t *testing.T) {
	b := newNumberBox(english(), nil, numberKind{})
	b.on().check = func(a model.Answer) []model.Problem {
		if a.Number <= model.Whole(60) {
			return nil
		}
		return []model.Problem{{Code: "outside_accepted", Warning: true, Args: model.Args{"value": a.Number.String(), "least": "1", "most": "60"}}}
	}
	told := heard(b)
	c, after := shown(t, b)
	typeText(c, "400")
	if b.note.text != "400 is unusual: mostly from 1 to 60." || b.answer().State != model.Missing {
		t.Errorf("%q, %v", b.note.text, b.answer())
	}
	press(c, "Return")
	if c.Focused() != b.entry || b.note.text != "400 is unusual: mostly from 1 to 60. Sure? Enter keeps it." {
		t.Errorf("the first Enter: %q", b.note.text)
	}
	press(c, "Return")
	if c.Focused() != after || !same(b.answer(), given(400)) {
		t.Errorf("the second Enter: %v", b.answer())
	}
	if last := (*told)[len(*told)-1]; !same(last, given(400)) {
		t.Errorf("told %v", *told)
	}
	press(c, "Shift+Tab")
	typeText(c, "500")
	if b.answer().State != model.Missing {
		t.Error("another figure counted without being asked about")
	}
	before := len(*told)
	b.put(given(400))
	if !same(b.answer(), given(400)) || len(*told) != before {
		t.Errorf("a figure kept before was questioned again, or told: %v", b.answer())
	}
}

func TestRefusedByThePage(t *testing.T) {
	b := newNumberBox(english(), nil, numberKind{})
	b.on().check = func(model.Answer) []model.Problem {
		return []model.Problem{{Code: "amount_not_in_steps", Args: model.Args{"value": "105", "step": "10"}}}
	}
	c, _ := shown(t, b)
	typeText(c, "105")
	if b.note.text != "105 does not fit: amounts go in steps of 10." || !same(b.answer(), given(105)) {
		t.Errorf("%q, %v", b.note.text, b.answer())
	}
}

func TestUnknownNumber(t *testing.T) {
	b := newNumberBox(english(), nil, numberKind{unknown: "does not know"})
	c, after := shown(t, b)
	typeText(c, "12?")
	if b.answer().State != model.StatedUnknown || b.entry.Text != "does not know" {
		t.Errorf("%v, %q", b.answer(), b.entry.Text)
	}
	press(c, "Return")
	if c.Focused() != after {
		t.Error("Enter did not go on")
	}
	press(c, "Shift+Tab")
	typeText(c, "3")
	if !same(b.answer(), given(3)) {
		t.Errorf("typing over: %v, %q", b.answer(), b.entry.Text)
	}
	press(c, "Ctrl+A", "BackSpace")
	if b.answer().State != model.Missing || b.note.text != "Press ? if the applicant does not know." {
		t.Errorf("emptied: %v, %q", b.answer(), b.note.text)
	}
}

// 10,000 characters from the clipboard are refused, and nothing is lost.
func TestLongPaste(t *testing.T) {
	b := newNumberBox(english(), nil, numberKind{})
	c, _ := shown(t, b)
	typeText(c, "12")
	fyne.CurrentApp().Clipboard().SetContent(strings.Repeat("9", 10_000))
	press(c, "Ctrl+V")
	if b.entry.Text != "12" || b.note.text != "No more than 40 characters fit here." || !same(b.answer(), given(12)) {
		t.Errorf("%d characters, %q, %v", len(b.entry.Text), b.note.text, b.answer())
	}
	fyne.CurrentApp().Clipboard().SetContent("34")
	press(c, "Ctrl+V")
	if !same(b.answer(), given(1234)) {
		t.Errorf("a short paste: %v", b.answer())
	}
	typeText(c, strings.Repeat("1", 100))
	if len(b.entry.Text) != typedMost {
		t.Errorf("%d characters were taken", len(b.entry.Text))
	}
}

func TestDateBox(t *testing.T) {
	b := newDateBox(words.New(words.StyleOf("en-US")), nil, true, "")
	c, after := shown(t, b)
	typeText(c, "3/2/20")
	if b.note.text != "" {
		t.Errorf("half typed: %q", b.note.text)
	}
	press(c, "Return")
	if b.note.text != "“3/2/20”: the year needs four digits, as in 1 Dec 2026." || c.Focused() != b.entry {
		t.Errorf("%q", b.note.text)
	}
	typeText(c, "26")
	want := model.Answer{State: model.Given, Date: model.Date{Year: 2026, Month: 3, Day: 2}}
	if b.note.text != "2 March 2026" || !same(b.answer(), want) {
		t.Errorf("%q, %v", b.note.text, b.answer())
	}
	press(c, "Return")
	if b.entry.Text != "2 Mar 2026" || !same(b.answer(), want) || c.Focused() != after {
		t.Errorf("left as %q, %v", b.entry.Text, b.answer())
	}
	press(c, "Shift+Tab")
	typeText(c, "1985")
	if b.answer().Date != (model.Date{Year: 1985}) {
		t.Errorf("a year alone: %v", b.answer())
	}
}

func attribute(i int) model.Answer { return model.Answer{State: model.Given, Attribute: i} }

func pickerOf(labels ...string) *picker {
	return newPicker(english(), nil, append(options(labels...), unknownOption("unsure")))
}

func TestPickerInARow(t *testing.T) {
	p := pickerOf("Own", "Rent", "Old")
	told := heard(p)
	c, after := shown(t, p)
	if !p.inRow {
		t.Fatal("three short options do not stand in a row")
	}
	for _, step := range []struct {
		do   func()
		want model.Answer
	}{
		{func() { typeText(c, "r") }, attribute(1)},
		{func() { typeText(c, "o") }, attribute(2)},
		{func() { typeText(c, "O") }, attribute(0)},
		{func() { press(c, "Right") }, attribute(1)},
		{func() { press(c, "Left", "Left") }, attribute(0)},
		{func() { typeText(c, "?") }, model.Answer{State: model.StatedUnknown}},
		{func() { typeText(c, "x") }, model.Answer{State: model.StatedUnknown}},
		{func() { press(c, "BackSpace") }, model.Answer{}},
		{func() { press(c, "End") }, model.Answer{State: model.StatedUnknown}},
		{func() { typeText(c, " ") }, attribute(0)},
	} {
		step.do()
		if !same(p.answer(), step.want) {
			t.Errorf("%v, want %v", p.answer(), step.want)
		}
	}
	if len(*told) != 9 {
		t.Errorf("told %d times: %v", len(*told), *told)
	}
	press(c, "Return")
	if c.Focused() != after {
		t.Error("Enter did not go on")
	}
	test.TapCanvas(c, fyne.CurrentApp().Driver().AbsolutePositionForObject(p).AddXY(p.chipWidth("Own")+20, 12))
	if !same(p.answer(), attribute(1)) {
		t.Errorf("a tap on the second: %v", p.answer())
	}
}

func TestPickerList(t *testing.T) {
	long := strings.Repeat("Sells from a fixed stall ", 4)[:80]
	p := pickerOf("Market stall", "Smallholder", "Workshop", "Épicerie", "Carrier", long, "Other")
	c, after := shown(t, p)
	if p.inRow || p.note.text != "Type the first letters, or press Down." {
		t.Fatalf("in a row: %v, %q", p.inRow, p.note.text)
	}
	list := func() *pickerList {
		t.Helper()
		l, ok := c.Focused().(*pickerList)
		if !ok {
			t.Fatalf("no list is open; the focus is on %T", c.Focused())
		}
		return l
	}
	found := func() (labels []string) {
		for _, i := range list().found {
			labels = append(labels, p.options[i].label)
		}
		return labels
	}

	typeText(c, "s")
	if got := found(); !slices.Equal(got, []string{"Smallholder", long, "Market stall"}) {
		t.Errorf("s finds %q", got)
	}
	typeText(c, "t")
	if got := found(); !slices.Equal(got, []string{"Market stall", long}) && !slices.Equal(got, []string{long, "Market stall"}) {
		t.Errorf("st finds %q", got)
	}
	press(c, "BackSpace", "BackSpace")
	if got := found(); len(got) != 8 {
		t.Errorf("nothing typed finds %q", got)
	}
	typeText(c, "EPI")
	press(c, "Return")
	if !same(p.answer(), attribute(3)) || c.Focused() != after {
		t.Errorf("Enter took %v and went to %T", p.answer(), c.Focused())
	}

	p.focus()
	press(c, "Down")
	if l := list(); l.found[l.marked] != 3 {
		t.Errorf("opened at %d", l.marked)
	}
	press(c, "Down", "Escape")
	if !same(p.answer(), attribute(3)) || c.Focused() != p || c.Overlays().Top() != nil {
		t.Errorf("Escape: %v, %T", p.answer(), c.Focused())
	}
	press(c, "Down", "Home", "Up", "Tab")
	if !same(p.answer(), attribute(0)) || c.Focused() != after {
		t.Errorf("Tab took %v", p.answer())
	}
	p.focus()
	typeText(c, "zz")
	if len(list().found) != 0 {
		t.Errorf("zz finds %q", found())
	}
	press(c, "Return")
	list()
	typeText(c, "?")
	if p.answer().State != model.StatedUnknown || c.Focused() != p {
		t.Errorf("?: %v, %T", p.answer(), c.Focused())
	}
}

// A list of many options scrolls with what is marked, and stays inside the
// window.
func TestLongPickerList(t *testing.T) {
	var labels []string
	for i := range 40 {
		labels = append(labels, strings.Repeat(string(rune('a'+i%26)), 3+i))
	}
	p := pickerOf(labels...)
	c, _ := shown(t, p)
	press(c, "Down", "End")
	l := c.Focused().(*pickerList)
	if l.marked != 40 || l.marked < l.top || l.marked >= l.top+l.shown() {
		t.Errorf("marked %d, top %d of %d", l.marked, l.top, l.shown())
	}
	at, size := l.frame()
	if at.X < 0 || at.Y < 0 || at.X+size.Width > c.Size().Width || at.Y+size.Height > c.Size().Height {
		t.Errorf("the list stands at %v, %v", at, size)
	}
	press(c, slices.Repeat([]string{string(fyne.KeyPageUp)}, 5)...)
	if l.marked != 0 || l.top != 0 {
		t.Errorf("marked %d, top %d", l.marked, l.top)
	}
}

func TestYesNoBox(t *testing.T) {
	for _, l := range []struct {
		language, keys string
	}{{"en", "yn"}, {"fr", "on"}, {"es", "sn"}} {
		for _, label := range []string{"", "Ja", "Non"} {
			b := newYesNoBox(words.New(words.Style{Language: l.language}), nil, option{label: label, answer: attribute(0)}, option{answer: attribute(1)}, "")
			c, _ := shown(t, b)
			for i, key := range l.keys {
				typeText(c, string(key))
				if !same(b.answer(), attribute(i)) {
					t.Errorf("%s, %q: %c gave %v", l.language, label, key, b.answer())
				}
			}
		}
	}
}

func worksheet() *worksheetBox {
	kind := worksheetKind{
		lines:    []worksheetLine{{"Stall", model.Adds, model.Week}, {"Food", model.TakesAway, model.Month}},
		decimals: 2, currency: "crowns", unknown: "does not know",
		monthly: func(lines []model.Money) (sum model.Number) {
			for i, m := range lines {
				per := m.Period
				if per == "" {
					per = []model.Period{model.Week, model.Month}[i]
				}
				sum = sum.Plus(m.Amount.Times(model.Whole(per.TimesAYear()*int64(1-2*i)), 6))
			}
			return sum.Over(model.Whole(12), 2)
		},
	}
	return newWorksheetBox(english(), nil, kind)
}

func TestWorksheetBox(t *testing.T) {
	b := worksheet()
	told := heard(b)
	c, after := shown(t, b)
	if !strings.Contains(b.note.text, "day, week, fortnight, month, season, year") {
		t.Errorf("hint %q", b.note.text)
	}
	typeText(c, "120")
	if b.sum.Text != "520\u00a0crowns" || b.note.text != "one hundred and twenty crowns" {
		t.Errorf("%q, %q", b.sum.Text, b.note.text)
	}
	typeText(c, "d")
	if b.sum.Text != "3,650\u00a0crowns" || b.rows[0].entry.Text != "120" {
		t.Errorf("a day: %q, %q", b.sum.Text, b.rows[0].entry.Text)
	}
	press(c, "Return")
	typeText(c, "1.250,5")
	if b.answer().State != model.Missing || b.sum.Text != "" || !strings.HasPrefix(b.note.text, "“1.250,5”") {
		t.Errorf("a bad line: %v, %q, %q", b.answer(), b.sum.Text, b.note.text)
	}
	press(c, "Return")
	if c.Focused() == after {
		t.Error("Enter left a line that does not read")
	}
	press(c, "Ctrl+A")
	typeText(c, "650")
	press(c, "Return")
	want := []model.Money{{Amount: model.Whole(120), Period: model.Day, Set: true}, {Amount: model.Whole(650), Set: true}}
	if a := b.answer(); a.State != model.Given || !slices.Equal(a.Lines, want) || b.sum.Text != "3,000\u00a0crowns" {
		t.Errorf("%v, %q", a, b.sum.Text)
	}
	if c.Focused() != after || b.rows[1].entry.Text != "650" {
		t.Errorf("Enter on the last line: %T, %q", c.Focused(), b.rows[1].entry.Text)
	}
	if last := (*told)[len(*told)-1]; !slices.Equal(last.Lines, want) {
		t.Errorf("told %v", last)
	}

	other := worksheet()
	told = heard(other)
	c, _ = shown(t, other)
	other.put(b.answer())
	if len(*told) > 0 {
		t.Errorf("putting an answer told %v", *told)
	}
	if !slices.Equal(other.answer().Lines, want) || other.rows[0].period.period != model.Day {
		t.Errorf("put: %v", other.answer())
	}
	other.focus()
	typeText(c, "?")
	if other.answer().State != model.StatedUnknown || other.sum.Text != "does not know" || other.rows[0].entry.Text != "" {
		t.Errorf("unknown: %v, %q", other.answer(), other.sum.Text)
	}
	other.put(given(75))
	if !same(other.answer(), given(75)) || other.sum.Text != "75\u00a0crowns" {
		t.Errorf("one figure: %v, %q", other.answer(), other.sum.Text)
	}
}

// The window's keys and shortcuts are heard from inside every box.
func TestKeysFromInside(t *testing.T) {
	var names []fyne.KeyName
	k := keys(func(name fyne.KeyName) bool {
		names = append(names, name)
		return name == fyne.KeyF9
	})
	r := english()
	boxes := []box{
		newNumberBox(r, k, numberKind{}),
		newPicker(r, k, options("One", "Two")),
		newPicker(r, k, options("One", "Two", "Three", "Four", "Five", "Six", "Seven")),
		newWorksheetBox(r, k, worksheet().kind),
	}
	c, _ := shown(t, boxes...)
	saved := 0
	c.AddShortcut(&desktop.CustomShortcut{KeyName: fyne.KeyS, Modifier: fyne.KeyModifierControl}, func(fyne.Shortcut) { saved++ })
	for i, b := range boxes {
		b.focus()
		press(c, "F9", "Ctrl+S")
		if len(names) != i+1 || saved != i+1 {
			t.Errorf("box %d: heard %v, saved %d", i, names, saved)
		}
	}
	boxes[2].focus()
	press(c, "Down", "F9")
	if names[len(names)-1] != fyne.KeyF9 || c.Overlays().Top() != nil {
		t.Errorf("with the list open: %v", names)
	}
}

func TestDisabled(t *testing.T) {
	first := newNumberBox(english(), nil, numberKind{})
	boxes := []box{first, newNumberBox(english(), nil, numberKind{}), pickerOf("One", "Two"), worksheet()}
	for _, b := range boxes[1:] {
		b.Disable()
	}
	c, after := shown(t, boxes...)
	press(c, "Tab")
	if c.Focused() != after {
		t.Errorf("Tab stopped at %T", c.Focused())
	}
	for i, b := range boxes[1:] {
		b.Enable()
		if b.Disabled() {
			t.Errorf("box %d stays disabled", i+1)
		}
	}
}

// A window that comes back to the front leaves a half-typed figure as it was.
func TestWindowComesBack(t *testing.T) {
	b := newNumberBox(english(), nil, numberKind{})
	c, _ := shown(t, b)
	typeText(c, "12")
	b.entry.FocusLost()
	b.entry.FocusGained()
	typeText(c, "50")
	if !same(b.answer(), given(1250)) {
		t.Errorf("%q", b.entry.Text)
	}
}

// Nothing moves: a box and its note take the same room whatever they say.
func TestNothingMoves(t *testing.T) {
	b := newNumberBox(english(), nil, numberKind{decimals: 2, money: true, unit: "crowns"})
	c, _ := shown(t, b)
	before, note := b.MinSize(), b.note.MinSize()
	for _, text := range []string{"1", "999999", ",1.5", strings.Repeat("7", 60)} {
		typeText(c, text)
		if b.MinSize() != before || b.note.MinSize() != note {
			t.Errorf("%q: %v, %v", b.entry.Text, b.MinSize(), b.note.MinSize())
		}
	}
}

func TestWrap(t *testing.T) {
	test.NewTempApp(t).Settings().SetTheme(look{})
	width := fyne.MeasureText("one two", 12, fyne.TextStyle{}).Width
	for _, c := range []struct {
		text  string
		lines int
		want  []string
	}{
		{"one two", 2, []string{"one two", ""}},
		{"one two six", 2, []string{"one two", "six"}},
		{"onetwosixten", 2, []string{"onetwo", "sixten"}},
		{"", 1, []string{""}},
	} {
		got := wrap(c.text, width, 12, fyne.TextStyle{}, c.lines)
		if strings.Join(got, "") != strings.ReplaceAll(c.text, "two six", "twosix") || len(got) != c.lines {
			t.Errorf("%q: %q", c.text, got)
		}
	}
	if got := wrap("one two six ten", width, 12, fyne.TextStyle{}, 1)[0]; !strings.HasSuffix(got, "…") {
		t.Errorf("too long: %q", got)
	}
}

// An amount that the product does not lend keeps the focus until it is mended.
func TestARefusedAnswerKeepsTheFocus(t *testing.T) {
	b := newNumberBox(english(), nil, numberKind{})
	b.on().check = func(a model.Answer) []model.Problem {
		if a.Number <= model.Whole(6000) {
			return nil
		}
		return []model.Problem{{Code: "outside_product", Args: model.Args{"value": a.Number.String(), "least": "200", "most": "6000"}}}
	}
	c, after := shown(t, b)
	typeText(c, "7000")
	press(c, "Return", "Return")
	if c.Focused() != b.entry || b.note.text == "" {
		t.Errorf("Enter left a refused amount, saying %q", b.note.text)
	}
	press(c, "BackSpace")
	press(c, "Return")
	if c.Focused() != after || !same(b.answer(), given(700)) {
		t.Errorf("a mended amount did not go on: %v", b.answer())
	}
}
