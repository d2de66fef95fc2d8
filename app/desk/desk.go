// Package desk is the window: a file a page, a file a widget. It asks store
// and model for everything and draws what they say; no rule lives here.
package desk

import (
	"cmp"
	"context"
	"strconv"
	"sync/atomic"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/theme"

	"weighhouse/app/practice"
	"weighhouse/app/words"
	"weighhouse/model"
	"weighhouse/store"
)

// Options are what the command line may say.
type Options struct {
	Practice bool
	Folder   string // of the desk's file; empty for a folder of the user's own
	Language string // empty for as last time
}

// A Desk is the window with a person signed in and one page showing.
type Desk struct {
	app     fyne.App
	window  fyne.Window
	session *store.Session
	reader  *words.Reader
	dark    bool
	hidden  bool
	// post runs a change of the window: fyne.Do, or in tests at once.
	post func(func())

	page      page
	scrolled  *container.Scroll // the page's, where it is one long text
	interview *interview        // the application at hand; nil before the first
	written   chan struct{}     // closed once all acts begun are written; nil before the first
	closing   bool              // the window was told to close and stayed
	shell     *fyne.Container
}

// A page fills the window between the banner and the keys.
type page interface {
	// object is what it draws, made each time the page is opened: also anew,
	// when the language or the light has changed.
	object() fyne.CanvasObject
	// opened gives the focus to where the work starts.
	opened()
	// key hears a key that nothing on the page used.
	key(name fyne.KeyName) bool
}

// Run opens the window and returns when it is closed. painted is called once
// something has been painted; the branch is opened meanwhile.
func Run(a fyne.App, o Options, painted func()) error {
	d := &Desk{app: a, post: fyne.Do}
	a.Settings().SetTheme(look{})
	var session *store.Session
	var failed error
	opened, seen := make(chan struct{}), make(chan struct{})
	go func() {
		defer close(opened)
		session, failed = openBranch(o)
	}()
	err := d.appear(o, func() { painted(); close(seen) })
	if err == nil {
		var closed atomic.Bool
		d.window.SetOnClosed(func() { closed.Store(true) })
		go func() {
			<-seen
			<-opened
			d.post(func() {
				switch {
				case closed.Load():
				case failed != nil:
					d.refuse(o, failed)
				default:
					d.begin(session, o)
				}
			})
		}()
		a.Run()
	}
	<-opened
	if session != nil {
		failed = session.Branch().Close()
	}
	return cmp.Or(err, failed)
}

// openBranch opens the branch and signs in.
func openBranch(o Options) (*store.Session, error) {
	dir := o.Folder
	if dir == "" {
		var err error
		if dir, err = practice.Folder(); err != nil {
			return nil, err
		}
	}
	return practice.Open(context.Background(), dir)
}

// begin shows the first page to the person signed in.
func (d *Desk) begin(session *store.Session, o Options) {
	d.session = session
	language := o.Language
	if language == "" {
		language = d.remembered("language")
	}
	d.reader = words.New(words.StyleOf(language))
	d.dark = d.remembered("light") == "dark"
	if set := d.app.Settings(); set.Theme() != fyne.Theme(look{d.dark}) {
		set.SetTheme(look{d.dark}) // which loads the fonts anew
	}
	d.window.SetCloseIntercept(d.close)
	if w, h := d.remembered("width"), d.remembered("height"); w != "" && h != "" {
		d.window.Resize(fyne.NewSize(length(w, smallest.Width), length(h, smallest.Height)))
	}
	d.show("interview")
}

// labels word an edition in the window's language.
func (d *Desk) labels(e *model.Edition) *words.Labels {
	return words.LabelsOf(e, d.reader.Style().Language)
}

// questionOf is what an item asks; amount and term are worded here where the
// workbook does not.
func (d *Desk) questionOf(l *words.Labels, item *model.Item) string {
	if q := l.Question(item); q != "" {
		return q
	}
	return d.reader.T("desk.ask_" + item.Code)
}

func (d *Desk) remembered(name string) string {
	value, _ := d.session.Branch().Remembered(context.Background(), name)
	return value
}

func (d *Desk) remember(name, value string) {
	d.behind(func() { d.session.Branch().Remember(context.Background(), name, value) })
}

// open shows a page.
func (d *Desk) open(p page) {
	d.page, d.scrolled = p, nil
	d.fill(frame(d.banner(), d.keyBar(), nil, nil, p.object()))
	d.window.Canvas().SetOnTypedKey(func(e *fyne.KeyEvent) { d.key(e.Name) })
	p.opened()
}

// fill puts a page in the window, whose own content stays the same: with
// another the library would throw away every text that it has drawn.
func (d *Desk) fill(page fyne.CanvasObject) {
	if d.shell == nil {
		d.shell = container.NewStack(page)
		d.window.SetContent(d.shell)
		return
	}
	c := d.window.Canvas()
	if e, ok := c.Focused().(*entry); ok {
		e.moved = nil // it goes with its page, which was left before
	}
	c.Unfocus()
	d.shell.Objects = []fyne.CanvasObject{page}
	page.Resize(d.shell.Size())
	canvas.Refresh(d.shell)
}

// banner marks every page of the practice branch, and names the branch.
func (d *Desk) banner() fyne.CanvasObject {
	info := d.session.Branch().Info()
	ground, text := colorRaised, d.reader.T("shell.branch", "branch", info.Name, "desk", info.Desk)
	if info.Practice {
		ground, text = colorNotice, d.reader.T("shell.practice", "branch", info.Name, "desk", info.Desk)
	}
	left := figure(theme.CaptionTextSize(), true)
	setFigure(left, text, theme.ColorNameForeground)
	right := caption(d.reader.T("shell.person", "person", d.session.Person()))
	right.Color = shade(theme.ColorNameForeground)
	return container.NewStack(canvas.NewRectangle(shade(ground)),
		container.NewPadded(container.NewBorder(nil, nil, left, right)))
}

// caution stands wherever a recommendation stands.
func (d *Desk) caution() fyne.CanvasObject {
	l := paragraph(d.reader.T("desk.caution"))
	l.SizeName = theme.SizeNameCaptionText
	return l
}

// today is the date that the branch goes by, and whether it is doubtful.
func (d *Desk) today() (model.Date, error) { return d.session.Branch().Today() }

// smallest is what the window begins with: it fits the smallest screen.
var smallest = fyne.NewSize(1000, 640)

// length reads a remembered length of the window.
func length(text string, least float32) float32 {
	n, _ := strconv.Atoi(text)
	return max(float32(n), least)
}

// close keeps what is complete before the window goes. Where something would
// be lost it stays, and goes when it is told once more.
func (d *Desk) close() {
	if d.unfinished() {
		return
	}
	if d.interview != nil {
		d.setAside(d.interview)
	}
	size := d.window.Canvas().Size()
	d.remember("width", strconv.Itoa(int(size.Width)))
	d.remember("height", strconv.Itoa(int(size.Height)))
	d.behind(func() {
		d.post(func() {
			if iv := d.interview; iv != nil && iv.saveProblem != "" && !d.closing {
				d.closing = true
				d.show("interview")
				return
			}
			d.window.Close()
		})
	})
}
