package store

import (
	"strconv"
	"time"

	"weighhouse/model"
)

// A clock is doubted when it stands before the last entry, or more than
// 30 days after it. Up to five minutes before are forgiven: clocks are set
// right by that much all the time (common practice, no source), and an entry
// then takes the time of the one before it.
const (
	longestGap   = 30 * 24 * time.Hour
	forgivenBack = 5 * time.Minute
)

// doubtful tells whether a clock is doubted after an entry made at last; a
// first entry is not.
func doubtful(now, last time.Time) bool {
	return !last.IsZero() && (now.Before(last.Add(-forgivenBack)) || now.After(last.Add(longestGap)))
}

// now is the computer's clock, moved by the days that a person's word for
// today's date was away from it.
func (b *Branch) now() time.Time { return b.clock().AddDate(0, 0, int(b.shiftDays.Load())) }

// timeAfter is the time for an entry after one made at last, or a
// "doubtful_date" with the clock's date and the last entry's.
func (b *Branch) timeAfter(last time.Time) (time.Time, error) {
	now := b.now()
	if doubtful(now, last) {
		return time.Time{}, refuse("doubtful_date",
			"clock", model.DateOf(now).String(), "last", model.DateOf(last.In(now.Location())).String(),
			"days", strconv.Itoa(int(longestGap.Hours()/24)))
	}
	if now.Before(last) {
		return last, nil
	}
	return now, nil
}

// Today is today's date. Where the clock is doubted it is a "doubtful_date",
// until someone has told it with Session.ConfirmDate.
func (b *Branch) Today() (model.Date, error) {
	now, err := b.timeAfter(time.UnixMilli(b.lastAt.Load()))
	if err != nil {
		return model.Date{}, err
	}
	return model.DateOf(now), nil
}
