package desk

import (
	"strings"

	"fyne.io/fyne/v2"
)

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

// breakLines breaks a text into lines of at most that width, between words
// where it can. It measures word by word, for words come again and the library
// remembers their widths.
func breakLines(text string, most, size float32, style fyne.TextStyle) (lines []string) {
	width := func(t string) float32 { return fyne.MeasureText(t, size, style).Width }
	space := width(" ")
	for _, paragraph := range strings.Split(text, "\n") {
		line, used := "", -space
		for _, word := range strings.Split(paragraph, " ") {
			for width(word) > most { // no line has room for it
				part := strings.TrimSuffix(shorten(word, most, size, style), "…")
				if part == "" {
					break
				}
				if line != "" {
					lines = append(lines, line)
				}
				lines, line, used, word = append(lines, part), "", -space, word[len(part):]
			}
			w := width(word)
			if line != "" && used+space+w > most {
				lines = append(lines, line)
				line, used = "", -space
			}
			if line != "" {
				line += " "
			}
			line, used = line+word, used+space+w
		}
		lines = append(lines, line)
	}
	return lines
}

// wrap breaks a text into exactly that many lines; what does not fit ends in
// an ellipsis, and what is not needed is empty.
func wrap(text string, width, size float32, style fyne.TextStyle, lines int) []string {
	out := make([]string, lines)
	all := breakLines(text, width, size, style)
	copy(out, all)
	if len(all) > lines {
		out[lines-1] = shorten(strings.Join(all[lines-1:], " "), width, size, style)
	}
	return out
}
