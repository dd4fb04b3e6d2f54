package store

import (
	"context"
	"fmt"
	"strings"

	"github.com/jackc/pgx/v5"

	"ratehouse/store/rows"
)

// Found is what a search gives.
type Found struct {
	Batches   []FoundBatch
	Movements []FoundMovement
	More      bool // there are more movements than these
}

// FoundBatch is a batch whose code matches.
type FoundBatch struct {
	Code, Depositor, Calibre string
	Whole                    bool // the code is exactly what was asked
}

// FoundMovement is a movement whose number matches.
type FoundMovement struct {
	Serial, Batch, Depositor, Calibre string
	Attempt                           int
	Whole                             bool // the number is exactly what was asked
}

// mostFound movements are shown; who has more types more digits.
const mostFound = 50

// Search finds movements by the beginning or the last digits of their number, and batches by a part
// of their code; small letters are taken as capital ones too. The whole number stands first, then the
// latest batch.
func (l *Lab) Search(ctx context.Context, a Actor, asked string) (Found, error) {
	var f Found
	if !a.May(RightBatches) {
		return f, failure(KindForbidden, "not_allowed", "right", string(RightBatches))
	}
	asked = strings.TrimSpace(asked)
	if asked == "" {
		return f, nil
	}
	var (
		batches   []rows.FoundBatch
		movements []rows.FoundMovement
		b         = &pgx.Batch{}
	)
	rows.SearchBatches(b, &batches, l.site, strings.ToUpper(asked), mostFound)
	rows.SearchMovements(b, &movements, l.site, asked, mostFound+1)
	if err := rows.Run(ctx, l.pool, b); err != nil {
		return f, fmt.Errorf("search: %w", err)
	}
	if f.More = len(movements) > mostFound; f.More {
		movements = movements[:mostFound]
	}
	for _, r := range batches {
		f.Batches = append(f.Batches, FoundBatch{r.Code, r.Depositor, value(r.Calibre), r.Code == strings.ToUpper(asked)})
	}
	for _, r := range movements {
		f.Movements = append(f.Movements, FoundMovement{r.Serial, r.Batch, r.Depositor, value(r.Calibre), int(r.Attempt), strings.EqualFold(r.Serial, asked)})
	}
	return f, nil
}
