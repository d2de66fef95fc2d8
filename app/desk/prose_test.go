package desk

import (
	"slices"
	"strings"
	"testing"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/test"
	"fyne.io/fyne/v2/theme"
)

// A figure that changes leaves the texts around it as they are.
func TestProse(t *testing.T) {
	test.NewTempApp(t)
	p := newProse(14, theme.ColorNameForeground)
	w := test.NewTempWindow(t, p)
	said := func(text string) []string {
		p.say(text)
		var all []string
		for _, o := range test.WidgetRenderer(p).Objects() {
			all = append(all, o.(*canvas.Text).Text)
		}
		return all
	}
	w.Resize(fyne.NewSize(900, 100))
	if got := said(""); got != nil || p.MinSize().Height != 0 {
		t.Errorf("nothing said: %q, %v", got, p.MinSize())
	}
	want := []string{"About", "1", "in", "85", "such borrowers fell behind."}
	if got := said(strings.Join(want, " ")); !slices.Equal(got, want) {
		t.Errorf("%q", got)
	}
	one := p.MinSize().Height
	p.Resize(fyne.NewSize(120, 200))
	if lines := p.MinSize().Height / one; lines < 2 || lines != float32(int(lines)) {
		t.Errorf("%v lines at a narrow width", lines)
	}
	if got := strings.Join(said("A\nB"), "|"); got != "A|B" || p.MinSize().Height != 2*one {
		t.Errorf("%q, %v", got, p.MinSize())
	}
}

func TestBreakLines(t *testing.T) {
	test.NewTempApp(t)
	width := func(text string) float32 { return fyne.MeasureText(text, 14, fyne.TextStyle{}).Width }
	text := "some words and averyveryverylongwordindeed then more of them"
	for most := width("averyvery"); most < width(text)+1; most += 7 {
		lines := breakLines(text, most, 14, fyne.TextStyle{})
		for _, line := range lines {
			if w := width(line); w > most+0.5 || line == "" {
				t.Errorf("at %v: %q is %v wide", most, line, w)
			}
		}
		if got := strings.Join(lines, ""); strings.ReplaceAll(got, " ", "") != strings.ReplaceAll(text, " ", "") {
			t.Errorf("at %v: %q", most, lines)
		}
	}
	if lines := breakLines(text, width(text)+1, 14, fyne.TextStyle{}); len(lines) != 1 {
		t.Errorf("%q", lines)
	}
	if got := wrap(text, width("some words and"), 14, fyne.TextStyle{}, 2); len(got) != 2 || !strings.HasSuffix(got[1], "…") {
		t.Errorf("%q", got)
	}
}
