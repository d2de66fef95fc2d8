package desk

import (
	"math"
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/widget"
)

// A prose is a text that wraps, in which figures change as answers do. A
// figure is a text of its own, and so is what stands between two, so that a
// frame draws only those anew that changed.
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
	text    string  // that the parts say
	width   float32 // that its lines are broken for
	lines   int
	objects []fyne.CanvasObject
}

func (r *proseRenderer) Objects() []fyne.CanvasObject { return r.objects }
func (r *proseRenderer) Destroy()                     {}

// MinSize is the height of the lines as they were last broken.
func (r *proseRenderer) MinSize() fyne.Size {
	return fyne.NewSize(1, lineHeight(r.p.size)*float32(r.lines))
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
	var lines []string
	if r.text != "" {
		lines = breakLines(r.text, r.width, r.p.size, fyne.TextStyle{})
	}
	height, space, used := lineHeight(r.p.size), fyne.MeasureText(" ", r.p.size, fyne.TextStyle{}).Width, 0
	for i, line := range lines {
		x := float32(0)
		for _, part := range parts(line) {
			if used == len(r.objects) {
				t := canvas.NewText("", shade(r.p.colour))
				t.TextSize = r.p.size
				r.objects = append(r.objects, t)
			}
			t := r.objects[used].(*canvas.Text)
			t.Text = part
			width := t.MinSize().Width
			place(t, float32(math.Round(float64(x))), height*float32(i), width, height) // between two pixels it would blur
			x, used = x+width+space, used+1
		}
	}
	r.lines, r.objects = len(lines), r.objects[:used]
}

// parts parts a line into its figures and what stands between them; joined by
// spaces they are the line.
func parts(line string) (list []string) {
	figure := true
	for word := range strings.SplitSeq(line, " ") {
		is := strings.ContainsAny(word, "0123456789")
		if is || figure {
			list = append(list, word)
		} else {
			list[len(list)-1] += " " + word
		}
		figure = is
	}
	return list
}
