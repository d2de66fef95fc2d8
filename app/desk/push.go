package desk

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/driver/desktop"
	"fyne.io/fyne/v2/theme"
	"fyne.io/fyne/v2/widget"
)

// A push is a button that Enter and Space press as well as a tap.
type push struct {
	widget.BaseWidget
	keys    keys
	text    *canvas.Text
	ground  *canvas.Rectangle
	does    func()
	focused bool
}

func newPush(label string, k keys, does func()) *push {
	p := &push{keys: k, text: figure(theme.TextSize(), true), ground: canvas.NewRectangle(nil), does: does}
	p.text.Text, p.text.Alignment = label, fyne.TextAlignCenter
	p.ground.CornerRadius, p.ground.StrokeWidth = 4, 2
	p.ExtendBaseWidget(p)
	p.paint()
	return p
}

func (p *push) FocusGained()            { p.focused = true; p.paint() }
func (p *push) FocusLost()              { p.focused = false; p.paint() }
func (p *push) TypedRune(rune)          {}
func (p *push) Tapped(*fyne.PointEvent) { p.does() }
func (p *push) Cursor() desktop.Cursor  { return desktop.PointerCursor }
func (p *push) TypedKey(e *fyne.KeyEvent) {
	switch e.Name {
	case fyne.KeyReturn, fyne.KeyEnter, fyne.KeySpace:
		p.does()
	default:
		p.keys.take(e)
	}
}

func (p *push) paint() {
	p.ground.FillColor, p.ground.StrokeColor = shade(theme.ColorNameButton), shade(theme.ColorNameButton)
	p.text.Color = shade(theme.ColorNameForeground)
	if p.focused {
		p.ground.FillColor, p.ground.StrokeColor = shade(theme.ColorNameFocus), shade(theme.ColorNamePrimary)
	}
	p.ground.Refresh()
	p.text.Refresh()
}

func (p *push) CreateRenderer() fyne.WidgetRenderer { return &pushRenderer{p} }

type pushRenderer struct{ p *push }

func (r *pushRenderer) Objects() []fyne.CanvasObject {
	return []fyne.CanvasObject{r.p.ground, r.p.text}
}
func (r *pushRenderer) Destroy() {}
func (r *pushRenderer) Refresh() { r.p.paint() }
func (r *pushRenderer) MinSize() fyne.Size {
	m := r.p.text.MinSize()
	return fyne.NewSize(m.Width+28, m.Height+10)
}
func (r *pushRenderer) Layout(size fyne.Size) {
	r.p.ground.Resize(size)
	r.p.text.Resize(fyne.NewSize(size.Width, r.p.text.MinSize().Height))
	r.p.text.Move(fyne.NewPos(0, 5))
}
