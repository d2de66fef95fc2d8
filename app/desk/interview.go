package desk

import (
	"slices"
	"time"

	"weighhouse/model"
)

// An interview is one applicant at the desk: the answers so far and what the
// edition says of them. It draws nothing.
type interview struct {
	edition *model.Edition
	answers *model.Answers
	who     string
	today   model.Date

	bounds model.Bounds
	worked []model.Worked
	wrong  [][]model.Problem // by item: what is wrong or worth a question
	result model.Result
	// complete tells that result stands: nothing is missing, nothing refused.
	complete bool
	// handedIn tells that the officer has ended the interview; an answer that
	// changes afterwards takes that back.
	handedIn bool

	// Where the officer is on the page: the row that last had the focus, by
	// item, the line of it, how far down the page that row stands, and what is
	// typed that is no answer yet, by item.
	at     int
	line   int
	down   float32
	drafts map[int]draft
	warned bool // that these answers are not kept

	keptText    string // what was kept last
	keeping     string // what is being written
	savedAt     time.Time
	saveProblem string
	// seen are the kept results that were not handed in, with what was kept;
	// only acts behind the window touch it.
	seen map[int64]string
}

func newInterview(e *model.Edition, today model.Date, client model.ClientKind) *interview {
	iv := &interview{edition: e, answers: e.NewAnswers(today, client), today: today, wrong: make([][]model.Problem, len(e.Items())),
		at: atName, drafts: map[int]draft{}, seen: map[int64]string{}}
	iv.weigh()
	return iv
}

// put enters an answer and weighs again.
func (iv *interview) put(index int, answer model.Answer) {
	iv.answers.Put(index, answer)
	iv.wrong[index] = iv.edition.CheckAnswer(iv.answers, index)
	iv.handedIn, iv.warned = false, false
	iv.weigh()
}

// name enters who it is.
func (iv *interview) name(who string) { iv.who, iv.warned = who, false }

// text is all that is kept of it.
func (iv *interview) text() string { return iv.answers.Text() + "\n" + iv.who }

// begun tells that something was entered.
func (iv *interview) begun() bool {
	if iv.who != "" || len(iv.drafts) > 0 {
		return true
	}
	return slices.ContainsFunc(iv.edition.Items(), func(item model.Item) bool { return iv.answers.At(item.Index).State != model.Missing })
}

// judge tells what stands against an answer before it counts.
func (iv *interview) judge(index int, answer model.Answer) []model.Problem {
	try := iv.answers.Clone()
	try.Put(index, answer)
	return iv.edition.CheckAnswer(try, index)
}

// changed goes over to another edition or kind of client. What was answered
// and typed is carried over wherever the new edition asks the same.
func (iv *interview) changed(e *model.Edition, client model.ClientKind) *interview {
	n := newInterview(e, iv.today, client)
	n.who, n.at, n.down, n.seen = iv.who, iv.at, iv.down, iv.seen
	n.answers.Carry(iv.answers)
	for i, d := range iv.drafts {
		theirs := iv.edition.Items()[i]
		if item, ok := e.Item(theirs.Code); ok && item.Kind == theirs.Kind && len(item.Lines) == len(theirs.Lines) {
			n.drafts[item.Index] = d
		}
	}
	n.weighAll()
	return n
}

// weighAll weighs anew after many answers have changed.
func (iv *interview) weighAll() {
	for i := range iv.wrong {
		iv.wrong[i] = iv.edition.CheckAnswer(iv.answers, i)
	}
	iv.weigh()
}

func (iv *interview) weigh() {
	iv.bounds = iv.edition.Bound(iv.answers)
	iv.worked = iv.edition.Work(iv.answers)
	iv.complete = false
	if len(iv.bounds.Missing) == 0 && !iv.refused() {
		iv.result, iv.complete = iv.edition.Score(iv.answers)
	}
}

// refused tells that an answer cannot stand, such as an amount outside the
// product.
func (iv *interview) refused() bool { return slices.ContainsFunc(iv.wrong, stands) }

// stands tells that a problem stands in the way.
func stands(list []model.Problem) bool {
	return slices.ContainsFunc(list, func(p model.Problem) bool { return !p.Warning })
}

// open is the first question that stands in the way of a result, or -1: one
// without an answer, or with an answer that cannot stand.
func (iv *interview) open() int {
	return slices.IndexFunc(iv.edition.Items(), func(item model.Item) bool {
		return slices.Contains(iv.bounds.Missing, item.Index) || stands(iv.wrong[item.Index])
	})
}

// waitsFor is the key of the words that say why no result is shown.
func (iv *interview) waitsFor() string {
	switch {
	case iv.refused():
		return "desk.mend_first"
	case iv.complete:
		return "desk.hand_in"
	case iv.edition.Scorecard().Card.ResultShown == model.WhenHandedIn:
		return "desk.shown_handed_in"
	}
	return "desk.shown_later"
}

// asked counts the questions that are, or may be, asked of this applicant,
// and those of them that are answered.
func (iv *interview) asked() (answered, all int) {
	for i, item := range iv.edition.Items() {
		if item.Kind != model.Computed && iv.answers.Applies(i) != model.Not {
			all++
		}
	}
	return all - len(iv.bounds.Missing), all
}

// shows tells whether the lender lets the officer see the result now. Of a
// loan that cannot be had there is none.
func (iv *interview) shows() bool {
	if iv.refused() {
		return false
	}
	switch iv.edition.Scorecard().Card.ResultShown {
	case model.WhileAnswering:
		return true
	case model.WhenComplete:
		return iv.complete
	}
	return iv.complete && iv.handedIn
}

// recommendation is what stands so far, with settled telling that no answer
// still to come can change it; empty while it is open or may not be shown.
func (iv *interview) recommendation() (r model.Recommendation, settled bool) {
	switch {
	case !iv.shows():
		return "", false
	case iv.complete:
		return iv.result.Recommendation, true
	case iv.bounds.Settled():
		return iv.bounds.Mildest, true
	}
	return "", false
}

// fires are the rules that fire whatever else is answered; those are said at
// once, whenever the result is shown.
func (iv *interview) fires() []model.PolicyRule {
	var list []model.PolicyRule
	for i, r := range iv.edition.Rules() {
		if iv.bounds.Fires.Has(i) {
			list = append(list, r)
		}
	}
	return list
}

// next is the next question that is, or may be, asked; -1 after the last.
func (iv *interview) next(after int) int {
	for i := after + 1; i < len(iv.edition.Items()); i++ {
		if iv.edition.Items()[i].Kind != model.Computed && iv.answers.Applies(i) != model.Not {
			return i
		}
	}
	return -1
}
