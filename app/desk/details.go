package desk

import (
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"weighhouse/app/words"
	"weighhouse/model"
)

// detailsPage shows all that stands behind a result: the range, the log-odds,
// the grounds it goes beyond, the edition and its telephone code.
type detailsPage struct{ desk *Desk }

func (p *detailsPage) opened()               {}
func (p *detailsPage) key(fyne.KeyName) bool { return false }

func (p *detailsPage) object() fyne.CanvasObject {
	d, iv := p.desk, p.desk.interview
	if iv == nil || d.hidden {
		return d.nothingYet(d.reader.T("details.title"), iv)
	}
	r, e := d.reader, iv.edition
	labels := d.labels(e)
	form := container.New(&pairs{})
	add := func(key string, text string) {
		form.Add(caption(r.T(key)))
		form.Add(paragraph(text))
	}
	card := e.Scorecard().Card
	add("details.edition", d.editionWords(e))
	add("details.code", e.TelephoneCode())
	add("details.default", labels.Text("default_means", card.DefaultMeans))
	add("details.made", r.Name(card.HowMade)+madeFrom(r, card))
	add("details.review", r.Date(card.ReviewBy))
	if iv.shows() && iv.complete {
		add("details.log_odds", r.LogOdds(iv.result.LogOdds))
		add("details.pd", r.Percent(iv.result.PD))
		add("details.score", r.Score(iv.result.Score))
		if low, high, ok := e.Range(iv.answers); ok {
			add("details.range", r.T("details.range_text", "low", low, "high", high))
		} else {
			add("details.range", r.T("details.no_range"))
		}
	}
	if iv.shows() {
		var ground []string
		for _, problem := range e.Ground(iv.answers, iv.today) {
			ground = append(ground, groundWords(r, labels, e, problem))
		}
		if ground == nil {
			ground = []string{r.T("details.on_ground")}
		}
		add("details.ground", strings.Join(ground, "\n"))
	}
	work := container.New(&pairs{})
	for i, item := range e.Items() {
		if item.Kind == model.Computed {
			work.Add(caption(labels.Question(&e.Items()[i])))
			work.Add(paragraph(workedWords(r, labels, &e.Items()[i], iv.worked[i])))
		}
	}
	return inset(frame(heading(r.T("details.title")), d.caution(), nil, nil,
		d.long(container.NewVBox(form, widget.NewSeparator(), heading(r.T("details.worked")), work))))
}

func madeFrom(r *words.Reader, card model.Card) string {
	if !card.LoansUsed.Set {
		return ""
	}
	return ", " + r.T("details.from_loans", "n", int(card.LoansUsed.Value), "defaults", int(card.DefaultsAmong.Or(0)))
}

func groundWords(r *words.Reader, l *words.Labels, e *model.Edition, p model.Problem) string {
	text := r.Sentence(p)
	if item, ok := e.Item(p.Place.Column); ok {
		return labelled(r, l.Question(item)) + " " + text
	}
	return text
}

// pairs lays out captions and their texts in two columns.
type pairs struct{}

const pairsLabel = 300

func (pairs) MinSize(objects []fyne.CanvasObject) fyne.Size {
	var h float32
	for i := 1; i < len(objects); i += 2 {
		h += objects[i].MinSize().Height
	}
	return fyne.NewSize(pairsLabel+200, h)
}

func (pairs) Layout(objects []fyne.CanvasObject, size fyne.Size) {
	var y float32
	for i := 1; i < len(objects); i += 2 {
		label, text := objects[i-1], objects[i]
		// A wrapped text knows its height only once it has its width.
		text.Resize(fyne.NewSize(size.Width-pairsLabel, text.MinSize().Height))
		h := text.MinSize().Height
		text.Resize(fyne.NewSize(size.Width-pairsLabel, h))
		text.Move(fyne.NewPos(pairsLabel, y))
		if t, ok := label.(*canvas.Text); ok {
			t.Text = shorten(t.Text, pairsLabel-12, t.TextSize, t.TextStyle)
		}
		label.Move(fyne.NewPos(6, y+(min(h, 31)-label.MinSize().Height)/2))
		label.Resize(label.MinSize())
		y += h
	}
}
