package desk

import (
	"context"
	"maps"
	"slices"

	"weighhouse/model"
	"weighhouse/store"
)

// The acts on the application at hand: to keep its result, hand it in, and set
// it aside for the next.

// behind runs acts that write, one after another and off the window's thread.
func (d *Desk) behind(act func()) {
	before, done := d.written, make(chan struct{})
	d.written = done
	go func() {
		defer close(done)
		if before != nil {
			<-before
		}
		act()
	}()
}

// keep writes a complete result that is not kept yet. "Saved" is said only
// once it is on the disk.
func (d *Desk) keep(iv *interview) {
	text := iv.text()
	if !iv.complete || !iv.shows() || text == iv.keptText || text == iv.keeping {
		return
	}
	iv.keeping = text
	complete, handedIn := store.Complete{Applicant: iv.who, Answers: iv.answers.Clone()}, iv.handedIn
	d.behind(func() {
		kept, err := d.session.KeepResult(context.Background(), complete)
		if err == nil && !handedIn {
			iv.seen[kept.ID] = text
		}
		d.post(func() {
			if iv.keeping == text {
				iv.keeping = ""
			}
			if iv.saveProblem = errorWords(d.reader, err); err == nil {
				iv.keptText, iv.savedAt = text, kept.At.Local()
			}
			if now := d.interview; err != nil && now != iv && !now.begun() {
				d.interview = iv // nothing is lost
				d.show("interview")
			} else if err != nil && now != iv {
				now.saveProblem = iv.saveProblem
			}
			d.toldOf(d.interview)
		})
	})
}

// toldOf shows news of an application, where its page is the one at hand.
func (d *Desk) toldOf(iv *interview) {
	if p, ok := d.page.(*interviewPage); ok && p.iv == iv {
		p.panel.show(iv)
		p.strip.show(iv)
	}
}

// handIn ends the application: the result is shown, whenever the lender lets
// it be, and kept. Where an answer is wanting it goes there instead.
func (d *Desk) handIn() {
	iv := d.interview
	if iv == nil {
		return
	}
	if !iv.complete {
		d.goToOpen(iv)
		return
	}
	if !iv.handedIn {
		iv.handedIn = true
		text := iv.text()
		d.keep(iv)
		d.behind(func() { maps.DeleteFunc(iv.seen, func(_ int64, seen string) bool { return seen == text }) })
	}
	d.show("interview")
}

// goToOpen goes to the first question that stands in the way of a result.
func (d *Desk) goToOpen(iv *interview) {
	at := iv.open()
	if at < 0 {
		d.show("interview")
		return
	}
	iv.at = at
	d.show("interview")
	if iv.answers.At(at).State == model.Missing && iv.drafts[at] == nil {
		d.note(d.reader.T("desk.answer_this"))
	}
}

// note asks something beneath the question that has the focus.
func (d *Desk) note(text string) {
	if p, ok := d.page.(*interviewPage); ok && p.now != nil {
		p.now.box.line().ask(text)
	}
}

// newApplication begins anew.
func (d *Desk) newApplication() {
	product := ""
	if iv := d.interview; iv != nil {
		if d.unfinished() {
			return
		}
		product = iv.edition.Scorecard().Card.ProductCode
		d.setAside(iv)
	}
	iv, err := d.freshInterview(product, model.NewClients)
	if err != nil {
		d.interview = nil
		d.open(&messagePage{d, err})
		return
	}
	d.interview = iv
	d.show("interview")
}

// unfinished tells that there are answers which are not kept, since they are
// not complete or could not be written, and asks whether to drop them. It asks
// once.
func (d *Desk) unfinished() bool {
	iv := d.interview
	d.leave()
	if iv == nil || !iv.begun() || iv.warned || iv.complete && iv.shows() && iv.saveProblem == "" {
		return false
	}
	iv.warned = true
	if p, ok := d.page.(*interviewPage); !ok || p.now == nil {
		d.show("interview")
	}
	d.note(d.reader.T("desk.unfinished"))
	return true
}

// setAside leaves an application for good. What was seen of it and not handed
// in stays kept, marked as cleared.
func (d *Desk) setAside(iv *interview) {
	d.keep(iv)
	d.behind(func() {
		for _, id := range slices.Sorted(maps.Keys(iv.seen)) {
			if err := d.session.ClearResult(context.Background(), id); err != nil {
				d.post(func() { d.notCleared(err) })
				return
			}
		}
		clear(iv.seen)
	})
}

// notCleared tells, on the next application's page, that the last one's result
// could not be marked.
func (d *Desk) notCleared(err error) {
	if iv := d.interview; iv != nil {
		iv.saveProblem = errorWords(d.reader, err)
		d.toldOf(iv)
	}
}
