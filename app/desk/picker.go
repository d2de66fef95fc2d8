package desk

import (
	"strings"
	"unicode"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/driver/desktop"
	"fyne.io/fyne/v2/theme"
	"fyne.io/fyne/v2/widget"

	"weighhouse/app/words"
	"weighhouse/model"
)

// An option is one answer of a picker.
type option struct {
	label  string
	key    rune // picks it besides its first letters; 0 for none
	answer model.Answer
}

// A picker chooses one of several labels by keyboard. A few short ones stand
// side by side, and a first letter picks; of more, or longer ones, the chosen
// is shown, and a first letter or Down opens the list. The arrows move, Enter
// goes on, Backspace clears.
type picker struct {
	widget.BaseWidget
	hooks
	options  []option
	chosen   int // -1 for none
	note     *note
	inRow    bool
	focused  bool
	disabled bool
}

// rowMost is how wide a picker's options may be together to stand in a row,
// and rowOptions how many they may be.
const (
	rowMost    = 295
	rowOptions = 6
)

func newPicker(reader *words.Reader, keys keys, options []option) *picker {
	p := &picker{hooks: hooks{reader: reader, keys: keys}, options: options, chosen: -1, note: newNote(1)}
	width := float32(0)
	for _, o := range options {
		width += p.chipWidth(o.label)
	}
	p.inRow = len(options) <= rowOptions && width <= rowMost
	p.ExtendBaseWidget(p)
	return p
}

// newYesNoBox takes yes or no; their labels are the edition's or, where those
// are empty, the reader's language's. The key of either word in that language
// picks it whatever the labels are.
func newYesNoBox(reader *words.Reader, keys keys, yes, no option, unknown string) *picker {
	if yes.label == "" {
		yes.label = reader.T("yes_no.yes")
	}
	if no.label == "" {
		no.label = reader.T("yes_no.no")
	}
	yes.key, no.key = []rune(reader.T("yes_no.yes_key"))[0], []rune(reader.T("yes_no.no_key"))[0]
	options := []option{yes, no}
	if unknown != "" {
		options = append(options, unknownOption(unknown))
	}
	return newPicker(reader, keys, options)
}

// unknownOption is the answer "does not know", picked by its ? key.
func unknownOption(label string) option {
	return option{label, '?', model.Answer{State: model.StatedUnknown}}
}

func (p *picker) answer() model.Answer {
	if p.chosen < 0 {
		return model.Answer{}
	}
	return p.options[p.chosen].answer
}

func (p *picker) put(a model.Answer) {
	p.chosen = -1
	for i, o := range p.options {
		if a.State != model.Missing && same(o.answer, a) {
			p.chosen = i
		}
	}
	p.say()
	p.Refresh()
}

func (p *picker) line() *note    { return p.note }
func (p *picker) on() *hooks     { return &p.hooks }
func (p *picker) focus()         { focusOn(p) }
func (p *picker) Disabled() bool { return p.disabled }
func (p *picker) Enable()        { p.disabled = false; p.Refresh() }
func (p *picker) Disable() {
	p.disabled = true
	p.note.hint("")
	p.Refresh()
}

// choose picks an option, -1 for none, and tells the page.
func (p *picker) choose(i int) {
	if i == p.chosen || p.disabled {
		return
	}
	p.chosen = i
	p.say()
	p.Refresh()
	p.tell(p.answer())
}

// say says what the page has against the choice.
func (p *picker) say() {
	v := p.judge(p.answer())
	switch {
	case v.refusal != "":
		p.note.refuse(v.refusal)
	case v.question != "":
		p.note.ask(v.question)
	case p.chosen < 0 && p.focused && !p.inRow:
		p.note.hint(p.reader.T("box.pick"))
	default:
		p.note.hint("")
	}
}

func (p *picker) FocusGained() {
	p.focused = true
	p.say()
	p.Refresh()
	if p.gained != nil {
		p.gained()
	}
}

func (p *picker) FocusLost() {
	p.focused = false
	p.say()
	p.Refresh()
}

func (p *picker) TypedKey(k *fyne.KeyEvent) {
	if p.keys.take(k) {
		return
	}
	switch k.Name {
	case fyne.KeyReturn, fyne.KeyEnter:
		p.goOn(p)
	case fyne.KeyBackspace, fyne.KeyDelete:
		p.choose(-1)
	case fyne.KeyDown, fyne.KeyRight:
		if !p.inRow {
			p.open("")
			return
		}
		p.choose(min(p.chosen+1, len(p.options)-1))
	case fyne.KeyUp, fyne.KeyLeft:
		if !p.inRow {
			p.open("")
			return
		}
		p.choose(max(p.chosen-1, 0))
	case fyne.KeyHome:
		p.choose(0)
	case fyne.KeyEnd:
		p.choose(len(p.options) - 1)
	}
}

// TypedRune picks by a key or a first letter; where several labels begin
// alike the same letter goes round them.
func (p *picker) TypedRune(c rune) {
	typed := words.Fold(string(c))
	if p.disabled || !unicode.IsPrint(c) {
		return
	}
	for i, o := range p.options {
		if o.key != 0 && typed == string(o.key) {
			p.choose(i)
			return
		}
	}
	switch {
	case !p.inRow && c == ' ':
		p.open("")
	case !p.inRow:
		p.open(string(c))
	case c == ' ':
		p.choose((p.chosen + 1) % len(p.options))
	default:
		for step := range p.options {
			i := (p.chosen + 1 + step) % len(p.options)
			if strings.HasPrefix(words.Fold(p.options[i].label), typed) {
				p.choose(i)
				return
			}
		}
	}
}

func (p *picker) Tapped(e *fyne.PointEvent) {
	if p.disabled {
		return
	}
	p.focus()
	if !p.inRow {
		p.open("")
		return
	}
	x := float32(0)
	for i, o := range p.options {
		if x += p.chipWidth(o.label); e.Position.X < x {
			p.choose(i)
			return
		}
	}
}

// Cursor shows that a click does something.
func (p *picker) Cursor() desktop.Cursor { return desktop.PointerCursor }

const chipGap = 4

// chipWidth is an option's room in a row, with the gap after it.
func (p *picker) chipWidth(label string) float32 {
	return fyne.MeasureText(label, theme.TextSize(), fyne.TextStyle{}).Width + 4*theme.InnerPadding() + chipGap
}

// boxHeight is that of every box of one line.
func boxHeight() float32 { return lineHeight(theme.TextSize()) + 2*theme.InnerPadding() }

func (p *picker) CreateRenderer() fyne.WidgetRenderer {
	if p.inRow {
		r := &rowRenderer{p: p}
		for _, o := range p.options {
			ground, text := canvas.NewRectangle(nil), canvas.NewText(o.label, nil)
			ground.CornerRadius = 2 * theme.InputRadiusSize()
			text.Alignment = fyne.TextAlignCenter
			r.grounds, r.texts = append(r.grounds, ground), append(r.texts, text)
			r.objects = append(r.objects, ground, text)
		}
		r.paint()
		return r
	}
	r := &faceRenderer{p: p, ground: canvas.NewRectangle(nil), lines: [2]*canvas.Text{canvas.NewText("", nil), canvas.NewText("", nil)},
		arrow: [2]*canvas.Line{canvas.NewLine(nil), canvas.NewLine(nil)}}
	r.ground.CornerRadius = theme.InputRadiusSize()
	return r
}

// rowRenderer draws the options side by side. The chosen one is filled and
// its border is heavy, so it shows without colour too.
type rowRenderer struct {
	p       *picker
	grounds []*canvas.Rectangle
	texts   []*canvas.Text
	objects []fyne.CanvasObject
}

func (r *rowRenderer) Objects() []fyne.CanvasObject { return r.objects }
func (r *rowRenderer) Destroy()                     {}
func (r *rowRenderer) MinSize() fyne.Size {
	width := float32(-chipGap)
	for _, o := range r.p.options {
		width += r.p.chipWidth(o.label)
	}
	return fyne.NewSize(width, boxHeight())
}

func (r *rowRenderer) Layout(fyne.Size) {
	x := float32(0)
	for i, o := range r.p.options {
		width := r.p.chipWidth(o.label)
		size := fyne.NewSize(width-chipGap, boxHeight())
		r.grounds[i].Move(fyne.NewPos(x, 0))
		r.grounds[i].Resize(size)
		r.texts[i].Move(fyne.NewPos(x, 0))
		r.texts[i].Resize(size)
		x += width
	}
}

func (r *rowRenderer) Refresh() {
	r.paint()
	canvas.Refresh(r.p)
}

func (r *rowRenderer) paint() {
	for i, ground := range r.grounds {
		text := r.texts[i]
		ground.FillColor, ground.StrokeColor, ground.StrokeWidth = shade(theme.ColorNameInputBackground), shade(theme.ColorNameInputBorder), 1
		text.Color, text.TextStyle.Bold = shade(theme.ColorNameForeground), false
		switch {
		case r.p.disabled:
			ground.FillColor, ground.StrokeColor = shade(theme.ColorNameDisabledButton), shade(theme.ColorNameSeparator)
			text.Color = shade(theme.ColorNameDisabled)
		case i == r.p.chosen:
			ground.FillColor, ground.StrokeColor = shade(theme.ColorNamePrimary), shade(theme.ColorNamePrimary)
			text.Color = shade(theme.ColorNameForegroundOnPrimary)
		}
		if r.p.focused && !r.p.disabled {
			ground.StrokeColor, ground.StrokeWidth = shade(theme.ColorNamePrimary), 2
		}
	}
}

// faceRenderer draws the chosen label and an arrow. A label too long for a
// line is drawn smaller, on two lines if need be, in the same room.
type faceRenderer struct {
	p      *picker
	ground *canvas.Rectangle
	lines  [2]*canvas.Text
	arrow  [2]*canvas.Line
}

const (
	arrowRoom  = 24
	smallLabel = 11 // two lines of it have the room of one
)

func (r *faceRenderer) Objects() []fyne.CanvasObject {
	return []fyne.CanvasObject{r.ground, r.lines[0], r.lines[1], r.arrow[0], r.arrow[1]}
}
func (r *faceRenderer) Destroy()           {}
func (r *faceRenderer) MinSize() fyne.Size { return fyne.NewSize(200, boxHeight()) }

func (r *faceRenderer) Refresh() {
	r.Layout(r.p.Size())
	canvas.Refresh(r.p)
}

func (r *faceRenderer) Layout(size fyne.Size) {
	p, pad := r.p, theme.InnerPadding()
	r.ground.Resize(size)
	r.ground.FillColor, r.ground.StrokeColor, r.ground.StrokeWidth = shade(theme.ColorNameInputBackground), shade(theme.ColorNameInputBorder), 1
	colour := shade(theme.ColorNameForeground)
	if p.disabled {
		colour = shade(theme.ColorNameDisabled)
		r.ground.FillColor, r.ground.StrokeColor = shade(theme.ColorNameDisabledButton), shade(theme.ColorNameSeparator)
	} else if p.focused {
		r.ground.StrokeColor, r.ground.StrokeWidth = shade(theme.ColorNamePrimary), 2
	}
	label := ""
	if p.chosen >= 0 {
		label = p.options[p.chosen].label
	}
	width, textSize, lines := size.Width-2*pad-arrowRoom, theme.TextSize(), 1
	if fyne.MeasureText(label, textSize, fyne.TextStyle{}).Width > width {
		textSize = smallLabel
		if fyne.MeasureText(label, textSize, fyne.TextStyle{}).Width > width {
			lines = 2
		}
	}
	height := lineHeight(textSize)
	top := (size.Height - height*float32(lines)) / 2
	parts := append(wrap(label, width, textSize, fyne.TextStyle{}, lines), "")
	for i, t := range r.lines {
		t.Text, t.TextSize, t.Color = parts[i], textSize, colour
		t.Move(fyne.NewPos(pad, top+height*float32(i)))
		t.Resize(fyne.NewSize(width, height))
	}
	x, y := size.Width-arrowRoom/2-4, size.Height/2
	for i, l := range r.arrow {
		l.StrokeColor, l.StrokeWidth = colour, 1.5
		l.Position1 = fyne.NewPos(x+5*float32(2*i-1), y-2.5)
		l.Position2 = fyne.NewPos(x, y+2.5)
	}
}
