package desk

import (
	"errors"
	"image"
	"sync"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/driver"
	"fyne.io/fyne/v2/theme"

	"weighhouse/app/words"
)

// appear makes the window and shows it, empty; painted is called once, when
// that is drawn. Where there is no display the library panics, and where
// there is no OpenGL it goes on with a window that nobody sees; here either
// is an error that says so.
func (d *Desk) appear(o Options, painted func()) (err error) {
	err = errors.New(words.New(words.StyleOf(o.Language)).T("shell.no_display"))
	defer func() {
		if recover() == nil && inSight(d.window) {
			err = nil
		}
	}()
	d.window = d.app.NewWindow("Weighhouse")
	err = NotDrawn(o)
	d.window.Resize(smallest)
	d.window.CenterOnScreen()
	first := sync.OnceFunc(painted)
	d.fill(canvas.NewRaster(func(int, int) image.Image {
		first()
		return image.NewUniform(shade(theme.ColorNameBackground))
	}))
	d.window.Show()
	return err
}

// NotDrawn is what to say of a window that stays unpainted.
func NotDrawn(o Options) error {
	return errors.New(words.New(words.StyleOf(o.Language)).T("shell.no_graphics"))
}

// inSight tells that the system has given a window a place on the screen.
func inSight(w fyne.Window) (is bool) {
	w.(driver.NativeWindow).RunNative(func(context any) {
		switch c := context.(type) {
		case driver.X11WindowContext:
			is = c.WindowHandle != 0
		case driver.WaylandWindowContext:
			is = c.WaylandSurface != 0
		case driver.WindowsWindowContext:
			is = c.HWND != 0
		case driver.MacWindowContext:
			is = c.NSWindow != 0
		}
	})
	return is
}
