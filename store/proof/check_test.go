package proof

import (
	"errors"
	"slices"
	"strings"
	"testing"
	"time"
)

// spoil is one way to make a record wrong and where Check must say so.
type spoil struct {
	name  string
	where string
	edit  func(*Record)
}

// refuseAll wants each spoilt record to have a fault at its place, and Issue to refuse it.
func refuseAll(t *testing.T, kind Kind, spoils []spoil) {
	t.Helper()
	key := publishedTestKey(t)
	for _, s := range spoils {
		r := golden(t, kind)
		s.edit(&r)
		var faults Faults
		if err := r.Check(); !errors.As(err, &faults) || !errors.Is(err, ErrInconsistent) {
			t.Errorf("%s: %v, want faults", s.name, err)
			continue
		}
		if !slices.ContainsFunc(faults, func(f Fault) bool { return strings.HasPrefix(f.Where, s.where) }) {
			t.Errorf("%s: %v names no %s", s.name, faults, s.where)
		}
		if jws, err := Issue(key, r); err == nil {
			t.Errorf("%s: issued %.20s", s.name, jws)
		}
	}
}

func TestCheckHead(t *testing.T) {
	t.Parallel()
	refuseAll(t, KindCertificate, []spoil{
		{"schema", "schema", func(r *Record) { r.Schema = "x" }},
		{"version", "schema_version", func(r *Record) { r.SchemaVersion = 2 }},
		{"kind", "kind", func(r *Record) { r.Kind = "diploma" }},
		{"number", "number", func(r *Record) { r.Number = "26/118" }},
		{"no number", "number", func(r *Record) { r.Number = "" }},
		{"title", "title", func(r *Record) { r.Title = " " }},
		{"replaces itself", "replaces", func(r *Record) { r.Replaces, r.ReplaceReason = r.Number, "x" }},
		{"no reason", "replace_reason", func(r *Record) { r.Replaces = "26-1" }},
		{"replaces what is no number", "replaces", func(r *Record) { r.Replaces, r.ReplaceReason = "26/1", "x" }},
		{"no beginning", "trial.from", func(r *Record) { r.Trial.From = Instant{} }},
		{"language", "language", func(r *Record) { r.Language = "it" }},
		{"zone", "time_zone", func(r *Record) { r.TimeZone = "" }},
		{"issued", "issued_at", func(r *Record) { r.IssuedAt = Instant{} }},
		{"issued before released", "issued_at", func(r *Record) { r.IssuedAt = At(r.ReleasedAt.Time().Add(-time.Second)) }},
		{"released before the end", "released_at", func(r *Record) { r.ReleasedAt = At(r.Trial.To.Time().Add(-time.Second)) }},
		{"backwards", "trial.to", func(r *Record) { r.Trial.From, r.Trial.To = r.Trial.To, r.Trial.From }},
		{"released by", "released_by", func(r *Record) { r.ReleasedBy = "" }},
		{"act", "journal_act", func(r *Record) { r.JournalAct = "" }},
		{"laboratory", "laboratory.name", func(r *Record) { r.Laboratory.Name = "" }},
		{"batch", "batch", func(r *Record) { r.Batch = "" }},
		{"serial", "movement.serial", func(r *Record) { r.Movement.Serial = "" }},
		{"serial with a tab", "movement.serial", func(r *Record) { r.Movement.Serial = "A\t1" }},
		{"category", "movement.category", func(r *Record) { r.Movement.Category.Code = "" }},
		{"depositor", "movement.depositor", func(r *Record) { r.Movement.Depositor.Code = "" }},
		{"attempt", "movement.attempt", func(r *Record) { r.Movement.Attempt = 0 }},
		{"two sizes", "movement.size", func(r *Record) { r.Movement.Size.AreaMM2 = "300" }},
		{"size", "movement.size", func(r *Record) { r.Movement.Size.DiameterMM = "27,4" }},
		{"area", "movement.size.area_mm2", func(r *Record) { r.Movement.Size = Size{AreaMM2: "314,1"} }},
		{"received", "received", func(r *Record) { r.Received.At = Instant{} }},
	})
}

func TestCheckMethod(t *testing.T) {
	t.Parallel()
	refuseAll(t, KindCertificate, []spoil{
		{"programme", "programme.code", func(r *Record) { r.Programme.Code = "" }},
		{"version", "programme.version", func(r *Record) { r.Programme.Version = "" }},
		{"title", "programme.title", func(r *Record) { r.Programme.Title = "" }},
		{"source", "programme.source", func(r *Record) { r.Programme.Source = "" }},
		{"short hash", "programme.hash", func(r *Record) { r.Programme.Hash = r.Programme.Hash[1:] }},
		{"capital hash", "programme.hash", func(r *Record) { r.Programme.Hash = "A" + r.Programme.Hash[1:] }},
		{"measurand", "programme.measurand", func(r *Record) { r.Programme.Measurand = "" }},
		{"checker", "programme.text_checked.by", func(r *Record) { r.Programme.TextChecked = &TextChecked{"", "2026-12-01", "2"} }},
		{"edition", "programme.text_checked.edition", func(r *Record) { r.Programme.TextChecked = &TextChecked{"a", "2026-12-01", ""} }},
		{"date", "programme.text_checked.date", func(r *Record) { r.Programme.TextChecked = &TextChecked{"a", "2026-02-30", "2"} }},
		{"engine", "engine", func(r *Record) { r.Engine = "" }},
		{"rule", "decision.rule", func(r *Record) { r.Decision.Rule = "" }},
		{"words", "decision.words", func(r *Record) { r.Decision.Words = "" }},
		{"guard of the simple rule", "decision.guard", func(r *Record) { r.Decision.Guard = "1" }},
		{"guarded without guard", "decision.guard", func(r *Record) { r.Decision.Rule = RuleGuarded }},
		{"guard is no number", "decision.guard", func(r *Record) { guard(r); r.Decision.Guard = "half" }},
		{"guarded without lower limit", "criteria[0] (M).accept_min", func(r *Record) { guard(r); r.Criteria[0].AcceptMin = "" }},
		{"guarded without upper limit", "criteria[0] (M).accept_max", func(r *Record) { guard(r); r.Criteria[0].AcceptMax = "" }},
		{"caution on the title", "cautions", func(r *Record) { r.Cautions = drop(r.Cautions, CautionTitle) }},
		{"caution on accreditation", "cautions", func(r *Record) { r.Cautions = drop(r.Cautions, CautionAccreditation) }},
		{"caution on the piece", "cautions", func(r *Record) { r.Cautions = drop(r.Cautions, CautionThisPiece) }},
		{"caution on the source", "cautions", func(r *Record) { r.Cautions = drop(r.Cautions, CautionPublished) }},
		{"reference", "reference", func(r *Record) { r.Reference = Statement{} }},
		{"two references", "reference", func(r *Record) { r.Reference.Code = NotStated }},
		{"conditions", "conditions", func(r *Record) { r.Conditions.Code = "" }},
		{"measured nothing", "conditions", func(r *Record) { r.Conditions.Code = ConditionsMeasured }},
		{"chamber is warm", "conditions.chambers[0]", func(r *Record) { chamber(r, Chamber{Code: "A", NominalC: "23", MeanC: "warm"}) }},
		{"chamber without code", "conditions.chambers[0].code", func(r *Record) { chamber(r, Chamber{NominalC: "23"}) }},
		{"chamber without set point", "conditions.chambers[0].nominal_c", func(r *Record) { chamber(r, Chamber{Code: "A"}) }},
		{"uncertainty", "uncertainty.k", func(r *Record) { r.Uncertainty.Reason = "" }},
		{"uncertainty and reason", "uncertainty", func(r *Record) { r.Uncertainty.K = "2" }},
		{"uncertainty of nothing", "uncertainty.criteria[0]", func(r *Record) {
			r.Uncertainty = Uncertainty{K: "2", Rate: "0.35", Criteria: []CriterionU{{"Q", "0.1"}}}
		}},
		{"not applicable to nothing", "uncertainty.not_applicable", func(r *Record) {
			r.Uncertainty = Uncertainty{K: "2", Rate: "0.35", NotApplicable: []string{"Q"}}
		}},
		{"remark", "remarks[0].code", func(r *Record) { r.Remarks[0].Code = "" }},
		{"remark's step", "remarks[0].step", func(r *Record) { r.Remarks[0].Step = -2 }},
	})
}

func chamber(r *Record, c Chamber) { r.Conditions = Conditions{ConditionsMeasured, []Chamber{c}} }

func drop(list []string, word string) []string {
	return slices.DeleteFunc(list, func(s string) bool { return s == word })
}

func TestCheckEvidence(t *testing.T) {
	t.Parallel()
	refuseAll(t, KindCertificate, []spoil{
		{"no days", "days", func(r *Record) { r.Days = nil }},
		{"days swapped", "days[1].day", func(r *Record) { r.Days[0], r.Days[1] = r.Days[1], r.Days[0] }},
		{"day twice", "days[1].day", func(r *Record) { r.Days[1].Day = 1 }},
		{"position", "days[2].position", func(r *Record) { r.Days[2].Position = "" }},
		{"temperature", "days[2].temperature_c", func(r *Record) { r.Days[2].TemperatureC = "" }},
		{"rate is no number", "days[2].rate", func(r *Record) { r.Days[2].Rate = "+0.4" }},
		{"rate from states is no number", "days[2].rate", func(r *Record) { r.Readings[2].Kind, r.Days[2].Rate = ReadingState, "+0.4" }},
		{"state is no number", "readings[2].value", func(r *Record) { r.Readings[2].Kind, r.Readings[2].Value = ReadingState, "0,4" }},
		{"another rate", "days[0].rate", func(r *Record) { r.Days[0].Rate = "1.3" }},
		{"rate left out", "days[0].rate", func(r *Record) { r.Days[0].Rate = "" }},
		{"rate left out, criteria kept", "criteria[0] (M).value", func(r *Record) { r.Days[0].Rate = "" }},
		{"day without evidence", "days[11].rate", func(r *Record) { r.Readings = slices.Delete(r.Readings, 12, 13) }},
		{"enters nothing known", "days[0].enters", func(r *Record) { r.Days[0].Enters = append(r.Days[0].Enters, "Q") }},
		{"enters twice", "days[0].enters", func(r *Record) { r.Days[0].Enters = append(r.Days[0].Enters, "M") }},
		{"reading of another value", "days[0].rate", func(r *Record) { r.Readings[0].Value = "1.21" }},
		{"two rates for a day", "days[0].rate", func(r *Record) { r.Readings[1].Day = 1 }},
		{"superseded reading counted", "days[0].rate", func(r *Record) { r.Readings[0].Superseded = true }},
		{"step", "readings[0].step", func(r *Record) { r.Readings[0].Step = -1 }},
		{"unknown day", "readings[0].day", func(r *Record) { r.Readings[0].Day = 16 }},
		{"kind", "readings[0].kind", func(r *Record) { r.Readings[0].Kind = "guess" }},
		{"method", "readings[0].method", func(r *Record) { r.Readings[0].Method = "" }},
		{"reader", "readings[0].read_by", func(r *Record) { r.Readings[0].ReadBy = "" }},
		{"typist", "readings[0].entered_by", func(r *Record) { r.Readings[0].EnteredBy = "" }},
		{"value and code", "readings[0]", func(r *Record) { r.Readings[0].Code = "stopped" }},
		{"neither value nor code", "readings[0]", func(r *Record) { r.Readings[0].Value = "" }},
		{"read after the release", "readings[0].read_at", func(r *Record) { r.Readings[0].ReadAt = At(r.ReleasedAt.Time().Add(25 * time.Hour)) }},
		{"state without instant", "readings[0].read_at", func(r *Record) { r.Readings[0].Kind, r.Readings[0].ReadAt = ReadingState, Instant{} }},
		{"correction without reason", "readings[5].reason", func(r *Record) { r.Readings[5].Reason = "" }},
		{"reason without correction", "readings[0].reason", func(r *Record) { r.Readings[0].Reason = "x" }},
		{"corrected entry still in force", "readings[5]", func(r *Record) { r.Readings[4].Superseded = false }},
		{"first entry left out", "readings[4].nth", func(r *Record) { r.Readings = slices.Delete(r.Readings, 4, 5) }},
	})
}

func TestCheckCriteria(t *testing.T) {
	t.Parallel()
	refuseAll(t, KindCertificate, []spoil{
		{"none", "criteria", func(r *Record) { r.Criteria = nil }},
		{"twice", "criteria[1] (M).symbol", func(r *Record) { r.Criteria[1].Symbol = "M" }},
		{"symbol", "criteria[1] ().symbol", func(r *Record) { r.Criteria[1].Symbol = "" }},
		{"title", "criteria[0] (M).title", func(r *Record) { r.Criteria[0].Title = "" }},
		{"unit", "criteria[0] (M).unit", func(r *Record) { r.Criteria[0].Unit = "" }},
		{"definition", "criteria[0] (M).definition", func(r *Record) { r.Criteria[0].Definition = "" }},
		{"decimals", "criteria[0] (M).decimals", func(r *Record) { r.Criteria[0].Decimals = -1 }},
		{"value not in lowest terms", "criteria[0] (M).value", func(r *Record) { r.Criteria[0].Value = "402/200" }},
		{"value", "criteria[0] (M).printed", func(r *Record) { r.Criteria[0].Value = "101/50" }},
		{"printed", "criteria[0] (M).printed", func(r *Record) { r.Criteria[0].Printed = "2.02" }},
		{"printed short", "criteria[0] (M).printed", func(r *Record) { r.Criteria[0].Printed = "2.0" }},
		{"printed with a plus", "criteria[0] (M).printed", func(r *Record) { r.Criteria[0].Printed = "+2.01" }},
		{"margin", "criteria[0] (M).margin", func(r *Record) { r.Criteria[0].Margin = "4.00" }},
		{"no margin", "criteria[0] (M).margin", func(r *Record) { r.Criteria[0].Margin = "" }},
		{"limit", "criteria[0] (M).limits", func(r *Record) { r.Criteria[0].Max = "six" }},
		{"limits swapped", "criteria[0] (M).limits", func(r *Record) { r.Criteria[0].Min, r.Criteria[0].Max = "6", "-4" }},
		{"verdict", "criteria[0] (M).verdict", func(r *Record) { r.Criteria[0].Verdict = VerdictFail }},
		{"limit moved", "criteria[0] (M).verdict", func(r *Record) { r.Criteria[0].Max = "2" }},
		{"limits taken away", "criteria[0] (M).verdict", func(r *Record) { r.Criteria[0].Min, r.Criteria[0].Max = "", "" }},
		{"acceptance limit of the simple rule", "criteria[0] (M).accept_max", func(r *Record) { r.Criteria[0].AcceptMax = "5" }},
		{"undecided with text", "criteria[0] (M).printed", func(r *Record) { r.Criteria[0].Value = "" }},
		{"undecided though read", "criteria[0] (M).value", func(r *Record) { r.Criteria[0] = undecide(r.Criteria[0]) }},
		{"undecided passes", "criteria[0] (M).verdict", func(r *Record) { r.Criteria[0] = undecide(r.Criteria[0]); r.Criteria[0].Verdict = VerdictPass }},
		{"margin without limits", "criteria[0] (M).margin", func(r *Record) {
			k := &r.Criteria[0]
			k.Min, k.Max, k.Verdict = "", "", VerdictNone
		}},
		{"6.04 printed 6.0", "criteria[0] (M).printed", func(r *Record) {
			k := &r.Criteria[0]
			k.Decimals, k.Value, k.Printed, k.Margin, k.Verdict = 1, "151/25", "6.0", "-0.04", VerdictFail
		}},
		{"margin of a fail shown as 0", "criteria[0] (M).margin", func(r *Record) {
			k := &r.Criteria[0]
			k.Decimals, k.Value, k.Printed, k.Margin, k.Verdict = 1, "151/25", "6.04", "0.0", VerdictFail
		}},
	})
}

func undecide(k Criterion) Criterion {
	k.Value, k.Printed, k.Margin, k.Verdict = "", "", "", VerdictOpen
	return k
}

func TestCheckVerdict(t *testing.T) {
	t.Parallel()
	refuseAll(t, KindCertificate, []spoil{
		{"verdict", "verdict", func(r *Record) { r.Verdict = VerdictFail }},
		{"rejection of a pass", "verdict", func(r *Record) { r.Kind, r.Verdict = KindRejection, VerdictFail }},
		{"failed", "failed", func(r *Record) { r.Failed = []string{"M"} }},
		{"end", "end", func(r *Record) { r.End, r.EndCause = EndRejected, "stopped" }},
		{"cause without end", "end_cause", func(r *Record) { r.EndCause = "stopped" }},
		{"end without cause", "end_cause", func(r *Record) { r.End = EndRejected }},
		{"open", "verdict", func(r *Record) { reopen(r) }},
		{"nothing limited", "verdict", func(r *Record) {
			for i := range r.Criteria {
				k := &r.Criteria[i]
				k.Min, k.Max, k.Margin, k.Verdict = "", "", "", VerdictNone
			}
		}},
	})
	refuseAll(t, KindRejection, []spoil{
		{"verdict", "verdict", func(r *Record) { r.Verdict = VerdictPass }},
		{"certificate of a fail", "verdict", func(r *Record) { r.Kind, r.Verdict = KindCertificate, VerdictPass }},
		{"failed", "failed", func(r *Record) { r.Failed = nil }},
		{"failed another", "failed", func(r *Record) { r.Failed = []string{"M"} }},
		{"withdrawn", "end", func(r *Record) { r.End, r.EndCause = "withdrawn", "by_depositor" }},
		{"void", "end", func(r *Record) { r.End, r.EndCause = "void", "dropped" }},
		{"open without end", "verdict", func(r *Record) { reopen(r); r.Failed = nil; r.Criteria[3] = undecide(r.Criteria[3]) }},
	})
}

// reopen takes back the last reading, as if the movement had stopped before it.
func reopen(r *Record) {
	last := len(r.Days) - 1
	r.Days[last].Rate = ""
	r.Readings[len(r.Readings)-1] = Reading{Step: 15, Day: 15, Kind: ReadingRate, Method: "typed", Code: "stopped", ReadBy: "a", EnteredBy: "a", Nth: 1}
	for i, k := range r.Criteria {
		if k.Symbol == "R" {
			r.Criteria[i] = undecide(k)
		}
	}
}

// Records that look odd and are right.
func TestCheckAccepts(t *testing.T) {
	t.Parallel()
	for _, s := range []spoil{
		{name: "rejected for cause with open criteria", edit: func(r *Record) {
			reopen(r)
			r.Kind, r.Verdict, r.End, r.EndCause = KindRejection, VerdictFail, EndRejected, "stopped"
		}},
		{name: "removed because it cannot pass", edit: func(r *Record) {
			reopen(r)
			r.Kind, r.Verdict, r.End, r.EndCause = KindRejection, VerdictFail, EndRemoved, "cannot_pass"
		}},
		{name: "text checked", edit: func(r *Record) {
			r.Programme.TextChecked = &TextChecked{"N. Quill", "2026-12-01", "second, 2009"}
			r.Cautions = drop(r.Cautions, CautionPublished)
		}},
		{name: "replacement", edit: func(r *Record) { r.Replaces, r.ReplaceReason = "26-118-0112", "serial misread" }},
		{name: "states", edit: func(r *Record) {
			for i := range r.Readings {
				r.Readings[i].Kind = ReadingState
			}
		}},
		{name: "states over a rate", edit: func(r *Record) {
			extra := r.Readings[0]
			extra.Kind, extra.Value = ReadingState, "12.5"
			r.Readings = append(r.Readings, extra)
			r.Readings[0].Superseded = true
		}},
		{name: "replicates", edit: func(r *Record) {
			extra := r.Readings[0]
			extra.Kind, extra.Value = ReadingReplicate, "1.4"
			again := extra
			again.Nth = 2
			r.Readings = append(r.Readings, extra, again)
		}},
		{name: "nothing optional", edit: func(r *Record) {
			r.Received, r.Remarks, r.Movement.Size, r.Movement.Calibre, r.Movement.State = nil, nil, Size{}, "", nil
			r.Reference, r.VerifyURL, r.Laboratory.Address = Statement{Code: NotStated}, "", nil
		}},
		{name: "stated", edit: func(r *Record) {
			r.Uncertainty = Uncertainty{K: "2", Rate: "0.35", Criteria: []CriterionU{{"M", "0.13"}}, NotApplicable: []string{"V", "Vmax", "P"}}
			r.Conditions = Conditions{ConditionsMeasured, []Chamber{{Code: "A", NominalC: "23", MeanC: "23.2"}}}
		}},
		{name: "guarded", edit: guard},
		{name: "a tablet's clock ahead", edit: func(r *Record) { r.Readings[0].ReadAt = At(r.ReleasedAt.Time().Add(time.Hour)) }},
	} {
		r := golden(t, KindCertificate)
		s.edit(&r)
		if err := r.Check(); err != nil {
			t.Errorf("%s: %v", s.name, err)
		}
	}
}

// guard draws the limits of M in by a tenth and judges again.
func guard(r *Record) {
	r.Decision = Decision{RuleGuarded, "1", "guarded"}
	for i, k := range r.Criteria {
		v, _ := k.Value.rat()
		k.AcceptMin, k.AcceptMax = k.Min, k.Max
		if k.Symbol == "M" {
			k.AcceptMin, k.AcceptMax = "-3.9", "5.9"
		}
		r.Criteria[i], _ = k.WithValue(v, VerdictPass)
	}
}

// A guarded value between the acceptance limit and the limit fails, and says so.
func TestCheckGuardedFail(t *testing.T) {
	t.Parallel()
	r := golden(t, KindCertificate)
	guard(&r)
	v, _ := r.Criteria[0].Value.rat()
	r.Criteria[0].AcceptMax = "2"
	r.Criteria[0], _ = r.Criteria[0].WithValue(v, VerdictFail)
	r.Kind, r.Verdict, r.Failed = KindRejection, VerdictFail, []string{"M"}
	if err := r.Check(); err != nil {
		t.Error(err)
	}
	if r.Criteria[0].Margin != "-0.01" {
		t.Errorf("margin %s", r.Criteria[0].Margin)
	}
	r.Criteria[0].AcceptMax = "7"
	if err := r.Check(); !errors.Is(err, ErrInconsistent) {
		t.Error("an acceptance limit outside the limit was taken")
	}
}
