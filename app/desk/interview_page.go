package desk

import (
	"context"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/theme"
	"fyne.io/fyne/v2/widget"

	"weighhouse/app/words"
	"weighhouse/model"
	"weighhouse/store"
)

// interviewPage is the officer's: who it is and which loan, then the questions
// in their order, and beside them what they come to.
type interviewPage struct {
	desk   *Desk
	iv     *interview
	labels *words.Labels
	rows   []*row // by item; nil for what is computed
	who    *row
	kind   *row
	what   *row
	panel  *panel
	strip  *strip
	scroll *container.Scroll
	now    *row
	// noEdition is why a product or a kind of client could not be had.
	noEdition string
}

// newInterviewPage goes on with the application at hand, or begins one.
func newInterviewPage(d *Desk) page {
	if d.interview == nil {
		iv, err := d.freshInterview("", model.NewClients)
		if err != nil {
			return &messagePage{d, err}
		}
		d.interview = iv
	}
	return &interviewPage{desk: d, iv: d.interview}
}

// freshInterview begins an application for a product, or for the first that
// is lent today, and a kind of client.
func (d *Desk) freshInterview(product string, client model.ClientKind) (*interview, error) {
	today, err := d.today()
	if err != nil {
		return nil, err
	}
	if product == "" {
		list, err := d.products(today)
		if err != nil {
			return nil, err
		}
		if len(list) == 0 {
			return nil, model.Problem{Code: "no_edition_yet"}
		}
		product = list[0].Card.ProductCode
	}
	e, err := d.session.InForce(context.Background(), product, client, today)
	if err != nil {
		return nil, err
	}
	return newInterview(e, today, client), nil
}

// products are the first released edition of each product that has one in
// force.
func (d *Desk) products(today model.Date) ([]store.Released, error) {
	released, err := d.session.Editions(context.Background())
	if err != nil {
		return nil, err
	}
	var list []store.Released
	seen := map[string]bool{}
	for i := len(released) - 1; i >= 0; i-- {
		card := released[i].Card
		if !seen[card.ProductCode] && !today.Before(card.InForceFrom) {
			seen[card.ProductCode] = true
			list = append(list, released[i])
		}
	}
	return list, nil
}

func (p *interviewPage) object() fyne.CanvasObject {
	d, e := p.desk, p.iv.edition
	p.now = nil
	p.labels = d.labels(e)
	p.panel = newPanel(d.reader, p.labels, e, d.caution())
	p.strip = newStrip(d.reader, p.labels)
	p.strip.hidden = d.hidden
	list := p.applicantRows()
	section := ""
	p.rows = make([]*row, len(e.Items()))
	for i := range e.Items() {
		item := &e.Items()[i]
		if item.Kind == model.Computed {
			continue
		}
		if item.Section != section {
			section = item.Section
			list = append(list, p.sectionHead(p.labels.Section(item)))
		}
		p.rows[i] = p.questionRow(item)
		list = append(list, p.rows[i])
	}
	p.resume()
	p.scroll = container.NewVScroll(newStack(list))
	var side fyne.CanvasObject = p.panel.object
	if d.hidden {
		side = d.curtain()
	}
	p.show()
	return frame(p.strip.object, nil, nil, container.New(&sideWidth{}, side), p.scroll)
}

// putBy puts by what is typed and no answer yet, and where the officer is.
func (p *interviewPage) putBy() {
	iv := p.iv
	if p.now != nil {
		iv.down = p.now.Position().Y - p.scroll.Offset.Y
	}
	clear(iv.drafts)
	for i, r := range p.rows {
		if r == nil {
			continue
		}
		if d := r.box.draft(); d != nil {
			iv.drafts[i] = d
		}
	}
	iv.line = 0
	if w, ok := p.rowAt(iv.at).box.(*worksheetBox); ok {
		iv.line = w.lineAtWork()
	}
}

// resume shows again what was put by.
func (p *interviewPage) resume() {
	for i, d := range p.iv.drafts {
		line := notTyping
		if i == p.iv.at {
			line = p.iv.line
		}
		p.rows[i].box.resume(d, line)
	}
}

func (p *interviewPage) sectionHead(text string) fyne.CanvasObject {
	t := canvas.NewText(text, shade(theme.ColorNamePrimary))
	t.TextSize, t.TextStyle = theme.TextSize(), fyne.TextStyle{Bold: true}
	return container.NewVBox(widget.NewSeparator(), container.NewPadded(t))
}

// questionRow is the row of one asked characteristic.
func (p *interviewPage) questionRow(item *model.Item) *row {
	d, index := p.desk, item.Index
	b := boxFor(d.reader, p.labels, p.iv.edition, item, d.key)
	b.put(p.iv.answers.At(index))
	var e *evidence
	if item.EvidenceNeeded == model.Told || item.EvidenceNeeded == model.Seen {
		e = newEvidence(d.reader.Name(model.Told), d.reader.Name(model.Seen), item.EvidenceNeeded == model.Seen,
			func(seen bool) { p.evidence(index, seen) })
		e.set(p.iv.answers.At(index).Seen)
	}
	r := newRow(d.reader.Number(model.Whole(int64(item.Number)), 0), d.questionOf(p.labels, item), p.labels.Help(item), b, e)
	h := b.on()
	h.check = func(a model.Answer) []model.Problem { return p.iv.judge(index, a) }
	h.changed = func(a model.Answer) {
		if e != nil {
			a.Seen = e.seen
		}
		p.iv.put(index, a)
		p.show()
	}
	h.done = func() { p.goOn(index) }
	h.gained = func() { p.current(r, index) }
	return r
}

// evidence notes whether a paper was seen.
func (p *interviewPage) evidence(index int, seen bool) {
	a := p.iv.answers.At(index)
	a.Seen = seen
	p.iv.put(index, a)
	p.show()
}

// current tints a row and brings it in sight.
func (p *interviewPage) current(r *row, at int) {
	p.iv.at = at
	if p.now == r {
		return
	}
	if p.now != nil {
		p.now.setCurrent(false)
		p.desk.keep(p.iv)
	}
	p.now = r
	r.setCurrent(true)
	top, height := r.Position().Y, r.Size().Height
	view := p.scroll.Size().Height
	const room = 130 // of what comes before and after
	switch offset := p.scroll.Offset.Y; {
	case top-room < offset:
		p.scroll.ScrollToOffset(fyne.NewPos(0, max(top-room, 0)))
	case top+height+room > offset+view:
		p.scroll.ScrollToOffset(fyne.NewPos(0, top+height+room-view))
	}
}

// goOn moves to the next question; after the last it says what is left to do.
func (p *interviewPage) goOn(index int) {
	r, note := p.desk.reader, p.rowAt(p.iv.at).box.line()
	if next := p.iv.next(index); next >= 0 {
		p.rows[next].box.focus()
	} else if open := p.iv.open(); open >= 0 {
		note.ask(r.T("desk.last_open", "number", p.iv.edition.Items()[open].Number))
	} else {
		note.hint(r.T("desk.last"))
	}
	p.desk.keep(p.iv)
}

// show brings the page up to date after an answer.
func (p *interviewPage) show() {
	why := p.desk.reader.T("desk.not_asked")
	for i, r := range p.rows {
		if r != nil {
			r.setAsked(p.iv.answers.Applies(i) != model.Not, why)
		}
	}
	p.panel.show(p.iv)
	p.strip.show(p.iv)
}

// The rows above the questions, where an item's index would be.
const (
	atName    = -1
	atClient  = -2
	atProduct = -3
)

func (p *interviewPage) rowAt(at int) *row {
	switch at {
	case atName:
		return p.who
	case atClient:
		return p.kind
	case atProduct:
		return p.what
	}
	return p.rows[at]
}

// opened goes back to where the officer was.
func (p *interviewPage) opened() {
	r := p.rowAt(p.iv.at)
	most := p.scroll.Content.MinSize().Height - p.scroll.Size().Height
	p.scroll.ScrollToOffset(fyne.NewPos(0, max(0, min(r.Position().Y-p.iv.down, most))))
	switch b := r.box.(type) {
	case *worksheetBox:
		b.focusLine(p.iv.line)
	default:
		b.focus()
	}
	p.desk.cursorToEnd()
}

func (p *interviewPage) key(name fyne.KeyName) bool {
	switch name {
	case fyne.KeyF12:
		if p.now != nil && p.now.evidence != nil {
			p.now.evidence.toggle()
		}
		return true
	case fyne.KeyEscape:
		return true
	}
	return false
}
