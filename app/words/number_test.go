package words

import (
	"strings"
	"testing"

	"pgregory.net/rapid"

	"weighhouse/model"
)

func reader(language string, style NumberStyle) *Reader {
	return New(Style{Language: language, Numbers: style})
}

func number(t *testing.T, text string) model.Number {
	t.Helper()
	n, err := model.ParseNumber(text)
	if err != nil {
		t.Fatal(err)
	}
	return n
}

func TestNumberStyles(t *testing.T) {
	for _, c := range []struct {
		style    NumberStyle
		text     string
		decimals int
		want     string
	}{
		{PointComma, "1234567.89", 2, "1,234,567.89"},
		{PointComma, "1234567.89", 0, "1,234,568"},
		{PointComma, "-999", 0, "-999"},
		{PointComma, "-1000", Shortest, "-1,000"},
		{PointComma, "5", 2, "5.00"},
		{PointComma, "0.5", 1, "0.5"},
		{CommaPoint, "1234567.89", Shortest, "1.234.567,89"},
		{SpaceComma, "1234567.89", Shortest, "1\u00a0234\u00a0567,89"},
		{Apostrophe, "1234567.89", Shortest, "1’234’567.89"},
		{Lakh, "1234567.89", Shortest, "12,34,567.89"},
		{Lakh, "100000", 0, "1,00,000"},
		{Lakh, "99999", 0, "99,999"},
		{Lakh, "123456789", 0, "12,34,56,789"},
	} {
		if got := reader("en", c.style).Number(number(t, c.text), c.decimals); got != c.want {
			t.Errorf("%s of %s to %d: %q, want %q", c.style, c.text, c.decimals, got, c.want)
		}
	}
	if got := Lakh.Sample(); got != "12,34,567.89" {
		t.Errorf("sample %q", got)
	}
	if got := reader("en", PointComma).Money(number(t, "3200"), 2, "crowns"); got != "3,200\u00a0crowns" {
		t.Errorf("money %q", got)
	}
}

func TestFigures(t *testing.T) {
	en, fr := reader("en", PointComma), reader("fr", SpaceComma)
	for _, c := range []struct{ got, want string }{
		{en.Percent(model.PDOne / 2), "50.0%"},
		{en.Percent(33_333_333), "3.33%"},
		{en.Percent(5_000_000), "0.500%"},
		{en.Percent(1_000), "0.0001%"},
		{en.Percent(999), "below 0.0001%"},
		{en.Percent(model.PDOne - 999), "above 99.9999%"},
		{en.Percent(999_500_000), "99.9500%"},
		{fr.Percent(33_333_333), "3,33\u00a0%"},
		{en.Rate(240_000_000), "24%"},
		{en.Rate(129_620_377), "12.96%"},
		{en.Score(number(t, "551.5")), "552"},
		{en.Score(number(t, "-0.5")), "-1"},
		{en.LogOdds(-2_222_802_279), "-2.223"},
		{en.LogOdds(409_781_595), "+0.410"},
		{en.LogOdds(0), "0.000"},
		{en.T("count.days", "n", 1), "1 day"},
		{en.T("count.days", "n", 1_000), "1,000 days"},
		{fr.T("count.days", "n", 0), "0 jour"},
		{fr.T("count.days", "n", 1_000_000), "1\u00a0000\u00a0000 jours"},
		{en.T("there_is_none"), "[there_is_none]"},
		{en.Name(model.Refer), "send to manager"},
		{fr.Name(model.Refer), "envoyer au chef d’agence"},
		{en.Name("plain"), "plain"},
		{en.Term(12, model.Months), "12 months"},
	} {
		if c.got != c.want {
			t.Errorf("%q, want %q", c.got, c.want)
		}
	}
}

func TestParseNumber(t *testing.T) {
	for _, c := range []struct {
		style    NumberStyle
		text     string
		decimals int
		want     string // a number, or a code with its readings
	}{
		{PointComma, "1250", 2, "1250"},
		{PointComma, "1,250.50", 2, "1250.5"},
		{PointComma, " 1 250.50 ", 2, "1250.5"},
		{PointComma, "1\u202f250", 0, "1250"},
		{PointComma, "1\u00a0250\u00a0000", 0, "1250000"},
		{PointComma, "1'250.5", 2, "1250.5"},
		{PointComma, "12,34,567", 0, "1234567"},
		{PointComma, ".5", 2, "0.5"},
		{PointComma, "5.", 2, "5"},
		{PointComma, "+5", 0, "5"},
		{PointComma, "−5", 0, "-5"},
		{PointComma, "- 5", 0, "-5"},
		{PointComma, "007", 0, "7"},
		{PointComma, "0.250", 2, "0.25"},
		{PointComma, "1250.500", 2, "1250.5"},
		{PointComma, "1.250", 3, "1.25"},
		{PointComma, "999,999,999,999", 0, "999999999999"},
		{CommaPoint, "1.250,50", 2, "1250.5"},
		{SpaceComma, "1 250,50", 2, "1250.5"},
		{Apostrophe, "1’250.50", 2, "1250.5"},
		{Lakh, "12,34,567.89", 2, "1234567.89"},
		{Lakh, "1,234,567", 0, "1234567"},

		{PointComma, "1.250,50", 2, "number_other_style 1250.5"},
		{PointComma, "1.250,50", 4, "number_two_readings 1.2505 1250.5"},
		{PointComma, "1.250", 2, "number_two_readings 1.25 1250"},
		{PointComma, "1.250", 0, "number_other_style 1250"},
		{PointComma, "12,34", 2, "number_two_readings 1234 12.34"},
		{PointComma, "1,5", 2, "number_two_readings 15 1.5"},
		{PointComma, "-1,5", 2, "number_two_readings -15 -1.5"},
		{PointComma, "1.250.000", 2, "number_other_style 1250000"},
		{PointComma, "1 25", 2, "number_other_style 125"},
		{PointComma, "1 250,000", 2, "number_two_readings 1250000 1250"},
		{CommaPoint, "1,250.50", 2, "number_other_style 1250.5"},
		{CommaPoint, "1,250", 2, "number_two_readings 1.25 1250"},
		{SpaceComma, "1.250", 2, "number_two_readings 1250 1.25"},
		{SpaceComma, "1.5", 2, "number_two_readings 15 1.5"},
		{Apostrophe, "1,250", 2, "number_two_readings 1250 1.25"},

		{PointComma, "", 2, "number_empty"},
		{PointComma, " \u00a0 ", 2, "number_empty"},
		{PointComma, strings.Repeat("1", 10_000), 2, "text_too_long"},
		{PointComma, "inf", 2, "number_not_finite"},
		{PointComma, "-Infinity", 2, "number_not_finite"},
		{PointComma, "∞", 2, "number_not_finite"},
		{PointComma, "NaN", 2, "number_not_finite"},
		{PointComma, "1e5", 2, "number_exponent"},
		{PointComma, "1.5E+3", 2, "number_exponent"},
		{PointComma, "١٢٣", 2, "digits_other"},
		{PointComma, "१२३", 2, "digits_other"},
		{PointComma, "１２", 2, "digits_other"},
		{PointComma, "12 crowns", 2, "not_a_number"},
		{PointComma, "12%", 2, "not_a_number"},
		{PointComma, "abc", 2, "not_a_number"},
		{PointComma, "-", 2, "not_a_number"},
		{PointComma, ".", 2, "not_a_number"},
		{PointComma, "--5", 2, "not_a_number"},
		{PointComma, "1..5", 2, "not_a_number"},
		{PointComma, "1,2.3,4.5", 2, "not_a_number"},
		{PointComma, "5\u0301", 2, "not_a_number"},
		{PointComma, "\u202e12", 2, "not_a_number"},
		{PointComma, "1.2345", 2, "too_many_decimals"},
		{PointComma, "1000000000000", 0, "number_too_large"},
	} {
		n, err := reader("en", c.style).ParseNumber(c.text, c.decimals)
		got := n.String()
		if err != nil {
			p := err.(model.Problem)
			got = strings.TrimSpace(strings.Join([]string{p.Code, p.Args["reading"] + p.Args["first"], p.Args["second"]}, " "))
		}
		if got != c.want {
			t.Errorf("%s style, %.20q: %s, want %s", c.style, c.text, got, c.want)
		}
	}
}

// What a Reader writes it reads back as the same number, in every style.
func TestNumbersComeBack(t *testing.T) {
	var readers []*Reader
	for _, s := range NumberStyles() {
		readers = append(readers, reader("en", s))
	}
	rapid.Check(t, func(t *rapid.T) {
		n := model.Number(rapid.Int64Range(-int64(model.Largest), int64(model.Largest)).Draw(t, "n"))
		decimals := rapid.IntRange(0, 6).Draw(t, "decimals")
		for _, r := range readers {
			n := n.Round(decimals)
			text := r.Number(n, decimals)
			if back, err := r.ParseNumber(text, decimals); err != nil || back != n {
				t.Fatalf("%s: %q read as %v, %v", r.style.Numbers, text, back, err)
			}
		}
	})
}

func TestUnfinished(t *testing.T) {
	r := reader("en", PointComma)
	for _, text := range []string{"-", "1,", "1,2", "1,25", "1,250.", "1 2"} {
		if !r.Unfinished(text, 2) {
			t.Errorf("%q may still become a number", text)
		}
	}
	for _, text := range []string{"1.250,5", "1e5", "12 c", "1,2,3,", "1.234"} {
		if r.Unfinished(text, 2) {
			t.Errorf("%q can no longer become a number", text)
		}
	}
}

func FuzzParseNumber(f *testing.F) {
	for _, seed := range []string{"1,250.50", "1.250,50", "-∞", "1e5", "１２", " 1 2 3 ", "'", "\xff"} {
		f.Add(seed, 2)
	}
	readers := map[NumberStyle]*Reader{}
	for _, s := range NumberStyles() {
		readers[s] = reader("en", s)
	}
	f.Fuzz(func(t *testing.T, text string, decimals int) {
		decimals = min(max(decimals, 0), 6)
		for _, r := range readers {
			n, err := r.ParseNumber(text, decimals)
			if err == nil && n != n.Round(decimals) {
				t.Errorf("%q gave %v", text, n)
			}
			if err != nil && r.Sentence(err.(model.Problem)) == "" {
				t.Errorf("%q: no words for %v", text, err)
			}
		}
	})
}
