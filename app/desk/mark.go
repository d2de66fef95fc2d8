package desk

import (
	"image/color"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/widget"

	"weighhouse/model"
)

// A mark is the shape of a recommendation, told apart without colour: a disc
// with a tick for approve, a diamond with two dots for refer, a square with a
// bar for decline. With no recommendation it is an empty ring.
type mark struct {
	widget.BaseWidget
	of   model.Recommendation
	size float32
}

func newMark(size float32) *mark {
	m := &mark{size: size}
	m.ExtendBaseWidget(m)
	return m
}

// show changes the recommendation; empty is none yet.
func (m *mark) show(r model.Recommendation) {
	if m.of != r {
		m.of = r
		m.Refresh()
	}
}

func (m *mark) CreateRenderer() fyne.WidgetRenderer {
	r := &markRenderer{mark: m, image: canvas.NewRaster(nil)}
	r.image = canvas.NewRasterWithPixels(m.pixel)
	return r
}

type markRenderer struct {
	mark  *mark
	image *canvas.Raster
}

func (r *markRenderer) Layout(size fyne.Size)        { r.image.Resize(size) }
func (r *markRenderer) MinSize() fyne.Size           { return fyne.NewSquareSize(r.mark.size) }
func (r *markRenderer) Refresh()                     { r.image.Refresh() }
func (r *markRenderer) Objects() []fyne.CanvasObject { return []fyne.CanvasObject{r.image} }
func (r *markRenderer) Destroy()                     {}

// pixel draws the shape. x and y run from -1 to 1 over the mark; an edge is
// softened over about a pixel.
func (m *mark) pixel(px, py, w, h int) color.Color {
	x, y := (2*float64(px)+1)/float64(w)-1, (2*float64(py)+1)/float64(h)-1
	soft := 2 / float64(w)
	var body, sign float64 // distances: below zero is inside
	switch m.of {
	case model.Approve:
		body = hypot(x, y) - 0.94
		sign = min(segment(x, y, -0.42, 0.04, -0.12, 0.36), segment(x, y, -0.12, 0.36, 0.44, -0.34)) - 0.11
	case model.Refer:
		body = (absf(x) + absf(y) - 0.98) / 1.4142
		sign = min(hypot(x-0.26, y), hypot(x+0.26, y)) - 0.13
	case model.Decline:
		body = max(absf(x), absf(y)) - 0.86
		sign = max(absf(x)-0.5, absf(y)-0.14)
	default:
		ring := absf(hypot(x, y)-0.8) - 0.08
		return blend(shade(colorQuiet), coverage(ring, soft))
	}
	c := blend(shade(shadeOf(m.of)), coverage(body, soft))
	if s := coverage(sign, soft); s > 0 {
		return mix(c, shade(colorRaised), s)
	}
	return c
}
