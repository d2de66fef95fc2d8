package model

import (
	"fmt"
	"math"
	"testing"
)

// twelve is a scorecard of 12 scored characteristics, 14 questions with amount
// and term: six choices of five, two yes/no, three numbers of five bands one
// of which is sloped too, and the payment as a share of what is left; with six
// rules. Its checks are left out.
func twelve(t testing.TB) *Edition {
	s := partOf("Bands\nBand | Label | PD from | PD below | Recommendation\na | Low | | 0.1 | approve\nb | Middle | 0.1 | 0.2 | refer\nc | High | 0.2 | | decline")
	add := func(code string, kind Kind, use Use) {
		s.Characteristics = append(s.Characteristics, Characteristic{Code: code, Question: "Asked", Kind: kind, Use: use, Decimals: 2,
			CountedFrom: Some(Number(0)), CountedTo: Some(Whole(100)), LowestAccepted: Some(Number(0)), HighestAccepted: Some(Whole(100)), AverageLogOdds: Some(LogOdds(0))})
	}
	attribute := func(characteristic, code string, from, below Maybe[Number], n int) {
		s.Attributes = append(s.Attributes, Attribute{Characteristic: characteristic, Code: code, Label: code, From: from, Below: below,
			LogOdds: Some(LogOdds(n%7-3) * LogOddsOne / 10)})
	}
	for i := range 6 {
		code := fmt.Sprintf("choice%d", i)
		add(code, Choice, Scored)
		for n := range 5 {
			attribute(code, fmt.Sprintf("a%d", n), Maybe[Number]{}, Maybe[Number]{}, i+n)
		}
	}
	for i := range 2 {
		code := fmt.Sprintf("yesno%d", i)
		add(code, YesNo, Scored)
		attribute(code, Yes, Maybe[Number]{}, Maybe[Number]{}, i)
		attribute(code, No, Maybe[Number]{}, Maybe[Number]{}, i+3)
	}
	bands := func(code string, width Number) {
		var from Maybe[Number]
		for n := range 5 {
			below := Some(width * Number(n+1))
			if n == 4 {
				below = Maybe[Number]{}
			}
			attribute(code, fmt.Sprintf("b%d", n), from, below, n)
			from = below
		}
	}
	for i := range 3 {
		code := fmt.Sprintf("number%d", i)
		add(code, Numeric, Scored)
		bands(code, Whole(20))
	}
	s.Attributes = append(s.Attributes, Attribute{Characteristic: "number2", Slope: Some(Slope{349617511200, 13})})
	add("income", Numeric, Recorded)
	add("payment", Computed, Recorded)
	add("share", Computed, Scored)
	bands("share", One/5)
	attribute("share", NothingLeft, Maybe[Number]{}, Maybe[Number]{}, 6)
	s.Computed = []Formula{{Characteristic: "payment", Operation: Instalment},
		{Characteristic: "share", Operation: Ratio, Parts: [8]Part{{Code: "payment"}, {Code: "income"}}}}
	for i, r := range []Rule{
		{Characteristic: "choice0", Test: Is, Value: "a4"},
		{Characteristic: "share", Test: AtLeast, Value: "0.9"},
		{Characteristic: "number0", Test: Below, Value: "1"},
		{Characteristic: "yesno0", Test: Is, Value: "no"},
		{Characteristic: "choice1", Test: OneOf, Value: "a0, a1"},
		{Characteristic: "income", Test: ToldOnly},
	} {
		r.Code, r.Label, r.Effect = fmt.Sprintf("r%d", i), "Rule", ReferEffect
		s.Rules = append(s.Rules, r)
	}
	c := gather(s)
	for _, p := range c.problems {
		if !p.Warning {
			t.Fatal(p)
		}
	}
	return c.e
}

func twelveAnswers(t testing.TB, e *Edition) *Answers {
	return answered(t, e, "amount 1200", "term 12", "choice0 a1", "choice1 a2", "choice2 a3", "choice3 a4", "choice4 a0", "choice5 a1",
		"yesno0 yes", "yesno1 no", "number0 33", "number1 70.5", "number2 12", "income 400!")
}

// bare is the same scorecard in plain floats, without bands' limits, rules,
// computed answers' own arithmetic or a thought for exactness: what scoring
// cannot be faster than.
type bare struct {
	weights [12][5]float64
	floors  [12][5]float64
}

func (b *bare) score(choices *[8]int, numbers *[4]float64) float64 {
	sum := -2.0
	for i, c := range choices {
		sum += b.weights[i][c]
	}
	for i, n := range numbers {
		k := 4
		for k > 0 && n < b.floors[8+i][k] {
			k--
		}
		sum += b.weights[8+i][k]
	}
	sum += 0.03496 * numbers[2]
	return 1 / (1 + math.Exp(-sum))
}

func BenchmarkBareFloatLoop(b *testing.B) {
	var card bare
	for i := range card.weights {
		for k := range 5 {
			card.weights[i][k] = float64((i+k)%7-3) / 10
			card.floors[i][k] = float64(20 * k)
		}
	}
	choices, numbers := [8]int{1, 2, 3, 4, 0, 1, 0, 1}, [4]float64{33, 70.5, 12, 0}
	var sum float64
	for b.Loop() {
		numbers[3] = 113.47 / 400
		sum += card.score(&choices, &numbers)
	}
	if sum == 0 {
		b.Fatal()
	}
}

func BenchmarkScore(b *testing.B) {
	e := twelve(b)
	a := twelveAnswers(b, e)
	b.ReportAllocs()
	for b.Loop() {
		if _, ok := e.Score(a); !ok {
			b.Fatal("missing")
		}
	}
}

func TestScoreAllocatesNothing(t *testing.T) {
	for _, a := range []*Answers{twelveAnswers(t, twelve(t)), sampleAnswers(t, compiled(t, scorecardOf(t, sample)))} {
		if n := testing.AllocsPerRun(100, func() { a.edition.Score(a) }); n != 0 {
			t.Errorf("%v allocations", n)
		}
	}
}

// A changed answer: nothing but amount and term given, and the last but one.
func BenchmarkBound(b *testing.B) {
	e := twelve(b)
	full := twelveAnswers(b, e)
	for _, given := range []int{2, 8, 13} {
		b.Run(fmt.Sprintf("%d_of_14", given), func(b *testing.B) {
			a := e.NewAnswers(full.On, full.Client)
			for _, i := range e.asked[:given] {
				a.Put(i, full.At(i))
			}
			for b.Loop() {
				e.Bound(a)
			}
		})
	}
}

func BenchmarkTermsThatFit(b *testing.B) {
	e := twelve(b)
	a := twelveAnswers(b, e)
	a.Put(e.byCode[Amount], Answer{State: Given, Number: Whole(5000)})
	a.Put(e.byCode["yesno0"], Answer{State: Given, Attribute: 1}) // a rule refers: everything is tried
	if len(e.TermsThatFit(a)) != 0 {
		b.Fatal("something fits")
	}
	for b.Loop() {
		e.TermsThatFit(a)
	}
	b.ReportMetric(50*34, "loans/op")
}

func BenchmarkParseAndScore(b *testing.B) {
	e := twelve(b)
	text := twelveAnswers(b, e).Text()
	b.ReportAllocs()
	for b.Loop() {
		a, _ := e.ParseAnswers(text)
		if _, ok := e.Score(a); !ok {
			b.Fatal("missing")
		}
	}
}

// A changed answer with its result, when nothing is missing.
func BenchmarkPutAndScore(b *testing.B) {
	e := twelve(b)
	a := twelveAnswers(b, e)
	i := e.byCode["number0"]
	x := a.At(i)
	for b.Loop() {
		a.Put(i, x)
		e.Score(a)
	}
}

func BenchmarkCompile(b *testing.B) {
	s := scorecardOf(b, sample)
	for b.Loop() {
		Compile(s)
	}
}

func BenchmarkExp(b *testing.B) {
	x, sum := -2.5, 0.0
	b.Run("ours", func(b *testing.B) {
		for b.Loop() {
			sum += exp(x)
		}
	})
	b.Run("math", func(b *testing.B) {
		for b.Loop() {
			sum += math.Exp(x)
		}
	})
}
