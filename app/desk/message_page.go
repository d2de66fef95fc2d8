package desk

import (
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/theme"

	"weighhouse/app/words"
	"weighhouse/model"
	"weighhouse/store"
)

// messagePage says what stands in the way of the questions.
type messagePage struct {
	desk *Desk
	err  error
}

func (p *messagePage) opened()               {}
func (p *messagePage) key(fyne.KeyName) bool { return false }
func (p *messagePage) object() fyne.CanvasObject {
	return message(errorWords(p.desk.reader, p.err))
}

// message is all that stands on a page.
func message(text string) fyne.CanvasObject {
	l := paragraph(text)
	l.SizeName = theme.SizeNameSubHeadingText
	return inset(l)
}

// nothingYet stands where a page has nothing to show, and says why. The
// application is nil where there is none.
func (d *Desk) nothingYet(title string, iv *interview) fyne.CanvasObject {
	key := "desk.no_application"
	switch {
	case d.hidden:
		key = "desk.hidden"
	case iv != nil:
		key = iv.waitsFor()
	}
	return inset(frame(heading(title), nil, nil, nil, message(d.reader.T(key))))
}

// curtain covers the result from whoever looks over the desk.
func (d *Desk) curtain() fyne.CanvasObject {
	return container.NewStack(canvas.NewRectangle(shade(colorRaised)), paragraph(d.reader.T("desk.hidden")))
}

// refuse says why the branch cannot be opened. There is nobody's language to
// go by yet but the one asked for.
func (d *Desk) refuse(o Options, err error) {
	r := words.New(words.StyleOf(o.Language))
	d.fill(message(r.T("shell.cannot_open", "reason", errorWords(r, err))))
}

// errorWords are all problems of an error, a line each; empty for none.
func errorWords(r *words.Reader, err error) string { return problemLines(r, store.Problems(err)) }

func problemLines(r *words.Reader, problems []model.Problem) string {
	var lines []string
	for _, p := range problems {
		lines = append(lines, r.Problem(p))
	}
	return strings.Join(lines, "\n")
}
