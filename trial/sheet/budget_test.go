package sheet

import (
	"os"
	"path/filepath"
	"testing"

	"ratehouse/trial"
)

func TestParseBudget(t *testing.T) {
	t.Parallel()
	data, err := os.ReadFile(filepath.Join("..", "..", "testdata", "conformity", "budget.json"))
	if err != nil {
		t.Fatal(err)
	}
	b, err := ParseBudget(data)
	if err != nil {
		t.Fatal(err)
	}
	got := map[string]trial.Exact{"read": b.Read, "camera": b.Methods["camera"], "tap": b.Methods["tap"], "resolution": b.Resolution,
		"common": b.Common, "eccentricity": b.Eccentricity, "systematic": b.ChamberSystematic, "random": b.ChamberRandom,
		"frequency": b.Frequency, "handling": b.Handling, "tilt": b.Tilt}
	for name, want := range map[string]string{"read": "0.1", "camera": "0.03", "tap": "0.05", "resolution": "0.2", "common": "0.05",
		"eccentricity": "0.16", "systematic": "0.3", "random": "0.1", "frequency": "0.001", "handling": "0.05", "tilt": "1"} {
		e, err := trial.ParseExact(want)
		if err != nil || got[name].Cmp(e) != 0 {
			t.Errorf("%s is %s, want %s", name, got[name].String(), want)
		}
	}
	if b.Title == "" || len(b.Methods) != 2 {
		t.Errorf("%+v", b)
	}
}

func TestParseBudgetFaults(t *testing.T) {
	t.Parallel()
	for _, c := range []struct{ file, fault string }{
		{`[]`, "budget: must be an object"},
		{`{}`, "budget: is empty"},
		{`{"read_s": "0"}`, "budget: is empty"},
		{`{"title": "x"}`, "budget: is empty"},
		{`{"read_s": "-0.1"}`, "budget.read_s: -0.1 is outside what is allowed (0 to 1000000)"},
		{`{"read_s": 0.1}`, "budget.read_s: must be a decimal or p/q in quotation marks"},
		{`{"read_s": "1e-3"}`, "budget.read_s: must be a decimal or p/q in quotation marks"},
		{`{"reed_s": "0.1"}`, `budget: "reed_s" is not allowed here`},
		{`{"read_s": "0.1", "read_s": "0.2"}`, `budget.read_s: "read_s" appears twice`},
		{`{"methods": {"camera": "-1"}}`, "budget.methods.camera: -1 is outside what is allowed (0 to 1000000)"},
		{`{"methods": "camera"}`, "budget.methods: must be an object"},
		{`{"read_s": "0.1"} {}`, "budget: is not JSON: something follows the object"},
	} {
		if _, err := ParseBudget([]byte(c.file)); err == nil || err.Error() != c.fault {
			t.Errorf("%s: %v, want %s", c.file, err, c.fault)
		}
	}
	if _, err := ParseBudget([]byte(`{"read_s"`)); err == nil {
		t.Error("half a file")
	}
}
