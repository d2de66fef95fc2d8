package desk

import "fyne.io/fyne/v2"

// A stack lays rows beneath each other without gaps. A row may need another
// height at another width, so rows are asked once they have their width.
type stack struct {
	of    *fyne.Container // which it lays out, in a scroll
	width float32
}

func newStack(rows []fyne.CanvasObject) *fyne.Container {
	s := &stack{}
	s.of = &fyne.Container{Layout: s, Objects: rows}
	return s.of
}

func (s *stack) MinSize(objects []fyne.CanvasObject) fyne.Size {
	var size fyne.Size
	for _, o := range objects {
		m := o.MinSize()
		size.Width = max(size.Width, m.Width)
		size.Height += m.Height
	}
	return size
}

func (s *stack) Layout(objects []fyne.CanvasObject, size fyne.Size) {
	var y float32
	for _, o := range objects {
		o.Resize(fyne.NewSize(size.Width, o.Size().Height))
		h := o.MinSize().Height
		o.Move(fyne.NewPos(0, y))
		o.Resize(fyne.NewSize(size.Width, h))
		y += h
	}
	// The scroll measured before the rows had their width.
	if s.width != size.Width {
		s.width = size.Width
		s.of.Resize(fyne.NewSize(size.Width, y))
	}
}
