package desk

import (
	"slices"
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/theme"
	"fyne.io/fyne/v2/widget"

	"weighhouse/app/words"
	"weighhouse/model"
)

// A worksheetKind tells what a worksheet asks.
type worksheetKind struct {
	lines    []worksheetLine
	decimals int
	currency string
	unknown  string // the label of "does not know"; empty where that is no answer
	// monthly is what lines come to in a month: Item.Monthly.
	monthly func([]model.Money) model.Number
}

// A worksheetLine is one line of money in or out.
type worksheetLine struct {
	label string
	flow  model.Flow
	usual model.Period
}

// A worksheetBox takes lines of money in and out, each a day, a week and so
// on, and shows what they come to in a month. The first letter of a period,
// typed after an amount, changes how often it comes.
type worksheetBox struct {
	widget.BaseWidget
	hooks
	kind worksheetKind
	note *note
	rows []*worksheetRow
	sum  *canvas.Text

	now, told model.Answer
	whole     bool                      // all lines were gone through: an empty one is nothing
	stated    bool                      // does not know
	single    model.Maybe[model.Number] // one figure kept without lines
	confirmed model.Maybe[model.Number] // the sum that was confirmed
	asked     model.Maybe[model.Number]
}

type worksheetRow struct {
	box    *worksheetBox
	line   worksheetLine
	entry  *entry
	period *periodChip
}

func newWorksheetBox(reader *words.Reader, keys keys, kind worksheetKind) *worksheetBox {
	b := &worksheetBox{hooks: hooks{reader: reader, keys: keys}, kind: kind, note: newNote(1), sum: figure(theme.TextSize(), true)}
	b.sum.Alignment = fyne.TextAlignTrailing
	for i, line := range kind.lines {
		row := &worksheetRow{box: b, line: line, entry: newEntry(keys, typedMost)}
		row.period = newPeriodChip(row, line.usual)
		row.entry.OnChanged = func(string) { b.typed(row) }
		row.entry.letter = row.letter
		row.entry.moved = func(gained bool) { b.moved(row, gained) }
		row.entry.enter = func() { b.enter(i) }
		row.entry.full = func(p model.Problem) { b.note.refuse(reader.Sentence(p)) }
		b.rows = append(b.rows, row)
	}
	b.ExtendBaseWidget(b)
	return b
}

func (b *worksheetBox) answer() model.Answer { return b.now }
func (b *worksheetBox) line() *note          { return b.note }
func (b *worksheetBox) on() *hooks           { return &b.hooks }
func (b *worksheetBox) focus()               { b.focusLine(0) }
func (b *worksheetBox) focusLine(line int)   { focusOn(b.rows[line].entry) }
func (b *worksheetBox) Disabled() bool       { return b.rows[0].entry.Disabled() }
func (b *worksheetBox) Enable() {
	for _, r := range b.rows {
		r.entry.Enable()
	}
}

func (b *worksheetBox) Disable() {
	b.note.hint("")
	for _, r := range b.rows {
		r.entry.Disable()
	}
}

// lineAtWork is the line that has the focus, or the first.
func (b *worksheetBox) lineAtWork() int {
	return max(0, slices.IndexFunc(b.rows, func(r *worksheetRow) bool { return r.entry.lit }))
}

func (b *worksheetBox) put(a model.Answer) {
	b.whole = a.State == model.Given
	b.stated, b.single = a.State == model.StatedUnknown, model.Maybe[model.Number]{}
	for i, r := range b.rows {
		text := ""
		r.period.show(r.line.usual)
		if i < len(a.Lines) && a.Lines[i].Set {
			text = b.reader.Amount(a.Lines[i].Amount, b.kind.decimals)
			if p := a.Lines[i].Period; p != "" {
				r.period.show(p)
			}
		}
		r.entry.rewrite(text)
	}
	if a.State == model.Given && a.Lines == nil {
		b.single = model.Some(a.Number)
	}
	b.confirmed = b.total()
	b.read(nil)
	b.told = b.now
}

// money reads one line; an empty one is not set.
func (r *worksheetRow) money() (m model.Money, err error) {
	if r.entry.Text == "" {
		return m, nil
	}
	m.Amount, err = r.box.reader.ParseNumber(r.entry.Text, r.box.kind.decimals)
	if err == nil && m.Amount < 0 {
		err = model.Problem{Code: "number_negative", Args: model.Args{"value": r.entry.Text}}
	}
	if r.period.period != r.line.usual {
		m.Period = r.period.period
	}
	m.Set = true
	return m, err
}

// lines reads all lines, with the first that does not read.
func (b *worksheetBox) lines() (lines []model.Money, bad *worksheetRow, err error) {
	for _, r := range b.rows {
		m, e := r.money()
		if e != nil && err == nil {
			bad, err = r, e
		}
		lines = append(lines, m)
	}
	return lines, bad, err
}

// total is what the lines come to, if they read and there are any.
func (b *worksheetBox) total() (sum model.Maybe[model.Number]) {
	lines, _, err := b.lines()
	if err == nil && slices.ContainsFunc(lines, func(m model.Money) bool { return m.Set }) {
		return model.Some(b.kind.monthly(lines))
	}
	return b.single
}

// look reads everything and tells what is new.
func (b *worksheetBox) look(typing *worksheetRow) {
	b.read(typing)
	if !same(b.now, b.told) || !slices.Equal(b.now.Lines, b.told.Lines) {
		b.told = b.now
		b.tell(b.now)
	}
}

// read reads everything and says what there is to say; typing is the row at
// work, whose half-typed amount is let be, or nil.
func (b *worksheetBox) read(typing *worksheetRow) {
	lines, bad, err := b.lines()
	sum := b.total()
	b.now = model.Answer{}
	hint := ""
	if typing != nil {
		hint = typing.hint()
	}
	b.note.hint(hint)
	switch {
	case err != nil:
		sum = model.Maybe[model.Number]{}
		if bad != typing || !b.reader.Unfinished(bad.entry.Text, b.kind.decimals) {
			sentence := b.reader.Sentence(err.(model.Problem))
			if bad != typing {
				sentence = bad.line.label + ": " + sentence
			}
			b.note.refuse(sentence)
		}
	case b.stated:
		b.now = model.Answer{State: model.StatedUnknown}
	case b.single.Set:
		b.now = model.Answer{State: model.Given, Number: b.single.Value}
	case sum.Set && !b.whole && slices.ContainsFunc(lines, func(m model.Money) bool { return !m.Set }):
		// An officer on the way through the lines must not be told a result.
		if typing == nil {
			b.note.ask(b.reader.T("box.lines_open"))
		}
	case sum.Set:
		b.weigh(model.Answer{State: model.Given, Lines: lines}, sum)
	}
	switch {
	case b.stated:
		setFigure(b.sum, b.kind.unknown, colorQuiet)
	case sum.Set:
		setFigure(b.sum, b.reader.Money(sum.Value, b.kind.decimals, b.kind.currency), theme.ColorNameForeground)
	default:
		setFigure(b.sum, "", theme.ColorNameForeground)
	}
}

func (b *worksheetBox) weigh(a model.Answer, sum model.Maybe[model.Number]) {
	v := b.judge(a)
	switch {
	case v.refusal != "":
		b.now = a
		b.note.refuse(v.refusal)
	case v.question != "" && b.confirmed != sum:
		if b.asked == sum {
			v.question = b.reader.T("box.sure", "question", v.question)
		}
		b.note.ask(v.question)
	default:
		b.now = a
	}
}

// hint is a row's amount in words, or how to change its period.
func (r *worksheetRow) hint() string {
	m, err := r.money()
	if err == nil && m.Set {
		return r.box.reader.InWords(m.Amount, r.box.kind.decimals, r.box.kind.currency)
	}
	var names []string
	for _, p := range periods() {
		names = append(names, r.box.reader.Name(p))
	}
	return r.box.reader.T("box.period_keys", "keys", strings.Join(names, ", "))
}

func (b *worksheetBox) typed(r *worksheetRow) {
	b.stated, b.single = false, model.Maybe[model.Number]{}
	b.look(r)
}

func (b *worksheetBox) moved(r *worksheetRow, gained bool) {
	if gained {
		if b.gained != nil {
			b.gained()
		}
		b.look(r)
		return
	}
	if m, err := r.money(); err == nil && m.Set {
		r.entry.rewrite(b.reader.Amount(m.Amount, b.kind.decimals))
	}
	b.whole = b.whole || r == b.rows[len(b.rows)-1]
	b.look(nil)
}

func (b *worksheetBox) enter(i int) {
	if i+1 < len(b.rows) {
		focusOn(b.rows[i+1].entry)
		return
	}
	b.whole = true
	sum := b.total()
	if b.asked == sum && sum.Set {
		b.confirmed = sum
	}
	b.asked = sum
	b.look(nil)
	if _, _, err := b.lines(); err == nil && (b.now.State != model.Missing || !sum.Set) {
		b.goOn(b.rows[i].entry)
	}
}

// letter takes the first letter of a period, or the key of "does not know".
func (r *worksheetRow) letter(c rune) bool {
	if c == '?' && r.box.kind.unknown != "" {
		r.box.put(model.Answer{State: model.StatedUnknown})
		r.box.tell(r.box.now)
		return true
	}
	all := periods()
	from := slices.Index(all, r.period.period)
	for step := range all {
		p := all[(from+1+step)%len(all)]
		if strings.HasPrefix(words.Fold(r.box.reader.Name(p)), words.Fold(string(c))) {
			r.turn(p)
			return true
		}
	}
	return false
}

// turn changes how often a line comes.
func (r *worksheetRow) turn(p model.Period) {
	r.period.show(p)
	r.box.look(r)
}

func periods() []model.Period {
	return []model.Period{model.Day, model.Week, model.Fortnight, model.Month, model.Season, model.Year}
}

func (b *worksheetBox) CreateRenderer() fyne.WidgetRenderer {
	c := container.New(worksheetLayout{})
	for _, r := range b.rows {
		sign := "+"
		if r.line.flow == model.TakesAway {
			sign = "–" // the font has no minus sign
		}
		label := widget.NewLabel(r.line.label)
		label.Truncation = fyne.TextTruncateEllipsis
		c.Objects = append(c.Objects, widget.NewLabel(sign), label, r.entry, r.period)
	}
	each := widget.NewLabel(b.reader.T("box.each_month"))
	each.TextStyle.Bold = true
	c.Objects = append(c.Objects, each, b.sum)
	return widget.NewSimpleRenderer(c)
}

// worksheetLayout sets rows of sign, label, amount and period, and under them
// the month's sum, ranged right with the amounts.
type worksheetLayout struct{}

const (
	signRoom, amountRoom, periodRoom = 22, 118, 108
	rowGap                           = 2
)

func (worksheetLayout) MinSize(objects []fyne.CanvasObject) fyne.Size {
	rows := float32(len(objects)/4 + 1)
	return fyne.NewSize(signRoom+120+amountRoom+periodRoom, rows*(boxHeight()+rowGap))
}

func (worksheetLayout) Layout(objects []fyne.CanvasObject, size fyne.Size) {
	height := boxHeight()
	label := size.Width - signRoom - amountRoom - periodRoom
	y := float32(0)
	for ; len(objects) > 2; objects = objects[4:] {
		place(objects[0], 0, y, signRoom, height)
		place(objects[1], signRoom, y, label, height)
		place(objects[2], signRoom+label, y, amountRoom, height)
		place(objects[3], signRoom+label+amountRoom, y, periodRoom, height)
		y += height + rowGap
	}
	place(objects[0], signRoom, y, label, height)
	place(objects[1], signRoom+label-60, y, amountRoom+60-theme.InnerPadding(), height)
}

// A periodChip says how often a line comes; a click changes it.
type periodChip struct {
	widget.BaseWidget
	row    *worksheetRow
	period model.Period
	text   *canvas.Text
}

func newPeriodChip(r *worksheetRow, p model.Period) *periodChip {
	c := &periodChip{row: r, text: canvas.NewText("", shade(theme.ColorNameForeground))}
	c.ExtendBaseWidget(c)
	c.show(p)
	return c
}

func (c *periodChip) show(p model.Period) {
	c.period = p
	c.text.TextStyle.Bold = p != c.row.line.usual
	setFigure(c.text, c.row.box.reader.T("box.per", "period", c.row.box.reader.Name(p)), theme.ColorNameForeground)
}

func (c *periodChip) Tapped(*fyne.PointEvent) {
	if c.row.box.Disabled() {
		return
	}
	all := periods()
	c.row.turn(all[(slices.Index(all, c.period)+1)%len(all)])
}

func (c *periodChip) CreateRenderer() fyne.WidgetRenderer {
	return widget.NewSimpleRenderer(container.NewBorder(nil, nil, container.NewGridWrap(fyne.NewSize(6, 1)), nil, c.text))
}
