package model

// ScoreOf is the score of log-odds, kept to six places.
func (e *Edition) ScoreOf(l LogOdds) Number {
	return roundNumber(e.offset - float64(e.factor*l.Float()))
}

// Points is what log-odds add to a score, kept to six places; of an
// attribute's log-odds, its points on a scorecard on paper.
func (e *Edition) Points(l LogOdds) Number {
	return roundNumber(float64(-e.factor * l.Float()))
}

// Constant is the log-odds that every applicant starts from: base and later
// adjustment. ScoreOf it is where the points on paper start from.
func (e *Edition) Constant() LogOdds { return e.constant }

// ShownScore is a score in whole points, half away from zero.
func ShownScore(score Number) int64 {
	if score < 0 {
		return -ShownScore(-score)
	}
	return int64((score + One/2) / One)
}

// roundNumber is the nearest Number to f, half away from zero.
func roundNumber(f float64) Number {
	f = float64(f * float64(One))
	switch {
	case f >= float64(Largest):
		return Largest
	case f <= -float64(Largest):
		return -Largest
	case f < 0:
		return -Number(0.5 - f)
	}
	return Number(f + 0.5)
}
