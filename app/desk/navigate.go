package desk

import (
	"fyne.io/fyne/v2"

	"weighhouse/app/words"
)

// show opens the page of that name: "interview", "why", "details", "fits",
// "kept", "scorecards" or "keys".
func (d *Desk) show(name string) {
	d.leave()
	switch name {
	case "why":
		d.open(&whyPage{desk: d})
	case "details":
		d.open(&detailsPage{desk: d})
	case "fits":
		d.open(&fitsPage{desk: d})
	case "kept":
		d.open(newKeptPage(d))
	case "scorecards":
		d.open(newScorecardsPage(d))
	case "keys":
		d.open(&keysPage{desk: d})
	default:
		d.open(newInterviewPage(d))
	}
}

// redraw opens the page at hand anew, after the language, the light or what is
// hidden has changed.
func (d *Desk) redraw() {
	d.leave()
	d.open(d.page)
}

// leave puts by what the page at hand has made.
func (d *Desk) leave() {
	if p, ok := d.page.(*interviewPage); ok {
		p.putBy()
	}
	if d.interview != nil {
		d.keep(d.interview)
	}
}

// hide covers the person and the result on every page, or uncovers them.
func (d *Desk) hide() {
	d.hidden = !d.hidden
	d.redraw()
}

// nextLanguage goes on to the next of the program's languages.
func (d *Desk) nextLanguage() {
	list := words.Languages()
	at := 0
	for i, l := range list {
		if l.Code == d.reader.Style().Language {
			at = (i + 1) % len(list)
		}
	}
	d.reader = words.New(words.StyleOf(list[at].Code))
	d.remember("language", list[at].Code)
	d.redraw()
}

// turnLight goes from light to dark and back.
func (d *Desk) turnLight() {
	d.dark = !d.dark
	d.app.Settings().SetTheme(look{d.dark})
	light := "light"
	if d.dark {
		light = "dark"
	}
	d.remember("light", light)
	d.redraw()
}

// cursorToEnd takes the selection off a text, so that the next key does not
// wipe it out.
func (d *Desk) cursorToEnd() {
	if e, ok := d.window.Canvas().Focused().(*entry); ok {
		e.Entry.TypedKey(&fyne.KeyEvent{Name: fyne.KeyEnd})
	}
}
