package model

import (
	"testing"
	"time"

	"pgregory.net/rapid"
)

func TestWholeYears(t *testing.T) {
	for _, c := range []struct {
		born, on string
		want     int
	}{
		{"1985-06-15", "2026-06-14", 40}, {"1985-06-15", "2026-06-15", 41}, {"1985-06-15", "2026-12-31", 41},
		{"2004-02-29", "2026-02-28", 21}, {"2004-02-29", "2026-03-01", 22}, {"2004-02-29", "2028-02-29", 24},
		{"2008-03-01", "2024-02-29", 15}, {"2026-06-15", "2026-06-14", -1}, {"2030-01-01", "2026-06-14", -4},
		// A year alone is its 1 July: half a year off at the most.
		{"1985", "2026-06-30", 40}, {"1985", "2026-07-01", 41}, {"1985", "2026", 41},
	} {
		if got := dateOf(t, c.on).WholeYears(dateOf(t, c.born)); got != c.want {
			t.Errorf("born %s, on %s: %d, want %d", c.born, c.on, got, c.want)
		}
	}
}

func dateOf(t testing.TB, text string) Date {
	t.Helper()
	d, err := ParseDate(text)
	if err != nil {
		t.Fatal(err)
	}
	return d
}

func TestDatesMove(t *testing.T) {
	for _, c := range []struct{ got, want string }{
		{dateOf(t, "2026-01-31").AddMonths(1).String(), "2026-02-28"}, {dateOf(t, "2024-01-31").AddMonths(1).String(), "2024-02-29"},
		{dateOf(t, "2026-01-31").AddMonths(2).String(), "2026-03-31"}, {dateOf(t, "2026-11-30").AddMonths(15).String(), "2028-02-29"},
		{dateOf(t, "2026-03-31").AddMonths(-1).String(), "2026-02-28"}, {dateOf(t, "2026").AddMonths(1).String(), "2026-08-01"},
		{dateOf(t, "2026-12-25").AddDays(14).String(), "2027-01-08"}, {Date{}.String(), ""}, {Date{Year: 1985}.String(), "1985"},
	} {
		if c.got != c.want {
			t.Errorf("%s, want %s", c.got, c.want)
		}
	}
	if n := dateOf(t, "1800-01-01").DaysTo(dateOf(t, "2999-12-31")); n != 438_290 { // 1,200 years of 365, 291 leap days, less a day
		t.Errorf("%d days", n)
	}
	if !dateOf(t, "1985").Before(dateOf(t, "1985-07-02")) || dateOf(t, "1985-07-01").Before(dateOf(t, "1985")) {
		t.Error("a year alone does not count as its 1 July")
	}
}

func TestDatesRoundTrip(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		day := time.Unix(rapid.Int64Range(-5_364_662_400, 32_503_679_999).Draw(t, "second"), 0).UTC() // 1800 to 2999
		d := DateOf(day)
		if got, err := ParseDate(d.String()); got != d || err != nil {
			t.Fatalf("%v was read as %v %v", d, got, err)
		}
		n := rapid.IntRange(0, 4000).Draw(t, "days")
		if later := d.AddDays(n); d.DaysTo(later) != n || later.Before(d) {
			t.Fatalf("%v and %d days is %v", d, n, later)
		}
	})
}

// The last payment of weeks and fortnights is days away, of months months.
func TestAgeAtLastPayment(t *testing.T) {
	for _, c := range []struct {
		unit TermUnit
		want string
	}{{Weeks, "2026-04-26"}, {Fortnights, "2026-07-19"}, {Months, "2027-02-01"}} {
		s := partOf(`
Characteristics
Characteristic | Question | Kind | Use | Lawful ground
born | Born | date | recorded | minimum age
end | Age at the end | computed | recorded | minimum age

Computed
Characteristic | Operation | Part 1
end | age at last payment | born

Bands
Band | Label | Recommendation
a | All | approve`)
		s.Terms.TermUnit = c.unit
		e := gather(s).e
		a := answered(t, e, "amount 1000", "term 12", "born 2000-01-01")
		last := e.LastPayment(a.On, Whole(12))
		if last.String() != c.want {
			t.Errorf("twelve %s end on %v, want %s", c.unit, last, c.want)
		}
		for born, want := range map[Date]Number{last.AddMonths(-12 * 30): Whole(30), last.AddMonths(-12 * 30).AddDays(1): Whole(29)} {
			a.Put(e.byCode["born"], Answer{State: Given, Date: born})
			if got := e.Work(a)[e.byCode["end"]]; got.Low != want || got.High != want {
				t.Errorf("born %v, twelve %s: %v, want %v", born, c.unit, got, want)
			}
		}
	}
}

// The day of the application may be set after the answers.
func TestAgesFollowTheDay(t *testing.T) {
	e := compiled(t, scorecardOf(t, sample))
	a := sampleAnswers(t, e)
	a.Put(e.byCode["born"], Answer{State: Given, Date: Date{2008, 6, 1}})
	if r, _ := e.Score(a); r.Recommendation != Decline {
		t.Errorf("at 17: %v", r.Recommendation)
	}
	a.On = Date{2026, 6, 1}
	if r, _ := e.Score(a); r.Recommendation != Approve {
		t.Errorf("at 18: %v", r.Recommendation)
	}
}
