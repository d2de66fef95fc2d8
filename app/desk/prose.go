package desk

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/widget"
)

// A prose is a text that wraps and changes with the answers. Each of its lines
// is a text of its own, so that a frame draws only those anew that changed.
type prose struct {
	widget.BaseWidget
	text   string
	size   float32
	colour fyne.ThemeColorName
}

func newProse(size float32, colour fyne.ThemeColorName) *prose {
	p := &prose{size: size, colour: colour}
	p.ExtendBaseWidget(p)
	return p
}

func (p *prose) say(text string) {
	if p.text != text {
		p.text = text
		p.Refresh()
	}
}

func (p *prose) CreateRenderer() fyne.WidgetRenderer { return &proseRenderer{p: p} }

type proseRenderer struct {
	p       *prose
	text    string  // that the lines say
	width   float32 // that they are broken for
	objects []fyne.CanvasObject
}

func (r *proseRenderer) Objects() []fyne.CanvasObject { return r.objects }
func (r *proseRenderer) Destroy()                     {}

// MinSize is the height of the lines as they were last broken.
func (r *proseRenderer) MinSize() fyne.Size {
	return fyne.NewSize(1, lineHeight(r.p.size)*float32(len(r.objects)))
}

func (r *proseRenderer) Refresh() {
	r.Layout(r.p.Size())
	canvas.Refresh(r.p)
}

func (r *proseRenderer) Layout(size fyne.Size) {
	if r.text == r.p.text && r.width == size.Width {
		return
	}
	r.text, r.width = r.p.text, size.Width
	lines, height := breakLines(r.text, r.width, r.p.size, fyne.TextStyle{}), lineHeight(r.p.size)
	for len(r.objects) < len(lines) {
		t := canvas.NewText("", shade(r.p.colour))
		t.TextSize = r.p.size
		t.Move(fyne.NewPos(0, height*float32(len(r.objects))))
		r.objects = append(r.objects, t)
	}
	r.objects = r.objects[:len(lines)]
	for i, line := range lines {
		t := r.objects[i].(*canvas.Text)
		t.Text = line
		t.Resize(fyne.NewSize(r.width, height))
	}
}
