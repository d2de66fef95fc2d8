package model

// A Result is what an edition says of complete answers.
type Result struct {
	LogOdds LogOdds
	PD      PD
	Score   Number // in millionths of a point; shown whole, half away from zero
	Band    int    // place among Scorecard.Bands
	// Recommendation is the band's, made stricter by the rules that fired.
	Recommendation Recommendation
	Fired          RuleSet
	// LargestAmount is the least of the caps that fired. It does not touch the
	// recommendation: what was asked may be more.
	LargestAmount Maybe[Number]
}

// Score says what the edition makes of complete answers; ok is false while an
// answer is missing. The answers' log-odds were looked up as they came in; what
// is left is to sum them exactly and to see what follows.
func (e *Edition) Score(a *Answers) (result Result, ok bool) {
	v, ok := a.whole()
	if !ok {
		return Result{}, false
	}
	sum := e.sum(v)
	pd := sum.PD()
	result = Result{LogOdds: sum, PD: pd, Score: e.ScoreOf(sum), Band: e.band(pd)}
	e.fire(v, &result)
	return result, true
}

func (e *Edition) sum(v []value) LogOdds {
	sum := e.constant
	for i := range v {
		sum += v[i].weight
	}
	return sum
}

// band is the place of the band that a PD falls in.
func (e *Edition) band(pd PD) int {
	i := len(e.bands) - 1
	for i > 0 && pd < e.bands[i] {
		i--
	}
	return i
}
