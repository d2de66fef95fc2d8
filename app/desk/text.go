package desk

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/layout"
	"fyne.io/fyne/v2/theme"
	"fyne.io/fyne/v2/widget"
)

// Small texts. Each figure that changes is a text of its own, for Fyne draws a
// new string from its outlines, and a label that never changes costs nothing.

// figure is one line that changes often.
func figure(size float32, bold bool) *canvas.Text {
	t := canvas.NewText("", shade(theme.ColorNameForeground))
	t.TextSize, t.TextStyle = size, fyne.TextStyle{Bold: bold}
	return t
}

// setFigure changes a figure's text and colour, and draws it only if either
// is new.
func setFigure(t *canvas.Text, text string, c fyne.ThemeColorName) {
	if color := shade(c); t.Text != text || t.Color != color {
		t.Text, t.Color = text, color
		t.Refresh()
	}
}

// caption is a quiet fixed line.
func caption(text string) *canvas.Text {
	t := canvas.NewText(text, shade(colorQuiet))
	t.TextSize = theme.CaptionTextSize()
	return t
}

// paragraph is a text that wraps.
func paragraph(text string) *widget.Label {
	l := widget.NewLabel(text)
	l.Wrapping = fyne.TextWrapWord
	return l
}

// setParagraph changes a paragraph's text if it is new.
func setParagraph(l *widget.Label, text string) {
	if l.Text != text {
		l.SetText(text)
	}
}

// heading is the title of a page or a part of it.
func heading(text string) *canvas.Text {
	t := canvas.NewText(text, shade(theme.ColorNameForeground))
	t.TextSize, t.TextStyle = theme.TextSubHeadingSize(), fyne.TextStyle{Bold: true}
	return t
}

// inset gives an object room on every side.
func inset(o fyne.CanvasObject) fyne.CanvasObject {
	return container.NewPadded(container.NewPadded(o))
}

// frame puts parts around a middle, as container.NewBorder does, but in the
// order that Tab goes: from the top down. Any part but the middle may be nil.
func frame(top, bottom, left, right, middle fyne.CanvasObject) *fyne.Container {
	c := container.New(layout.NewBorderLayout(top, bottom, left, right))
	for _, o := range []fyne.CanvasObject{top, left, middle, right, bottom} {
		if o != nil {
			c.Objects = append(c.Objects, o)
		}
	}
	return c
}
