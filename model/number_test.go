package model

import (
	"errors"
	"fmt"
	"math/big"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

var anyNumber = rapid.Custom(func(t *rapid.T) Number {
	return Number(rapid.OneOf(
		rapid.Int64Range(-int64(Largest), int64(Largest)),
		rapid.Int64Range(-3_000_000, 3_000_000),
		rapid.Map(rapid.Int64Range(-2000, 2000), func(n int64) int64 { return n * 500_000 }),
		rapid.SampledFrom([]int64{int64(Largest), -int64(Largest), int64(Largest) - 1}),
	).Draw(t, "number"))
})

func ratOf(n Number) *big.Rat { return big.NewRat(int64(n), int64(One)) }

// rounded is x to so many decimals, half up, within the range of Numbers.
func rounded(x *big.Rat, decimals int) Number {
	step := big.NewInt(pow10[MostDecimals-decimals])
	x = new(big.Rat).Quo(x, new(big.Rat).SetFrac(step, big.NewInt(int64(One)))) // in steps
	x.Add(x, big.NewRat(1, 2))
	floor := new(big.Int).Div(x.Num(), x.Denom()) // Euclid's, the floor for a positive denominator
	most := new(big.Int).Div(big.NewInt(int64(Largest)), step)
	if floor.CmpAbs(most) > 0 {
		floor.Mul(most, big.NewInt(int64(floor.Sign())))
	}
	return Number(floor.Mul(floor, step).Int64())
}

// Every operation is exact but for one rounding and the ends of the range.
func TestArithmeticIsExact(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		a, b := anyNumber.Draw(t, "a"), anyNumber.Draw(t, "b")
		decimals := rapid.IntRange(0, MostDecimals).Draw(t, "decimals")
		x, y := ratOf(a), ratOf(b)
		check := func(what string, got Number, exact *big.Rat, decimals int) {
			if want := rounded(exact, decimals); got != want {
				t.Fatalf("%v %s %v to %d places is %v, want %v", a, what, b, decimals, got, want)
			}
		}
		check("+", a.Plus(b), new(big.Rat).Add(x, y), MostDecimals)
		check("-", a.Minus(b), new(big.Rat).Sub(x, y), MostDecimals)
		check("×", a.Times(b, decimals), new(big.Rat).Mul(x, y), decimals)
		check("rounded with", a.Round(decimals), x, decimals)
		if b > 0 {
			check("÷", a.Over(b, decimals), new(big.Rat).Quo(x, y), decimals)
		}
		factors := rapid.SliceOfN(anyNumber, 1, MostParts).Draw(t, "factors")
		exact := big.NewRat(1, 1)
		for _, f := range factors {
			exact.Mul(exact, ratOf(f))
		}
		check(fmt.Sprint("with ", factors), product(decimals, factors...), exact, decimals)
	})
}

func TestSlopeTimesNumber(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s, v := slope.Draw(t, "slope"), anyNumber.Draw(t, "value")
		exact, ok := new(big.Rat).SetString(s.String())
		if !ok {
			t.Fatal(s)
		}
		exact.Mul(exact, ratOf(v)).Mul(exact, big.NewRat(1e9, 1))
		// Half to even: of the two neighbours the nearer, of two as near the even.
		floor := new(big.Int).Div(exact.Num(), exact.Denom())
		rest := new(big.Rat).Sub(exact, new(big.Rat).SetInt(floor))
		if c := rest.Cmp(big.NewRat(1, 2)); c > 0 || (c == 0 && floor.Bit(0) == 1) {
			floor.Add(floor, big.NewInt(1))
		}
		want := int64(largestLogOdds) * int64(floor.Sign())
		if floor.IsInt64() && abs(floor.Int64()) <= uint64(largestLogOdds) {
			want = floor.Int64()
		}
		if got := s.At(v); got != LogOdds(want) {
			t.Fatalf("%v × %v is %v, want %v", s, v, got, LogOdds(want))
		}
	})
	for _, c := range []struct {
		slope string
		value Number
		want  LogOdds
	}{
		{"0.0000005", Number(1000), 0},            // half a billionth: to even
		{"0.0000015", Number(1000), 2},            // one and a half
		{"-0.0000005", Number(3000), -2},          // minus one and a half
		{"0.000000000000001", Whole(500_000), 0},  // 15 places
		{"0.000000000000001", Whole(500_001), 1},  //
		{"999999999999", Largest, largestLogOdds}, // stops
		{"-999999999999", Largest, -largestLogOdds},
		{"100", Whole(10_001), largestLogOdds},
		{"100", Whole(10_000), largestLogOdds},
		{"0", Largest, 0},
	} {
		s, err := ParseSlope(c.slope)
		if got := s.At(c.value); err != nil || got != c.want {
			t.Errorf("%s × %v is %v %v, want %v", c.slope, c.value, got, err, c.want)
		}
	}
}

// What is written is read back as the same, and is the shortest text.
func TestNumbersRoundTrip(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := anyNumber.Draw(t, "number")
		if got, err := ParseNumber(n.String()); got != n || err != nil {
			t.Fatalf("%v was read as %v %v", n, got, err)
		}
		if exact, ok := new(big.Rat).SetString(n.String()); !ok || exact.Cmp(ratOf(n)) != 0 {
			t.Fatalf("%d is written %v", int64(n), n)
		}
		l := LogOdds(rapid.Int64Range(-int64(largestLogOdds), int64(largestLogOdds)).Draw(t, "log-odds"))
		if got, err := ParseLogOdds(l.String()); got != l || err != nil {
			t.Fatalf("%v was read as %v %v", l, got, err)
		}
		s := slope.Draw(t, "slope")
		if got, err := ParseSlope(s.String()); got != s || err != nil {
			t.Fatalf("%v was read as %v %v", s, got, err)
		}
		p := PD(rapid.Int64Range(0, int64(PDOne)).Draw(t, "PD"))
		if got, err := ParsePD(p.String()); got != p || err != nil {
			t.Fatalf("%v was read as %v %v", p, got, err)
		}
		for _, text := range []string{n.String(), l.String(), s.String(), p.String()} {
			if text != "0" && (strings.HasPrefix(strings.TrimPrefix(text, "-"), "00") || strings.Contains(text, ".") && strings.HasSuffix(text, "0") || text == "-0") {
				t.Fatalf("%s is not the shortest", text)
			}
		}
		c := Covar(0)
		f := rapid.Float64().Draw(t, "covariance")
		if err := c.UnmarshalText([]byte(Covar(f).String())); err != nil || c.String() != Covar(f+0).String() {
			t.Fatalf("%v was read as %v %v", Covar(f), c, err)
		}
	})
}

// What is no canonical number is refused, each with its own code.
func TestNumbersRefused(t *testing.T) {
	number := func(text string) error { _, err := ParseNumber(text); return err }
	logOdds := func(text string) error { _, err := ParseLogOdds(text); return err }
	slope := func(text string) error { _, err := ParseSlope(text); return err }
	pd := func(text string) error { _, err := ParsePD(text); return err }
	count := func(text string) error { return new(Count).UnmarshalText([]byte(text)) }
	rate := func(text string) error { return new(Rate).UnmarshalText([]byte(text)) }
	covar := func(text string) error { return new(Covar).UnmarshalText([]byte(text)) }
	date := func(text string) error { _, err := ParseDate(text); return err }
	long := strings.Repeat("9", 10_000)
	for _, c := range []struct {
		read       func(string) error
		text, code string
	}{
		{number, "", "not_a_number"}, {number, "-", "not_a_number"}, {number, "--1", "not_a_number"}, {number, "+1", "not_a_number"},
		{number, "1e3", "not_a_number"}, {number, "1,000", "not_a_number"}, {number, " 1", "not_a_number"}, {number, "1.", "not_a_number"},
		{number, ".5", "not_a_number"}, {number, "1.2.3", "not_a_number"}, {number, "NaN", "not_a_number"}, {number, "Inf", "not_a_number"},
		{number, "٣", "not_a_number"}, {number, "0x10", "not_a_number"}, {number, long + "x", "not_a_number"},
		{number, "0.1234567", "too_many_decimals"}, {number, "1000000000000", "number_too_large"}, {number, "-1000000000000", "number_too_large"},
		{number, long, "number_too_large"}, {number, "9223372036854.775808", "number_too_large"}, {number, "18446744073709551617", "number_too_large"},
		{logOdds, "1.0000000001", "too_many_decimals"}, {logOdds, "1000000.000000001", "number_too_large"}, {logOdds, "x", "not_a_number"},
		{slope, "", "not_a_number"}, {slope, "1.", "not_a_number"}, {slope, "1e-5", "not_a_number"}, {slope, "--1", "not_a_number"}, {slope, "1.2.3", "not_a_number"},
		{slope, "0.0000000000000001", "too_many_decimals"}, {slope, "1234567890123", "too_many_digits"}, {slope, long, "too_many_digits"},
		{pd, "1.000000001", "not_a_probability"}, {pd, "-0.1", "not_a_probability"}, {pd, "x", "not_a_number"},
		{count, "-1", "not_a_count"}, {count, "1.5", "not_a_count"}, {count, "1000000001", "not_a_count"}, {count, "one", "not_a_number"},
		{rate, "-0.1", "not_a_rate"}, {rate, "1000.1", "not_a_rate"}, {rate, "24%", "not_a_number"},
		{covar, "x", "not_a_number"}, {covar, "NaN", "not_a_number"}, {covar, "-Inf", "not_a_number"}, {covar, "1e999", "not_a_number"}, {covar, "1.234567890123", "too_many_digits"},
		{date, "", "not_a_date"}, {date, "2026-02-29", "not_a_date"}, {date, "2026-13-01", "not_a_date"}, {date, "1/3/2026", "not_a_date"},
		{date, "1799", "not_a_date"}, {date, "3000-01-01", "not_a_date"}, {date, "85", "not_a_date"}, {date, "+198", "not_a_date"}, {date, "2026-3-1", "not_a_date"},
	} {
		var p Problem
		if err := c.read(c.text); !errors.As(err, &p) || p.Code != c.code {
			t.Errorf("%.40q: %v, want %s", c.text, err, c.code)
		}
	}
}

func TestNumbersTaken(t *testing.T) {
	for text, want := range map[string]Number{"0": 0, "-0": 0, "007": Whole(7), "1.500000000": One + One/2, "-0.000001": -1, "999999999999.999999": Largest} {
		if got, err := ParseNumber(text); got != want || err != nil {
			t.Errorf("%s was read as %v %v", text, got, err)
		}
	}
	if Whole(1<<62) != Largest || Whole(-1<<62) != -Largest || Whole(5) != 5*One {
		t.Error("Whole does not stop at the ends")
	}
	for score, want := range map[Number]int64{One / 2: 1, -One / 2: -1, One/2 - 1: 0, Whole(551): 551, Whole(551) + 499_999: 551} {
		if got := ShownScore(score); got != want {
			t.Errorf("a score of %v is shown %d, want %d", score, got, want)
		}
	}
}

// Halves go up, towards plus infinity, where a sheet's ROUND would go away
// from zero.
func TestHalvesGoUp(t *testing.T) {
	half := One / 2
	for _, c := range []struct{ got, want Number }{
		{half.Round(0), One}, {(-half).Round(0), 0}, {(-One - half).Round(0), -One},
		{(-One).Over(Whole(8), 2), -120_000}, {One.Over(Whole(8), 2), 130_000},
		{(-half).Times(One, 0), 0}, {half.Times(-half, 1), -200_000},
	} {
		if c.got != c.want {
			t.Errorf("%v, want %v", c.got, c.want)
		}
	}
}

// A worksheet's month, against exact fractions.
func TestMonthly(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		item := Item{Characteristic: Characteristic{Kind: Worksheet, Decimals: Count(rapid.IntRange(0, 6).Draw(t, "decimals"))}}
		exact := new(big.Rat)
		var lines []Money
		for range rapid.IntRange(1, MostLines).Draw(t, "lines") {
			line := Line{Flow: rapid.SampledFrom([]Flow{Adds, TakesAway}).Draw(t, "flow"), Period: rapid.SampledFrom(periods).Draw(t, "usual")}
			m := Money{anyNumber.Draw(t, "amount"), rapid.SampledFrom(append(periods, "")).Draw(t, "period"), rapid.Bool().Draw(t, "set")}
			item.Lines, lines = append(item.Lines, line), append(lines, m)
			if !m.Set {
				continue
			}
			times := line.Period.TimesAYear()
			if m.Period != "" {
				times = m.Period.TimesAYear()
			}
			if line.Flow == TakesAway {
				times = -times
			}
			exact.Add(exact, new(big.Rat).Mul(ratOf(m.Amount), big.NewRat(times, 12)))
		}
		if got, want := item.Monthly(lines), rounded(exact, int(item.Decimals)); got != want {
			t.Fatalf("%v a month, want %v (%s)", got, want, exact.FloatString(9))
		}
	})
}
