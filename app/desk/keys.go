package desk

import "fyne.io/fyne/v2"

// keys hears the keys that belong to the whole window, such as F9, and tells
// whether it used one. Fyne gives a key to the focused part alone, so every
// part of ours that can have the focus asks its keys first.
type keys func(name fyne.KeyName) bool

// take offers a key to the window; a nil keys uses none.
func (k keys) take(e *fyne.KeyEvent) bool { return k != nil && k(e.Name) }
