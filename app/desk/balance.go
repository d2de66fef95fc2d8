package desk

import (
	"math"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/driver/desktop"
	"fyne.io/fyne/v2/theme"
	"fyne.io/fyne/v2/widget"

	"weighhouse/app/words"
	"weighhouse/model"
)

// A balance draws what speaks for and against: a horizontal axis of log-odds
// with its ticks in PD, the score bands behind it, and from the development
// average a step for each answer, towards safer (left) or riskier (right),
// down to where the applicant stands. A step that is still open is drawn from
// its lowest to its highest, and widens all below it. Safer steps are hollow
// and riskier ones filled, so it reads without colour.
//
// Up and Down, or the pointer, choose a row; the line beneath words it.
type balance struct {
	widget.BaseWidget
	reader  *words.Reader
	labels  *words.Labels
	edition *model.Edition
	rows    []balanceRow
	centre  float64 // log-odds
	chosen  int     // -1 for none
	keys    keys
	focused bool
}

// A balanceRow is one step and where it starts and ends, lowest and highest.
type balanceRow struct {
	step                 model.Step
	fromLo, toLo         float64
	fromHi, toHi         float64
	label, answer, words string
}

func newBalance(reader *words.Reader, labels *words.Labels, e *model.Edition) *balance {
	b := &balance{reader: reader, labels: labels, edition: e, centre: e.Centre().Float(), chosen: -1}
	b.ExtendBaseWidget(b)
	return b
}

// show draws the steps of answers, complete or not.
func (b *balance) show(a *model.Answers) {
	b.rows = b.rows[:0]
	lo, hi := b.centre, b.centre
	for _, s := range b.edition.Steps(a) {
		r := balanceRow{step: s, fromLo: lo, fromHi: hi}
		lo += (s.Lowest - s.Average).Float()
		hi += (s.Highest - s.Average).Float()
		r.toLo, r.toHi = lo, hi
		item := &b.edition.Items()[s.Index]
		r.label = b.labels.Question(item)
		if !s.Open() {
			r.answer = answerWords(b.reader, b.labels, item, s, a)
		}
		r.words = stepWords(b.reader, r)
		b.rows = append(b.rows, r)
	}
	b.chosen = min(b.chosen, len(b.rows)-1)
	b.Refresh()
}

// text is the same in lines of plain words: the average, each step in its
// order, and where the applicant stands.
func (b *balance) text() []string {
	lines := []string{b.reader.T("balance.centre", "pd", b.edition.Centre().PD())}
	for _, r := range b.rows {
		lines = append(lines, r.words)
	}
	lo, hi := b.ends()
	if lo == hi {
		return append(lines, b.reader.T("balance.end", "pd", pdAt(lo)))
	}
	return append(lines, b.reader.T("balance.ends", "low", pdAt(lo), "high", pdAt(hi)))
}

// ends are the log-odds where the steps end.
func (b *balance) ends() (lo, hi float64) {
	if len(b.rows) == 0 {
		return b.centre, b.centre
	}
	last := b.rows[len(b.rows)-1]
	return last.toLo, last.toHi
}

func pdAt(logOdds float64) model.PD {
	return model.LogOdds(math.Round(logOdds * float64(model.LogOddsOne))).PD()
}

// stepWords says what one answer adds or takes, as a change of the odds: e to
// the power of its distance from the average.
func stepWords(r *words.Reader, row balanceRow) string {
	question, answer := labelled(r, row.label), row.answer
	if row.step.Open() {
		return r.T("balance.open", "question", question)
	}
	above := row.step.Above().Float()
	times := model.Number(math.Round(math.Exp(math.Abs(above)) * float64(model.One))).Round(2)
	switch {
	case times == model.One:
		return r.T("balance.level", "question", question, "answer", answer)
	case above > 0:
		return r.T("balance.riskier", "question", question, "answer", answer, "times", r.Number(times, 2))
	}
	return r.T("balance.safer", "question", question, "answer", answer, "times", r.Number(times, 2))
}

// answerWords is the answer behind a step: its attribute's label, or the number.
func answerWords(r *words.Reader, l *words.Labels, item *model.Item, s model.Step, a *model.Answers) string {
	if label := l.Attribute(item, s.Attribute); label != "" {
		return label
	}
	switch {
	case item.Kind == model.YesNo && s.Attribute >= 0:
		return r.T("yes_no." + item.Attributes[s.Attribute].Code)
	case item.Kind != model.Computed && a.At(item.Index).State == model.Given:
		return numberWords(r, l, item, a.At(item.Index).Number)
	}
	return ""
}

// Focus and the pointer.

func (b *balance) FocusGained() {
	b.focused = true
	b.choose(max(b.chosen, 0))
}
func (b *balance) FocusLost()                    { b.focused = false; b.Refresh() }
func (b *balance) TypedRune(rune)                {}
func (b *balance) MouseIn(e *desktop.MouseEvent) { b.MouseMoved(e) }
func (b *balance) MouseOut()                     {}

func (b *balance) TypedKey(e *fyne.KeyEvent) {
	switch e.Name {
	case fyne.KeyDown:
		b.choose(min(b.chosen+1, len(b.rows)-1))
	case fyne.KeyUp:
		b.choose(max(b.chosen-1, 0))
	case fyne.KeyHome:
		b.choose(0)
	case fyne.KeyEnd:
		b.choose(len(b.rows) - 1)
	default:
		b.keys.take(e)
	}
}

func (b *balance) MouseMoved(e *desktop.MouseEvent) {
	i := int((e.Position.Y - balanceHead) / balanceRowHeight)
	if i >= 0 && i < len(b.rows) && i != b.chosen {
		b.choose(i)
	}
}

func (b *balance) choose(i int) {
	b.chosen = i
	b.Refresh()
}

const (
	balanceHead      = 24 // band labels
	balanceRowHeight = 21
	balanceEnd       = 36 // the end mark, and what the average line is
	balanceFoot      = 78 // the axis, its ticks and the words of the chosen row
)

func (b *balance) CreateRenderer() fyne.WidgetRenderer {
	r := &balanceRenderer{b: b}
	r.words = widget.NewLabel("")
	r.words.Wrapping = fyne.TextWrapWord
	return r
}

type balanceRenderer struct {
	b       *balance
	objects []fyne.CanvasObject
	words   *widget.Label
}

func (r *balanceRenderer) Objects() []fyne.CanvasObject { return r.objects }
func (r *balanceRenderer) Destroy()                     {}
func (r *balanceRenderer) MinSize() fyne.Size {
	return fyne.NewSize(560, balanceHead+balanceRowHeight*float32(len(r.b.rows))+balanceEnd+balanceFoot)
}
func (r *balanceRenderer) Refresh() {
	r.Layout(r.b.Size())
	canvas.Refresh(r.b)
}

// Layout draws everything anew; it happens when answers change or the window
// does, and when another row is chosen.
func (r *balanceRenderer) Layout(size fyne.Size) {
	r.objects = r.objects[:0]
	if size.Width < 1 || len(r.b.rows) == 0 {
		return
	}
	a := r.axis(size)
	r.bands(a)
	r.ticks(a)
	for i := range r.b.rows {
		r.row(a, i)
	}
	r.end(a)
	r.wording(a, size)
}

// An axis places log-odds between left and right.
type axis struct {
	left, right, top, bottom float32
	lo, hi                   float64
}

func (a axis) x(l float64) float32 {
	l = max(a.lo, min(a.hi, l))
	return a.left + float32((l-a.lo)/(a.hi-a.lo))*(a.right-a.left)
}

// axis spans all steps with some room, and at least from a half to a double
// of the odds.
func (r *balanceRenderer) axis(size fyne.Size) axis {
	a := axis{left: min(size.Width*0.4, 330), right: size.Width - 8, top: balanceHead,
		bottom: balanceHead + balanceRowHeight*float32(len(r.b.rows)) + balanceEnd, lo: r.b.centre - 0.7, hi: r.b.centre + 0.7}
	for _, row := range r.b.rows {
		a.lo, a.hi = min(a.lo, row.toLo), max(a.hi, row.toHi)
	}
	room := (a.hi - a.lo) * 0.06
	a.lo, a.hi = a.lo-room, a.hi+room
	return a
}

func (r *balanceRenderer) add(o fyne.CanvasObject, x, y, w, h float32) {
	o.Move(fyne.NewPos(x, y))
	o.Resize(fyne.NewSize(w, h))
	r.objects = append(r.objects, o)
}

func (r *balanceRenderer) line(x1, y1, x2, y2, width float32, c fyne.ThemeColorName) {
	l := canvas.NewLine(shade(c))
	l.StrokeWidth = width
	l.Position1, l.Position2 = fyne.NewPos(x1, y1), fyne.NewPos(x2, y2)
	r.objects = append(r.objects, l)
}

// print puts a text with its anchor (0 left, 0.5 middle, 1 right) at x, cut to
// the width given.
func (r *balanceRenderer) print(text string, x, y, most, anchor float32, c fyne.ThemeColorName, style fyne.TextStyle) {
	t := canvas.NewText(shorten(text, most, 12, style), shade(c))
	t.TextSize, t.TextStyle = 12, style
	w := t.MinSize().Width
	r.add(t, x-w*anchor, y, w, 16)
}

// bands tints every other score band and names each where there is room.
func (r *balanceRenderer) bands(a axis) {
	list := r.b.edition.Scorecard().Bands
	for i, band := range list {
		from, to := a.lo, a.hi
		if band.From.Or(0) > 0 {
			from = band.From.Value.LogOdds()
		}
		if below := band.Below.Or(model.PDOne); below < model.PDOne {
			to = below.LogOdds()
		}
		if to <= a.lo || from >= a.hi {
			continue
		}
		x, end := a.x(from), a.x(to)
		if i%2 == 0 {
			r.add(canvas.NewRectangle(shade(colorBand)), x, 0, end-x, a.bottom)
		}
		if from > a.lo {
			r.line(x, 0, x, a.bottom, 1, theme.ColorNameSeparator)
		}
		if end-x < 26 {
			continue
		}
		m := newMark(14)
		m.of = band.Recommendation
		r.add(m, x+4, 4, 14, 14)
		if end-x > 60 {
			label, _ := r.b.labels.Band(i)
			r.print(label, x+22, 3, end-x-24, 0, colorQuiet, fyne.TextStyle{})
		}
	}
}

// tickPDs are the PDs that may have a tick, in billionths.
var tickPDs = []model.PD{1e6, 2e6, 5e6, 1e7, 2e7, 3e7, 5e7, 7e7, 1e8, 1.5e8, 2e8, 3e8, 4e8, 5e8, 6e8, 7e8, 8e8, 9e8, 9.5e8, 9.8e8, 9.9e8}

func (r *balanceRenderer) ticks(a axis) {
	r.line(a.left, a.bottom, a.right, a.bottom, 1, colorQuiet)
	last := a.left - 100
	for _, pd := range tickPDs {
		l := pd.LogOdds()
		x := a.x(l)
		if l < a.lo || l > a.hi || x-last < 46 || x > a.right-16 {
			continue
		}
		last = x
		r.line(x, a.bottom, x, a.bottom+4, 1, colorQuiet)
		r.print(r.b.reader.Rate(model.Rate(pd)), x, a.bottom+4, 60, 0.5, colorQuiet, fyne.TextStyle{})
	}
	r.print(r.b.reader.T("balance.axis"), 4, a.bottom+4, a.left-30, 0, colorQuiet, fyne.TextStyle{})
	r.print(r.b.reader.T("balance.sides"), 4, 3, a.left-14, 0, colorQuiet, fyne.TextStyle{})
	x := a.x(r.b.centre)
	r.line(x, a.top-2, x, a.bottom, 1, colorQuiet)
	r.print(r.b.reader.T("balance.average"), x+4, a.bottom-16, a.right-x-4, 0, colorQuiet, fyne.TextStyle{})
}

func (r *balanceRenderer) row(a axis, i int) {
	row := r.b.rows[i]
	y := a.top + balanceRowHeight*float32(i)
	if i == r.b.chosen {
		ground := colorCurrent
		if r.b.focused {
			ground = theme.ColorNameFocus
		}
		r.add(canvas.NewRectangle(shade(ground)), 0, y, a.left-6, balanceRowHeight)
	}
	r.print(row.label, 4, y+2, a.left-14, 0, theme.ColorNameForeground, fyne.TextStyle{Bold: i == r.b.chosen})
	if row.step.Open() {
		x, end := a.x(row.toLo), a.x(row.toHi)
		bar := canvas.NewRectangle(shade(colorCurrent))
		bar.StrokeColor, bar.StrokeWidth = shade(colorQuiet), 1
		r.add(bar, x, y+7, end-x, 7)
		return
	}
	// The step is drawn on the middle of what may be.
	from, to := a.x((row.fromLo+row.fromHi)/2), a.x((row.toLo+row.toHi)/2)
	r.line(from, y-3, from, y+17, 1, theme.ColorNameSeparator)
	bar := canvas.NewRectangle(shade(colorStep))
	if to < from {
		bar.FillColor = shade(colorRaised)
		bar.StrokeColor, bar.StrokeWidth = shade(colorStep), 1.5
	}
	r.add(bar, min(from, to), y+5, max(max(from, to)-min(from, to), 1.5), 11)
	// An arrow tells the direction where the bar is too short to.
	if d := to - from; d > 3 || d < -3 {
		tip, back := to+4, to-1
		if d < 0 {
			tip, back = to-4, to+1
		}
		r.line(back, y+6, tip, y+10.5, 1.5, colorStep)
		r.line(tip, y+10.5, back, y+15, 1.5, colorStep)
	}
	r.answer(a, row, min(from, to), max(from, to), y)
}

// answer stands beside its step, on the side where there is room.
func (r *balanceRenderer) answer(a axis, row balanceRow, left, right, y float32) {
	const room = 10
	before, after := left-a.left-room, a.right-right-room
	if after >= before || after > 220 {
		r.print(row.answer, right+room, y+2, after, 0, colorQuiet, fyne.TextStyle{})
	} else {
		r.print(row.answer, left-room, y+2, before, 1, colorQuiet, fyne.TextStyle{})
	}
}

// end marks where the applicant stands.
func (r *balanceRenderer) end(a axis) {
	lo, hi := r.b.ends()
	y := a.bottom - balanceEnd + 2
	x, end := a.x(lo), a.x(hi)
	r.line(a.x((lo+hi)/2), y-2, a.x((lo+hi)/2), y+18, 2, theme.ColorNamePrimary)
	bar := canvas.NewRectangle(shade(theme.ColorNamePrimary))
	r.add(bar, x-3, y+4, end-x+6, 8)
	text := r.b.reader.T("balance.here", "pd", pdAt(lo))
	if hi-lo > 1e-9 {
		text = r.b.reader.T("balance.between", "low", pdAt(lo), "high", pdAt(hi))
	}
	r.print(text, 4, y, a.left-14, 0, theme.ColorNamePrimary, fyne.TextStyle{Bold: true})
}

// wording says the chosen row in plain words, or what the middle is.
func (r *balanceRenderer) wording(a axis, size fyne.Size) {
	text := r.b.reader.T("balance.centre", "pd", r.b.edition.Centre().PD())
	if i := r.b.chosen; i >= 0 && i < len(r.b.rows) {
		text = r.b.rows[i].words
	}
	if r.words.Text != text {
		r.words.SetText(text)
	}
	r.add(r.words, 0, a.bottom+20, size.Width, 44)
}
