package workbook

import (
	"archive/zip"
	"encoding/xml"
	"errors"
	"io"
	"maps"
	"path"
	"slices"
	"strings"

	"weighhouse/model"
)

// mostUnzipped is how many bytes all parts of a workbook may have together.
const mostUnzipped = 100 << 20

// mostDepth is how deep the XML of a part may nest.
const mostDepth = 128

// parts are the files inside a workbook. Every part is inflated at most once,
// and its bytes are counted as they come: what the zip headers say of sizes
// is not believed.
type parts struct {
	files  map[string]*zip.File // by lower-case name, the way part names are compared
	opened map[string]bool
	types  map[string]string // content type by name
	byEnd  map[string]string // content type by file name extension
	left   int64             // bytes that may still be inflated
}

// errUnzipped is returned by a part's reader when the limit is passed.
var errUnzipped = errors.New("too large when unzipped")

// errEnough stops the reading of a part whose problem is already known.
var errEnough = errors.New("enough")

func partKey(name string) string {
	return strings.ToLower(strings.TrimPrefix(strings.ReplaceAll(name, `\`, "/"), "/"))
}

// openParts lists the parts and reads the table of their content types.
func openParts(z *zip.Reader) (*parts, error) {
	p := &parts{
		files:  make(map[string]*zip.File, len(z.File)),
		opened: map[string]bool{},
		types:  map[string]string{},
		byEnd:  map[string]string{},
		left:   mostUnzipped,
	}
	for _, f := range z.File {
		key := partKey(f.Name)
		if p.files[key] != nil {
			return nil, problem("file_repeated_part", "part", f.Name)
		}
		if f.Flags&1 != 0 {
			return nil, problem("file_password")
		}
		p.files[key] = f
	}
	const table = "[content_types].xml"
	if p.files[table] == nil {
		return nil, p.withoutTypes()
	}
	return p, p.each(table, func(depth int, e xml.StartElement) error {
		switch e.Name.Local {
		case "Override":
			p.types[partKey(attr(e, "PartName"))] = attr(e, "ContentType")
		case "Default":
			p.byEnd[strings.ToLower(attr(e, "Extension"))] = attr(e, "ContentType")
		}
		return nil
	})
}

// withoutTypes names a zip file that is no office file of the OOXML family.
func (p *parts) withoutTypes() error {
	if p.files["mimetype"] != nil {
		r, err := p.open("mimetype")
		if err == nil {
			head, _ := io.ReadAll(io.LimitReader(r, 256))
			r.Close()
			if strings.HasPrefix(string(head), "application/vnd.oasis.opendocument") {
				return problem("file_other_office", "kind", "opendocument")
			}
		}
	}
	return problem("file_not_workbook")
}

// contentType is the type the workbook declares for a part.
func (p *parts) contentType(key string) string {
	if t, ok := p.types[key]; ok {
		return t
	}
	return p.byEnd[strings.TrimPrefix(path.Ext(key), ".")]
}

// open starts inflating a part.
func (p *parts) open(key string) (io.ReadCloser, error) {
	f := p.files[key]
	if f == nil || p.opened[key] {
		return nil, damaged(key)
	}
	p.opened[key] = true
	r, err := f.Open()
	if err != nil {
		return nil, damaged(key)
	}
	return counted{r, p}, nil
}

// counted takes what is read from the parts' common allowance.
type counted struct {
	io.ReadCloser
	parts *parts
}

func (c counted) Read(b []byte) (int, error) {
	n, err := c.ReadCloser.Read(b)
	if c.parts.left -= int64(n); c.parts.left < 0 {
		return 0, errUnzipped
	}
	return n, err
}

// damaged is the problem of a part that cannot be read to its end.
func damaged(key string) error { return problem("file_damaged", "part", key) }

// wrap turns a reader's error into a problem that names the part.
func wrap(key string, err error) error {
	var p model.Problem
	switch {
	case err == nil, errors.As(err, &p):
		return err
	case errors.Is(err, errUnzipped):
		return problem("file_unzips_too_large", "most", "100")
	}
	return damaged(key)
}

// read opens the part and gives its XML to do, token by token, then sees to
// it that the part is read to its end.
func (p *parts) read(key string, do func(*tokens) error) error {
	r, err := p.open(key)
	if err != nil {
		return err
	}
	defer r.Close()
	t := &tokens{d: xml.NewDecoder(r)}
	if err = do(t); err == nil {
		err = t.drain()
	}
	if err == errEnough {
		return nil
	}
	return wrap(key, err)
}

// each calls do for every element of a part, with its depth from 1.
func (p *parts) each(key string, do func(depth int, e xml.StartElement) error) error {
	return p.read(key, func(t *tokens) error {
		for {
			tok, err := t.next()
			if err == io.EOF {
				return nil
			}
			if err != nil {
				return err
			}
			if e, ok := tok.(xml.StartElement); ok {
				if err := do(t.depth, e); err != nil {
					return err
				}
			}
		}
	})
}

// rest reads every part that nobody opened: XML must be well formed, and all
// bytes count.
func (p *parts) rest() error {
	for _, key := range slices.Sorted(maps.Keys(p.files)) {
		if p.opened[key] || strings.HasSuffix(key, "/") {
			continue
		}
		t := p.contentType(key)
		if strings.HasSuffix(t, "+xml") || strings.HasSuffix(t, "/xml") {
			if err := p.read(key, func(*tokens) error { return nil }); err != nil {
				return err
			}
			continue
		}
		r, err := p.open(key)
		if err != nil {
			return err
		}
		_, err = io.Copy(io.Discard, r)
		r.Close()
		if err != nil {
			return wrap(key, err)
		}
	}
	return nil
}

// tokens is encoding/xml with what it leaves out: one root and nothing around
// it, no DOCTYPE (so no entities of the file's own), no attribute twice, and
// a limit on depth.
type tokens struct {
	d     *xml.Decoder
	depth int
	roots int
}

var errXML = errors.New("malformed XML")

// next is the next token that matters. It is valid until the call after.
func (t *tokens) next() (xml.Token, error) {
	for {
		tok, err := t.d.Token()
		if err != nil {
			if err == io.EOF && t.roots != 1 {
				err = errXML
			}
			return nil, err
		}
		switch tok := tok.(type) {
		case xml.StartElement:
			if t.depth == 0 {
				t.roots++
			}
			t.depth++
			if t.roots > 1 || t.depth > mostDepth || repeatedAttr(tok.Attr) {
				return nil, errXML
			}
			return tok, nil
		case xml.EndElement:
			t.depth--
			return tok, nil
		case xml.CharData:
			if t.depth > 0 {
				return tok, nil
			}
			if strings.Trim(string(tok), " \t\r\n\ufeff") != "" {
				return nil, errXML
			}
		case xml.Directive:
			return nil, errXML
		}
	}
}

// drain reads on to the end.
func (t *tokens) drain() error {
	for {
		if _, err := t.next(); err == io.EOF {
			return nil
		} else if err != nil {
			return err
		}
	}
}

// mostAttrs is far above what any element of a workbook has.
const mostAttrs = 500

func repeatedAttr(attrs []xml.Attr) bool {
	if len(attrs) > mostAttrs {
		return true
	}
	for i := range attrs {
		for j := range i {
			if attrs[i].Name == attrs[j].Name {
				return true
			}
		}
	}
	return false
}

// attr is the value of an attribute without a namespace; empty if absent.
func attr(e xml.StartElement, name string) string {
	for _, a := range e.Attr {
		if a.Name.Space == "" && a.Name.Local == name {
			return a.Value
		}
	}
	return ""
}

// truth reads an XML boolean.
func truth(text string) bool { return text == "1" || text == "true" }
