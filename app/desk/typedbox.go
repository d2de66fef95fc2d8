package desk

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"weighhouse/app/words"
	"weighhouse/model"
)

// A typedBox is a box that reads what is typed into it: a number, money or a
// date.
type typedBox struct {
	widget.BaseWidget
	hooks
	entry   *entry
	note    *note
	unit    string
	unknown string // the label of "does not know"; empty where it is not allowed

	parse      func(string) (model.Answer, error)
	unfinished func(string) bool
	write      func(model.Answer) string
	words      func(model.Answer) string // said beneath a sound answer

	now       model.Answer
	told      model.Answer
	confirmed string // the text that was confirmed, or was kept before
	asked     string // the text that Enter has asked about
	refused   bool   // the answer reads, but cannot stand
}

// typedMost is how many characters a number or a date box holds.
const typedMost = 40

func newTypedBox(reader *words.Reader, keys keys) *typedBox {
	b := &typedBox{hooks: hooks{reader: reader, keys: keys}, entry: newEntry(keys, typedMost), note: newNote(1)}
	b.entry.OnChanged = func(string) { b.look(false) }
	b.entry.enter = b.enter
	b.entry.moved = b.moved
	b.entry.letter = b.letter
	b.entry.full = func(p model.Problem) { b.note.refuse(reader.Sentence(p)) }
	b.ExtendBaseWidget(b)
	return b
}

// A numberKind tells what a number box takes.
type numberKind struct {
	decimals int
	negative bool
	// unit stands behind the box. For money it is the currency, and the
	// amount is said in words beneath.
	unit  string
	money bool
	// unknown is the label of "does not know", empty where that is no answer.
	unknown string
}

// newNumberBox takes a number or an amount of money.
func newNumberBox(reader *words.Reader, keys keys, kind numberKind) *typedBox {
	b := newTypedBox(reader, keys)
	b.unit, b.unknown = kind.unit, kind.unknown
	b.parse = func(text string) (model.Answer, error) {
		n, err := reader.ParseNumber(text, kind.decimals)
		if err == nil && n < 0 && !kind.negative {
			err = model.Problem{Code: "number_negative", Args: model.Args{"value": text}}
		}
		return model.Answer{State: model.Given, Number: n}, err
	}
	b.unfinished = func(text string) bool {
		return reader.Unfinished(text, kind.decimals) && (kind.negative || text[0] != '-')
	}
	b.write = func(a model.Answer) string {
		if kind.money {
			return reader.Amount(a.Number, kind.decimals)
		}
		return reader.Number(a.Number, words.Shortest)
	}
	if kind.money {
		b.words = func(a model.Answer) string { return reader.InWords(a.Number, kind.decimals, kind.unit) }
	}
	return b
}

// newDateBox takes a date, or a year alone if that is allowed, and says its
// reading beneath.
func newDateBox(reader *words.Reader, keys keys, yearAlone bool, unknown string) *typedBox {
	b := newTypedBox(reader, keys)
	b.unknown = unknown
	b.parse = func(text string) (model.Answer, error) {
		d, err := reader.ParseDate(text, yearAlone)
		return model.Answer{State: model.Given, Date: d}, err
	}
	// A date cannot be judged before it is whole.
	b.unfinished = func(text string) bool { return len(text) < typedMost }
	b.write = func(a model.Answer) string { return reader.Date(a.Date) }
	b.words = func(a model.Answer) string { return reader.DateInFull(a.Date) }
	return b
}

func (b *typedBox) answer() model.Answer { return b.now }
func (b *typedBox) line() *note          { return b.note }
func (b *typedBox) on() *hooks           { return &b.hooks }
func (b *typedBox) focus()               { focusOn(b.entry) }
func (b *typedBox) Enable()              { b.entry.Enable() }
func (b *typedBox) Disabled() bool       { return b.entry.Disabled() }

// Disable greys the box, for a question that is not asked of this applicant.
func (b *typedBox) Disable() {
	b.note.hint("")
	b.entry.Disable()
}

func (b *typedBox) put(a model.Answer) {
	text := ""
	switch a.State {
	case model.Given:
		text = b.write(a)
	case model.StatedUnknown:
		text = b.unknown
	}
	b.confirmed = text
	b.entry.rewrite(text)
	b.read(true)
	b.told = b.now
}

// look reads the text and tells what is new.
func (b *typedBox) look(whole bool) {
	b.read(whole)
	if !same(b.now, b.told) {
		b.told = b.now
		b.tell(b.now)
	}
}

// read reads the text and says what there is to say. While it is being typed
// a number that may still become right is let be; whole is true when the
// typing has ended.
func (b *typedBox) read(whole bool) {
	text := b.entry.Text
	b.now, b.refused = model.Answer{}, false
	switch {
	case text == "":
		hint := ""
		if b.unknown != "" && !b.Disabled() {
			hint = b.reader.T("box.unknown_key")
		}
		b.note.hint(hint)
	case text == b.unknown:
		b.now = model.Answer{State: model.StatedUnknown}
		b.note.hint("")
	default:
		a, err := b.parse(text)
		if err == nil {
			b.weigh(a, text, whole)
			break
		}
		b.note.hint("")
		if whole || !b.unfinished(text) {
			b.note.refuse(b.reader.Sentence(err.(model.Problem)))
		}
	}
}

// weigh takes an answer that reads, unless it is questioned.
func (b *typedBox) weigh(a model.Answer, text string, whole bool) {
	v := b.judge(a)
	switch {
	case v.refusal != "":
		b.now, b.refused = a, true
		b.note.refuse(v.refusal)
	case v.question != "" && b.confirmed != text:
		if whole {
			v.question = b.reader.T("box.sure", "question", v.question)
		}
		b.note.ask(v.question)
	case v.question != "":
		b.now = a
		b.note.ask(v.question)
	default:
		b.now = a
		text := ""
		if b.words != nil {
			text = b.words(a)
		}
		b.note.hint(text)
	}
}

func same(a, b model.Answer) bool {
	return a.State == b.State && a.Attribute == b.Attribute && a.Number == b.Number && a.Date == b.Date
}

func (b *typedBox) enter() {
	text := b.entry.Text
	if b.asked == text && text != "" {
		b.confirmed = text
	}
	b.asked = text
	b.look(true)
	if !b.refused && (text == "" || b.now.State != model.Missing) {
		b.goOn(b.entry)
	}
}

// moved tidies the text when the focus leaves: 1250 becomes 1,250.
func (b *typedBox) moved(gained bool) {
	if gained {
		if b.gained != nil {
			b.gained()
		}
		return
	}
	if b.now.State == model.Given {
		tidy := b.write(b.now)
		if b.confirmed == b.entry.Text {
			b.confirmed = tidy
		}
		b.entry.rewrite(tidy)
	}
	b.look(true)
}

// letter takes the key of "does not know".
func (b *typedBox) letter(c rune) bool {
	if c != '?' || b.unknown == "" {
		return false
	}
	b.entry.SetText(b.unknown)
	b.entry.TypedShortcut(&fyne.ShortcutSelectAll{})
	return true
}

func (b *typedBox) CreateRenderer() fyne.WidgetRenderer {
	if b.unit == "" {
		return widget.NewSimpleRenderer(b.entry)
	}
	return widget.NewSimpleRenderer(container.NewBorder(nil, nil, nil, widget.NewLabel(b.unit), b.entry))
}
