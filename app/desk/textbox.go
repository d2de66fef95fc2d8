package desk

import (
	"weighhouse/app/words"
	"weighhouse/model"

	"fyne.io/fyne/v2"
)

// newTextBox takes free text of at most that many characters, such as a name
// or, of several lines, a note. Its own OnChanged and enter are for the page;
// what does not fit is said in the note.
func newTextBox(reader *words.Reader, keys keys, most, lines int) (*entry, *note) {
	e, n := newEntry(keys, most), newNote(1)
	if lines > 1 {
		e.MultiLine = true
		e.Wrapping = fyne.TextWrapWord
		e.SetMinRowsVisible(lines)
	}
	e.full = func(p model.Problem) { n.refuse(reader.Sentence(p)) }
	return e, n
}
