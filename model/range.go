package model

import "math"

// Z95 is the point that a standard normal variable exceeds with probability
// 0.025.
const Z95 = 1.959963984540054

// Range is the 95 % range of the PD of complete answers from the sampling
// error of the coefficients alone: the logistic of the log-odds ± Z95 standard
// errors. ok is false where the workbook has no covariance or an answer is
// missing. A coefficient that is not in the covariance, such as a reference
// level's 0, adds nothing; nor does a later adjustment that is known, where an
// estimated one adds its own variance.
func (e *Edition) Range(a *Answers) (low, high PD, ok bool) {
	sum, variance, ok := e.variance(a)
	if !ok {
		return 0, 0, false
	}
	half := float64(Z95 * math.Sqrt(math.Max(variance, 0)))
	return pdOf(sum.Float() - half), pdOf(sum.Float() + half), true
}

// StandardError is that of the log-odds of complete answers; see Range.
func (e *Edition) StandardError(a *Answers) (se float64, ok bool) {
	_, variance, ok := e.variance(a)
	return math.Sqrt(math.Max(variance, 0)), ok
}

func (e *Edition) variance(a *Answers) (sum LogOdds, variance float64, ok bool) {
	v, ok := a.whole()
	if e.card.Covariance == nil || !ok {
		return 0, 0, false
	}
	// What each coefficient is multiplied by, but for the zeros.
	type factor struct {
		at int
		x  float64
	}
	var space [2*MostCharacteristics + 1]factor
	factors := append(space[:0], factor{e.base, 1})
	for _, i := range e.scored {
		item, x := &e.items[i], &v[i]
		if x.attr >= 0 && item.covariance[x.attr] >= 0 {
			factors = append(factors, factor{item.covariance[x.attr], 1})
		}
		if x.state == Given && item.slopeCovariance >= 0 {
			factors = append(factors, factor{item.slopeCovariance, item.clamp(x.n).Float()})
		}
	}
	se := e.card.Card.AdjustmentSE.Or(0).Float()
	variance = float64(se * se)
	for _, f := range factors {
		row := e.card.Covariance.Values[f.at]
		for _, g := range factors {
			variance += float64(float64(f.x*g.x) * row[g.at].Float())
		}
	}
	return e.sum(v), variance, true
}
