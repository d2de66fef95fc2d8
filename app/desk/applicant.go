package desk

import (
	"context"
	"slices"

	"fyne.io/fyne/v2"

	"weighhouse/model"
)

// The rows above the questions: who it is, whether they are known, and which
// product. They decide the edition.

func (p *interviewPage) applicantRows() []fyne.CanvasObject {
	d := p.desk

	name := newNameBox(d.reader, d.key, 300)
	name.putText(p.iv.who)
	name.on().done = func() { p.kind.box.focus() }
	name.heard = func(text string) {
		p.iv.name(text)
		p.strip.show(p.iv)
	}
	p.who = newRow("", d.reader.T("desk.who"), d.reader.T("desk.who_help"), name, nil)
	name.on().gained = func() { p.current(p.who, atName) }
	if d.hidden {
		name.putText("")
		name.Disable()
	}

	kinds := []model.ClientKind{model.NewClients, model.RepeatClients}
	kind := newPicker(d.reader, d.key, options(d.reader.Name(kinds[0]), d.reader.Name(kinds[1])))
	kind.put(optionAnswer(slices.Index(kinds, p.iv.answers.Client)))
	p.kind = newRow("", d.reader.T("desk.client"), "", kind, nil)
	kind.on().gained = func() { p.current(p.kind, atClient) }
	kind.on().done = func() { d.goOnFrom(atClient) }
	kind.on().changed = func(a model.Answer) {
		if a.State == model.Given {
			p.change(p.iv.edition.Scorecard().Card.ProductCode, kinds[a.Attribute])
		}
	}

	products, err := d.products(p.iv.today)
	var labels, codes []string
	for _, r := range products {
		label := r.Card.Product
		if e, err := d.session.Edition(context.Background(), r.Fingerprint); err == nil {
			label = d.labels(e).Product()
		}
		labels, codes = append(labels, label), append(codes, r.Card.ProductCode)
	}
	what := newPicker(d.reader, d.key, options(labels...))
	what.put(optionAnswer(slices.Index(codes, p.iv.edition.Scorecard().Card.ProductCode)))
	p.what = newRow("", d.reader.T("desk.product"), "", what, nil)
	if err != nil {
		what.line().refuse(errorWords(d.reader, err))
	}
	what.on().gained = func() { p.current(p.what, atProduct) }
	what.on().done = func() { d.goOnFrom(atProduct) }
	what.on().changed = func(a model.Answer) {
		if a.State == model.Given {
			p.change(codes[a.Attribute], p.iv.answers.Client)
		}
	}
	return []fyne.CanvasObject{p.sectionHead(d.reader.T("desk.applicant")), p.who, p.kind, p.what}
}

// options are those of a picker that is no characteristic's.
func options(labels ...string) []option {
	list := make([]option, len(labels))
	for i, label := range labels {
		list[i] = option{label: label, answer: optionAnswer(i)}
	}
	return list
}

func optionAnswer(i int) model.Answer { return model.Answer{State: model.Given, Attribute: i} }

// change goes over to the edition of another product or kind of client. Where
// there is none, the picker goes back to what it was and says why.
func (p *interviewPage) change(product string, client model.ClientKind) {
	d := p.desk
	if product == p.iv.edition.Scorecard().Card.ProductCode && client == p.iv.answers.Client {
		return
	}
	e, err := d.session.InForce(context.Background(), product, client, p.iv.today)
	if err != nil {
		d.redraw()
		p.noEdition = errorWords(d.reader, err)
		d.note(p.noEdition)
		return
	}
	p.putBy()
	d.interview = p.iv.changed(e, client)
	d.show("interview")
}

// goOnFrom goes on from the kind of client or the product, on the page that
// the choice has led to; it stays where the choice could not be had.
func (d *Desk) goOnFrom(at int) {
	p, ok := d.page.(*interviewPage)
	switch {
	case !ok:
	case p.noEdition != "":
		d.note(p.noEdition)
		p.noEdition = ""
	case at == atClient:
		p.what.box.focus()
	default:
		p.goOn(-1)
	}
}
