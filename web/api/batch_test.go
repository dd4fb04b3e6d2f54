package api_test

import (
	"encoding/json"
	"fmt"
	"maps"
	"reflect"
	"slices"
	"strings"
	"testing"
	"time"

	"ratehouse/store"
	"ratehouse/store/storetest"
	"ratehouse/web/api"
)

type fields map[string]any

// with is a copy with some members changed; nil takes one out.
func (f fields) with(pairs ...any) fields {
	f = maps.Clone(f)
	for i := 0; i < len(pairs); i += 2 {
		if pairs[i+1] == nil {
			delete(f, pairs[i].(string))
		} else {
			f[pairs[i].(string)] = pairs[i+1]
		}
	}
	return f
}

func (f fields) String() string {
	text, err := json.Marshal(map[string]any(f))
	if err != nil {
		panic(err)
	}
	return string(text)
}

var newBatch = fields{"code": "26-001", "programme": "iso3159", "category": "1", "depositor": "KESTWICK",
	"starts_at": storetest.Start.Format(time.RFC3339), "entry": "state", "serials": []string{"S-0001", "S-0002", "S-0003"}}

func TestRegisterThenSee(t *testing.T) {
	t.Parallel()
	h := newHouse(t)
	a := h.call(t, h.all, "POST", "/api/v1/batches", newBatch.String()).want(t, 201, "")
	if got := a.header.Get("Location"); got != "/api/v1/batches/26-001" {
		t.Errorf("Location %q", got)
	}
	var made, seen api.Batch
	a.into(t, &made)
	h.call(t, h.all, "GET", "/api/v1/batches/26-001", "").want(t, 200, "").into(t, &seen)
	if seen.Standing == nil || seen.Standing.Open != 3 {
		t.Errorf("standing %+v", seen.Standing)
	}
	seen.Standing = nil
	if !reflect.DeepEqual(made, seen) {
		t.Errorf("registered %+v, seen %+v", made, seen)
	}
	if len(seen.Rounds) != 16 || seen.Rounds[15].DueAt != storetest.Start.Add(15*24*time.Hour) || *seen.Rounds[15].Day != 15 {
		t.Errorf("%d rounds, the last %+v", len(seen.Rounds), seen.Rounds[len(seen.Rounds)-1])
	}
	h.call(t, h.all, "GET", "/api/v1/batches/26-002", "").want(t, 404, "no_batch")
	h.call(t, h.all, "GET", "/api/v1/batches/26%00", "").want(t, 404, "no_batch")
	h.call(t, h.all, "GET", "/api/v1/batches/26%ff", "").want(t, 404, "no_batch")
}

func TestListBatches(t *testing.T) {
	t.Parallel()
	h := newHouse(t)
	var want []string
	for i := range 5 {
		code := fmt.Sprintf("26-%03d", i)
		h.Batch(t, code, 1, func(n *store.NewBatch) { n.StartsAt = n.StartsAt.Add(time.Duration(i/2) * time.Hour) })
		want = append([]string{code}, want...)
	}
	var got []string
	for path := "/api/v1/batches?limit=2"; ; {
		var page api.BatchPage
		h.call(t, h.all, "GET", path, "").want(t, 200, "").into(t, &page)
		for _, b := range page.Items {
			got = append(got, b.Code)
		}
		if page.Next == "" {
			break
		}
		path = "/api/v1/batches?limit=2&cursor=" + page.Next
	}
	if !slices.Equal(got, want) {
		t.Errorf("got %v, want %v", got, want)
	}
	for query, code := range map[string]string{
		"limit=0": "parameter", "limit=201": "parameter", "limit=x": "parameter", "cursor=x": "cursor_unknown", "offset=3": "parameter",
		"cursor=%00": "cursor_unknown",
	} {
		p := h.call(t, h.all, "GET", "/api/v1/batches?"+query, "").want(t, 422, code).problem(t)
		if name := strings.Split(query, "=")[0]; len(p.Errors) == 0 || p.Errors[0].Location != "query."+name {
			t.Errorf("%s: %+v", query, p.Errors)
		}
	}
}

func TestRegisterRefusals(t *testing.T) {
	t.Parallel()
	h := newHouse(t)
	if _, err := h.AddCalibre(t.Context(), h.Lead, store.Calibre{Code: "K-41", Title: "K 41", DiameterUM: 18_000}); err != nil {
		t.Fatal(err)
	}
	h.Batch(t, "26-000", 1)
	for name, c := range map[string]struct {
		body           fields
		code, location string
	}{
		"no code":          {newBatch.with("code", nil), "field_missing", "body.code"},
		"code null":        {fields{"code": nil}, "field_missing", "body.code"},
		"small letters":    {newBatch.with("code", "abc"), "code_form", "body.code"},
		"reserved":         {newBatch.with("code", "NEW"), "code_form", "body.code"},
		"long":             {newBatch.with("code", strings.Repeat("A", 41)), "code_form", "body.code"},
		"taken":            {newBatch.with("code", "26-000"), "batch_code_taken", "body.code"},
		"code a number":    {newBatch.with("code", 26), "field_type", "body.code"},
		"NUL":              {newBatch.with("code", "A\x00"), "text_nul", "body.code"},
		"NUL in a serial":  {newBatch.with("serials", []string{"a", "b\x00"}), "text_nul", "body.serials[1]"},
		"programme":        {newBatch.with("programme", "iso9999"), "unknown_programme", "body.programme"},
		"category":         {newBatch.with("category", "3"), "unknown_category", "body.category"},
		"no category":      {newBatch.with("category", nil), "category_needed", "body.category"},
		"they disagree":    {newBatch.with("calibre", "K-41"), "category_contradicts_calibre", "body.category"},
		"calibre form":     {newBatch.with("calibre", "k 41"), "code_form", "body.calibre"},
		"entry":            {newBatch.with("entry", "guess"), "unknown_entry", "body.entry"},
		"no instant":       {newBatch.with("starts_at", nil), "field_missing", "body.starts_at"},
		"a date":           {newBatch.with("starts_at", "2026-12-01"), "time_form", "body.starts_at"},
		"seconds":          {newBatch.with("starts_at", 1764576000), "field_type", "body.starts_at"},
		"no serials":       {newBatch.with("serials", nil), "field_missing", "body.serials"},
		"empty serials":    {newBatch.with("serials", []string{}), "needed", "body.serials"},
		"serials a text":   {newBatch.with("serials", "S-1"), "field_type", "body.serials"},
		"serial a number":  {newBatch.with("serials", []any{1}), "field_type", "body.serials[0]"},
		"empty serial":     {newBatch.with("serials", []string{"S-1", " "}), "serial_empty", "body.serials"},
		"formula":          {newBatch.with("serials", []string{"=1+1"}), "serial_formula", "body.serials"},
		"twice":            {newBatch.with("serials", []string{"S-1", "S-1 "}), "serial_repeated", "body.serials"},
		"invisible":        {newBatch.with("serials", []string{"S\u200b1"}), "serial_unprintable", "body.serials"},
		"unknown field":    {newBatch.with("Code", "X"), "unknown_field", "body.Code"},
		"unknown field 2":  {newBatch.with("places", 5), "unknown_field", "body.places"},
		"depositor's form": {newBatch.with("depositor", "Kestwick & Sons"), "code_form", "body.depositor"},
	} {
		t.Run(name, func(t *testing.T) {
			p := h.call(t, h.all, "POST", "/api/v1/batches", c.body.String()).want(t, 422, c.code).problem(t)
			if len(p.Errors) == 0 || p.Errors[0].Location != c.location {
				t.Errorf("errors %+v, want the first at %s", p.Errors, c.location)
			}
		})
	}
	// All faults of a form are told at once.
	p := h.call(t, h.all, "POST", "/api/v1/batches", newBatch.with("code", "x", "programme", "iso9999", "entry", "guess").String()).want(t, 422, "code_form").problem(t)
	if len(p.Errors) != 3 {
		t.Errorf("%d errors: %+v", len(p.Errors), p.Errors)
	}
	var page api.BatchPage
	h.call(t, h.all, "GET", "/api/v1/batches", "").into(t, &page)
	if len(page.Items) != 1 {
		t.Errorf("something refused was registered: %+v", page.Items)
	}
}

func TestRegisterOnce(t *testing.T) {
	t.Parallel()
	h := newHouse(t)
	post := func(key string, body fields) answer {
		return h.call(t, h.all, "POST", "/api/v1/batches", body.String(), "Idempotency-Key", key)
	}
	first := post("k-1", newBatch).want(t, 201, "")
	again := post("k-1", newBatch).want(t, 201, "")
	if string(first.body) != string(again.body) || again.header.Get("Location") != first.header.Get("Location") {
		t.Errorf("the answers differ:\n%s\n%s", first.text(), again.text())
	}
	post("k-1", newBatch.with("code", "26-002")).want(t, 422, "key_reused")
	post("k-2", newBatch).want(t, 422, "batch_code_taken")
	post("k-2", newBatch.with("code", "26-002")).want(t, 201, "") // what was refused was not done
	post("a b", newBatch).want(t, 422, "key_form")
	post(strings.Repeat("k", 201), newBatch).want(t, 422, "key_form")
	// The answer stays what it was, whatever happened to the batch since.
	h.MustSave(t, h.Technician, h.State("26-001", 1, 0, "0.5"))
	if again := post("k-1", newBatch); string(first.body) != string(again.body) {
		t.Errorf("the answer changed: %s", again.text())
	}
}

func TestSheets(t *testing.T) {
	t.Parallel()
	h := newHouse(t)
	h.Batch(t, "26-001", 2)
	a := h.call(t, h.all, "GET", "/api/v1/batches/26-001/sheets.csv", "").want(t, 200, "")
	lines := strings.Split(strings.TrimSuffix(string(a.body), "\n"), "\n")
	if lines[0] != "serial,category,verdict,M,V,Vmax,D,P,C,R,failed,unreachable,end,end_cause" || len(lines) != 3 {
		t.Errorf("%q", lines)
	}
	if got := a.header.Get("Content-Type"); got != "text/csv; charset=utf-8" {
		t.Errorf("Content-Type %q", got)
	}
	if got := a.header.Get("Content-Disposition"); got != `attachment; filename="26-001.csv"` {
		t.Errorf("Content-Disposition %q", got)
	}
	h.call(t, h.all, "GET", "/api/v1/batches/26-009/sheets.csv", "").want(t, 404, "no_batch")
}

func TestClimateIsNotBuilt(t *testing.T) {
	t.Parallel()
	h := newHouse(t)
	h.call(t, h.all, "POST", "/api/v1/chambers/CH-1/climate", `{"samples": []}`).want(t, 501, "not_built")
}
