package store_test

import (
	"strings"
	"testing"

	"github.com/jackc/pgx/v5"

	"ratehouse/store"
	"ratehouse/store/proof"
	"ratehouse/store/storetest"
	"ratehouse/trial"
	"ratehouse/trial/sheet"
)

const house6 = "../testdata/programmes/house6.json"

// onHouse registers a batch on the laboratory's own programme.
func onHouse(n *store.NewBatch) { n.Programme, n.Category = "HOUSE6", "LARGE" }

// Ten rates of the house's own programme: within all its limits, and with too great a standard
// deviation: 8.198/√6 of the six rates 0, 0, 0, 0, 0 and 8.198.
var (
	steady   = []string{"1.0", "1.4", "0.6", "2.1", "0.2", "1.5", "-1.1", "2.3", "1.2", "1.0"}
	unsteady = []string{"0", "0", "0", "0", "0", "8.198", "0", "0", "0", "0"}
)

// A laboratory's own programme, six positions in five days: loaded, used, judged, on papers.
func TestProgrammeOfTheHouse(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	p := h.ProgrammeFile(t, house6)
	b := h.Batch(t, "B1", 2, onHouse)
	if got := b.Due(10).Sub(b.StartsAt).Hours(); len(b.Steps) != 11 || got != 120 {
		t.Fatalf("%d rounds in %v hours, want eleven in five days", len(b.Steps), got)
	}
	h.Run(t, "B1", [][]string{steady, unsteady})
	var csv strings.Builder
	if err := h.SheetCSV(t.Context(), h.Lead, "B1", &csv); err != nil {
		t.Fatal(err)
	}
	lines := strings.Split(csv.String(), "\n")
	if want := "serial,category,verdict,M,S,X,D,C,R,Q,failed,unreachable"; !strings.HasPrefix(lines[0], want) {
		t.Errorf("columns %s, want %s", lines[0], want)
	}
	// S by the statistics module of Python; Q = |M| + 2·S + 10·|C| with M = 6.8/6, C = 3.4/30.
	if want := "S-0001,LARGE,pass,1.133333,0.680196,1.900000,-0.100000,0.113333,0.400000,3.627059,,"; !strings.HasPrefix(lines[1], want) {
		t.Errorf("%s, want %s", lines[1], want)
	}
	if want := "S-0002,LARGE,fail,1.366333,3.346819,8.198000,2.049500,0.000000,0.000000,8.059972,S X,"; !strings.HasPrefix(lines[2], want) {
		t.Errorf("%s, want %s", lines[2], want)
	}
	for _, r := range release(t, h, h.Lead, "B1", "S-0001", "S-0002") {
		if r.Why != "" {
			t.Fatalf("%s is held: %s", r.Serial, r.Why)
		}
		rec := paper(t, h, r.Number).Record
		if rec.Programme.Code != "HOUSE6" || len(rec.Days) != 10 || len(rec.Criteria) != len(p.Criteria) || rec.Criteria[6].Verdict != proof.VerdictNone {
			t.Errorf("%s: record %+v", r.Number, rec)
		}
	}
}

// A programme that was used is never changed: the same version with other limits is refused, a new
// version is taken by batches to come, and the batch under way keeps its own.
func TestProgrammeIsOnlySuperseded(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	first := h.ProgrammeFile(t, house6)
	h.Batch(t, "B1", 1, onHouse)
	h.Run(t, "B1", [][]string{unsteady})

	tighter := func(p *trial.Programme) {
		p.Criteria[0].Limits["LARGE"] = trial.Limit{HasMax: true, Max: trial.Ratio(1, 1)}
	}
	loose := *first
	loose.Criteria = append([]trial.Criterion(nil), first.Criteria...)
	loose.Criteria[1].Limits, loose.Criteria[2].Limits = nil, nil
	wantCode(t, h.AddProgramme(t.Context(), h.Manager, &loose), "programme_version_taken")
	again := *first
	wantCode(t, h.AddProgramme(t.Context(), h.Manager, &again), "programme_known")

	h.Clock.Advance(1)
	second := h.ProgrammeFile(t, house6, tighter, func(p *trial.Programme) { p.Version = "2" })
	h.Batch(t, "B2", 1, onHouse, func(n *store.NewBatch) { n.Pieces[0].Serial = "S-0002" })
	for code, want := range map[string]*trial.Programme{"B1": first, "B2": second} {
		b, err := h.Lab.Batch(t.Context(), h.Lead, code)
		if err != nil {
			t.Fatal(err)
		}
		if b.Hash != sheet.Hash(want) || b.Programme.Version != want.Version {
			t.Errorf("%s is on version %s", code, b.Programme.Version)
		}
	}
	// What a caller does with his programme afterwards, and what anybody tries by SQL, changes nothing.
	first.Criteria[1].Limits["LARGE"] = trial.Limit{}
	s, err := h.BatchSheet(t.Context(), h.Lead, "B1")
	if err != nil {
		t.Fatal(err)
	}
	j, err := trial.NewJudge(s.Batch.Programme, "LARGE")
	if err != nil {
		t.Fatal(err)
	}
	var r trial.Result
	if j.Rates(s.Movements[0].Rates, &r); strings.Join(r.Failed(), " ") != "S X" {
		t.Errorf("failed %v", r.Failed())
	}
	conn, err := pgx.Connect(t.Context(), h.DB.App)
	if err != nil {
		t.Fatal(err)
	}
	defer conn.Close(t.Context())
	for _, sql := range []string{"UPDATE programme SET body = ''", "DELETE FROM programme"} {
		if _, err := conn.Exec(t.Context(), sql); err == nil {
			t.Errorf("%s is done", sql)
		}
	}
}

func TestProgrammeThatCannotBeUsed(t *testing.T) {
	t.Parallel()
	h := storetest.New(t)
	for code, bend := range map[string]func(*trial.Programme){
		"programme_faulty":  func(p *trial.Programme) { p.Criteria[0].Formula.Days = []int{99} },
		"guarded_not_built": func(p *trial.Programme) { p.Decision = trial.Decision{Rule: trial.Guarded, Guard: trial.Ratio(1, 1)} },
	} {
		p := trial.ISO3159()
		p.Version = "2"
		bend(p)
		wantCode(t, h.AddProgramme(t.Context(), h.Manager, p), code)
	}
	for _, a := range []store.Actor{h.Technician, h.Adjuster} {
		p := trial.ISO3159()
		p.Version = "3"
		if err := h.AddProgramme(t.Context(), a, p); store.KindOf(err) != store.KindForbidden {
			t.Errorf("%s: %v", a.Name, err)
		}
	}
}
