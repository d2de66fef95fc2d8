package desk

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/theme"
	"fyne.io/fyne/v2/widget"
)

// A note is the room beneath a box for what it has to say. It takes the same
// room whether it says something or not, so nothing moves.
type note struct {
	widget.BaseWidget
	lines  int
	text   string
	colour fyne.ThemeColorName
}

func newNote(lines int) *note {
	n := &note{lines: lines, colour: colorQuiet}
	n.ExtendBaseWidget(n)
	return n
}

// hint says something of lesser weight, such as an amount in words.
func (n *note) hint(text string) { n.say(text, colorQuiet) }

// ask says what is questioned.
func (n *note) ask(text string) { n.say(text, theme.ColorNameWarning) }

// refuse says what is wrong.
func (n *note) refuse(text string) { n.say(text, theme.ColorNameError) }

func (n *note) say(text string, colour fyne.ThemeColorName) {
	if n.text != text || n.colour != colour {
		n.text, n.colour = text, colour
		n.Refresh()
	}
}

func (n *note) CreateRenderer() fyne.WidgetRenderer {
	r := &noteRenderer{note: n}
	for range n.lines {
		t := canvas.NewText("", shade(colorQuiet))
		t.TextSize = theme.CaptionTextSize()
		r.texts = append(r.texts, t)
		r.objects = append(r.objects, t)
	}
	return r
}

type noteRenderer struct {
	note    *note
	texts   []*canvas.Text
	objects []fyne.CanvasObject
}

func (r *noteRenderer) Objects() []fyne.CanvasObject { return r.objects }
func (r *noteRenderer) Destroy()                     {}
func (r *noteRenderer) MinSize() fyne.Size {
	return fyne.NewSize(40, lineHeight(theme.CaptionTextSize())*float32(r.note.lines))
}

func (r *noteRenderer) Layout(size fyne.Size) {
	height, textSize := lineHeight(theme.CaptionTextSize()), theme.CaptionTextSize()
	if len(breakLines(r.note.text, size.Width, textSize, fyne.TextStyle{})) > r.note.lines {
		textSize = smallLabel
	}
	for i, line := range wrap(r.note.text, size.Width, textSize, fyne.TextStyle{}, r.note.lines) {
		t := r.texts[i]
		t.Move(fyne.NewPos(0, height*float32(i)))
		t.Resize(fyne.NewSize(size.Width, height))
		if colour := shade(r.note.colour); t.Text != line || t.Color != colour || t.TextSize != textSize {
			t.Text, t.Color, t.TextSize = line, colour, textSize
			t.Refresh()
		}
	}
}

func (r *noteRenderer) Refresh() { r.Layout(r.note.Size()) }

func lineHeight(size float32) float32 { return fyne.MeasureText("M", size, fyne.TextStyle{}).Height }
