package desk

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/driver/desktop"
	"fyne.io/fyne/v2/theme"
	"fyne.io/fyne/v2/widget"

	"weighhouse/model"
)

// A listing shows rows of short texts in columns and asks only for those in
// sight, so that 200,000 rows cost what twenty do. Up, Down, Page Up, Page
// Down, Home and End choose a row, Enter takes it; so do a tap and a second tap.
type listing struct {
	widget.BaseWidget
	keys    keys
	columns []listColumn
	count   int
	// cells gives a row's texts, and the recommendation whose mark stands
	// before them, or empty for none.
	cells  func(row int) (texts []string, mark model.Recommendation)
	marked bool // leave room for marks
	chosen int
	top    int
	onMove func(row int)
	onTake func(row int)

	focused bool
}

// A listColumn has a heading and a share of the width.
type listColumn struct {
	title string
	share float32
}

const listRowHeight = 25

func newListing(columns []listColumn, cells func(int) ([]string, model.Recommendation)) *listing {
	l := &listing{columns: columns, cells: cells}
	l.ExtendBaseWidget(l)
	return l
}

// setCount changes how many rows there are and keeps the choice among them.
func (l *listing) setCount(n int) {
	l.count = n
	l.choose(min(l.chosen, max(n-1, 0)))
}

func (l *listing) choose(row int) {
	if l.count == 0 {
		l.chosen, l.top = 0, 0
		l.Refresh()
		return
	}
	row = max(0, min(row, l.count-1))
	moved := row != l.chosen
	l.chosen = row
	page := l.page()
	l.top = max(0, min(l.top, row, l.count-1))
	if row >= l.top+page {
		l.top = row - page + 1
	}
	l.Refresh()
	if moved && l.onMove != nil {
		l.onMove(row)
	}
}

// page is how many whole rows are in sight.
func (l *listing) page() int {
	return max(1, int((l.Size().Height-l.head())/listRowHeight))
}

// head is the height of the headings.
func (l *listing) head() float32 {
	if l.columns[0].title == "" {
		return 0
	}
	return 22
}

func (l *listing) FocusGained()   { l.focused = true; l.Refresh() }
func (l *listing) FocusLost()     { l.focused = false; l.Refresh() }
func (l *listing) TypedRune(rune) {}

func (l *listing) TypedKey(e *fyne.KeyEvent) {
	switch e.Name {
	case fyne.KeyDown:
		l.choose(l.chosen + 1)
	case fyne.KeyUp:
		l.choose(l.chosen - 1)
	case fyne.KeyPageDown:
		l.choose(l.chosen + l.page())
	case fyne.KeyPageUp:
		l.choose(l.chosen - l.page())
	case fyne.KeyHome:
		l.choose(0)
	case fyne.KeyEnd:
		l.choose(l.count - 1)
	case fyne.KeyReturn, fyne.KeyEnter:
		if l.count > 0 && l.onTake != nil {
			l.onTake(l.chosen)
		}
	default:
		l.keys.take(e)
	}
}

func (l *listing) Tapped(e *fyne.PointEvent) {
	focusOn(l)
	if row := l.rowAt(e.Position); row >= 0 {
		l.choose(row)
	}
}

// DoubleTapped comes instead of the tap, not after it.
func (l *listing) DoubleTapped(e *fyne.PointEvent) {
	if row := l.rowAt(e.Position); row >= 0 && l.onTake != nil {
		l.choose(row)
		l.onTake(row)
	}
}

// rowAt is the row at a place, or -1.
func (l *listing) rowAt(at fyne.Position) int {
	row := l.top + int((at.Y-l.head())/listRowHeight)
	if at.Y < l.head() || row >= l.count {
		return -1
	}
	return row
}

func (l *listing) Scrolled(e *fyne.ScrollEvent) {
	steps := -int(e.Scrolled.DY / 8)
	l.top = max(0, min(l.top+steps, l.count-l.page()))
	l.Refresh()
}

func (l *listing) Cursor() desktop.Cursor { return desktop.DefaultCursor }

func (l *listing) CreateRenderer() fyne.WidgetRenderer {
	return &listingRenderer{l: l, ground: canvas.NewRectangle(nil), bar: canvas.NewRectangle(nil)}
}

type listingRenderer struct {
	l       *listing
	ground  *canvas.Rectangle // behind the chosen row
	bar     *canvas.Rectangle // how far down the rows in sight are
	titles  []*canvas.Text
	texts   [][]*canvas.Text
	marks   []*mark
	objects []fyne.CanvasObject
}

func (r *listingRenderer) Objects() []fyne.CanvasObject { return r.objects }
func (r *listingRenderer) Destroy()                     {}
func (r *listingRenderer) MinSize() fyne.Size           { return fyne.NewSize(200, 3*listRowHeight) }
func (r *listingRenderer) Refresh() {
	r.Layout(r.l.Size())
	canvas.Refresh(r.l)
}

// Layout fills the rows in sight; texts are made once and used again.
func (r *listingRenderer) Layout(size fyne.Size) {
	l := r.l
	l.top = max(0, min(l.top, l.count-l.page()))
	r.objects = append(r.objects[:0], r.ground, r.bar)
	left := float32(6)
	if l.marked {
		left += 24
	}
	var shares float32
	for _, c := range l.columns {
		shares += c.share
	}
	width := size.Width - left - 14
	r.head(left, width/shares)
	rows := min(l.page(), l.count-l.top)
	for len(r.texts) < rows {
		row := make([]*canvas.Text, len(l.columns))
		for i := range row {
			row[i] = canvas.NewText("", nil)
			row[i].TextSize = theme.TextSize()
		}
		r.texts = append(r.texts, row)
		r.marks = append(r.marks, newMark(17))
	}
	r.ground.Hide()
	for n := range rows {
		y := l.head() + float32(n)*listRowHeight
		chosen := l.top+n == l.chosen
		if chosen {
			r.ground.FillColor = shade(colorCurrent)
			if l.focused {
				r.ground.FillColor = shade(theme.ColorNameFocus)
			}
			r.ground.Move(fyne.NewPos(0, y))
			r.ground.Resize(fyne.NewSize(size.Width-10, listRowHeight))
			r.ground.Show()
		}
		texts, recommendation := l.cells(l.top + n)
		if l.marked && recommendation != "" {
			m := r.marks[n]
			m.Move(fyne.NewPos(6, y+4))
			m.Resize(fyne.NewSize(17, 17))
			m.show(recommendation)
			r.objects = append(r.objects, m)
		}
		x := left
		for i, c := range l.columns {
			w := c.share * width / shares
			t := r.texts[n][i]
			t.Text = shorten(texts[i], w-8, t.TextSize, t.TextStyle)
			t.Color = shade(theme.ColorNameForeground)
			t.Move(fyne.NewPos(x, y+2))
			t.Resize(fyne.NewSize(w-8, listRowHeight-4))
			r.objects = append(r.objects, t)
			x += w
		}
	}
	r.scrollBar(size, rows)
}

func (r *listingRenderer) head(left, unit float32) {
	if r.l.head() == 0 {
		return
	}
	for len(r.titles) < len(r.l.columns) {
		r.titles = append(r.titles, caption(""))
	}
	x := left
	for i, c := range r.l.columns {
		t := r.titles[i]
		t.Text, t.Color = shorten(c.title, c.share*unit-8, t.TextSize, t.TextStyle), shade(colorQuiet)
		t.Move(fyne.NewPos(x, 2))
		r.objects = append(r.objects, t)
		x += c.share * unit
	}
}

func (r *listingRenderer) scrollBar(size fyne.Size, rows int) {
	r.bar.Hide()
	if r.l.count <= rows || rows == 0 {
		return
	}
	track := size.Height - r.l.head()
	h := max(track*float32(rows)/float32(r.l.count), 14)
	at := (track - h) * float32(r.l.top) / float32(max(r.l.count-rows, 1))
	r.bar.FillColor = shade(theme.ColorNameScrollBar)
	r.bar.Move(fyne.NewPos(size.Width-7, r.l.head()+at))
	r.bar.Resize(fyne.NewSize(5, h))
	r.bar.Show()
}
