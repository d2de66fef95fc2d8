package words

import (
	"errors"
	"fmt"
	"strings"
	"testing"

	"weighhouse/model"
)

func TestProblem(t *testing.T) {
	gap := model.Problem{Code: "band_gap", Place: model.Place{Sheet: "Attributes", Row: 6, Column: "From", Cell: "D7"},
		Args: model.Args{"value": "1250.5", "expected": "1000"}}
	noCell := gap
	noCell.Place.Cell = ""
	limits := func(least, most model.Number) model.Problem {
		return model.Problem{Code: "outside_accepted", Place: model.Place{Sheet: "Answers", Column: "acres"},
			Args: model.Args{"value": "400", "least": least.String(), "most": most.String()}}
	}
	for _, c := range []struct {
		tag     string
		problem model.Problem
		want    string
	}{
		{"en", gap, "Attributes!D7 (From): From is 1,250.5 where the band above ends at 1,000: what lies between has no band."},
		{"en", noCell, "Attributes, row 7 (From): From is 1,250.5 where the band above ends at 1,000: what lies between has no band."},
		{"fr", gap, "Attributes!D7 (From)\u00a0: From est 1\u00a0250,5 alors que la tranche du dessus finit à 1\u00a0000\u00a0: ce qui est entre les deux n’a pas de tranche."},
		{"es", gap, "Attributes!D7 (From): From es 1.250,5 donde el tramo de arriba termina en 1.000: lo que queda en medio no tiene tramo."},
		{"en", limits(0, model.Whole(1000)), "acres: 400 is unusual: mostly from 0 to 1,000."},
		{"en", limits(-model.Largest, model.Whole(60)), "acres: 400 is unusual: mostly at most 60."},
		{"en", limits(model.Whole(500), model.Largest), "acres: 400 is unusual: mostly at least 500."},
		{"en", model.Problem{Code: "past_review", Args: model.Args{"value": "2026-03-01"}}, "The scorecard was to be reviewed by 1 Mar 2026. Ask head office for the next edition."},
		{"en", model.Problem{Code: "protected_scored", Args: model.Args{"value": "village", "ground": "age"}}, "village looks like age. It may be scored only with a lawful ground, written in the column Lawful ground."},
		{"en", model.Problem{Code: "unknown_characteristic", Args: model.Args{"value": "acer", "near": "acre"}}, "No characteristic has the code acer. Do you mean acre?"},
		{"en", model.Problem{Code: "unknown_characteristic", Args: model.Args{"value": "acer", "near": ""}}, "No characteristic has the code acer."},
		{"en", model.Problem{Code: "number_two_readings", Args: model.Args{"value": "1.250", "first": "1.25", "second": "1250"}}, "“1.250” may be 1.25 or 1,250. Write one of these."},
		{"en", model.Problem{Code: "not_a_number", Args: model.Args{"value": "\u202eabc\x00"}}, "“\ufffdabc\ufffd” is not a number. Use the digits 0 to 9 only."},
		{"en", model.Problem{Code: "not_a_number", Args: model.Args{"value": strings.Repeat("é", 10_000)}}, "“" + strings.Repeat("é", 60) + "…” is not a number. Use the digits 0 to 9 only."},
		{"en", model.Problem{Code: "never_heard_of"}, "Something is wrong that this program has no words for yet: never_heard_of"},
	} {
		if got := New(StyleOf(c.tag)).Problem(c.problem); got != c.want {
			t.Errorf("%s %s: %q, want %q", c.tag, c.problem.Code, got, c.want)
		}
	}
	r := New(Style{})
	if got := r.Error(fmt.Errorf("reading: %w", model.Problem{Code: "file_empty"})); got != "The file is empty. Copy it again." {
		t.Errorf("a wrapped problem: %q", got)
	}
	if got := r.Error(errors.New("no such device")); got != "The system says: no such device" {
		t.Errorf("another error: %q", got)
	}
}

func TestStyleOf(t *testing.T) {
	for tag, want := range map[string]Style{
		"":      {"en", PointComma, DayFirst},
		"en-US": {"en", PointComma, MonthFirst},
		"en_IN": {"en", Lakh, DayFirst},
		"fr":    {"fr", SpaceComma, DayFirst},
		"fr-CH": {"fr", Apostrophe, DayFirst},
		"es":    {"es", CommaPoint, DayFirst},
		"es-MX": {"es", PointComma, DayFirst},
		"sw":    {"en", PointComma, DayFirst},
	} {
		if got := StyleOf(tag); got != want {
			t.Errorf("%q: %v, want %v", tag, got, want)
		}
	}
	if got := New(Style{"tlh", "runes", "sideways"}).Style(); got != (Style{"en", PointComma, DayFirst}) {
		t.Errorf("an unknown style became %v", got)
	}
}
