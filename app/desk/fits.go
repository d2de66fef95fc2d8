package desk

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"

	"weighhouse/model"
)

// fitsPage lists amounts and terms that the edition would approve, never above
// what is asked.
type fitsPage struct {
	desk *Desk
	list *listing
}

func (p *fitsPage) opened() {
	if p.list != nil {
		p.desk.window.Canvas().Focus(p.list)
	}
}

func (p *fitsPage) key(fyne.KeyName) bool { return false }

func (p *fitsPage) object() fyne.CanvasObject {
	d, iv, chosen := p.desk, p.desk.interview, 0
	if p.list != nil {
		chosen = p.list.chosen
	}
	p.list = nil
	if iv == nil || !iv.complete || !iv.shows() || d.hidden {
		return d.nothingYet(d.reader.T("fits.title"), iv)
	}
	r, e := d.reader, iv.edition
	offers := e.TermsThatFit(iv.answers)
	head := container.NewVBox(heading(r.T("fits.title")), paragraph(r.T("fits.about")))
	if len(offers) == 0 {
		return inset(frame(head, nil, nil, nil, paragraph(r.T("fits.none"))))
	}
	labels := d.labels(e)
	p.list = newListing([]listColumn{{r.T("fits.term"), 1.4}, {r.T("fits.amount"), 1.6}, {r.T("fits.payment"), 1.6}, {r.T("kept.pd"), 1}},
		func(row int) ([]string, model.Recommendation) {
			o := offers[row]
			payment := ""
			if n, ok := e.Payment(o.Amount, o.Term); ok {
				payment = moneyWords(r, labels, n)
			}
			return []string{r.Term(o.Term, e.Scorecard().Terms.TermUnit), moneyWords(r, labels, o.Amount),
				payment, r.Percent(o.Result.PD)}, o.Result.Recommendation
		})
	p.list.marked = true
	p.list.keys = d.key
	p.list.setCount(len(offers))
	p.list.choose(chosen)
	return inset(frame(head, d.caution(), nil, nil, p.list))
}
