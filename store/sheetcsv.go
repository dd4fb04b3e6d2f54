package store

import (
	"context"
	"fmt"
	"io"

	"ratehouse/trial"
	"ratehouse/trial/sheet"
)

// SheetCSV writes a batch as judge would, from the rates that were read, with two columns more: end
// and end_cause. verdict stays what the rates alone say. Nothing is written before the batch is found.
func (l *Lab) SheetCSV(ctx context.Context, a Actor, code string, w io.Writer) error {
	if !a.May(RightVerdicts) {
		return failure(KindForbidden, "not_allowed", "right", string(RightVerdicts))
	}
	s, err := l.BatchSheet(ctx, a, code)
	if err != nil {
		return err
	}
	j, err := trial.NewJudge(s.Batch.Programme, s.Batch.Category)
	if err != nil {
		return fmt.Errorf("batch %s: %w", code, err)
	}
	var (
		result trial.Result
		out    = sheet.NewVerdicts(w, s.Batch.Programme, sheet.CSV, false, "end", "end_cause")
	)
	for i := range s.Movements {
		m := &s.Movements[i]
		j.Rates(m.Rates, &result)
		if err := out.Write([]byte(m.Serial), []byte(s.Batch.Category), nil, &result, []byte(m.End), []byte(m.Cause)); err != nil {
			return err
		}
	}
	return out.Close()
}
