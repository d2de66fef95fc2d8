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
	hidden                               bool // the person is out of sight
	ground                               *canvas.Rectangle
	row                                  *fyne.Container
	rest                                 *container.Clip // with the row in it
	object                               *fyne.Container
}

func newStrip(reader *words.Reader, labels *words.Labels) *strip {
	s := &strip{reader: reader, labels: labels, ground: canvas.NewRectangle(shade(colorRaised))}
	for _, t := range []**canvas.Text{&s.who, &s.product, &s.amount, &s.payment, &s.saved} {
		*t = figure(theme.TextSize(), false)
	}
	s.who.TextStyle.Bold = true
	s.row = container.New(layout.NewCustomPaddedHBoxLayout(22), s.who, s.product, s.amount, s.payment)
	s.rest = container.NewClip(s.row)
	s.object = container.New(s, s.ground, s.rest, s.saved)
	return s
}

const (
	stripEdge = 8
	stripRoom = 3 // above and beneath
)

// MinSize is always the same, and the parts are put in their places at once:
// the window draws a second frame where it finds that they are not.
func (s *strip) MinSize([]fyne.CanvasObject) fyne.Size {
	return fyne.NewSize(1, lineHeight(theme.TextSize())+2*stripRoom)
}

func (s *strip) Layout(_ []fyne.CanvasObject, size fyne.Size) {
	s.ground.Resize(size)
	saved, height := s.saved.MinSize().Width, lineHeight(theme.TextSize())
	place(s.saved, size.Width-saved-stripEdge, stripRoom, saved, height)
	place(s.rest, stripEdge, stripRoom, size.Width-saved-3*stripEdge, height)
	s.row.Layout.Layout(s.row.Objects, s.row.Size())
}

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
	loan, payment := "", ""
	if amount, term, ok := iv.answers.AmountAndTerm(); ok && !s.hidden {
		loan = loanWords(s.reader, s.labels, iv.answers)
		if p, ok := iv.edition.Payment(amount, term); ok {
			payment = s.reader.T("desk.payment_each", "payment", moneyWords(s.reader, s.labels, p))
		}
	}
	setFigure(s.amount, loan, theme.ColorNameForeground)
	setFigure(s.payment, payment, theme.ColorNameForeground)
	saved, ink := s.reader.T("desk.not_saved"), colorQuiet
	switch {
	case iv.saveProblem != "":
		ink = theme.ColorNameError
	case iv.keptText == iv.text():
		saved, ink = s.reader.T("desk.saved", "time", s.reader.Time(iv.savedAt)), colorApprove
	}
	setFigure(s.saved, saved, ink)
	s.Layout(nil, s.object.Size())
}
