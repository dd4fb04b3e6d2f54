package store

import (
	"context"
	"fmt"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"

	"ratehouse/store/rows"
	"ratehouse/trial"
)

// History is what other batches on the same programme tell about one: merged when it is read, from
// what the drain keeps of each. A batch counts as the drain last saw it.
type History struct {
	All *trial.Prior // of every calibre
	Own *trial.Prior // of the batch's calibre; empty when it has none
}

// HistoryOf reads the history for a batch, the batch itself left out. It takes one query.
func (l *Lab) HistoryOf(ctx context.Context, a Actor, b *Batch) (History, error) {
	if !a.May(RightVerdicts) {
		return History{}, failure(KindForbidden, "not_allowed", "right", string(RightVerdicts))
	}
	var calibre *uuid.UUID
	if b.Calibre.ID != uuid.Nil {
		calibre = &b.Calibre.ID
	}
	var found []rows.Prior
	q := &pgx.Batch{}
	rows.PriorsOf(q, &found, l.engine, b.Hash[:], calibre, b.ID)
	if err := rows.Run(ctx, l.pool, q); err != nil {
		return History{}, fmt.Errorf("history of batch %s: %w", b.Code, err)
	}
	days := len(b.Programme.Days)
	h := History{trial.NewPrior(days), trial.NewPrior(days)}
	for _, one := range found {
		if err := h.add(one); err != nil {
			return History{}, fmt.Errorf("history of batch %s: %w", b.Code, err)
		}
	}
	return h, nil
}

func (h *History) add(one rows.Prior) error {
	p, err := trial.ParsePrior(one.Prior)
	if err != nil {
		return err
	}
	if err := h.All.Merge(p); err != nil || !one.Own {
		return err
	}
	return h.Own.Merge(p)
}
