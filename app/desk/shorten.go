package desk

import "fyne.io/fyne/v2"

// shorten cuts a text to a width and ends it with an ellipsis where it had to.
func shorten(text string, most, size float32, style fyne.TextStyle) string {
	width := func(t string) float32 { return fyne.MeasureText(t, size, style).Width }
	if width(text) <= most {
		return text
	}
	runes := []rune(text)
	lo, hi := 0, len(runes)
	for lo < hi {
		mid := (lo + hi + 1) / 2
		if width(string(runes[:mid])+"…") <= most {
			lo = mid
		} else {
			hi = mid - 1
		}
	}
	return string(runes[:lo]) + "…"
}
