package words

import "weighhouse/model"

// PDPlain says a PD in plain words with its horizon: "about 1 in 30 such
// borrowers fell more than 30 days behind within 12 months". Below one in ten
// it is one in so many, above it so many in a hundred.
func (r *Reader) PDPlain(p model.PD, daysLate, months int) string {
	horizon := []any{
		"late", r.T("count.days", "n", daysLate),
		"within", r.T("count.months", "n", months),
	}
	say := func(key string, n, among int) string {
		return r.T(key, append(horizon, "n", n, "among", among)...)
	}
	const million = int(model.PDOne / model.SmallestSaid)
	hundredths := int((p + model.PDOne/200) / (model.PDOne / 100))
	switch {
	case p < model.SmallestSaid:
		return say("pd.fewer", 1, million)
	case p > model.LargestSaid:
		return say("pd.more", million-1, million)
	case hundredths == 100:
		return say("pd.more", 99, 100)
	case p >= model.PDOne/10:
		return say("pd.about", hundredths, 100)
	}
	among, step := int((model.PDOne+p/2)/p), 1
	for among >= 100*step { // two figures are enough
		step *= 10
	}
	return say("pd.about", 1, (among+step/2)/step*step)
}
