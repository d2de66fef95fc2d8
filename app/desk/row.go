package desk

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/theme"
	"fyne.io/fyne/v2/widget"
)

// A row is one question on the page: its number as on the visit form, what is
// asked, the box, the box's note and, where evidence is asked for, whether a
// paper was seen. The row whose box has the focus is tinted.
type row struct {
	widget.BaseWidget
	number   string
	question string
	help     string
	box      box
	evidence *evidence // nil where none is asked for
	current  bool
	asked    bool // of this applicant
	wide     bool // the box stands beneath the question, over the whole width
}

func newRow(number, question, help string, b box, e *evidence) *row {
	_, wide := b.(*worksheetBox)
	r := &row{number: number, question: question, help: help, box: b, evidence: e, asked: true, wide: wide}
	r.ExtendBaseWidget(r)
	return r
}

// setCurrent tints the row.
func (r *row) setCurrent(on bool) {
	if r.current != on {
		r.current = on
		r.Refresh()
	}
}

// setAsked greys a question that is not asked of this applicant.
func (r *row) setAsked(on bool, why string) {
	if r.asked == on {
		return
	}
	r.asked = on
	if on {
		r.box.Enable()
		r.box.line().hint("")
	} else {
		r.box.Disable()
		r.box.line().hint(why)
	}
	r.Refresh()
}

const (
	numberWidth   = 30
	evidenceWidth = 84
	rightEdge     = 12 // the scroll bar's
	questionGap   = 4
	widest        = 620 // of a box beneath its question
	questionLines = 3
	helpLines     = 3
)

func (r *row) CreateRenderer() fyne.WidgetRenderer {
	v := &questionRenderer{row: r, ground: canvas.NewRectangle(nil), number: canvas.NewText(r.number, nil)}
	v.number.TextSize, v.number.Alignment = theme.TextSize(), fyne.TextAlignTrailing
	for range questionLines {
		v.question = append(v.question, canvas.NewText("", nil))
	}
	for range helpLines {
		v.help = append(v.help, caption(""))
	}
	v.objects = []fyne.CanvasObject{v.ground, v.number, r.box, r.box.line()}
	for _, t := range v.help {
		v.objects = append(v.objects, t)
	}
	for _, t := range v.question {
		t.TextSize = theme.TextSize()
		v.objects = append(v.objects, t)
	}
	if r.evidence != nil {
		v.objects = append(v.objects, r.evidence)
	}
	v.paint()
	return v
}

type questionRenderer struct {
	row      *row
	ground   *canvas.Rectangle
	number   *canvas.Text
	question []*canvas.Text
	help     []*canvas.Text
	objects  []fyne.CanvasObject

	// Every frame asks every row how much room it needs, several times over;
	// that changes only with the width.
	said   widthAnd[float32]   // by say
	needed widthAnd[fyne.Size] // by MinSize
}

// widthAnd is what was worked out for a width.
type widthAnd[T any] struct {
	width float32
	value T
}

func (v *questionRenderer) Objects() []fyne.CanvasObject { return v.objects }
func (v *questionRenderer) Destroy()                     {}

// MinSize leaves room for the question and its help, and for the box and its
// note beside or beneath them.
func (v *questionRenderer) MinSize() fyne.Size {
	width := max(v.row.Size().Width, 480)
	if v.needed.width == width {
		return v.needed.value
	}
	text := 3 + v.say(v.columns(width).questionWidth)
	boxed := v.row.box.MinSize().Height + v.row.box.line().MinSize().Height
	height := max(text, boxed) + questionGap + 3
	if v.row.wide {
		height = text + boxed + 2*questionGap
	}
	v.needed = widthAnd[fyne.Size]{width, fyne.NewSize(480, height)}
	return v.needed.value
}

// columns are where the parts of a row start and how wide they are.
type columns struct{ question, questionWidth, box, boxWidth, evidence float32 }

func (v *questionRenderer) columns(width float32) columns {
	c := columns{question: numberWidth + 8, evidence: width - evidenceWidth - rightEdge}
	rest := c.evidence - c.question
	c.questionWidth, c.box, c.boxWidth = rest*0.45-12, c.question+rest*0.45, rest*0.55-8
	if v.row.evidence == nil {
		c.boxWidth += evidenceWidth
	}
	if v.row.wide {
		c.questionWidth, c.box, c.boxWidth = rest-12, c.question, min(rest+evidenceWidth, widest)
	}
	return c
}

// say fills in the question's and the help's lines for a width, one beneath
// the other, and returns their height.
func (v *questionRenderer) say(width float32) float32 {
	if v.said.width == width {
		return v.said.value
	}
	y := float32(0)
	fill := func(text string, into []*canvas.Text, size float32) {
		for i, line := range wrap(text, width, size, fyne.TextStyle{}, len(into)) {
			into[i].Text = line
			into[i].Move(fyne.NewPos(numberWidth+8, questionGap+3+y))
			into[i].Resize(fyne.NewSize(width, lineHeight(size)))
			if line != "" {
				y += lineHeight(size)
			}
		}
	}
	fill(v.row.question, v.question, theme.TextSize())
	fill(v.row.help, v.help, theme.CaptionTextSize())
	v.said = widthAnd[float32]{width, y}
	return y
}

func (v *questionRenderer) Layout(size fyne.Size) {
	v.ground.Resize(size)
	c := v.columns(size.Width)
	v.number.Move(fyne.NewPos(0, questionGap+3))
	v.number.Resize(fyne.NewSize(numberWidth, lineHeight(theme.TextSize())))
	top := float32(questionGap)
	if text := v.say(c.questionWidth); v.row.wide {
		top += text + questionGap
	}
	height := v.row.box.MinSize().Height
	v.row.box.Move(fyne.NewPos(c.box, top))
	v.row.box.Resize(fyne.NewSize(c.boxWidth, height))
	note := v.row.box.line()
	note.Move(fyne.NewPos(c.box+4, top+height))
	note.Resize(fyne.NewSize(size.Width-c.box-rightEdge, note.MinSize().Height))
	if e := v.row.evidence; e != nil {
		e.Move(fyne.NewPos(c.evidence, questionGap))
		e.Resize(fyne.NewSize(evidenceWidth-4, e.MinSize().Height))
	}
}

func (v *questionRenderer) paint() {
	v.ground.FillColor = shade(theme.ColorNameBackground)
	if v.row.current {
		v.ground.FillColor = shade(colorCurrent)
	}
	ink := theme.ColorNameForeground
	if !v.row.asked {
		ink = theme.ColorNameDisabled
	}
	v.number.Color = shade(colorQuiet)
	for _, t := range v.question {
		t.Color = shade(ink)
	}
}

func (v *questionRenderer) Refresh() {
	v.paint()
	v.Layout(v.row.Size())
	canvas.Refresh(v.row)
}

// evidence shows whether an answer was told or a paper seen; a tap, or the
// window's key for it, changes it.
type evidence struct {
	widget.BaseWidget
	seen    bool
	needed  bool // that a paper be seen
	words   [2]string
	changed func(seen bool)
	text    *canvas.Text
	ground  *canvas.Rectangle
}

func newEvidence(told, seen string, needed bool, changed func(bool)) *evidence {
	e := &evidence{words: [2]string{told, seen}, needed: needed, changed: changed,
		text: canvas.NewText("", nil), ground: canvas.NewRectangle(nil)}
	e.text.TextSize, e.text.Alignment = theme.CaptionTextSize(), fyne.TextAlignCenter
	e.ground.CornerRadius, e.ground.StrokeWidth = 9, 1
	e.ExtendBaseWidget(e)
	e.paint()
	return e
}

// set shows what was kept, without telling.
func (e *evidence) set(seen bool) {
	e.seen = seen
	e.paint()
}

func (e *evidence) toggle() {
	e.set(!e.seen)
	e.changed(e.seen)
}

func (e *evidence) Tapped(*fyne.PointEvent) { e.toggle() }

func (e *evidence) paint() {
	e.text.Text, e.ground.FillColor, e.ground.StrokeColor = e.words[0], shade(theme.ColorNameBackground), shade(theme.ColorNameInputBorder)
	e.text.Color = shade(colorQuiet)
	switch {
	case e.seen:
		e.text.Text, e.text.Color = e.words[1], shade(colorApprove)
		e.ground.StrokeColor = shade(colorApprove)
	case e.needed:
		e.text.Color, e.ground.StrokeColor = shade(theme.ColorNameWarning), shade(theme.ColorNameWarning)
	}
	e.text.Text = shorten(e.text.Text, evidenceWidth-14, e.text.TextSize, fyne.TextStyle{})
	e.text.Refresh()
	e.ground.Refresh()
}

func (e *evidence) CreateRenderer() fyne.WidgetRenderer {
	return &evidenceRenderer{e}
}

type evidenceRenderer struct{ e *evidence }

func (r *evidenceRenderer) Objects() []fyne.CanvasObject {
	return []fyne.CanvasObject{r.e.ground, r.e.text}
}
func (r *evidenceRenderer) Destroy()           {}
func (r *evidenceRenderer) Refresh()           { r.e.paint() }
func (r *evidenceRenderer) MinSize() fyne.Size { return fyne.NewSize(60, 24) }
func (r *evidenceRenderer) Layout(size fyne.Size) {
	r.e.ground.Move(fyne.NewPos(0, 3))
	r.e.ground.Resize(fyne.NewSize(size.Width, 20))
	r.e.text.Move(fyne.NewPos(0, 4))
	r.e.text.Resize(fyne.NewSize(size.Width, 18))
}
