package desk

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/layout"
	"fyne.io/fyne/v2/theme"

	"weighhouse/app/words"
)

// A strip along the top says at all times who it is, which product, how much
// for how long, the payment, and when it was saved.
type strip struct {
	reader                               *words.Reader
	labels                               *words.Labels
	who, product, amount, payment, saved *canvas.Text
	hidden                               bool
	object                               fyne.CanvasObject
}

func newStrip(reader *words.Reader, labels *words.Labels) *strip {
	s := &strip{reader: reader, labels: labels}
	for _, t := range []**canvas.Text{&s.who, &s.product, &s.amount, &s.payment, &s.saved} {
		*t = figure(theme.TextSize(), false)
	}
	s.who.TextStyle.Bold = true
	row := container.New(layout.NewCustomPaddedHBoxLayout(22), s.who, s.product, s.amount, s.payment)
	s.object = container.NewStack(canvas.NewRectangle(shade(colorRaised)),
		container.New(layout.NewCustomPaddedLayout(3, 3, 8, 12), container.NewBorder(nil, nil, nil, s.saved, container.NewHScroll(row))))
	return s
}

// hide puts the person out of sight.
func (s *strip) hide(on bool) { s.hidden = on }

func (s *strip) show(iv *interview) {
	who := iv.who
	switch {
	case s.hidden:
		who = s.reader.T("desk.someone")
	case who == "":
		who = s.reader.T("desk.no_name")
	}
	setFigure(s.who, shorten(who, 260, theme.TextSize(), s.who.TextStyle), theme.ColorNameForeground)
	setFigure(s.product, s.labels.Product(), theme.ColorNameForeground)
	terms := iv.edition.Scorecard().Terms
	loan, payment := "", ""
	if amount, term, ok := iv.answers.AmountAndTerm(); ok && !s.hidden {
		loan = s.reader.T("desk.loan", "amount", s.reader.Money(amount, int(terms.MoneyDecimals), terms.Currency),
			"term", s.reader.Term(term, terms.TermUnit))
		if p, ok := iv.edition.Payment(amount, term); ok {
			payment = s.reader.T("desk.payment_each", "payment", s.reader.Money(p, int(terms.MoneyDecimals), terms.Currency))
		}
	}
	setFigure(s.amount, loan, theme.ColorNameForeground)
	setFigure(s.payment, payment, theme.ColorNameForeground)
	saved := s.reader.T("desk.not_saved")
	ink := colorQuiet
	if !iv.savedAt.IsZero() {
		saved, ink = s.reader.T("desk.saved", "time", s.reader.Time(iv.savedAt)), colorApprove
	}
	if iv.saveProblem != "" {
		saved, ink = iv.saveProblem, theme.ColorNameError
	}
	setFigure(s.saved, saved, ink)
}

// sideWidth gives the panel a width of its own: a third of a small window and
// never more than it needs.
type sideWidth struct{}

const panelWidth = 350

func (sideWidth) MinSize([]fyne.CanvasObject) fyne.Size { return fyne.NewSize(panelWidth, 100) }
func (sideWidth) Layout(objects []fyne.CanvasObject, size fyne.Size) {
	for _, o := range objects {
		o.Move(fyne.NewPos(0, 0))
		o.Resize(size)
	}
}
