package desk

import (
	"image/color"
	"math"
	"testing"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/theme"
)

// Contrast of all text is at least 4.5:1 (W3C, Web Content Accessibility
// Guidelines 2.2, success criterion 1.4.3; the formulas are its definitions of
// contrast ratio and relative luminance).
func TestContrast(t *testing.T) {
	texts := []fyne.ThemeColorName{theme.ColorNameForeground, theme.ColorNamePlaceHolder, theme.ColorNameDisabled, theme.ColorNameError,
		theme.ColorNameWarning, theme.ColorNameHyperlink, colorApprove, colorRefer, colorDecline, colorQuiet, colorStep}
	grounds := []fyne.ThemeColorName{theme.ColorNameBackground, theme.ColorNameInputBackground, theme.ColorNameOverlayBackground,
		theme.ColorNameButton, colorBand, colorNotice, colorRaised, colorCurrent}
	for _, l := range []look{{dark: false}, {dark: true}} {
		for _, text := range texts {
			for _, ground := range grounds {
				if c := contrast(l.Color(text, 0), l.Color(ground, 0)); c < 4.5 {
					t.Errorf("dark %v: %s on %s has contrast %.2f", l.dark, text, ground, c)
				}
			}
		}
		if c := contrast(l.Color(theme.ColorNameForegroundOnPrimary, 0), l.Color(theme.ColorNamePrimary, 0)); c < 4.5 {
			t.Errorf("dark %v: text on primary has contrast %.2f", l.dark, c)
		}
		if c := contrast(l.Color(theme.ColorNameForeground, 0), l.Color(theme.ColorNameFocus, 0)); c < 4.5 {
			t.Errorf("dark %v: text on focus has contrast %.2f", l.dark, c)
		}
	}
	// Black on white is 21:1.
	if c := contrast(color.Black, color.White); math.Abs(c-21) > 1e-9 {
		t.Errorf("black on white has contrast %v", c)
	}
}

func contrast(a, b color.Color) float64 {
	x, y := luminance(a), luminance(b)
	return (max(x, y) + 0.05) / (min(x, y) + 0.05)
}

func luminance(c color.Color) float64 {
	r, g, b, _ := c.RGBA()
	linear := func(v uint32) float64 {
		s := float64(v) / 0xffff
		if s <= 0.04045 {
			return s / 12.92
		}
		return math.Pow((s+0.055)/1.055, 2.4)
	}
	return 0.2126*linear(r) + 0.7152*linear(g) + 0.0722*linear(b)
}
