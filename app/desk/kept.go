package desk

import (
	"context"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"weighhouse/app/words"
	"weighhouse/model"
	"weighhouse/store"
)

// keptPage lists every result kept at this desk, newest first, cleared or
// not, and beside it what the chosen one says. It reads a stretch of rows at a
// time.
type keptPage struct {
	desk    *Desk
	list    *listing
	about   *widget.Label
	stretch []store.Kept
	first   int // the row that stretch begins at
	problem string
}

const keptStretch = 60

func newKeptPage(d *Desk) *keptPage { return &keptPage{desk: d} }

func (p *keptPage) object() fyne.CanvasObject {
	d := p.desk
	if d.hidden {
		return d.nothingYet(nil)
	}
	r := d.reader
	p.about = paragraph("")
	p.list = newListing([]listColumn{
		{r.T("kept.when"), 2.1}, {r.T("kept.who"), 2.6}, {r.T("kept.product"), 2.4}, {r.T("kept.amount"), 1.9},
		{r.T("kept.pd"), 1.1}, {r.T("kept.score"), 0.9}}, p.cells)
	p.list.marked = true
	p.list.keys = d.key
	p.list.onMove = p.tell
	count, err := d.session.ResultCount(context.Background())
	if err != nil {
		p.problem = openWords(r, err)
	}
	p.list.setCount(count)
	p.tell(0)
	side := container.New(&sideWidth{}, container.NewVScroll(p.about))
	head := container.NewVBox(heading(r.T("kept.title", "n", count)), caption(r.T("kept.keys")))
	return inset(frame(head, d.caution(), nil, side, p.list))
}

func (p *keptPage) opened() {
	if p.list != nil {
		p.desk.window.Canvas().Focus(p.list)
	}
}

func (p *keptPage) key(fyne.KeyName) bool { return false }

// at is the kept result of a row; nil where it cannot be read.
func (p *keptPage) at(row int) *store.Kept {
	if row < p.first || row >= p.first+len(p.stretch) {
		p.first = max(row-keptStretch/2, 0)
		stretch, err := p.desk.session.Results(context.Background(), p.first, keptStretch)
		p.stretch = stretch
		if err != nil {
			p.problem = openWords(p.desk.reader, err)
		}
	}
	if row < p.first || row >= p.first+len(p.stretch) {
		return nil
	}
	return &p.stretch[row-p.first]
}

func (p *keptPage) cells(row int) ([]string, model.Recommendation) {
	r := p.desk.reader
	k := p.at(row)
	if k == nil {
		return []string{"", p.problem, "", "", "", ""}, ""
	}
	when := r.Date(model.DateOf(k.At.Local())) + " " + r.Time(k.At.Local())
	texts := []string{when, k.Applicant, "", "", r.Percent(k.PD), r.Score(k.Score)}
	if e, err := p.desk.session.Edition(context.Background(), k.Edition); err == nil {
		texts[2] = p.desk.labels(e).Product()
		if a, problems := e.ParseAnswers(k.Answers); len(problems) == 0 {
			texts[3] = amountAndTerm(r, a)
		}
	}
	if k.Cleared() {
		texts[1] = r.T("kept.cleared", "who", k.Applicant)
	}
	return texts, k.Recommendation
}

// amountAndTerm is the loan asked for, such as "3,000 crowns, 12 months".
func amountAndTerm(r *words.Reader, a *model.Answers) string {
	amount, term, ok := a.AmountAndTerm()
	if !ok {
		return ""
	}
	terms := a.Edition().Scorecard().Terms
	return r.T("desk.loan", "amount", r.Money(amount, int(terms.MoneyDecimals), terms.Currency), "term", r.Term(term, terms.TermUnit))
}

// tell says what the chosen result was made of.
func (p *keptPage) tell(row int) {
	d, r := p.desk, p.desk.reader
	k := p.at(row)
	if k == nil {
		setParagraph(p.about, p.problem)
		return
	}
	e, err := d.session.Edition(context.Background(), k.Edition)
	if err != nil {
		setParagraph(p.about, openWords(r, err))
		return
	}
	a, problems := e.ParseAnswers(k.Answers)
	if len(problems) > 0 {
		setParagraph(p.about, joinLines(problemLines(r, problems)))
		return
	}
	l := d.labels(e)
	card := e.Scorecard().Card
	lines := []string{
		capital(r.Name(k.Recommendation)),
		capital(r.PDPlain(k.PD, int(card.DefaultDaysLate), int(card.WithinMonths))) + ".",
		r.T("details.in_force", "title", l.Title(), "edition", int(card.Edition), "date", card.InForceFrom),
		r.T("kept.by", "person", k.By),
	}
	if k.Cleared() {
		lines = append(lines, r.T("kept.cleared_by", "person", k.ClearedBy, "date", model.DateOf(k.ClearedAt.Local())))
	}
	lines = append(lines, "")
	for i := range e.Items() {
		item := &e.Items()[i]
		if item.Kind != model.Computed && a.Applies(i) != model.Not {
			lines = append(lines, d.questionOf(l, item)+" "+givenWords(r, l, e, item, a.At(i)))
		}
	}
	setParagraph(p.about, joinLines(lines))
}

// givenWords is an answer as a person reads it.
func givenWords(r *words.Reader, l *words.Labels, e *model.Edition, item *model.Item, a model.Answer) string {
	switch {
	case a.State == model.StatedUnknown:
		return r.T("box.unknown")
	case a.State != model.Given:
		return ""
	}
	text := ""
	switch item.Kind {
	case model.Choice, model.YesNo:
		if text = l.Attribute(item, a.Attribute); text == "" {
			text = r.T("yes_no." + item.Attributes[a.Attribute].Code)
		}
	case model.DateKind:
		text = r.Date(a.Date)
	case model.Worksheet:
		n := a.Number
		if a.Lines != nil {
			n = item.Monthly(a.Lines)
		}
		text = r.Money(n, int(item.Decimals), e.Scorecard().Terms.Currency)
	default:
		text = r.Number(a.Number, int(item.Decimals))
		if unit := l.Unit(item); unit != "" {
			text += " " + unit
		}
	}
	if a.Seen {
		text += " (" + r.Name(model.Seen) + ")"
	}
	return text
}
