package desk

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/driver/desktop"
	"fyne.io/fyne/v2/layout"
	"fyne.io/fyne/v2/theme"
	"fyne.io/fyne/v2/widget"
)

// The window's keys, in the order they stand along its foot. Each does the
// same on every page.
var windowKeys = []struct {
	key  fyne.KeyName
	word string // under "shell." in the words
}{
	{fyne.KeyF1, "keys"}, {fyne.KeyF2, "new"}, {fyne.KeyF3, "kept"}, {fyne.KeyF4, "scorecards"},
	{fyne.KeyF5, "why"}, {fyne.KeyF6, "details"}, {fyne.KeyF7, "fits"}, {fyne.KeyF8, "language"},
	{fyne.KeyF9, "hide"}, {fyne.KeyF10, "finish"}, {fyne.KeyF11, "light"}, {fyne.KeyF12, "evidence"},
}

// key does what a key of the window does, and tells whether it is one.
func (d *Desk) key(name fyne.KeyName) bool {
	if d.page.key(name) {
		return true
	}
	switch name {
	case fyne.KeyF1:
		d.show("keys")
	case fyne.KeyF2:
		d.newApplication()
	case fyne.KeyF3:
		d.show("kept")
	case fyne.KeyF4:
		d.show("scorecards")
	case fyne.KeyF5:
		d.show("why")
	case fyne.KeyF6:
		d.show("details")
	case fyne.KeyF7:
		d.show("fits")
	case fyne.KeyF8:
		d.nextLanguage()
	case fyne.KeyF9:
		d.hide()
	case fyne.KeyF10:
		d.handIn()
	case fyne.KeyF11:
		d.turnLight()
	case fyne.KeyEscape:
		d.show("interview")
	default:
		return d.scroll(name)
	}
	return true
}

// long is a page's content that may be longer than the window; the arrows,
// Page Up, Page Down, Home and End move it where nothing on the page uses them.
func (d *Desk) long(content fyne.CanvasObject) *container.Scroll {
	d.scrolled = container.NewVScroll(content)
	return d.scrolled
}

func (d *Desk) scroll(name fyne.KeyName) bool {
	if d.scrolled == nil {
		return false
	}
	const line = 40
	page := max(d.scrolled.Size().Height-line, line)
	by, ok := map[fyne.KeyName]float32{fyne.KeyDown: line, fyne.KeyUp: -line, fyne.KeyPageDown: page, fyne.KeyPageUp: -page,
		fyne.KeyEnd: d.scrolled.Content.Size().Height, fyne.KeyHome: -d.scrolled.Content.Size().Height}[name]
	if ok {
		most := max(d.scrolled.Content.Size().Height-d.scrolled.Size().Height, 0)
		d.scrolled.ScrollToOffset(fyne.NewPos(0, min(max(d.scrolled.Offset.Y+by, 0), most)))
	}
	return ok
}

// keyBar names the keys along the foot; a click does what the key does.
func (d *Desk) keyBar() fyne.CanvasObject {
	bar := container.New(layout.NewCustomPaddedHBoxLayout(2))
	for _, k := range windowKeys {
		bar.Objects = append(bar.Objects, newKeyHint(string(k.key), d.reader.T("shell."+k.word), func() { d.key(k.key) }))
	}
	return container.NewStack(canvas.NewRectangle(shade(colorBand)), container.NewHScroll(bar))
}

// A keyHint is a key's name and what it does. It takes a click and never the
// focus.
type keyHint struct {
	widget.BaseWidget
	name, does *canvas.Text
	ground     *canvas.Rectangle
	tapped     func()
}

func newKeyHint(name, does string, tapped func()) *keyHint {
	h := &keyHint{name: canvas.NewText(name, shade(theme.ColorNamePrimary)), does: canvas.NewText(does, shade(theme.ColorNameForeground)),
		ground: canvas.NewRectangle(shade(colorBand)), tapped: tapped}
	h.name.TextSize, h.name.TextStyle.Bold = 12, true
	h.does.TextSize = 12
	h.ExtendBaseWidget(h)
	return h
}

func (h *keyHint) Tapped(*fyne.PointEvent)        { h.tapped() }
func (h *keyHint) MouseIn(*desktop.MouseEvent)    { h.paint(theme.ColorNameHover) }
func (h *keyHint) MouseOut()                      { h.paint(colorBand) }
func (h *keyHint) MouseMoved(*desktop.MouseEvent) {}

func (h *keyHint) paint(c fyne.ThemeColorName) {
	h.ground.FillColor = shade(c)
	h.ground.Refresh()
}

func (h *keyHint) CreateRenderer() fyne.WidgetRenderer {
	row := container.New(layout.NewCustomPaddedHBoxLayout(5), h.name, h.does)
	return widget.NewSimpleRenderer(container.NewStack(h.ground, container.New(layout.NewCustomPaddedLayout(4, 4, 6, 6), row)))
}
