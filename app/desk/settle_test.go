package desk

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/test"
)

// settle does what the window does before it draws a frame: it asks every part
// in sight how much room it needs.
func settle(o fyne.CanvasObject) {
	if !o.Visible() {
		return
	}
	var parts []fyne.CanvasObject
	switch o := o.(type) {
	case *fyne.Container:
		parts = o.Objects
	case fyne.Widget:
		parts = test.WidgetRenderer(o).Objects()
	}
	for _, part := range parts {
		settle(part)
	}
	o.MinSize()
}
