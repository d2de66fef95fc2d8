package model

import (
	"math/bits"
	"slices"
	"testing"

	"pgregory.net/rapid"
)

// drawEdition compiles a random scorecard, but for its checks.
func drawEdition(t *rapid.T) *Edition {
	c := gather(drawScorecard(t))
	for _, p := range c.problems {
		if !p.Warning {
			t.Fatal(p)
		}
	}
	return c.e
}

func score(t *rapid.T, a *Answers) Result {
	r, ok := a.edition.Score(a)
	if !ok {
		t.Fatalf("missing answers in\n%s", a.Text())
	}
	return r
}

// within fails unless a result lies within bounds.
func (b Bounds) check(t *rapid.T, r Result) {
	switch {
	case r.LogOdds < b.Lowest || r.LogOdds > b.Highest:
		t.Fatalf("log-odds %v not in %v to %v", r.LogOdds, b.Lowest, b.Highest)
	case r.PD < b.LowestPD || r.PD > b.HighestPD:
		t.Fatalf("PD %v not in %v to %v", r.PD, b.LowestPD, b.HighestPD)
	case r.Band < b.FirstBand || r.Band > b.LastBand:
		t.Fatalf("band %v not in %v to %v", r.Band, b.FirstBand, b.LastBand)
	case b.Mildest.strictness() > r.Recommendation.strictness() || r.Recommendation.strictness() > b.Strictest.strictness():
		t.Fatalf("recommendation %v not in %v to %v", r.Recommendation, b.Mildest, b.Strictest)
	case b.Fires&^r.Fired != 0 || r.Fired&^(b.Fires|b.May) != 0 || b.Fires&b.May != 0:
		t.Fatalf("rules %b fired, %b sure, %b open", r.Fired, b.Fires, b.May)
	}
}

// While answers come in, in any order, the bounds hold what comes of them in
// the end and never grow; when nothing is missing they meet in the result.
func TestBoundsHoldEveryResult(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		e := drawEdition(t)
		for range 8 {
			final := drawAnswers(t, e)
			answerInOrder(t, final, rapid.Permutation(e.asked).Draw(t, "order"))
		}
	})
}

func answerInOrder(t *rapid.T, final *Answers, order []int) {
	e := final.edition
	result, work := score(t, final), e.Work(final)
	a := e.NewAnswers(final.On, final.Client)
	before := e.Bound(a)
	for _, i := range order {
		before.check(t, result)
		for n, w := range e.Work(a) {
			if w.Known() && w != work[n] {
				t.Fatalf("%s was known to be %+v and came to %+v", e.items[n].Code, w, work[n])
			}
		}
		a.Put(i, final.At(i))
		b := e.Bound(a)
		if b.Lowest < before.Lowest || b.Highest > before.Highest || before.Fires&^b.Fires != 0 || b.May&^before.May != 0 {
			t.Fatalf("bounds %+v grew to %+v", before, b)
		}
		if before.Settled() && b.Mildest != before.Mildest || before.BandSettled() && b.FirstBand != before.FirstBand {
			t.Fatalf("settled %+v changed to %+v", before, b)
		}
		if before.Narrows == i && b.Highest-b.Lowest >= before.Highest-before.Lowest && e.items[i].isChoice() {
			t.Fatalf("%s was to narrow %+v and gave %+v", e.items[i].Code, before, b)
		}
		if before.Narrows >= 0 && !slices.Contains(before.Missing, before.Narrows) {
			t.Fatalf("%+v is narrowed by what is not missing", before)
		}
		before = b
	}
	before.check(t, result)
	if len(before.Missing) != 0 || before.Lowest != before.Highest || before.May != 0 || !before.Settled() || !before.BandSettled() {
		t.Fatalf("nothing is missing, yet %+v", before)
	}
	if got := score(t, a); got != result {
		t.Fatalf("entered in another order: %+v, want %+v", got, result)
	}
	if a.Text() != final.Text() {
		t.Fatalf("entered in another order:\n%s\nwant\n%s", a.Text(), final.Text())
	}
}

// An incomplete set of answers is never scored, and says what is missing.
func TestMissingAnswerIsNeverScored(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		e := drawEdition(t)
		a := drawAnswers(t, e)
		i := rapid.SampledFrom(e.asked).Draw(t, "missing")
		a.Put(i, Answer{})
		_, ok := e.Score(a)
		if b := e.Bound(a); ok != (len(b.Missing) == 0) || (!ok && b.Missing[0] != i) || ok == (a.Applies(i) == Sure) {
			t.Fatalf("scored %v, missing %v", ok, b.Missing)
		}
	})
}

// The text of answers gives the same answers and the same result.
func TestAnswersRoundTrip(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		e := drawEdition(t)
		a := drawAnswers(t, e)
		for _, i := range e.asked {
			if rapid.IntRange(0, 5).Draw(t, "leave out") == 0 {
				a.Put(i, Answer{})
			}
		}
		b, problems := e.ParseAnswers(a.Text())
		for _, p := range problems {
			t.Fatal(p)
		}
		if a.Text() != b.Text() {
			t.Fatalf("\n%s\nwas read as\n%s", a.Text(), b.Text())
		}
		r, ok := e.Score(a)
		if s, also := e.Score(b); r != s || ok != also {
			t.Fatalf("%+v %v, read back %+v %v", r, ok, s, also)
		}
		if c := a.Clone(); c.Text() != a.Text() {
			t.Fatalf("\n%s\nwas copied as\n%s", a.Text(), c.Text())
		}
	})
}

// The canonical text gives the same scorecard.
func TestScorecardRoundTrip(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := drawScorecard(t)
		text := s.Canonical()
		read, problems := ParseCanonical(text)
		for _, p := range problems {
			t.Fatal(p)
		}
		if got := read.Canonical(); got != text {
			t.Fatalf("\n%s\nwas read as\n%s", text, got)
		}
		if read.Fingerprint() != s.Fingerprint() || gather(s).e.fingerprint != s.Fingerprint() {
			t.Fatal("fingerprints differ")
		}
	})
}

// The balance adds up, and reasons are its furthest steps above the average.
func TestStepsAddUp(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		e := drawEdition(t)
		a := drawAnswers(t, e)
		sum := e.Centre()
		var above []LogOdds
		for _, s := range e.Steps(a) {
			if s.Open() || s.Lowest != s.LogOdds {
				t.Fatalf("%+v is open", s)
			}
			sum += s.Above()
			if s.Above() > 0 {
				above = append(above, s.Above())
			}
		}
		if r := score(t, a); sum != r.LogOdds {
			t.Fatalf("the steps come to %v, the result to %v", sum, r.LogOdds)
		}
		slices.Sort(above)
		slices.Reverse(above)
		above = above[:min(len(above), MostReasons)]
		reasons := e.Reasons(a)
		for i, s := range reasons {
			if s.Above() != above[i] {
				t.Fatalf("reason %d is %v above, want %v", i+1, s.Above(), above[i])
			}
			if i > 0 && s.Above() == reasons[i-1].Above() && s.Index < reasons[i-1].Index {
				t.Fatal("a tie is out of order")
			}
		}
		if len(reasons) != len(above) {
			t.Fatalf("%d reasons, want %d", len(reasons), len(above))
		}
	})
}

// Every offer is approved within its cap, none is above what was asked, and no
// larger step of its term would have done.
func TestTermsThatFitAll(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		e := drawEdition(t)
		a := drawAnswers(t, e)
		asked, _, _ := a.AmountAndTerm()
		offers := e.TermsThatFit(a)
		fits := func(amount Number, term int) (Result, bool) {
			try := a.Clone()
			try.Put(e.byCode[Amount], Answer{State: Given, Number: amount, Seen: a.At(e.byCode[Amount]).Seen})
			try.Put(e.byCode[Term], Answer{State: Given, Number: Whole(int64(term)), Seen: a.At(e.byCode[Term]).Seen})
			r := score(t, try)
			return r, r.Recommendation == Approve && amount <= r.LargestAmount.Or(Largest)
		}
		terms := e.card.Terms
		for term := 1; term <= int(terms.LongestTerm); term++ {
			want := Offer{}
			for amount := terms.SmallestAmount; amount <= min(asked, terms.LargestAmount); amount += terms.AmountStep {
				if r, ok := fits(amount, term); ok {
					want = Offer{amount, term, r}
				}
			}
			if top := min(asked, terms.LargestAmount); top >= terms.SmallestAmount {
				if r, ok := fits(top, term); ok {
					want = Offer{top, term, r}
				}
			}
			i := slices.IndexFunc(offers, func(o Offer) bool { return o.Term == term })
			if (i >= 0) != (want.Term != 0) || (i >= 0 && offers[i] != want) {
				t.Fatalf("term %d: offers %+v, want %+v", term, offers, want)
			}
		}
	})
}

// A test on a set of values says what it says of every value in it.
func TestTestsInThreeValues(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		e := drawEdition(t)
		a := drawAnswers(t, e)
		v, _ := a.whole()
		var p possibles
		e.spread(a, &p)
		for _, r := range e.rules {
			for _, test := range r.tests {
				if got, want := test.may(&p.of[test.index]), truth(test.holds(&v[test.index])); got != want {
					t.Fatalf("%s of %s: %v of the set, %v of the value", r.Code, e.items[test.index].Code, got, want)
				}
			}
		}
		if n := bits.OnesCount64(uint64(score(t, a).Fired)); n != score(t, a).Fired.Len() {
			t.Fatal("rules miscounted")
		}
	})
}

// The log-odds of a number lie within those of any range that it lies in, and
// the ends of these are reached.
func TestNumberRange(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		item := Item{from: Whole(-5), to: Whole(60), slope: Slope{rapid.Int64Range(-99, 99).Draw(t, "slope"), 2}}
		for _, cut := range append([]Number{-Largest}, cuts(t, 4)...) {
			item.bandAt, item.floors = append(item.bandAt, len(item.floors)), append(item.floors, cut)
			item.weights = append(item.weights, LogOdds(rapid.Int64Range(-3, 3).Draw(t, "weight"))*LogOddsOne)
		}
		from := Number(rapid.Int64Range(-20e6, 80e6).Draw(t, "from"))
		to := from + Number(rapid.Int64Range(0, 80e6).Draw(t, "width"))
		lo, hi := item.numberRange(from, to)
		least, most := item.counted(from, true).weight, item.counted(from, true).weight
		for _, n := range append(item.floors, from, to, item.from, item.to, (from+to)/2) {
			for _, n := range []Number{n - 1, n} {
				if w := item.counted(n, true).weight; from <= n && n <= to {
					least, most = min(least, w), max(most, w)
				}
			}
		}
		if lo != least || hi != most {
			t.Fatalf("from %v to %v the log-odds are %v to %v, want %v to %v", from, to, lo, hi, least, most)
		}
	})
}
