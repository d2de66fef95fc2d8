package store

import (
	"context"
	"strconv"

	"weighhouse/model/duty"
)

// ClearResult notes that a kept result was cleared from the desk; it stays.
// The codes: no_result, already_cleared.
func (s *Session) ClearResult(ctx context.Context, id int64) error {
	return s.act(ctx, duty.ClearResult, func(w *writing) error {
		k, err := s.result(ctx, w, id)
		if err != nil {
			return err
		}
		if k.Cleared() {
			return refuse("already_cleared", "result", strconv.FormatInt(id, 10))
		}
		err = s.enter(w, duty.ClearResult, Facts{"result": strconv.FormatInt(id, 10)},
			plainCommit("clearings", w.next(), strconv.FormatInt(id, 10)))
		if err != nil {
			return err
		}
		return w.insert("clearings", w.last.Seq, id)
	})
}
