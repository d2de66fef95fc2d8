package desk

import (
	"strconv"
	"unicode/utf8"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/driver/desktop"
	"fyne.io/fyne/v2/theme"
	"fyne.io/fyne/v2/widget"

	"weighhouse/model"
)

// An entry is Fyne's with the manners of a form: Enter is heard, the window's
// own keys and shortcuts work from inside it, what stands in it is selected
// when the focus comes, and it holds no more text than it can draw.
type entry struct {
	widget.Entry
	keys keys
	most int  // characters
	lit  bool // has the focus
	// letter may take a typed character for itself.
	letter func(rune) bool
	enter  func()
	moved  func(gained bool)
	// full hears that there is no room for what was typed or pasted.
	full func(model.Problem)
}

func newEntry(keys keys, most int) *entry {
	e := &entry{keys: keys, most: most}
	e.Wrapping = fyne.TextWrap(fyne.TextTruncateClip)
	e.ExtendBaseWidget(e)
	return e
}

// lastEntry had the focus last. When a window comes back to the front Fyne
// gives the focus anew; then nothing is selected, or the next key would wipe
// out a half-typed figure.
var lastEntry *entry

func (e *entry) FocusGained() {
	e.lit = true
	e.Entry.FocusGained()
	if lastEntry != e && !e.MultiLine {
		e.Entry.TypedShortcut(&fyne.ShortcutSelectAll{})
	}
	lastEntry = e
	if e.moved != nil {
		e.moved(true)
	}
}

func (e *entry) FocusLost() {
	e.lit = false
	e.Entry.FocusLost()
	if e.moved != nil {
		e.moved(false)
	}
}

// AcceptsTab is false: Tab goes on even from several lines.
func (e *entry) AcceptsTab() bool { return false }

func (e *entry) TypedKey(k *fyne.KeyEvent) {
	enter := k.Name == fyne.KeyReturn || k.Name == fyne.KeyEnter
	switch {
	case e.keys.take(k):
	case enter && !e.MultiLine && e.enter != nil:
		e.enter()
	case enter && e.MultiLine && !e.fits(1):
	default:
		e.Entry.TypedKey(k)
	}
}

func (e *entry) TypedRune(c rune) {
	if e.Disabled() || (e.letter != nil && e.letter(c)) || !e.fits(1) {
		return
	}
	e.Entry.TypedRune(c)
}

func (e *entry) TypedShortcut(s fyne.Shortcut) {
	switch s := s.(type) {
	case *fyne.ShortcutPaste:
		if !e.fits(utf8.RuneCountInString(s.Clipboard.Content())) {
			return
		}
	case *desktop.CustomShortcut:
		switch s.KeyName {
		case fyne.KeyLeft, fyne.KeyRight, fyne.KeyBackspace, fyne.KeyDelete:
		default:
			if c, ok := canvasOf(e).(fyne.Shortcutable); ok {
				c.TypedShortcut(s)
			}
			return
		}
	}
	e.Entry.TypedShortcut(s)
}

// rewrite changes the text without telling of it.
func (e *entry) rewrite(text string) {
	if text != e.Text {
		heard := e.OnChanged
		e.OnChanged = nil
		e.SetText(text)
		e.OnChanged = heard
	}
}

// fits tells that there is room for n more characters, and says where not.
func (e *entry) fits(n int) bool {
	length := utf8.RuneCountInString(e.Text) - utf8.RuneCountInString(e.SelectedText()) + n
	if length <= e.most {
		return true
	}
	if e.full != nil {
		e.full(model.Problem{Code: "text_too_long", Args: model.Args{"length": strconv.Itoa(length), "most": strconv.Itoa(e.most)}})
	}
	return false
}

// CreateRenderer is Fyne's with a heavier border under the focus, for bad
// light, and a fainter one where nothing may be entered.
func (e *entry) CreateRenderer() fyne.WidgetRenderer {
	return &entryRenderer{e.Entry.CreateRenderer(), e}
}

type entryRenderer struct {
	fyne.WidgetRenderer
	e *entry
}

func (r *entryRenderer) Refresh() {
	r.WidgetRenderer.Refresh()
	r.paint()
}

func (r *entryRenderer) Layout(size fyne.Size) {
	r.WidgetRenderer.Layout(size)
	r.paint()
}

func (r *entryRenderer) paint() {
	ground, ok := r.Objects()[0].(*canvas.Rectangle)
	border, yes := r.Objects()[1].(*canvas.Rectangle)
	if !ok || !yes {
		return
	}
	border.StrokeWidth = 1
	if r.e.Disabled() {
		ground.FillColor, border.StrokeColor = shade(theme.ColorNameDisabledButton), shade(theme.ColorNameSeparator)
	} else if r.e.lit {
		border.StrokeWidth = 2
	}
}
