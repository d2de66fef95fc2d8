package desk

import (
	"strings"
	"unicode"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/driver/desktop"
)

// press presses keys as the real window does, for Fyne's test driver sends
// neither Tab nor shortcuts: "Tab", "Shift+Tab", "Return", "F9", "Ctrl+S".
// The order is that of Fyne's desktop driver: key down to the focused part;
// Tab to the focus unless the part keeps it; then shortcuts; then the key
// itself, to the focused part or else the window; key up.
func press(c fyne.Canvas, names ...string) {
	for _, name := range names {
		parts := strings.Split(name, "+")
		key := fyne.KeyName(parts[len(parts)-1])
		var mods fyne.KeyModifier
		for _, m := range parts[:len(parts)-1] {
			mods |= map[string]fyne.KeyModifier{"Shift": fyne.KeyModifierShift, "Ctrl": fyne.KeyModifierControl, "Alt": fyne.KeyModifierAlt}[m]
		}
		pressKey(c, key, mods)
	}
}

// typeText types text: each character first as a key, then as itself.
func typeText(c fyne.Canvas, text string) {
	for _, r := range text {
		if key := keyOf(r); key != "" {
			pressKey(c, key, 0)
		}
		if f := c.Focused(); f != nil {
			f.TypedRune(r)
		} else if on := c.OnTypedRune(); on != nil {
			on(r)
		}
	}
}

// keyOf is the key under a character; others come as a key without a name.
func keyOf(r rune) fyne.KeyName {
	switch {
	case r == ' ':
		return fyne.KeySpace
	case r < 0x80:
		return fyne.KeyName(unicode.ToUpper(r))
	}
	return fyne.KeyUnknown
}

func pressKey(c fyne.Canvas, key fyne.KeyName, mods fyne.KeyModifier) {
	event := &fyne.KeyEvent{Name: key}
	if k, ok := c.Focused().(desktop.Keyable); ok {
		k.KeyDown(event)
	}
	defer func() {
		if k, ok := c.Focused().(desktop.Keyable); ok {
			k.KeyUp(event)
		}
	}()
	if key == fyne.KeyTab && mods&^fyne.KeyModifierShift == 0 {
		if t, ok := c.Focused().(fyne.Tabbable); !ok || !t.AcceptsTab() {
			if mods == 0 {
				c.FocusNext()
			} else {
				c.FocusPrevious()
			}
			return
		}
	}
	if shortcut := shortcutOf(key, mods); shortcut != nil {
		if s, ok := c.Focused().(fyne.Shortcutable); ok {
			s.TypedShortcut(shortcut)
		} else {
			c.(fyne.Shortcutable).TypedShortcut(shortcut)
		}
		return
	}
	if f := c.Focused(); f != nil {
		f.TypedKey(event)
	} else if on := c.OnTypedKey(); on != nil {
		on(event)
	}
}

func shortcutOf(key fyne.KeyName, mods fyne.KeyModifier) fyne.Shortcut {
	clipboard := fyne.CurrentApp().Clipboard()
	if mods == fyne.KeyModifierControl {
		switch key {
		case fyne.KeyZ:
			return &fyne.ShortcutUndo{}
		case fyne.KeyY:
			return &fyne.ShortcutRedo{}
		case fyne.KeyV:
			return &fyne.ShortcutPaste{Clipboard: clipboard}
		case fyne.KeyC, fyne.KeyInsert:
			return &fyne.ShortcutCopy{Clipboard: clipboard}
		case fyne.KeyX:
			return &fyne.ShortcutCut{Clipboard: clipboard}
		case fyne.KeyA:
			return &fyne.ShortcutSelectAll{}
		}
	}
	if mods == 0 || mods == fyne.KeyModifierShift {
		return nil
	}
	return &desktop.CustomShortcut{KeyName: key, Modifier: mods}
}
