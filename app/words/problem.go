package words

import (
	"errors"
	"strings"
	"unicode"

	"weighhouse/model"
)

// How much of a text from outside a sentence repeats: of a value that was
// typed, and of anything else, such as a file's path.
const (
	mostOfValue = 60
	mostOfOther = 400
)

// Problem words what is wrong and where: "Attributes!D7 (From): ...".
func (r *Reader) Problem(p model.Problem) string {
	sentence := r.Sentence(p)
	if where := r.Where(p.Place); where != "" {
		return r.T("problem_where", "where", where, "what", sentence)
	}
	return sentence
}

// Sentence words what is wrong without the place, as under a field.
func (r *Reader) Sentence(p model.Problem) string {
	key := "problem." + p.Code
	if !r.has(key) {
		return r.T("problem_unworded", "code", p.Error())
	}
	args := make([]any, 0, 2*len(p.Args))
	for name, value := range p.Args {
		most := mostOfOther
		if name == "value" {
			most = mostOfValue
		}
		args = append(args, name, shorten(value, most))
	}
	return r.T(key, args...)
}

// Error words any error; one that is not a Problem keeps its own text.
func (r *Reader) Error(err error) string {
	if p, ok := errors.AsType[model.Problem](err); ok {
		return r.Problem(p)
	}
	return r.T("problem_outside", "text", shorten(err.Error(), mostOfOther))
}

// Where words a place: a cell, a row or a sheet of a workbook, or a question.
// It is empty for no place in particular.
func (r *Reader) Where(p model.Place) string {
	switch {
	case p.Sheet == "Answers":
		return p.Column
	case p.Sheet == "":
		return ""
	}
	where := p.Sheet
	switch {
	case p.Cell != "":
		where += "!" + p.Cell
	case p.Row > 0:
		where = r.T("problem_row", "sheet", p.Sheet, "row", p.Row+1)
	}
	if p.Column != "" {
		where = r.T("problem_column", "where", where, "column", p.Column)
	}
	return where
}

// shorten makes text from outside safe to show: at most so many characters,
// and none that move or hide their neighbours.
func shorten(text string, most int) string {
	var b strings.Builder
	n := 0
	for _, c := range text {
		if n++; n > most {
			b.WriteString("…")
			break
		}
		if unicode.IsControl(c) || unicode.Is(unicode.Cf, c) {
			c = unicode.ReplacementChar
		}
		b.WriteRune(c)
	}
	return b.String()
}
