package desk

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/widget"

	"weighhouse/app/words"
	"weighhouse/model"
)

// A nameBox takes a short text, such as a name. Its answer is of no
// characteristic: heard gets the text.
type nameBox struct {
	widget.BaseWidget
	hooks
	entry *entry
	note  *note
	heard func(string)
}

func newNameBox(reader *words.Reader, keys keys, most int) *nameBox {
	b := &nameBox{hooks: hooks{reader: reader, keys: keys}, entry: newEntry(keys, most), note: newNote(1)}
	b.entry.OnChanged = func(text string) {
		b.note.hint("")
		if b.heard != nil {
			b.heard(text)
		}
	}
	b.entry.enter = func() { b.goOn(b.entry) }
	b.entry.moved = func(gained bool) {
		if gained && b.gained != nil {
			b.gained()
		}
	}
	b.entry.full = func(p model.Problem) { b.note.refuse(reader.Sentence(p)) }
	b.ExtendBaseWidget(b)
	return b
}

// putText shows a text without telling of it.
func (b *nameBox) putText(text string) {
	b.note.hint("")
	b.entry.rewrite(text)
}

func (b *nameBox) answer() model.Answer { return model.Answer{} }
func (b *nameBox) put(model.Answer)     {}
func (b *nameBox) line() *note          { return b.note }
func (b *nameBox) on() *hooks           { return &b.hooks }
func (b *nameBox) focus()               { focusOn(b.entry) }
func (b *nameBox) Enable()              { b.entry.Enable() }
func (b *nameBox) Disable()             { b.entry.Disable() }
func (b *nameBox) Disabled() bool       { return b.entry.Disabled() }

func (b *nameBox) CreateRenderer() fyne.WidgetRenderer { return widget.NewSimpleRenderer(b.entry) }
