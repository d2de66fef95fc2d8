package desk

import (
	"fyne.io/fyne/v2"

	"weighhouse/app/words"
	"weighhouse/model"
)

// A box is where one question is answered: a choice, a number, money, a date,
// yes or no, or a worksheet. It is put on a page beside the question, and its
// note, which keeps its room whether it says something or not, beneath.
//
// Enter goes on; a message appears at once and nothing moves. An answer beyond
// what is usual is questioned: the first Enter asks, the second keeps it, and
// until then it does not count.
type box interface {
	fyne.CanvasObject
	fyne.Disableable
	// answer is Missing while nothing is entered, the text does not read, or
	// it is questioned and not confirmed.
	answer() model.Answer
	// put shows an answer kept before; it counts as confirmed.
	put(model.Answer)
	// draft is what is typed and no answer yet; resume goes on from it, with the
	// line at work or notTyping.
	draft() draft
	resume(d draft, line int)
	// focus takes the keyboard.
	focus()
	// line is the note.
	line() *note
	// on are the page's hooks, to be set before the box is shown.
	on() *hooks
}

// hooks are what a page hears from a box; each may be nil.
type hooks struct {
	reader *words.Reader
	keys   keys
	// check lists what the edition or the page has against an answer, before
	// it counts. A warning is asked about.
	check func(model.Answer) []model.Problem
	// changed hears every change of the answer.
	changed func(model.Answer)
	// done hears Enter; without it the focus goes on by itself.
	done func()
	// gained hears the focus come, to scroll to the box.
	gained func()
}

// A verdict is what stands against an answer, worded; both parts are empty
// for a sound one.
type verdict struct{ refusal, question string }

func (h *hooks) judge(a model.Answer) (v verdict) {
	if h.check == nil || a.State != model.Given {
		return v
	}
	for _, p := range h.check(a) {
		switch {
		case !p.Warning && v.refusal == "":
			v.refusal = h.reader.Sentence(p)
		case p.Warning && v.question == "":
			v.question = h.reader.Sentence(p)
		}
	}
	return v
}

func (h *hooks) tell(a model.Answer) {
	if h.changed != nil {
		h.changed(a)
	}
}

// goOn leaves the box after Enter.
func (h *hooks) goOn(from fyne.CanvasObject) {
	if h.done != nil {
		h.done()
		return
	}
	if c := canvasOf(from); c != nil {
		c.FocusNext()
	}
}

// canvasOf is where an object is drawn. One that was never painted is not
// known to the driver yet; the program has but one window.
func canvasOf(o fyne.CanvasObject) fyne.Canvas {
	driver := fyne.CurrentApp().Driver()
	if c := driver.CanvasForObject(o); c != nil {
		return c
	}
	if windows := driver.AllWindows(); len(windows) > 0 {
		return windows[len(windows)-1].Canvas()
	}
	return nil
}

func focusOn(o fyne.Focusable) {
	if c := canvasOf(o.(fyne.CanvasObject)); c != nil {
		c.Focus(o)
	}
}
