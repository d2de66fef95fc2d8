package workbook

import (
	"encoding/xml"
	"errors"
	"io"
	"maps"
	"path"
	"slices"
	"strings"

	"weighhouse/model"
)

// mostCells is how many filled cells, and how many different texts, a
// workbook may have.
const mostCells = 500_000

// book is what one pass over a workbook's parts finds.
type book struct {
	parts     *parts
	relations map[string][]relation // by the key of the part they start from
	texts     []text
	formats   []format // by a cell's style
	sheets    []*sheet // in the workbook's order
	cells     int      // filled cells kept so far
}

// A relation points from one part to another.
type relation struct {
	id, kind string // kind is the last word of the relation's type
	target   string // a part's key
	external bool
}

// A text is a shared string.
type text struct {
	text    string
	trimmed bool
}

// readBook reads every part of a workbook once and lists everything wrong
// with it. Sheets that want does not ask for are only seen to be well formed;
// their cells are not kept. The book is nil where the file as a whole cannot
// be taken.
func readBook(b []byte, want func(sheet string) bool) (*book, []model.Problem) {
	bk := &book{relations: map[string][]relation{}}
	problems, err := bk.read(b, want)
	if err != nil {
		var p model.Problem
		if !errors.As(err, &p) {
			p = problem("file_not_workbook")
		}
		return nil, []model.Problem{p}
	}
	if bk.sheets == nil {
		return nil, problems
	}
	return bk, problems
}

func (bk *book) read(b []byte, want func(string) bool) ([]model.Problem, error) {
	z, err := sniff(b)
	if err != nil {
		return nil, err
	}
	if bk.parts, err = openParts(z); err != nil {
		return nil, err
	}
	if err := bk.readRelations(); err != nil {
		return nil, err
	}
	main, err := bk.mainPart()
	if err != nil {
		return nil, err
	}
	if problems := bk.refusals(); len(problems) > 0 {
		return problems, nil
	}
	problems, err := bk.readMain(main)
	if err != nil {
		return nil, err
	}
	for _, r := range bk.relations[main] {
		switch r.kind {
		case "sharedStrings":
			err = bk.readTexts(r.target)
		case "styles":
			err = bk.readFormats(r.target)
		}
		if err != nil {
			return nil, err
		}
	}
	for _, s := range bk.sheets {
		if s.part == "" {
			continue
		}
		s.wanted = want(s.name)
		if err := bk.readSheet(s); err != nil {
			return nil, err
		}
		problems = append(problems, s.problems...)
	}
	return problems, bk.parts.rest()
}

// readRelations reads the .rels part of every part that has one.
func (bk *book) readRelations() error {
	for _, key := range slices.Sorted(maps.Keys(bk.parts.files)) {
		dir, name := path.Split(key)
		from, isRels := strings.CutSuffix(name, ".rels")
		if base, ok := strings.CutSuffix(dir, "_rels/"); ok && isRels {
			dir, from = base, base+from
		} else {
			continue
		}
		err := bk.parts.each(key, func(depth int, e xml.StartElement) error {
			if depth != 2 || e.Name.Local != "Relationship" {
				return nil
			}
			r := relation{id: attr(e, "Id"), kind: path.Base(attr(e, "Type")), external: attr(e, "TargetMode") == "External"}
			if target := attr(e, "Target"); !r.external {
				if !strings.HasPrefix(target, "/") {
					target = path.Join(dir, target)
				}
				r.target = partKey(path.Clean(target))
			}
			bk.relations[from] = append(bk.relations[from], r)
			return nil
		})
		if err != nil {
			return err
		}
	}
	return nil
}

// mainPart is the workbook part of an .xlsx, or the problem of what it is
// instead.
func (bk *book) mainPart() (string, error) {
	main := ""
	for _, r := range bk.relations[""] {
		if r.kind == "officeDocument" {
			main = r.target
		}
	}
	if bk.parts.files[main] == nil {
		return "", problem("file_not_workbook")
	}
	switch t := bk.parts.contentType(main); {
	case strings.Contains(t, "wordprocessingml"), strings.Contains(t, "ms-word"):
		return "", problem("file_other_office", "kind", "document")
	case strings.Contains(t, "presentationml"), strings.Contains(t, "ms-powerpoint"):
		return "", problem("file_other_office", "kind", "slides")
	case strings.Contains(t, "sheet.binary"):
		return "", problem("file_other_office", "kind", "binary_workbook")
	case strings.Contains(t, "macroEnabled"):
		return "", problem("file_macros")
	case strings.HasSuffix(t, "spreadsheetml.sheet.main+xml"), strings.HasSuffix(t, "spreadsheetml.template.main+xml"):
		return main, nil
	}
	return "", problem("file_not_workbook")
}

// refusals lists what must not be in the file whatever its cells say.
func (bk *book) refusals() (problems []model.Problem) {
	var macros, connections, links bool
	for key := range bk.parts.files {
		t := bk.parts.contentType(key)
		macros = macros || strings.Contains(t, "vbaProject") || strings.Contains(t, "macrosheet") || path.Base(key) == "vbaproject.bin"
		connections = connections || strings.HasSuffix(t, ".connections+xml") || strings.HasSuffix(t, ".queryTable+xml")
		links = links || strings.HasSuffix(t, ".externalLink+xml")
	}
	for _, relations := range bk.relations {
		for _, r := range relations {
			switch r.kind {
			case "vbaProject", "xlMacrosheet", "xlIntlMacrosheet":
				macros = true
			case "connections", "queryTable", "powerPivotData":
				connections = true
			case "externalLink":
				links = true
			case "hyperlink": // an address shown in a cell brings in no data
			default:
				links = links || r.external
			}
		}
	}
	if macros {
		problems = append(problems, problem("file_macros"))
	}
	if connections {
		problems = append(problems, problem("file_connections"))
	}
	if links {
		problems = append(problems, problem("file_external_links"))
	}
	return problems
}

// readMain lists the sheets.
func (bk *book) readMain(main string) (problems []model.Problem, err error) {
	err = bk.parts.each(main, func(depth int, e xml.StartElement) error {
		switch {
		case depth == 1 && !ours(e.Name, "workbook"):
			return errXML
		case depth == 2 && ours(e.Name, "workbookPr") && truth(attr(e, "date1904")):
			problems = append(problems, problem("file_1904_dates"))
		case depth == 3 && ours(e.Name, "sheet"):
			s := &sheet{name: attr(e, "name")}
			i := slices.IndexFunc(bk.relations[main], func(r relation) bool { return r.id == relationID(e) })
			if i < 0 {
				return errXML
			}
			place := model.Place{Sheet: s.name}
			for _, other := range bk.sheets {
				if strings.EqualFold(other.name, s.name) || other.part == bk.relations[main][i].target {
					return model.Problem{Code: "repeated_sheet", Place: place, Args: model.Args{"value": s.name}}
				}
			}
			if bk.relations[main][i].kind == "worksheet" {
				s.part = bk.relations[main][i].target
			}
			if state := attr(e, "state"); state != "" && state != "visible" {
				problems = append(problems, model.Problem{Code: "hidden_sheet", Place: place})
			}
			bk.sheets = append(bk.sheets, s)
		}
		return nil
	})
	if err == nil && len(bk.sheets) == 0 {
		err = damaged(main)
	}
	return problems, err
}

// relationID is the r:id of an element.
func relationID(e xml.StartElement) string {
	for _, a := range e.Attr {
		if a.Name.Local == "id" && strings.HasSuffix(a.Name.Space, "/relationships") {
			return a.Value
		}
	}
	return ""
}

// readTexts reads the shared strings. Of rich text the runs are joined; the
// reading aids of East Asian text are left out.
func (bk *book) readTexts(part string) error {
	return bk.parts.read(part, func(t *tokens) error {
		for {
			tok, err := t.next()
			if err == io.EOF {
				return nil
			}
			if err != nil {
				return err
			}
			e, ok := tok.(xml.StartElement)
			switch {
			case !ok:
			case t.depth == 1 && !ours(e.Name, "sst"):
				return errXML
			case t.depth == 2 && ours(e.Name, "si"):
				raw, err := richText(t)
				if err != nil {
					return err
				}
				if len(bk.texts) == mostCells {
					return problem("too_many_cells", "most", "500000")
				}
				bk.texts = append(bk.texts, cleanText(raw))
			}
		}
	})
}

// richText joins the texts inside the element that t has just entered and
// leaves t behind its end.
func richText(t *tokens) (string, error) {
	var b strings.Builder
	top, aid, in := t.depth, 0, false
	for {
		tok, err := t.next()
		if err != nil {
			return "", err
		}
		switch tok := tok.(type) {
		case xml.StartElement:
			if ours(tok.Name, "rPh") && aid == 0 {
				aid = t.depth
			}
			in = ours(tok.Name, "t") && aid == 0
		case xml.EndElement:
			in = false
			if t.depth < aid {
				aid = 0
			}
			if t.depth < top {
				return b.String(), nil
			}
		case xml.CharData:
			if in {
				b.Write(tok)
			}
		}
	}
}
