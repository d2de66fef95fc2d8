package desk

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
)

// keysPage says what every key does.
type keysPage struct{ desk *Desk }

func (p *keysPage) opened()               {}
func (p *keysPage) key(fyne.KeyName) bool { return false }

func (p *keysPage) object() fyne.CanvasObject {
	r := p.desk.reader
	form := container.New(&pairs{})
	add := func(key, does string) {
		form.Add(caption(key))
		form.Add(paragraph(r.T("keys." + does + "_does")))
	}
	for _, k := range []string{"enter", "letters", "question", "arrows", "tab"} {
		add(r.T("keys."+k), k)
	}
	for _, k := range windowKeys {
		add(string(k.key), k.word)
	}
	add(r.T("keys.escape"), "escape")
	return inset(frame(heading(r.T("keys.title")), nil, nil, nil, p.desk.long(form)))
}
