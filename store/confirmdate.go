package store

import (
	"context"

	"weighhouse/model"
	"weighhouse/model/duty"
)

// ConfirmDate takes a person's word for today's date, and journals it with
// what the clock said. Until the program ends the clock is then read with as
// many days added or taken away. A date that is not a day is a "not_a_date".
func (s *Session) ConfirmDate(ctx context.Context, today model.Date) error {
	if today.IsZero() || today.YearAlone() {
		return refuse("not_a_date", "value", today.String())
	}
	b := s.branch
	clock := b.clock()
	shift := model.DateOf(clock).DaysTo(today)
	err := s.act(ctx, duty.ConfirmDate, func(w *writing) error {
		at := clock.AddDate(0, 0, shift)
		return w.enter(at, duty.ConfirmDate, Facts{"clock": model.DateOf(clock).String(), "date": today.String()})
	})
	if err == nil {
		b.shiftDays.Store(int64(shift))
	}
	return err
}
