package desk

import (
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"weighhouse/app/words"
)

// whyPage shows what speaks for and against: the balance, and beside it the
// principal reasons and the rules that fired. T turns the drawing into text.
type whyPage struct {
	desk    *Desk
	balance *balance
	asText  bool
}

func (p *whyPage) object() fyne.CanvasObject {
	d, iv := p.desk, p.desk.interview
	p.balance = nil
	if iv == nil || !iv.shows() || d.hidden {
		return d.nothingYet(d.reader.T("why.title"), iv)
	}
	labels := d.labels(iv.edition)
	p.balance = newBalance(d.reader, labels, iv.edition)
	p.balance.keys = d.key
	p.balance.show(iv.answers)
	var picture fyne.CanvasObject = p.balance
	if p.asText {
		lines := container.NewVBox()
		for _, line := range p.balance.text() {
			lines.Add(paragraph(line))
		}
		picture = lines
	}
	reasons := paragraph(strings.Join(reasonWords(d.reader, labels, iv), "\n"))
	head := container.NewVBox(heading(d.reader.T("why.title")), caption(d.reader.T("why.keys")))
	return inset(frame(head, d.caution(), nil, nil, d.long(container.NewVBox(picture,
		widget.NewSeparator(), heading(d.reader.T("why.reasons")), reasons))))
}

func (p *whyPage) opened() {
	if p.balance != nil && !p.asText {
		p.desk.window.Canvas().Focus(p.balance)
	}
}

func (p *whyPage) key(name fyne.KeyName) bool {
	if name == fyne.KeyT {
		p.asText = !p.asText
		p.desk.open(p)
		return true
	}
	return false
}

// reasonWords follow the actual path: the rules that declined, else the
// answers that lie furthest above the average.
func reasonWords(r *words.Reader, l *words.Labels, iv *interview) []string {
	if !iv.complete {
		return []string{r.T("why.not_complete")}
	}
	var lines []string
	for _, rule := range iv.edition.DecliningRules(iv.result.Fired) {
		label, _ := l.Rule(rule) // its text may be advice, the label is the reason
		lines = append(lines, r.T("why.by_rule", "rule", label))
	}
	if lines != nil {
		return lines
	}
	for _, s := range iv.edition.Reasons(iv.answers) {
		lines = append(lines, "– "+l.Reason(&iv.edition.Items()[s.Index], s.Attribute))
	}
	if lines == nil {
		return []string{r.T("why.none")}
	}
	return lines
}
