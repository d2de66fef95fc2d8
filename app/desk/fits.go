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
	d, iv := p.desk, p.desk.interview
	if iv == nil || !iv.complete || !iv.shows() || d.hidden {
		return d.nothingYet(iv)
	}
	r, e := d.reader, iv.edition
	offers := e.TermsThatFit(iv.answers)
	head := container.NewVBox(heading(r.T("fits.title")), paragraph(r.T("fits.about")))
	if len(offers) == 0 {
		return inset(frame(head, nil, nil, nil, paragraph(r.T("fits.none"))))
	}
	terms := e.Scorecard().Terms
	p.list = newListing([]listColumn{{r.T("fits.term"), 1.4}, {r.T("fits.amount"), 1.6}, {r.T("fits.payment"), 1.6}, {r.T("kept.pd"), 1}},
		func(row int) ([]string, model.Recommendation) {
			o := offers[row]
			payment := ""
			if n, ok := e.Payment(o.Amount, o.Term); ok {
				payment = r.Money(n, int(terms.MoneyDecimals), terms.Currency)
			}
			return []string{r.Term(o.Term, terms.TermUnit), r.Money(o.Amount, int(terms.MoneyDecimals), terms.Currency),
				payment, r.Percent(o.Result.PD)}, o.Result.Recommendation
		})
	p.list.marked = true
	p.list.keys = d.key
	p.list.setCount(len(offers))
	return inset(frame(head, d.caution(), nil, nil, p.list))
}

// keysPage says what every key does.
type keysPage struct{ desk *Desk }

func (p *keysPage) opened()               {}
func (p *keysPage) key(fyne.KeyName) bool { return false }

func (p *keysPage) object() fyne.CanvasObject {
	r := p.desk.reader
	form := container.New(&pairs{})
	add := func(key, text string) {
		form.Add(caption(key))
		form.Add(paragraph(text))
	}
	for _, k := range []string{"enter", "letters", "question", "arrows", "tab"} {
		add(r.T("keys."+k), r.T("keys."+k+"_does"))
	}
	for _, k := range windowKeys {
		add(string(k.key), r.T("keys."+k.word+"_does"))
	}
	add("Esc", r.T("keys.escape_does"))
	return inset(frame(heading(r.T("keys.title")), nil, nil, nil, container.NewVScroll(form)))
}
