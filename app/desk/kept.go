package desk

import (
	"context"
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

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
	d, r, chosen := p.desk, p.desk.reader, 0
	if p.list != nil {
		chosen = p.list.chosen
	}
	p.list = nil
	if d.hidden {
		return d.nothingYet(r.T("shell.kept"), nil)
	}
	p.about = paragraph("")
	p.list = newListing([]listColumn{
		{r.T("kept.when"), 1.8}, {r.T("kept.who"), 2.1}, {r.T("kept.amount"), 2.9}, {r.T("kept.pd"), 0.8}, {r.T("kept.score"), 0.6}}, p.cells)
	p.list.marked = true
	p.list.keys = d.key
	p.list.onMove = p.tell
	count, err := d.session.ResultCount(context.Background())
	p.problem = errorWords(r, err)
	p.list.setCount(count)
	p.list.choose(chosen)
	p.tell(p.list.chosen)
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

// at is the kept result of a row; nil where it cannot be read. One that was
// tampered with hides none of those about it.
func (p *keptPage) at(row int) *store.Kept {
	read := func(first, count int) {
		var err error
		p.first = first
		p.stretch, err = p.desk.session.Results(context.Background(), first, count)
		p.problem = errorWords(p.desk.reader, err)
	}
	if row < p.first || row >= p.first+len(p.stretch) {
		read(max(row-keptStretch/2, 0), keptStretch)
	}
	if p.problem != "" {
		read(row, 1)
	}
	if row < p.first || row >= p.first+len(p.stretch) {
		return nil
	}
	return &p.stretch[row-p.first]
}

func (p *keptPage) cells(row int) ([]string, model.Recommendation) {
	d, r := p.desk, p.desk.reader
	k := p.at(row)
	if k == nil {
		return []string{"", p.problem, "", "", ""}, ""
	}
	when := r.Date(model.DateOf(k.At.Local())) + " " + r.Time(k.At.Local())
	texts := []string{when, k.Applicant, "", r.Percent(k.PD), r.Score(k.Score)}
	if e, err := d.session.Edition(context.Background(), k.Edition); err == nil {
		if a, problems := e.ParseAnswers(k.Answers); len(problems) == 0 {
			texts[2] = loanWords(r, d.labels(e), a)
		}
	}
	if k.Cleared() {
		texts[1] = strings.TrimSpace(r.T("kept.cleared", "who", k.Applicant))
	}
	return texts, k.Recommendation
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
		setParagraph(p.about, errorWords(r, err))
		return
	}
	a, problems := e.ParseAnswers(k.Answers)
	if len(problems) > 0 {
		setParagraph(p.about, problemLines(r, problems))
		return
	}
	l := d.labels(e)
	card := e.Scorecard().Card
	lines := []string{
		capital(r.Name(k.Recommendation)),
		capital(r.PDPlain(k.PD, int(card.DefaultDaysLate), int(card.WithinMonths))) + ".",
		"",
		l.Product(),
		d.editionWords(e),
		r.T("kept.by", "person", k.By),
	}
	if k.Cleared() {
		lines = append(lines, r.T("kept.cleared_by", "person", k.ClearedBy, "date", model.DateOf(k.ClearedAt.Local())))
	}
	lines = append(lines, "")
	for i := range e.Items() {
		item := &e.Items()[i]
		if item.Kind != model.Computed && a.Applies(i) != model.Not {
			lines = append(lines, labelled(r, d.questionOf(l, item))+" "+givenWords(r, l, item, a.At(i)))
		}
	}
	setParagraph(p.about, strings.Join(lines, "\n"))
}
