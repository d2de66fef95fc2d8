package table

import (
	"slices"
	"strings"

	"weighhouse/model"
)

// An Applicant is what one row says.
type Applicant struct {
	// Ref is the row's own mark, empty where it has none.
	Ref string
	// Answers are what could be read; nil where the row does not read at all or
	// asks for another product.
	Answers *model.Answers
	// Problems list what does not read, what is missing and, as warnings, what
	// is to be questioned. The place of each has the column.
	Problems []model.Problem
}

// Refused tells that the row cannot be scored.
func (a *Applicant) Refused() bool {
	for i := range a.Problems {
		if !a.Problems[i].Warning {
			return true
		}
	}
	return false
}

// Applicant reads a row. Where it does not say itself, on is the day of the
// application and client the kind of client; an edition for one kind has none
// but those.
func (c *Columns) Applicant(row Row, on model.Date, client model.ClientKind) Applicant {
	a := Applicant{Ref: cell(row.Cells, c.ref)}
	if len(row.Problems) > 0 {
		a.Problems = row.Problems
		return a
	}
	add := func(column string, err error) {
		if err != nil {
			p := err.(model.Problem)
			p.Place = place(column)
			a.Problems = append(a.Problems, p)
		}
	}
	on, err := c.day(cell(row.Cells, c.on), on)
	add("on", err)
	client, err = c.kind(strings.ToLower(cell(row.Cells, c.client)), client)
	add("client", err)
	if product := cell(row.Cells, c.product); product != "" && product != c.edition.Scorecard().Card.ProductCode {
		add("product", problem("file_other_product", "value", product, "expected", c.edition.Scorecard().Card.ProductCode))
		return a
	}
	papers := strings.FieldsFunc(strings.ToLower(cell(row.Cells, c.seen)), func(r rune) bool { return r == ' ' || r == ',' })
	a.Answers = c.edition.NewAnswers(on, client)
	unread := uint64(0) // by item
	for i := range c.questions {
		q := &c.questions[i]
		answer, column, err := c.answer(q, row.Cells)
		if err != nil {
			unread |= 1 << q.item.Index
		}
		add(column, err)
		answer.Seen = slices.Contains(papers, q.item.Code)
		papers = slices.DeleteFunc(papers, func(code string) bool { return code == q.item.Code })
		switch seen := cell(row.Cells, q.seen); strings.ToLower(seen) {
		case model.Yes:
			answer.Seen = true
		case model.No, "":
		default:
			add(q.item.Code+".seen", problem("not_in_list", "value", seen, "options", "yes, no"))
		}
		answer.Seen = answer.Seen && answer.State == model.Given
		a.Answers.Put(q.item.Index, answer)
	}
	if len(papers) > 0 {
		add("seen", problem("unknown_characteristic", "value", papers[0]))
	}
	for i := range c.questions {
		n := c.questions[i].item.Index
		s := a.Answers.At(n).State
		if unread&(1<<n) == 0 && (s == model.Missing || s == model.IsNotApplicable) && a.Answers.Applies(n) == model.Sure {
			add(c.questions[i].item.Code, problem("file_answer_missing"))
		}
	}
	a.Problems = append(a.Problems, c.edition.Check(a.Answers)...)
	return a
}

func cell(cells []string, column int) string {
	if column < 0 || column >= len(cells) {
		return ""
	}
	return cells[column]
}

// day is the day of the application.
func (c *Columns) day(text string, otherwise model.Date) (model.Date, error) {
	if text == "" {
		return otherwise, nil
	}
	d, err := model.ParseDate(text)
	if err != nil || d.YearAlone() {
		return otherwise, problem("file_not_a_day", "value", text)
	}
	return d, nil
}

// kind is the kind of client.
func (c *Columns) kind(text string, otherwise model.ClientKind) (model.ClientKind, error) {
	of := c.edition.Scorecard().Card.For
	if of != model.AllClients {
		otherwise = of
	}
	switch client := model.ClientKind(text); {
	case client == "":
		return otherwise, nil
	case client != model.NewClients && client != model.RepeatClients:
		return otherwise, problem("not_in_list", "value", text, "options", "new, repeat")
	case of != model.AllClients && client != of:
		return otherwise, problem("file_other_clients", "value", text)
	default:
		return client, nil
	}
}

// answer reads the answer to a question, and names the column at fault.
func (c *Columns) answer(q *question, cells []string) (a model.Answer, column string, err error) {
	column = q.item.Code
	text := cell(cells, q.answer)
	if len(q.lines) > 0 {
		lines, column, err := c.lines(q, cells)
		switch {
		case err != nil:
			return a, column, err
		case lines != nil && text != "":
			return a, q.item.Code, problem("file_worksheet_twice")
		case lines != nil:
			return model.Answer{State: model.Given, Lines: lines}, column, nil
		}
	}
	if text == "" {
		return a, column, nil
	}
	numeric := q.item.Kind == model.Numeric || q.item.Kind == model.Worksheet && !strings.Contains(text, ":")
	switch lower := strings.ToLower(text); {
	case lower == model.Unknown, lower == model.NotApplicable, !numeric:
		a, err = c.edition.ParseAnswer(q.item.Index, lower)
		switch p, _ := err.(model.Problem); p.Code {
		case "not_a_date":
			err = problem("file_not_a_date", "value", text)
		case "unknown_not_allowed":
			err = problem("file_unknown_not_allowed", "value", text)
		}
	default:
		a.State = model.Given
		a.Number, err = number(text, int(q.item.Decimals))
		if err == nil && a.Number < 0 && q.item.Kind == model.Numeric && q.item.LowestAccepted.Or(0) >= 0 {
			err = problem("number_negative", "value", text)
		}
	}
	if err != nil {
		a = model.Answer{}
	}
	return a, column, err
}

// lines reads the lines of a worksheet; nil where all are blank.
func (c *Columns) lines(q *question, cells []string) (lines []model.Money, column string, err error) {
	for i, columns := range q.lines {
		text := cell(cells, columns.amount)
		if text == "" {
			continue
		}
		n, err := number(text, c.money)
		if err == nil && n < 0 { // the line itself says whether it takes away
			err = problem("number_negative", "value", text)
		}
		if err != nil {
			return nil, c.names[columns.amount], err
		}
		if lines == nil {
			lines = make([]model.Money, len(q.lines))
		}
		lines[i] = model.Money{Amount: n, Set: true}
		period := model.Period(strings.ToLower(cell(cells, columns.period)))
		if period == "" || period == q.item.Lines[i].Period {
			continue
		}
		if period.TimesAYear() == 0 {
			return nil, c.names[columns.period], problem("not_in_list", "value", string(period), "options", strings.Join(period.Options(), ", "))
		}
		lines[i].Period = period
	}
	return lines, q.item.Code, nil
}
