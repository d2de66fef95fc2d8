package desk

import (
	"context"
	"errors"
	"io/fs"
	"os"
	"path/filepath"
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/layout"
	"fyne.io/fyne/v2/widget"

	"weighhouse/model"
	"weighhouse/store/workbook"
)

// scorecardsPage finds a scorecard workbook, reads it, and either lists all
// that is wrong with it or takes it as the next edition. A path is typed,
// found in folders, or a file is dropped on the window.
type scorecardsPage struct {
	desk   *Desk
	path   *nameBox
	list   *listing
	places []spot
	folder string

	reading *workbook.Reading // nil while looking for a file
	start   fyne.Focusable    // where the work starts
	file    string
	looked  int    // the problem last looked at
	said    string // the outcome of the last act, under the title
}

func newScorecardsPage(d *Desk) *scorecardsPage {
	p := &scorecardsPage{desk: d, folder: d.remembered("folder")}
	if info, err := os.Stat(p.folder); p.folder == "" || err != nil || !info.IsDir() {
		p.folder, _ = os.UserHomeDir()
	}
	return p
}

func (p *scorecardsPage) object() fyne.CanvasObject {
	if p.reading != nil {
		return p.verdict()
	}
	d, r := p.desk, p.desk.reader
	p.path = newNameBox(r, d.key, 1000)
	p.path.putText(p.folder)
	p.path.on().done = func() { p.take(p.path.entry.Text) }
	p.list = newListing([]listColumn{{"", 1}}, func(row int) ([]string, model.Recommendation) {
		return []string{p.places[row].label}, ""
	})
	p.list.keys = d.key
	p.list.onTake = func(row int) { p.take(p.places[row].path) }
	p.fill()
	p.start = p.list
	head := container.NewVBox(heading(r.T("scorecards.title")), paragraph(p.said), caption(r.T("scorecards.path")),
		p.path, p.path.line(), caption(r.T("scorecards.list")))
	return inset(frame(head, p.writeOut(), nil, container.New(&sideWidth{}, p.released()), p.list))
}

// released lists the editions that are in force, or will be.
func (p *scorecardsPage) released() fyne.CanvasObject {
	d, r := p.desk, p.desk.reader
	var lines []string
	editions, err := d.session.Editions(context.Background())
	if err != nil {
		lines = append(lines, errorWords(r, err))
	}
	for _, released := range editions {
		e, err := d.session.Edition(context.Background(), released.Fingerprint)
		if err != nil {
			lines = append(lines, errorWords(r, err), "")
			continue
		}
		lines = append(lines, d.labels(e).Product()+", "+r.Name(e.Scorecard().Card.For), d.editionWords(e),
			r.T("details.code"), e.TelephoneCode(), "")
	}
	return frame(heading(r.T("scorecards.released")), nil, nil, nil, container.NewVScroll(paragraph(strings.Join(lines, "\n"))))
}

// editionWords name an edition.
func (d *Desk) editionWords(e *model.Edition) string {
	card := e.Scorecard().Card
	return d.reader.T("details.in_force", "title", d.labels(e).Title(), "edition", int(card.Edition), "date", card.InForceFrom)
}

// writeOut offers the edition in force of the product at hand, and a blank
// workbook, as files.
func (p *scorecardsPage) writeOut() fyne.CanvasObject {
	d, r := p.desk, p.desk.reader
	row := container.NewHBox()
	if iv := d.interview; iv != nil {
		row.Add(newPush(r.T("scorecards.write"), d.key, func() {
			e, err := d.session.InForce(context.Background(), iv.edition.Scorecard().Card.ProductCode, iv.answers.Client, iv.today)
			if err != nil {
				p.say(errorWords(r, err))
				return
			}
			s := *e.Scorecard()
			p.write(workbook.FileName(s.Card), func(f *os.File) error { return workbook.Write(f, s) })
		}))
	}
	row.Add(newPush(r.T("scorecards.blank"), d.key, func() { p.write("scorecard-blank.xlsx", func(f *os.File) error { return workbook.Blank(f) }) }))
	return row
}

// say opens the page anew with the outcome of an act.
func (p *scorecardsPage) say(outcome string) {
	p.said = outcome
	p.desk.open(p)
}

// write makes a new file in the folder shown; it never writes over one.
func (p *scorecardsPage) write(name string, do func(*os.File) error) {
	r := p.desk.reader
	path := filepath.Join(p.folder, name)
	f, err := os.OpenFile(path, os.O_WRONLY|os.O_CREATE|os.O_EXCL, 0o644)
	if errors.Is(err, fs.ErrExist) {
		p.say(r.T("scorecards.exists", "file", path))
		return
	}
	if err == nil {
		err = errors.Join(do(f), f.Close())
		if err != nil {
			os.Remove(path)
		}
	}
	if err != nil {
		p.say(r.T("scorecards.not_written", "reason", err.Error()))
		return
	}
	p.say(r.T("scorecards.written", "file", path))
}

// take goes into a folder, or reads a file.
func (p *scorecardsPage) take(path string) {
	path = strings.Trim(strings.TrimSpace(path), `"'`)
	info, err := os.Stat(path)
	switch {
	case err != nil:
		p.path.line().refuse(p.desk.reader.T("scorecards.no_file"))
	case info.IsDir():
		p.folder = path
		p.path.putText(path)
		p.fill()
	default:
		p.read(path)
	}
}

// fill lists what is in the folder shown, and other places to look.
func (p *scorecardsPage) fill() {
	var err error
	if p.places, err = spotsIn(p.folder, p.desk.reader); err != nil {
		p.path.line().refuse(p.desk.reader.T("scorecards.unreadable", "reason", err.Error()))
	}
	p.list.setCount(len(p.places))
	p.list.choose(0)
}

// read reads a workbook off the window's thread. What is read after the
// officer has gone elsewhere is let go.
func (p *scorecardsPage) read(path string) {
	d := p.desk
	p.folder = filepath.Dir(path)
	d.remember("folder", p.folder)
	p.say(d.reader.T("scorecards.reading", "file", path))
	go func() {
		var reading *workbook.Reading
		f, err := os.Open(path)
		if err == nil {
			defer f.Close()
			reading, err = workbook.Read(f)
		}
		d.post(func() {
			switch {
			case d.page != p:
			case err != nil:
				p.say(d.reader.T("scorecards.unreadable", "reason", err.Error()))
			default:
				p.reading, p.file, p.looked = reading, path, 0
				p.say("")
			}
		})
	}()
}

// verdict shows what was read: every problem, and what may be done.
func (p *scorecardsPage) verdict() fyne.CanvasObject {
	d, r := p.desk, p.desk.reader
	problems := p.reading.Problems
	accepted := p.reading.Edition != nil
	buttons := container.NewHBox()
	push := func(label string, does func()) *push {
		b := newPush(r.T(label), d.key, does)
		buttons.Add(b)
		return b
	}
	head := container.NewVBox()
	if accepted {
		head.Add(heading(r.T("scorecards.sound")))
		head.Add(paragraph(strings.Join([]string{p.file, d.editionWords(p.reading.Edition),
			r.T("scorecards.code", "code", p.reading.Edition.TelephoneCode()), r.T("scorecards.read_code")}, "\n")))
		push("scorecards.accept", p.accept)
	} else {
		head.Add(heading(r.T("scorecards.refused", "n", len(problems))))
		head.Add(paragraph(p.file))
	}
	if p.said != "" {
		head.Add(paragraph(p.said))
	}
	if len(problems) > 0 {
		push("scorecards.save_list", p.saveList)
		push("scorecards.save_copy", p.saveCopy)
	}
	// Accepting cannot be undone: it is not where a second Enter lands.
	p.start = push("scorecards.another", p.back)
	head.Add(buttons)
	if len(problems) == 0 {
		return inset(frame(head, nil, nil, nil, layout.NewSpacer()))
	}
	full := paragraph("")
	p.list = p.problemList(problems, full)
	if !accepted {
		p.start = p.list
	}
	// The chosen problem in full has a place of its own, so that the list does
	// not move.
	foot := container.New(tall(110), container.NewVScroll(full))
	return inset(frame(head, foot, nil, nil, p.list))
}

// problemList lists problems, the chosen one in full elsewhere.
func (p *scorecardsPage) problemList(problems []model.Problem, full *widget.Label) *listing {
	r := p.desk.reader
	list := newListing([]listColumn{{r.T("scorecards.where"), 1}, {r.T("scorecards.what"), 3}},
		func(row int) ([]string, model.Recommendation) {
			mark := model.Decline
			if problems[row].Warning {
				mark = model.Refer
			}
			return []string{r.Where(problems[row].Place), r.Sentence(problems[row])}, mark
		})
	list.marked = true
	list.keys = p.desk.key
	list.onMove = func(row int) {
		p.looked = row
		setParagraph(full, r.Problem(problems[row]))
	}
	looked := p.looked
	list.setCount(len(problems))
	list.choose(looked)
	list.onMove(looked)
	return list
}

func (p *scorecardsPage) opened() {
	d := p.desk
	d.window.SetOnDropped(func(_ fyne.Position, files []fyne.URI) {
		if len(files) > 0 && d.page == p {
			p.read(files[0].Path())
		}
	})
	d.window.Canvas().Focus(p.start)
}

func (p *scorecardsPage) key(name fyne.KeyName) bool {
	if name == fyne.KeyEscape && p.reading != nil {
		p.back()
		return true
	}
	return false
}

// back looks for another workbook.
func (p *scorecardsPage) back() {
	p.reading = nil
	p.say("")
}

// accept takes the workbook as the next edition. Work at hand goes on under
// the edition it was begun with; the next application gets the new one.
func (p *scorecardsPage) accept() {
	d, r := p.desk, p.desk.reader
	edition, err := d.session.ReleaseEdition(context.Background(), p.reading.Scorecard)
	if err != nil {
		p.say(errorWords(r, err))
		return
	}
	card := edition.Scorecard().Card
	p.reading = nil
	p.say(r.T("scorecards.accepted", "title", d.labels(edition).Title(), "edition", int(card.Edition), "date", card.InForceFrom))
}

// saveList writes the problems beside the workbook, a line each.
func (p *scorecardsPage) saveList() {
	r := p.desk.reader
	p.writeBeside(r.T("scorecards.list_name")+".txt", func(f *os.File) error {
		_, err := f.WriteString(problemLines(r, p.reading.Problems) + "\n")
		return err
	})
}

// saveCopy writes a copy of the workbook with each problem as a note on its
// cell.
func (p *scorecardsPage) saveCopy() {
	r := p.desk.reader
	p.writeBeside(r.T("scorecards.copy_name")+".xlsx", func(f *os.File) error { return p.reading.Annotate(f, r.Sentence) })
}

// writeBeside makes a file beside the workbook, named after it.
func (p *scorecardsPage) writeBeside(ending string, do func(*os.File) error) {
	p.write(strings.TrimSuffix(filepath.Base(p.file), filepath.Ext(p.file))+ending, do)
}

// tall is the height of what is laid out, over the whole width.
type tall float32

func (t tall) MinSize([]fyne.CanvasObject) fyne.Size { return fyne.NewSize(100, float32(t)) }
func (t tall) Layout(objects []fyne.CanvasObject, size fyne.Size) {
	for _, o := range objects {
		o.Resize(size)
	}
}
