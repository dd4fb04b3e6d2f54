package store

import (
	"context"
	"slices"
	"strconv"

	"github.com/jackc/pgx/v5"

	"ratehouse/store/rows"
)

// AssignPlace lays a movement into a place of a holder, named by the holder's code; an empty code
// takes it out of its holder and leaves a hole. Each move is an event of its own and the last one is
// true; one place never holds two pieces.
func (l *Lab) AssignPlace(ctx context.Context, a Actor, code, serial, holder string, place int) error {
	return l.do(ctx, a, verb{"assign_place", RightRegister}, func(w *work) error {
		var (
			locked []rows.Series
			to     []rows.Holder
			types  []rows.HolderType
			nth    int16
			b      = &pgx.Batch{}
		)
		rows.LockSeries(b, &locked, l.site, []string{code}, []string{serial})
		rows.FindHolder(b, &to, l.site, holder)
		rows.QueueHolderTypes(b, &types, l.site)
		rows.LastMove(b, &nth, l.site, code, serial)
		if err := w.read(ctx, b); err != nil {
			return err
		}
		if len(locked) == 0 {
			return failure(KindNotFound, "no_movement", "code", code, "serial", serial)
		}
		m := rows.Move{Batch: locked[0].Batch, No: locked[0].No, Nth: nth + 1, At: w.now}
		if holder != "" {
			if err := fits(to, types, holder, place); err != nil {
				return err
			}
			p := int16(place)
			m.Holder, m.Place = &to[0].ID, &p
		}
		w.batch(m.Batch)
		w.act.Body = map[string]any{"batch": m.Batch.String(), "no": int(m.No), "holder": holder, "place": place}
		rows.QueueMove(w.out, m, w.act.ID)
		return nil
	})
}

// fits wants the holder to be known and to have such a place for movements.
func fits(found []rows.Holder, types []rows.HolderType, code string, place int) error {
	if len(found) == 0 {
		return failure(KindNotFound, "no_holder", "code", code)
	}
	for _, r := range types {
		t := holderTypeOf(r)
		if t.Code == found[0].Type && t.Carries == "movements" && slices.Contains(t.Places(), place) {
			return nil
		}
	}
	return invalid("place", "no_such_place", "place", strconv.Itoa(place))
}
