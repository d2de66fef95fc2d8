package words

import (
	"strings"
	"unicode"

	"golang.org/x/text/unicode/norm"
)

// Fold is text in small letters without accents, for finding what a person
// types: "Épicerie" is found by "epi".
func Fold(text string) string {
	return strings.ToLower(strings.Map(func(c rune) rune {
		if unicode.Is(unicode.Mn, c) {
			return -1
		}
		return c
	}, norm.NFD.String(text)))
}
