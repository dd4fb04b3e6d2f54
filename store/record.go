package store

import (
	"encoding/hex"
	"math/big"
	"slices"
	"strings"

	"ratehouse/store/proof"
	"ratehouse/store/rows"
	"ratehouse/trial"
)

// record freezes everything the paper prints. What nobody stated is said to be not stated.
func (r *release) record(row *rows.Movement, w *weighed) proof.Record {
	moved, judged, kind := &w.movement, &w.result, proof.Kind(w.Kind)
	number, replaces, why := r.number(row.No)
	rec := proof.Record{Schema: proof.SchemaName, SchemaVersion: proof.SchemaVersion, Kind: kind, Number: number, Title: paperTitle(kind),
		Replaces: replaces, ReplaceReason: why,
		Demo: r.house.Demo, Language: either2(r.batch.Language, either2(r.actor.Language, "en")), TimeZone: r.house.Zone.String(), IssuedAt: proof.At(r.now),
		Laboratory: proof.Laboratory{Name: r.house.Title, Address: r.house.Address, Contact: r.house.Contact},
		Movement:   r.subject(moved), Batch: r.batch.Code, Received: r.received(),
		Trial: r.span(row), Programme: programmeRecord(&r.batch), Decision: decisionRecord(r.batch.Programme), Engine: r.lab.engine,
		Days: r.days(moved.Rates), Readings: r.evidence(row.No), Criteria: r.criteria(judged), Failed: judged.Failed(),
		Verdict: proof.Verdict(judged.Verdict.String()), Remarks: r.remarksFor(moved.Serial),
		Uncertainty: proof.Uncertainty{Reason: proof.NotStated}, Reference: proof.Statement{Code: proof.NotStated},
		Conditions: proof.Conditions{Code: "nominal"}, Cautions: cautions(r.batch.Programme),
		ReleasedBy: r.actor.Title, ReleasedAt: proof.At(r.now), JournalAct: r.work.act.ID.String(), VerifyURL: r.lab.verifyURL()}
	if moved.End != InTrial {
		rec.Verdict, rec.End, rec.EndCause = proof.VerdictFail, string(moved.End), moved.Cause
	}
	return rec
}

func paperTitle(kind proof.Kind) string {
	if kind == proof.KindCertificate {
		return "rate_certificate"
	}
	return "rejection_report"
}

// number is the number of the paper to come, and the revoked one it replaces with the reason.
func (r *release) number(no int16) (number, replaces, why string) {
	papers := r.papers[no]
	number = paperNumber(r.batch.Code, no, len(papers)+1)
	if len(papers) > 0 {
		last := papers[len(papers)-1]
		replaces, why = last.Number, value(last.Revoked)
	}
	return number, replaces, why
}

func (l *Lab) verifyURL() string {
	if l.url == "" {
		return ""
	}
	return strings.TrimSuffix(l.url, "/") + "/verify"
}

func cautions(p *trial.Programme) []string {
	list := []string{proof.CautionThisPiece, proof.CautionTitle, proof.CautionAccreditation}
	if p.TextChecked == nil {
		list = append(list, proof.CautionPublished)
	}
	return list
}

func (r *release) subject(m *Movement) proof.Movement {
	c := r.batch.Calibre
	s := proof.Movement{Serial: m.Serial, Calibre: c.Code, Category: proof.Named{Code: r.category.Code, Title: r.category.Title},
		Depositor: proof.Named{Code: r.batch.Depositor.Code, Title: r.batch.Depositor.Title}, Attempt: m.Attempt}
	switch {
	case c.DiameterUM > 0:
		s.Size.DiameterMM = proof.Rounded(big.NewRat(int64(c.DiameterUM), 1000), 2)
	case c.AreaUM2 > 0:
		s.Size.AreaMM2 = proof.Rounded(big.NewRat(c.AreaUM2, 1_000_000), 2)
	}
	if c.Automatic != "" && c.Automatic != "none" {
		s.State = append(s.State, "automatic_"+c.Automatic)
	}
	return s
}

func (r *release) received() *proof.Received {
	if r.batch.ReceivedAt.IsZero() {
		return nil
	}
	return &proof.Received{At: proof.At(r.batch.ReceivedAt), Condition: r.batch.Condition, DeliveryNote: r.batch.DeliveryNote, Order: r.batch.OrderNumber}
}

// span is from the due instant of round 0, or the first reading if that was earlier, to the last
// reading of the movement.
func (r *release) span(m *rows.Movement) proof.Span {
	from, to := r.batch.StartsAt, r.batch.StartsAt
	for _, x := range r.readings[m.No] {
		if x.ReadAt.Before(from) {
			from = x.ReadAt
		}
		to = later(to, x.ReadAt)
	}
	if m.EndedAt != nil {
		to = later(to, *m.EndedAt)
	}
	if from.After(r.now) {
		from = r.now // ended before its first round was due
	}
	if to.After(r.now) {
		to = r.now
	}
	return proof.Span{From: proof.At(from), To: proof.At(to)}
}

func programmeRecord(b *Batch) proof.Programme {
	p := b.Programme
	rec := proof.Programme{Code: p.Code, Version: p.Version, Title: p.Title, Hash: hex.EncodeToString(b.Hash[:]), Source: p.Source, Measurand: string(p.Measurand)}
	if t := p.TextChecked; t != nil {
		rec.TextChecked = &proof.TextChecked{By: t.By, Date: t.Date, Edition: t.Edition}
	}
	return rec
}

func decisionRecord(p *trial.Programme) proof.Decision {
	d := proof.Decision{Rule: string(p.Decision.Rule), Words: "simple_inclusive"}
	if p.Decision.Rule == trial.Guarded {
		d.Guard, d.Words = limitText(p.Decision.Guard), "guarded"
	}
	return d
}

func (r *release) days(rates []trial.Rate) []proof.Day {
	p := r.batch.Programme
	out := make([]proof.Day, len(p.Days))
	for i, d := range p.Days {
		out[i] = proof.Day{Day: d.N, Position: string(d.Position), TemperatureC: proof.Decimal(d.TemperatureC.String()), Accessory: d.Accessory, Rate: rateText(rates[i])}
		for _, c := range p.Criteria {
			if slices.Contains(c.Formula.AllDays(), d.N) {
				out[i].Enters = append(out[i].Enters, c.Symbol)
			}
		}
	}
	return out
}

// rateText prints a rate as it was typed, or with two decimals when it comes from states over an
// interval that leaves no finite decimal.
func rateText(r trial.Rate) proof.Decimal {
	if !r.Known() {
		return ""
	}
	m, exact := r.Thousandths()
	switch {
	case !exact:
		return proof.Decimal(r.Decimal(2))
	case m%100 == 0:
		return proof.Decimal(r.Decimal(1))
	case m%10 == 0:
		return proof.Decimal(r.Decimal(2))
	}
	return proof.Decimal(r.Decimal(3))
}

func (r *release) evidence(no int16) []proof.Reading {
	list := r.readings[no]
	out := make([]proof.Reading, len(list))
	for i, x := range list {
		superseded := x.Kind <= 3 && i+1 < len(list) && list[i+1].Step == x.Step && list[i+1].Kind == x.Kind
		line := lineOf(x, superseded)
		out[i] = proof.Reading{Step: line.Step, Day: r.batch.Steps[line.Step].Day, Kind: string(line.Kind), Method: string(line.Method),
			Value: proof.Decimal(line.Value), Code: string(line.Code), Typed: line.Typed, ReadAt: proof.At(line.ReadAt), ReadBy: line.ReadBy,
			EnteredBy: line.EnteredBy, Station: line.Station, Nth: line.Nth, Reason: line.Reason, Superseded: superseded}
	}
	return out
}

func (r *release) criteria(judged *trial.Result) []proof.Criterion {
	p := r.batch.Programme
	out := make([]proof.Criterion, len(p.Criteria))
	for i, c := range p.Criteria {
		limit, v := r.judge.Limit(i), judged.Values[i]
		k := proof.Criterion{Symbol: c.Symbol, Title: c.Title, Unit: c.Unit, Decimals: c.Decimals, Definition: p.Expression(c.Formula), Verdict: verdictOf(v.Outcome)}
		if limit.HasMin {
			k.Min = limitText(limit.Min)
		}
		if limit.HasMax {
			k.Max = limitText(limit.Max)
		}
		if v.Known {
			k.Value = proof.ExactOf(v.Rat())
			k.Printed = proof.Decimal(trial.Printed(v.Exact, limit, c.Decimals))
			if m, ok := judged.Margin(i); ok {
				zero := trial.Limit{HasMin: true}
				k.Margin = proof.Decimal(trial.Printed(m, zero, c.Decimals))
			}
		}
		out[i] = k
	}
	return out
}

func verdictOf(o trial.Outcome) proof.Verdict {
	switch o {
	case trial.Inside:
		return proof.VerdictPass
	case trial.Outside:
		return proof.VerdictFail
	case trial.Unlimited:
		return proof.VerdictNone
	}
	return proof.VerdictOpen
}

// limitText writes a limit as a decimal when it is one, else as p/q.
func limitText(e trial.Exact) proof.Decimal {
	for places := 0; places <= 6; places++ {
		s := e.Decimal(places)
		if back, err := trial.ParseExact(s); err == nil && back.Cmp(e) == 0 {
			return proof.Decimal(s)
		}
	}
	return proof.Decimal(e.String())
}

// remarksFor lists the remarks on the movement and on its whole batch, oldest first, each with what
// was decided when it was closed.
func (r *release) remarksFor(serial string) []proof.Remark {
	var out []proof.Remark
	for _, k := range slices.Backward(r.remarks) {
		if k.Serial != serial && k.Serial != "" {
			continue
		}
		out = append(out, proof.Remark{Code: k.Kind, Step: k.Step, Text: k.Words})
		if k.State == "closed" {
			out = append(out, proof.Remark{Code: "decision", Step: k.Step, Text: k.Last})
		}
	}
	return out
}
