package main

import (
	"bufio"
	"errors"
	"fmt"
	"io"
	"os"
	"slices"
	"strings"
	"unicode"

	"golang.org/x/term"

	"weighhouse/app/words"
	"weighhouse/model"
)

// ask asks one applicant's questions on the terminal, in the edition's order,
// says what the answers come to, and keeps nothing.
func (k *clerk) ask() error {
	on, err := k.day()
	if err != nil {
		return err
	}
	edition, err := k.edition()
	if err != nil {
		return err
	}
	q := newInterview(k, edition, on)
	fmt.Fprintf(k.out, "%s, %s\n", q.labels.Title(), q.editionText())
	fmt.Fprintln(k.out, k.words.T("clerk.ask_keys"))
	err = q.all()
	if errors.Is(err, io.EOF) {
		fmt.Fprintln(k.out)
		return problem("clerk_ended_early")
	}
	if err != nil {
		return err
	}
	q.result()
	return nil
}

// An interview is one applicant's on a terminal.
type interview struct {
	*clerk
	edition *model.Edition
	answers *model.Answers
	labels  *words.Labels
	lines   *bufio.Scanner
	echo    bool // what is read is written out: nobody sees it typed
}

// longestLine is the longest line that is read; nobody types one.
const longestLine = 1 << 20

func newInterview(k *clerk, e *model.Edition, on model.Date) *interview {
	q := &interview{clerk: k, edition: e, labels: words.LabelsOf(e, k.words.Style().Language), lines: bufio.NewScanner(k.in)}
	q.lines.Buffer(nil, longestLine)
	f, ok := k.in.(*os.File)
	q.echo = !ok || !term.IsTerminal(int(f.Fd()))
	client := e.Scorecard().Card.For
	if asked := model.ClientKind(k.option["client"]); client == model.AllClients && asked != "" {
		client = asked
	}
	q.answers = e.NewAnswers(on, client)
	return q
}

// errBack asks for the question before.
var errBack = errors.New("back")

// all asks until every question that applies is answered.
func (q *interview) all() error {
	if q.answers.Client == model.AllClients {
		if err := q.client(); err != nil {
			return err
		}
	}
	items := q.edition.Items()
	for i := 0; ; i++ {
		var err error
		switch {
		case i == len(items):
			if q.edition.Scorecard().Card.ResultShown != model.WhenHandedIn {
				return nil
			}
			if _, err = q.line("\n" + q.words.T("clerk.hand_in") + " "); err == nil {
				return nil
			}
		case items[i].Kind == model.Computed:
		case q.answers.Applies(i) == model.Not:
			fmt.Fprintf(q.out, "\n%s  %s\n%s%s\n", q.place(&items[i]), q.question(&items[i]), indent, q.words.T("desk.not_asked"))
		default:
			if err = q.item(&items[i]); err == nil {
				q.soFar()
			}
		}
		if err == errBack {
			i = max(q.before(i), 0) - 1
		} else if err != nil {
			return err
		}
	}
}

// before is the question asked before one, -1 where there is none.
func (q *interview) before(i int) int {
	for i--; i >= 0; i-- {
		if q.edition.Items()[i].Kind != model.Computed && q.answers.Applies(i) != model.Not {
			break
		}
	}
	return i
}

const indent = "    "

// line prompts and reads one line; io.EOF at the end of input.
func (q *interview) line(prompt string) (string, error) {
	fmt.Fprint(q.out, prompt)
	if !q.lines.Scan() {
		if err := q.lines.Err(); err != nil {
			return "", problem("clerk_line_too_long")
		}
		return "", io.EOF
	}
	text := strings.TrimSpace(strings.Map(func(c rune) rune {
		if unicode.IsControl(c) || unicode.Is(unicode.Cf, c) { // it may be written out again
			return unicode.ReplacementChar
		}
		return c
	}, q.lines.Text()))
	if q.echo {
		fmt.Fprintln(q.out, text)
	}
	if text == "<" {
		return "", errBack
	}
	return text, nil
}

// wrong says what is wrong with what was typed.
func (q *interview) wrong(p model.Problem) { fmt.Fprintln(q.out, indent+q.words.Sentence(p)) }

func (q *interview) client() error {
	fmt.Fprintf(q.out, "\n%s\n", q.words.T("desk.client"))
	for {
		switch yes, err := q.yesNo(indent); {
		case err == errBack:
		case err != nil:
			return err
		case yes:
			q.answers.Client = model.RepeatClients
			return nil
		default:
			q.answers.Client = model.NewClients
			return nil
		}
	}
}

// yesNo asks until the answer is yes or no.
func (q *interview) yesNo(prompt string) (bool, error) {
	options := []string{q.words.T("yes_no.yes"), q.words.T("yes_no.no")}
	for {
		text, err := q.line(prompt + strings.Join(options, " / ") + " > ")
		if err != nil {
			return false, err
		}
		if n := pick(text, options); n >= 0 {
			return n == 0, nil
		}
		if text == "" {
			q.wrong(problem("clerk_ask_empty"))
		} else {
			q.wrong(problem("clerk_ask_pick", "value", text))
		}
	}
}

// item asks one question until its answer can stand.
func (q *interview) item(item *model.Item) error {
	fmt.Fprintf(q.out, "\n%s  %s\n", q.place(item), q.question(item))
	if help := q.labels.Help(item); help != "" {
		fmt.Fprintln(q.out, indent+help)
	}
	q.options(item)
	old := q.answers.At(item.Index)
	var sure model.Answer // to be kept by Enter
	if old.State != model.Missing && q.edition.CheckAnswer(q.answers, item.Index) == nil {
		sure = old
		fmt.Fprintln(q.out, indent+q.words.T("clerk.ask_now", "answer", q.answerText(item, old)))
	}
	for {
		answer, err := q.read(item, sure)
		if err != nil {
			p, ok := err.(model.Problem)
			if !ok {
				return err
			}
			q.wrong(p)
			continue
		}
		if answer.State == model.Given {
			if text := q.answerText(item, answer); text != "" {
				fmt.Fprintln(q.out, indent+"= "+text)
			}
		}
		try := q.answers.Clone()
		try.Put(item.Index, answer)
		problems := q.edition.CheckAnswer(try, item.Index)
		i := slices.IndexFunc(problems, func(p model.Problem) bool { return !p.Warning })
		switch {
		case i >= 0:
			q.wrong(problems[i])
			sure = model.Answer{}
			continue
		case len(problems) > 0 && q.edition.AnswerText(item.Index, answer) != q.edition.AnswerText(item.Index, sure):
			fmt.Fprintln(q.out, indent+q.words.T("box.sure", "question", q.words.Sentence(problems[0])))
			sure = answer
			continue
		}
		if answer.State == model.Given && item.EvidenceNeeded == model.Seen {
			if answer.Seen, err = q.seen(item); err != nil {
				return err
			}
		}
		q.answers.Put(item.Index, answer)
		return nil
	}
}

func (q *interview) seen(item *model.Item) (bool, error) {
	text := q.words.T("clerk.ask_seen")
	if papers := q.labels.Papers(item); papers != "" {
		text = q.words.T("clerk.ask_seen_papers", "papers", papers)
	}
	return q.yesNo(indent + text + " ")
}

// place is such as "3 of 14".
func (q *interview) place(item *model.Item) string {
	most := 0
	for _, other := range q.edition.Items() {
		most = max(most, other.Number)
	}
	return q.words.T("clerk.ask_place", "number", item.Number, "all", most)
}

// question is what is asked; the reserved ones the workbook need not word.
func (q *interview) question(item *model.Item) string {
	text := q.labels.Question(item)
	switch {
	case text != "":
		return text
	case item.Code == model.Amount:
		return q.words.T("desk.ask_amount")
	case item.Code == model.Term:
		return q.words.T("desk.ask_term")
	}
	return item.Code
}
