package desk

import (
	"slices"
	"time"

	"weighhouse/model"
	"weighhouse/store"
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
	// at is the row that last had the focus, by item; see the page.
	at int

	kept        store.Kept // the result last kept; its ID is 0 before the first
	keptText    string     // the answers that it was kept with
	savedAt     time.Time
	saveProblem string
}

func newInterview(e *model.Edition, today model.Date, client model.ClientKind) *interview {
	iv := &interview{edition: e, answers: e.NewAnswers(today, client), today: today, wrong: make([][]model.Problem, len(e.Items())), at: atName}
	iv.weigh()
	return iv
}

// put enters an answer and weighs again.
func (iv *interview) put(index int, answer model.Answer) {
	iv.answers.Put(index, answer)
	iv.wrong[index] = iv.edition.CheckAnswer(iv.answers, index)
	iv.handedIn = false
	iv.weigh()
}

// judge tells what stands against an answer before it counts.
func (iv *interview) judge(index int, answer model.Answer) []model.Problem {
	try := iv.answers.Clone()
	try.Put(index, answer)
	return iv.edition.CheckAnswer(try, index)
}

// carry takes over what was answered in another edition, wherever this one
// asks the same and takes the answer.
func (iv *interview) carry(from *interview) {
	for i, item := range from.edition.Items() {
		mine, ok := iv.edition.Item(item.Code)
		given := from.answers.At(i)
		if !ok || mine.Kind != item.Kind || item.Kind == model.Computed || given.State == model.Missing {
			continue
		}
		if answer, err := iv.edition.ParseAnswer(mine.Index, from.edition.AnswerText(i, given)); err == nil {
			answer.Seen = given.Seen
			iv.answers.Put(mine.Index, answer)
		}
	}
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
func (iv *interview) refused() bool {
	return slices.ContainsFunc(iv.wrong, func(list []model.Problem) bool {
		return slices.ContainsFunc(list, func(p model.Problem) bool { return !p.Warning })
	})
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

// shows tells whether the lender lets the officer see the result now.
func (iv *interview) shows() bool {
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
	case iv.bounds.Settled() && !iv.refused():
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

// next is the question to go to after one: the next that is asked and has no
// answer, else the next that is asked; -1 after the last.
func (iv *interview) next(after int) int {
	for i := after + 1; i < len(iv.edition.Items()); i++ {
		if iv.edition.Items()[i].Kind != model.Computed && iv.answers.Applies(i) != model.Not {
			return i
		}
	}
	return -1
}
