package desk

import (
	"context"
	"os"
	"path/filepath"
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"

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
	note := paragraph(p.said)
	head := container.NewVBox(heading(r.T("scorecards.title")), note, caption(r.T("scorecards.path")),
		p.path, p.path.line(), caption(r.T("scorecards.list")))
	return inset(frame(head, p.writeOut(), nil, container.New(&sideWidth{}, p.released()), p.list))
}

// released lists the editions that are in force, or will be.
func (p *scorecardsPage) released() fyne.CanvasObject {
	d, r := p.desk, p.desk.reader
	lines := []string{}
	editions, err := d.session.Editions(context.Background())
	if err != nil {
		lines = append(lines, openWords(r, err))
	}
	for _, e := range editions {
		lines = append(lines, e.Card.Product+", "+r.Name(e.Card.For),
			r.T("details.in_force", "title", e.Card.Title, "edition", int(e.Card.Edition), "date", e.Card.InForceFrom),
			r.T("scorecards.code", "code", e.Fingerprint.TelephoneCode()), "")
	}
	return frame(heading(r.T("scorecards.released")), nil, nil, nil, container.NewVScroll(paragraph(joinLines(lines))))
}

// writeOut offers the edition in force, and a blank workbook, as files.
func (p *scorecardsPage) writeOut() fyne.CanvasObject {
	d, r := p.desk, p.desk.reader
	row := container.NewHBox()
	if iv := d.interview; iv != nil {
		row.Add(newPush(r.T("scorecards.write"), d.key, func() {
			s := *iv.edition.Scorecard()
			p.write(workbook.FileName(s.Card), func(f *os.File) error { return workbook.Write(f, s) })
		}))
	}
	row.Add(newPush(r.T("scorecards.blank"), d.key, func() { p.write("scorecard-blank.xlsx", func(f *os.File) error { return workbook.Blank(f) }) }))
	return row
}

// write makes a new file in the folder shown; it never writes over one.
func (p *scorecardsPage) write(name string, do func(*os.File) error) {
	r := p.desk.reader
	path := filepath.Join(p.folder, name)
	f, err := os.OpenFile(path, os.O_WRONLY|os.O_CREATE|os.O_EXCL, 0o644)
	if err == nil {
		err = do(f)
		if e := f.Close(); err == nil {
			err = e
		}
		if err != nil {
			os.Remove(path)
		}
	}
	p.said = r.T("scorecards.written", "file", path)
	if err != nil {
		p.said = r.T("scorecards.not_written", "reason", err.Error())
	}
	p.desk.open(p)
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
	p.places = spotsIn(p.folder, p.desk.reader)
	p.list.setCount(len(p.places))
	p.list.choose(0)
}

// read reads a workbook off the window's thread.
func (p *scorecardsPage) read(path string) {
	d := p.desk
	d.remember("folder", filepath.Dir(path))
	go func() {
		var reading *workbook.Reading
		f, err := os.Open(path)
		if err == nil {
			defer f.Close()
			reading, err = workbook.Read(f)
		}
		d.post(func() {
			if err != nil {
				p.said = d.reader.T("scorecards.unreadable", "reason", err.Error())
			} else {
				p.reading, p.file, p.said = reading, path, ""
			}
			d.open(p)
		})
	}()
}

// verdict shows what was read: every problem, and what may be done.
func (p *scorecardsPage) verdict() fyne.CanvasObject {
	d, r := p.desk, p.desk.reader
	problems := p.reading.Problems
	p.list = newListing([]listColumn{{r.T("scorecards.where"), 1}, {r.T("scorecards.what"), 5}},
		func(row int) ([]string, model.Recommendation) {
			problem := problems[row]
			kind := model.Decline
			if problem.Warning {
				kind = model.Refer
			}
			return []string{r.Where(problem.Place), r.Sentence(problem)}, kind
		})
	p.list.marked = true
	p.list.keys = d.key
	full := paragraph("")
	p.list.onMove = func(row int) { setParagraph(full, r.Problem(problems[row])) }
	p.list.setCount(len(problems))
	if len(problems) > 0 {
		setParagraph(full, r.Problem(problems[0]))
	}
	p.start = p.list
	title, accepted := r.T("scorecards.refused", "n", len(problems)), p.reading.Edition != nil
	buttons := container.NewHBox()
	if accepted {
		title = r.T("scorecards.sound")
		accept := newPush(r.T("scorecards.accept"), d.key, p.accept)
		buttons.Add(accept)
		p.start = accept
	}
	if len(problems) > 0 {
		buttons.Add(newPush(r.T("scorecards.save_list"), d.key, p.saveList))
		buttons.Add(newPush(r.T("scorecards.save_copy"), d.key, p.saveCopy))
	}
	buttons.Add(newPush(r.T("scorecards.another"), d.key, func() { p.back() }))
	head := container.NewVBox(heading(title), paragraph(p.file))
	if accepted {
		card := p.reading.Scorecard.Card
		head.Add(paragraph(joinLines([]string{
			r.T("details.in_force", "title", card.Title, "edition", int(card.Edition), "date", card.InForceFrom),
			r.T("scorecards.code", "code", p.reading.Edition.TelephoneCode()),
			r.T("scorecards.read_code")})))
	}
	if p.said != "" {
		head.Add(paragraph(p.said))
	}
	head.Add(buttons)
	return inset(frame(head, full, nil, nil, p.list))
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

func (p *scorecardsPage) back() {
	p.reading, p.said = nil, ""
	p.desk.open(p)
}

// accept takes the workbook as the next edition. Work at hand goes on under
// the edition it was begun with; the next application gets the new one.
func (p *scorecardsPage) accept() {
	d, r := p.desk, p.desk.reader
	edition, err := d.session.ReleaseEdition(context.Background(), p.reading.Scorecard)
	if err != nil {
		p.said = openWords(r, err)
		d.open(p)
		return
	}
	card := edition.Scorecard().Card
	p.reading, p.said = nil, r.T("scorecards.accepted", "title", card.Title, "edition", int(card.Edition), "date", card.InForceFrom)
	d.open(p)
}

// saveList writes the problems beside the workbook, a line each.
func (p *scorecardsPage) saveList() {
	r := p.desk.reader
	name := strings.TrimSuffix(filepath.Base(p.file), filepath.Ext(p.file)) + r.T("scorecards.list_name") + ".txt"
	p.folder = filepath.Dir(p.file)
	p.write(name, func(f *os.File) error {
		_, err := f.WriteString(joinLines(problemLines(r, p.reading.Problems)) + "\n")
		return err
	})
}

// saveCopy writes a copy of the workbook with each problem as a note on its
// cell.
func (p *scorecardsPage) saveCopy() {
	r := p.desk.reader
	name := strings.TrimSuffix(filepath.Base(p.file), filepath.Ext(p.file)) + r.T("scorecards.copy_name") + ".xlsx"
	p.folder = filepath.Dir(p.file)
	p.write(name, func(f *os.File) error { return p.reading.Annotate(f, r.Sentence) })
}
