package desk

import (
	"image/color"
	"math"
)

// Small helps for drawing by distances.

func hypot(x, y float64) float64 { return math.Hypot(x, y) }
func absf(x float64) float64     { return math.Abs(x) }

// segment is the distance of a point from a line between two others.
func segment(x, y, ax, ay, bx, by float64) float64 {
	dx, dy := bx-ax, by-ay
	t := ((x-ax)*dx + (y-ay)*dy) / (dx*dx + dy*dy)
	t = math.Max(0, math.Min(1, t))
	return math.Hypot(x-ax-t*dx, y-ay-t*dy)
}

// coverage is how much of a pixel at that distance from an edge is inside.
func coverage(distance, soft float64) float64 {
	return math.Max(0, math.Min(1, 0.5-distance/soft))
}

// blend is a colour at part of its strength.
func blend(c color.Color, strength float64) color.NRGBA {
	n := color.NRGBAModel.Convert(c).(color.NRGBA)
	n.A = uint8(float64(n.A)*strength + 0.5)
	return n
}

// mix is a towards b by part, with a's strength.
func mix(a color.NRGBA, b color.Color, part float64) color.NRGBA {
	n := color.NRGBAModel.Convert(b).(color.NRGBA)
	at := func(x, y uint8) uint8 { return uint8(float64(x)*(1-part) + float64(y)*part + 0.5) }
	return color.NRGBA{R: at(a.R, n.R), G: at(a.G, n.G), B: at(a.B, n.B), A: a.A}
}
