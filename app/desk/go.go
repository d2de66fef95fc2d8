package desk

import (
	"context"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/theme"

	"weighhouse/app/words"
	"weighhouse/model"
	"weighhouse/store"
)

// Moving between pages, and the acts that belong to no single one.

// show opens the page of that name: "interview", "why", "details", "fits",
// "kept", "scorecards" or "keys".
func (d *Desk) show(name string) {
	d.leave()
	d.name = name
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

// redraw opens the page anew, after the language or the light has changed.
func (d *Desk) redraw() { d.show(d.name) }

// leave keeps what the page at hand has made.
func (d *Desk) leave() {
	if d.interview != nil {
		d.keep(d.interview, func() {})
	}
}

// keep writes a complete result that is not kept yet, off the window's
// thread. "Saved" is said only once it is on the disk.
func (d *Desk) keep(iv *interview, then func()) {
	if !iv.complete || !iv.shows() {
		return
	}
	text := iv.answers.Text() + "\n" + iv.who
	if text == iv.keptText {
		return
	}
	iv.keptText = text
	complete, session := store.Complete{Applicant: iv.who, Answers: iv.answers.Clone()}, d.session
	d.saving.Add(1)
	go func() {
		defer d.saving.Done()
		kept, err := session.KeepResult(context.Background(), complete)
		d.post(func() {
			if err != nil {
				iv.keptText, iv.saveProblem = "", d.reader.Error(err)
			} else {
				iv.kept, iv.saveProblem, iv.savedAt = kept, "", kept.At.Local()
			}
			then()
		})
	}()
}

// newApplication begins anew. A result that was seen and not handed in stays,
// marked as cleared.
func (d *Desk) newApplication() {
	product, client := "", model.NewClients
	if iv := d.interview; iv != nil {
		product, client = iv.edition.Scorecard().Card.ProductCode, iv.answers.Client
		d.leave()
		if iv.complete && !iv.handedIn {
			d.clear(iv)
		}
	}
	iv, err := d.freshInterview(product, client)
	if err != nil {
		d.name = "interview"
		d.open(newMessagePage(d, d.reader.Error(err)))
		return
	}
	d.interview = iv
	d.show("interview")
}

// clear marks the kept result of an application as cleared.
func (d *Desk) clear(iv *interview) {
	d.saving.Wait()
	if iv.kept.ID != 0 {
		go d.session.ClearResult(context.Background(), iv.kept.ID)
	}
}

// finish hands the application in: the result is shown, whenever the lender
// lets it be, and kept.
func (d *Desk) finish() {
	iv := d.interview
	if iv == nil {
		return
	}
	if !iv.complete {
		d.show("interview")
		return
	}
	iv.handedIn = true
	d.show("interview")
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

// messagePage says one thing that stands in the way.
type messagePage struct {
	desk *Desk
	text string
}

func newMessagePage(d *Desk, text string) page { return &messagePage{d, text} }
func (p *messagePage) opened()                 {}
func (p *messagePage) key(fyne.KeyName) bool   { return false }
func (p *messagePage) object() fyne.CanvasObject {
	l := paragraph(p.text)
	l.SizeName = theme.SizeNameSubHeadingText
	return inset(l)
}

// refuse says why the branch cannot be opened. There is nobody's language to
// go by yet but the one asked for.
func (d *Desk) refuse(o Options, err error) {
	reader := words.New(words.StyleOf(o.Language))
	d.window.SetContent(inset(paragraph(reader.T("shell.cannot_open", "reason", openWords(reader, err)))))
}

func openWords(r *words.Reader, err error) string {
	if e, ok := err.(*store.Error); ok {
		return joinLines(problemLines(r, e.Problems))
	}
	return r.Error(err)
}

func problemLines(r *words.Reader, problems []model.Problem) []string {
	var lines []string
	for _, p := range problems {
		lines = append(lines, r.Problem(p))
	}
	return lines
}
