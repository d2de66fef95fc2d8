package desk

import (
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/theme"
	"fyne.io/fyne/v2/widget"

	"weighhouse/app/words"
	"weighhouse/model"
)

// A panel stands beside the questions and always shows how far they are
// answered, what is recommended and how firmly, who may decide, the payment
// against what is left, the rules that fired, and the caution.
type panel struct {
	reader  *words.Reader
	labels  *words.Labels
	edition *model.Edition

	answered *canvas.Text
	mark     *mark
	verdict  *canvas.Text
	firmness *prose
	odds     *prose // PD in words, or its bounds
	figures  *prose // PD, score, band
	payment  *prose
	decider  *prose
	rules    *prose
	problem  *prose              // why nothing is saved
	below    []fyne.CanvasObject // all those beneath the verdict
	body     *fyne.Container
	height   float32 // of the body, where it is more than there is room for
	scroll   *container.Scroll
	object   fyne.CanvasObject
}

func newPanel(reader *words.Reader, labels *words.Labels, e *model.Edition, caution fyne.CanvasObject) *panel {
	text := func(colour fyne.ThemeColorName) *prose { return newProse(theme.TextSize(), colour) }
	p := &panel{reader: reader, labels: labels, edition: e,
		answered: figure(theme.TextSize(), false), mark: newMark(markSide), verdict: figure(theme.TextHeadingSize(), true),
		firmness: newProse(theme.CaptionTextSize(), colorQuiet), odds: text(theme.ColorNameForeground),
		figures: text(theme.ColorNameForeground), decider: text(theme.ColorNameForeground), payment: text(theme.ColorNameForeground),
		rules: text(theme.ColorNameWarning), problem: text(theme.ColorNameError)}
	p.below = []fyne.CanvasObject{p.firmness, p.odds, p.figures, widget.NewSeparator(), p.payment, p.decider, p.rules, p.problem}
	p.body = container.New(p, append([]fyne.CanvasObject{p.answered, p.mark, p.verdict}, p.below...)...)
	p.scroll = container.NewVScroll(p.body)
	ground := canvas.NewRectangle(shade(colorRaised))
	p.object = container.NewStack(ground, container.NewBorder(nil,
		container.NewVBox(widget.NewSeparator(), caution), nil, nil, p.scroll))
	return p
}

const (
	panelEdge = 8
	panelGap  = 8
	markSide  = 44
)

// MinSize is the same for all that there is room for, and the parts are put in
// their places at once: the window draws a second frame where it finds that
// they are not.
func (p *panel) MinSize([]fyne.CanvasObject) fyne.Size { return fyne.NewSize(1, p.height) }

// Layout stacks the parts, the verdict beside its mark. A part that says
// nothing takes no room.
func (p *panel) Layout(_ []fyne.CanvasObject, size fyne.Size) {
	if size.Width < panelWidth/2 {
		return // not in its place yet; its texts would wrap to a tower
	}
	width, y := size.Width-2*panelEdge, float32(panelEdge)
	place(p.answered, panelEdge, y, width, lineHeight(p.answered.TextSize))
	y += lineHeight(p.answered.TextSize) + panelGap
	place(p.mark, panelEdge, y, markSide, markSide)
	high := lineHeight(p.verdict.TextSize)
	place(p.verdict, panelEdge+markSide+panelGap, y+(markSide-high)/2, width-markSide-panelGap, high)
	y += markSide
	for _, o := range p.below {
		o.Resize(fyne.NewSize(width, o.Size().Height)) // a text that wraps knows its height only then
		h := o.MinSize().Height
		if h > 0 {
			y += panelGap
		}
		place(o, panelEdge, y, width, h)
		y += h
	}
	if p.height = y + panelEdge; p.height <= p.scroll.Size().Height {
		p.height = 0
	}
}

// show brings every figure up to date.
func (p *panel) show(iv *interview) {
	answered, all := iv.asked()
	setFigure(p.answered, p.reader.T("desk.answered", "answered", answered, "n", all), colorQuiet)
	r, settled := iv.recommendation()
	p.mark.show(r)
	switch {
	case settled:
		setFigure(p.verdict, capital(p.reader.Name(r)), shadeOf(r))
	case iv.complete:
		setFigure(p.verdict, p.reader.T("desk.ready"), theme.ColorNameForeground)
	default:
		setFigure(p.verdict, p.reader.T("desk.open"), colorQuiet)
	}
	p.firmness.say(p.firm(iv, settled))
	p.odds.say(p.oddsWords(iv))
	p.figures.say(p.figureWords(iv))
	p.decider.say(p.deciderWords(iv))
	p.payment.say(p.paymentWords(iv))
	p.rules.say(p.ruleWords(iv))
	p.problem.say(iv.saveProblem)
	p.Layout(nil, p.body.Size())
}

// firm tells how firmly the recommendation stands.
func (p *panel) firm(iv *interview, settled bool) string {
	switch {
	case !iv.shows():
		return p.reader.T(iv.waitsFor())
	case p.overCap(iv) != "":
		return p.overCap(iv)
	case iv.handedIn:
		return p.reader.T("desk.handed_in")
	case iv.complete:
		return p.reader.T("desk.complete")
	case settled:
		return p.reader.T("desk.settled")
	case iv.bounds.Narrows >= 0:
		item := &p.edition.Items()[iv.bounds.Narrows]
		return p.reader.T("desk.narrows", "number", item.Number)
	}
	return ""
}

// overCap says that the recommendation is not for the amount asked, where a
// rule's cap is below it; empty where none is.
func (p *panel) overCap(iv *interview) string {
	amount, _, ok := iv.answers.AmountAndTerm()
	if most := iv.result.LargestAmount; ok && iv.complete && iv.result.Recommendation != model.Decline && most.Set && most.Value < amount {
		return p.reader.T("desk.largest", "amount", moneyWords(p.reader, p.labels, most.Value))
	}
	return ""
}

func (p *panel) oddsWords(iv *interview) string {
	card := p.edition.Scorecard().Card
	switch {
	case !iv.shows():
		return ""
	case iv.complete:
		return capital(p.reader.PDPlain(iv.result.PD, int(card.DefaultDaysLate), int(card.WithinMonths))) + "."
	}
	return p.reader.T("desk.between", "low", iv.bounds.LowestPD, "high", iv.bounds.HighestPD)
}

func (p *panel) figureWords(iv *interview) string {
	if !iv.complete || !iv.shows() {
		return ""
	}
	band, _ := p.labels.Band(iv.result.Band)
	return p.reader.T("desk.figures", "pd", p.reader.Percent(iv.result.PD), "score", p.reader.Score(iv.result.Score), "band", band)
}

func (p *panel) deciderWords(iv *interview) string {
	amount, _, ok := iv.answers.AmountAndTerm()
	if !iv.complete || !iv.shows() || !ok {
		return ""
	}
	text := p.reader.T("desk.decides." + string(p.edition.Decider(iv.result, amount)))
	if _, caution := p.labels.Band(iv.result.Band); caution != "" {
		text += "\n" + caution
	}
	return text
}

// paymentWords sets the payment against what is left each month, where the
// edition works both out and they are known.
func (p *panel) paymentWords(iv *interview) string {
	share, payment, left, ok := p.edition.PaymentShare()
	if !ok || iv.refused() || !iv.worked[payment].Known() || iv.worked[payment].State != model.Given {
		return ""
	}
	money := func(i int) string { return moneyWords(p.reader, p.labels, iv.worked[i].Low) }
	if !iv.worked[left].Known() || iv.worked[left].State != model.Given {
		return p.reader.T("desk.payment", "payment", money(payment))
	}
	if iv.worked[share].State == model.IsNothingLeft {
		return p.reader.T("desk.payment_nothing_left", "payment", money(payment), "left", money(left))
	}
	percent := p.reader.Rate(model.Rate(iv.worked[share].Low * 1000))
	return p.reader.T("desk.payment_left", "payment", money(payment), "left", money(left), "share", percent)
}

// ruleWords are the rules that fire whatever else is answered, each on a line
// with what it does. They are said at once, also where the result is not shown
// yet: nobody need answer ten more questions for a loan that cannot be.
func (p *panel) ruleWords(iv *interview) string {
	var lines []string
	for _, r := range iv.fires() {
		label, text := p.labels.Rule(r)
		if text != "" {
			label += ". " + text
		}
		lines = append(lines, p.reader.T("desk.rule."+strings.ReplaceAll(string(r.Effect), " ", "_"), "rule", label))
	}
	if iv.complete && iv.shows() {
		if n := len(iv.edition.Ground(iv.answers, iv.today)); n > 0 {
			lines = append(lines, p.reader.T("desk.beyond", "n", n))
		}
	}
	return strings.Join(lines, "\n")
}

// capital is a text with its first letter made large.
func capital(text string) string {
	for i, r := range text {
		if i == 0 {
			return strings.ToUpper(string(r)) + text[len(string(r)):]
		}
	}
	return text
}

// sideWidth gives what stands beside a page's main part a width of its own: a
// third of a small window.
type sideWidth struct{}

const panelWidth = 350

func (sideWidth) MinSize([]fyne.CanvasObject) fyne.Size { return fyne.NewSize(panelWidth, 100) }
func (sideWidth) Layout(objects []fyne.CanvasObject, size fyne.Size) {
	for _, o := range objects {
		o.Move(fyne.NewPos(0, 0))
		o.Resize(size)
	}
}
