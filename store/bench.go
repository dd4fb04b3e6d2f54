package store

import (
	"context"
	"fmt"

	"github.com/jackc/pgx/v5"

	"ratehouse/store/rows"
)

// BenchSheet is what a note for the adjuster's bench is made from.
type BenchSheet struct {
	MovementSheet
	Card Calibre // of the batch; HasCard is false while it names no calibre or that has no card
}

// BenchSheet reads one movement and the card of its calibre in three round trips.
func (l *Lab) BenchSheet(ctx context.Context, a Actor, code, serial string) (BenchSheet, error) {
	var s BenchSheet
	if !a.May(RightBench) {
		return s, failure(KindForbidden, "not_allowed", "right", string(RightBench))
	}
	var err error
	if s.MovementSheet, err = l.movementSheet(ctx, l.pool, code, serial); err != nil {
		return s, err
	}
	var (
		cards []rows.Calibre
		b     = &pgx.Batch{}
	)
	rows.CardOf(b, &cards, l.site, code)
	if err := rows.Run(ctx, l.pool, b); err != nil {
		return s, fmt.Errorf("calibre of batch %s: %w", code, err)
	}
	if len(cards) == 1 {
		s.Card = calibreOf(cards[0])
	}
	return s, nil
}
