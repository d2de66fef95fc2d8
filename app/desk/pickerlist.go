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
)

// A pickerList is the open list of a picker, over the page. Letters narrow it
// to the labels with a word that begins so; Enter or Tab takes the marked one
// and goes on, Escape leaves all as it was.
type pickerList struct {
	widget.BaseWidget
	picker *picker
	canvas fyne.Canvas
	at     fyne.Position // of the picker
	typed  string
	found  []int // places among the picker's options
	marked int   // place among found
	top    int   // the first row that shows
}

// open shows the list, narrowed to what is typed so far.
func (p *picker) open(typed string) {
	c := canvasOf(p)
	if c == nil || p.disabled {
		return
	}
	l := &pickerList{picker: p, canvas: c, at: fyne.CurrentApp().Driver().AbsolutePositionForObject(p)}
	l.ExtendBaseWidget(l)
	l.narrow(typed)
	c.Overlays().Add(l)
	l.Resize(c.Size())
	c.Focus(l)
}

// narrow finds the options for what is typed: those whose label begins so
// first, then those with a later word that does.
func (l *pickerList) narrow(typed string) {
	l.typed, l.marked, l.top = typed, 0, 0
	l.found = l.found[:0]
	want := words.Fold(typed)
	for _, later := range []bool{false, true} {
		for i, o := range l.picker.options {
			label := words.Fold(o.label)
			if begins := strings.HasPrefix(label, want); begins != later && (begins || wordBegins(label, want)) {
				l.found = append(l.found, i)
			}
		}
	}
	for row, i := range l.found {
		if typed == "" && i == l.picker.chosen {
			l.mark(row)
		}
	}
	l.Refresh()
}

// wordBegins tells that some word of a label begins a text wanted.
func wordBegins(label, want string) bool {
	between := true
	for at, c := range label {
		if between && strings.HasPrefix(label[at:], want) {
			return true
		}
		between = !unicode.IsLetter(c) && !unicode.IsDigit(c)
	}
	return false
}

func (l *pickerList) mark(row int) {
	if len(l.found) == 0 {
		return
	}
	l.marked = min(max(row, 0), len(l.found)-1)
	l.top = min(max(l.top, l.marked-l.shown()+1), l.marked)
	l.Refresh()
}

func (l *pickerList) close() {
	l.canvas.Overlays().Remove(l)
	l.picker.focus()
}

// take picks the marked option and goes on.
func (l *pickerList) take() {
	if len(l.found) == 0 {
		return
	}
	l.close()
	l.picker.choose(l.found[l.marked])
	l.picker.goOn(l.picker)
}

func (l *pickerList) FocusGained() {}
func (l *pickerList) FocusLost()   {}

// AcceptsTab keeps Tab, which would find nowhere to go.
func (l *pickerList) AcceptsTab() bool { return true }

func (l *pickerList) TypedKey(k *fyne.KeyEvent) {
	if ofWindow(k.Name) {
		l.close()
		l.picker.keys.take(k)
		return
	}
	switch k.Name {
	case fyne.KeyReturn, fyne.KeyEnter, fyne.KeyTab:
		l.take()
	case fyne.KeyEscape:
		l.close()
	case fyne.KeyDown:
		l.mark(l.marked + 1)
	case fyne.KeyUp:
		l.mark(l.marked - 1)
	case fyne.KeyPageDown:
		l.mark(l.marked + l.shown())
	case fyne.KeyPageUp:
		l.mark(l.marked - l.shown())
	case fyne.KeyHome:
		l.mark(0)
	case fyne.KeyEnd:
		l.mark(len(l.found) - 1)
	case fyne.KeyBackspace:
		if typed := []rune(l.typed); len(typed) > 0 {
			l.narrow(string(typed[:len(typed)-1]))
		}
	}
}

// ofWindow tells a function key, F1 and so on, from letters.
func ofWindow(name fyne.KeyName) bool { return len(name) > 1 && name[0] == 'F' && name[1] <= '9' }

func (l *pickerList) TypedRune(c rune) {
	for i, o := range l.picker.options {
		if o.key == c {
			l.close()
			l.picker.choose(i)
			return
		}
	}
	if unicode.IsPrint(c) && len(l.typed) < typedMost && (c != ' ' || l.typed != "") {
		l.narrow(l.typed + string(c))
	}
}

func (l *pickerList) Tapped(e *fyne.PointEvent) {
	at, size := l.frame()
	if p := e.Position.Subtract(at); p.X >= 0 && p.X < size.Width && p.Y >= 0 && p.Y < size.Height {
		if row := l.top + int(p.Y/boxHeight()); row < len(l.found) {
			l.mark(row)
			l.take()
		}
		return
	}
	l.close()
}

func (l *pickerList) MouseIn(*desktop.MouseEvent) {}
func (l *pickerList) MouseOut()                   {}
func (l *pickerList) MouseMoved(e *desktop.MouseEvent) {
	at, size := l.frame()
	p := e.Position.Subtract(at)
	if row := l.top + int(p.Y/boxHeight()); p.X >= 0 && p.X < size.Width && p.Y >= 0 && row < len(l.found) && row < l.top+l.shown() && row != l.marked {
		l.mark(row)
	}
}

// listRows is how many rows show at the most.
const listRows = 12

// shown is how many rows show; one at least, to say that there is none.
func (l *pickerList) shown() int {
	room := int((l.canvas.Size().Height - 2*theme.Padding()) / boxHeight())
	return max(1, min(listRows, len(l.found), room))
}

// frame is where the list stands: under the picker or, where there is no room,
// above it; wide enough for the longest label, as far as the window is.
func (l *pickerList) frame() (fyne.Position, fyne.Size) {
	window, pad := l.canvas.Size(), theme.Padding()
	width := l.picker.Size().Width
	for _, o := range l.picker.options {
		width = max(width, fyne.MeasureText(o.label, theme.TextSize(), fyne.TextStyle{}).Width+2*theme.InnerPadding()+8)
	}
	width = min(width, window.Width-2*pad)
	height := boxHeight() * float32(l.shown())
	x := max(pad, min(l.at.X, window.Width-width-pad))
	y := l.at.Y + boxHeight()
	if y+height > window.Height-pad {
		y = max(pad, l.at.Y-height)
		if y+height > l.at.Y {
			y = max(pad, window.Height-height-pad)
		}
	}
	return fyne.NewPos(x, y), fyne.NewSize(width, height)
}

func (l *pickerList) CreateRenderer() fyne.WidgetRenderer {
	r := &listRenderer{l: l, ground: canvas.NewRectangle(nil), bar: canvas.NewRectangle(nil), slide: canvas.NewRectangle(nil)}
	r.objects = []fyne.CanvasObject{r.ground, r.bar, r.slide}
	for range listRows {
		t := canvas.NewText("", nil)
		r.texts = append(r.texts, t)
		r.objects = append(r.objects, t)
	}
	return r
}

type listRenderer struct {
	l                  *pickerList
	ground, bar, slide *canvas.Rectangle
	texts              []*canvas.Text
	objects            []fyne.CanvasObject
}

func (r *listRenderer) Objects() []fyne.CanvasObject { return r.objects }
func (r *listRenderer) Destroy()                     {}
func (r *listRenderer) MinSize() fyne.Size           { return fyne.NewSize(1, 1) }
func (r *listRenderer) Refresh() {
	r.Layout(r.l.Size())
	canvas.Refresh(r.l)
}

func (r *listRenderer) Layout(fyne.Size) {
	l, pad, height := r.l, theme.InnerPadding(), boxHeight()
	at, size := l.frame()
	r.ground.FillColor, r.ground.StrokeColor, r.ground.StrokeWidth = shade(theme.ColorNameOverlayBackground), shade(theme.ColorNamePrimary), 2
	place(r.ground, at.X-2, at.Y-2, size.Width+4, size.Height+4)
	r.bar.FillColor = shade(theme.ColorNamePrimary)
	place(r.bar, at.X, at.Y+height*float32(l.marked-l.top), size.Width, height)
	r.bar.Hidden = len(l.found) == 0
	r.slide.Hidden = len(l.found) <= l.shown()
	if !r.slide.Hidden {
		r.slide.FillColor = shade(theme.ColorNameScrollBar)
		part := size.Height / float32(len(l.found))
		place(r.slide, at.X+size.Width-4, at.Y+part*float32(l.top), 4, part*float32(l.shown()))
	}
	for i, t := range r.texts {
		row := l.top + i
		text, colour := "", shade(theme.ColorNameForeground)
		switch {
		case i >= l.shown():
		case row < len(l.found):
			text = l.picker.options[l.found[row]].label
			if row == l.marked {
				colour = shade(theme.ColorNameForegroundOnPrimary)
			}
		case i == 0:
			text = l.picker.reader.T("box.pick_none", "typed", l.typed)
			colour = shade(theme.ColorNameError)
		}
		t.TextSize, t.Color = theme.TextSize(), colour
		t.Text = shorten(text, size.Width-2*pad-8, t.TextSize, fyne.TextStyle{})
		place(t, at.X+pad, at.Y+height*float32(i), size.Width-2*pad, height)
		t.Refresh()
	}
}

func place(o fyne.CanvasObject, x, y, w, h float32) {
	o.Move(fyne.NewPos(x, y))
	o.Resize(fyne.NewSize(w, h))
}
