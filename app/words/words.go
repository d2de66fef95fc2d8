// Package words holds every sentence a person reads, in English, French and
// Spanish, and the one place where numbers, money and dates become text and
// text becomes numbers and dates.
//
// A Reader is made for a person: a language, a way of writing numbers and an
// order of dates. The sentences stand in assets/words, a file for each area
// and language; a test holds them complete.
package words

import (
	"bytes"
	"fmt"
	"io/fs"
	"slices"
	"strings"
	"sync"
	texttemplate "text/template"

	"github.com/BurntSushi/toml"
	"github.com/nicksnyder/go-i18n/v2/i18n"
	"github.com/nicksnyder/go-i18n/v2/i18n/template"
	"golang.org/x/text/language"

	"weighhouse/assets"
	"weighhouse/model"
)

// A Style is how a person reads: the zero Style is English, 1,234.5 and days
// before months.
type Style struct {
	Language string
	Numbers  NumberStyle
	Dates    DateOrder
}

// A Language is one that the program speaks.
type Language struct {
	Code string // such as "fr"
	Name string // in itself, such as "Français"
}

// Languages lists the languages, English first.
func Languages() []Language {
	return []Language{{"en", "English"}, {"fr", "Français"}, {"es", "Español"}}
}

// StyleOf is what is usual with a language tag such as "fr" or "es-MX"; a
// language that the program does not speak is read in English.
func StyleOf(tag string) Style {
	language, region, _ := strings.Cut(strings.ReplaceAll(tag, "_", "-"), "-")
	s := Style{"en", PointComma, DayFirst}
	switch strings.ToLower(language) {
	case "fr":
		s.Language, s.Numbers = "fr", SpaceComma
	case "es":
		s.Language, s.Numbers = "es", CommaPoint
	}
	switch strings.ToUpper(region) {
	case "US":
		s.Numbers, s.Dates = PointComma, MonthFirst
	case "IN", "PK", "BD", "NP", "LK":
		s.Numbers = Lakh
	case "CH", "LI":
		s.Numbers = Apostrophe
	case "MX", "GT", "HN", "NI", "SV", "PA", "DO", "PE":
		s.Numbers = PointComma
	}
	return s
}

// A Reader words everything for one person. It may be used by several
// goroutines at once.
type Reader struct {
	style     Style
	marks     marks
	localizer *i18n.Localizer
	parser    *parser
}

// New makes a Reader; what is missing or unknown in the style is filled in as
// the zero Style has it.
func New(style Style) *Reader {
	if !slices.ContainsFunc(Languages(), func(l Language) bool { return l.Code == style.Language }) {
		style.Language = "en"
	}
	if !slices.Contains(NumberStyles(), style.Numbers) {
		style.Numbers = PointComma
	}
	if style.Dates != MonthFirst {
		style.Dates = DayFirst
	}
	r := &Reader{style: style, marks: marksOf[style.Numbers]}
	r.parser = &parser{texttemplate.FuncMap{"num": r.canonical, "date": r.canonicalDate, "limits": r.limits, "word": r.word}, unbreakable[style.Language]}
	tag := language.Make(style.Language)
	bundle := i18n.NewBundle(tag)
	bundle.MustAddMessages(tag, sentences[style.Language]()...)
	r.localizer = i18n.NewLocalizer(bundle, style.Language)
	return r
}

// sentences reads a language's message files, once.
var sentences = map[string]func() []*i18n.Message{}

func init() {
	for _, l := range Languages() {
		sentences[l.Code] = sync.OnceValue(func() []*i18n.Message { return load(l.Code) })
	}
}

// load reads the files, which are built in and held by a test.
func load(language string) (all []*i18n.Message) {
	names, _ := fs.Glob(assets.Words, "words/*."+language+".toml")
	for _, name := range names {
		text, err := fs.ReadFile(assets.Words, name)
		if err != nil {
			panic(err)
		}
		f, err := i18n.ParseMessageFileBytes(text, name, map[string]i18n.UnmarshalFunc{"toml": toml.Unmarshal})
		if err != nil {
			panic(fmt.Sprintf("%s: %v", name, err))
		}
		all = append(all, f.Messages...)
	}
	return all
}

// Style is the one that the Reader was made for.
func (r *Reader) Style() Style { return r.style }

// T is the sentence of that key, its blanks filled from pairs of a name and a
// value. Numbers, dates and probabilities are written in the reader's style;
// a whole number named "n" chooses between singular and plural.
func (r *Reader) T(key string, args ...any) string {
	c := i18n.LocalizeConfig{MessageID: key, TemplateParser: r.parser}
	blanks := make(map[string]string, len(args)/2)
	for i := 0; i+1 < len(args); i += 2 {
		name := args[i].(string)
		blanks[name] = r.show(args[i+1])
		if name == "n" {
			c.PluralCount = count(args[i+1])
		}
	}
	c.TemplateData = blanks
	// Where a language has a plural form of its own for whole millions, the
	// library gives the common plural and an error that can be passed over.
	text, err := r.localizer.Localize(&c)
	if text == "" && err != nil {
		return "[" + key + "]"
	}
	return text
}

// has tells that there is a sentence of that key.
func (r *Reader) has(key string) bool {
	_, err := r.localizer.Localize(&i18n.LocalizeConfig{MessageID: key, TemplateParser: r.parser})
	_, missing := err.(*i18n.MessageNotFoundErr)
	return !missing
}

// show writes a blank's value.
func (r *Reader) show(v any) string {
	switch v := v.(type) {
	case string:
		return v
	case int:
		return r.Number(model.Whole(int64(v)), 0)
	case model.Count:
		return r.Number(model.Whole(int64(v)), 0)
	case model.Number:
		return r.Number(v, Shortest)
	case model.Date:
		return r.Date(v)
	case model.PD:
		return r.Percent(v)
	case model.Rate:
		return r.Rate(v)
	}
	return fmt.Sprint(v)
}

func count(v any) any {
	if c, ok := v.(model.Count); ok {
		return int(c)
	}
	return v
}

// A parser lets messages write blanks that come as canonical text: {{num .x}}
// and {{date .x}}, {{limits .least .most}} for a range that may be open, and
// {{word "list" .x}} for an entry of a list in the messages. It is made for
// one Reader, whose own bundle keeps what it parsed.
type parser struct {
	funcs       texttemplate.FuncMap
	unbreakable *strings.Replacer // nil for none
}

// unbreakable puts the spaces that no line may break at where a language's
// typography wants them.
var unbreakable = map[string]*strings.Replacer{
	"fr": strings.NewReplacer(" ?", nbsp+"?", " !", nbsp+"!", " ;", nbsp+";", " :", nbsp+":", "« ", "«"+nbsp, " »", nbsp+"»", " %", nbsp+"%"),
	"es": strings.NewReplacer(" %", nbsp+"%"),
}

func (*parser) Cacheable() bool { return true }

func (p *parser) Parse(src, _, _ string) (template.ParsedTemplate, error) {
	if p.unbreakable != nil {
		src = p.unbreakable.Replace(src)
	}
	t, err := texttemplate.New("").Funcs(p.funcs).Parse(src)
	return parsed{t}, err
}

type parsed struct{ *texttemplate.Template }

func (p parsed) Execute(data any) (string, error) {
	var b bytes.Buffer
	err := p.Template.Execute(&b, data)
	return b.String(), err
}
