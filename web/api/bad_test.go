package api_test

import (
	"bytes"
	"fmt"
	"io"
	"strings"
	"testing"
	"time"

	"ratehouse/store"
	"ratehouse/store/storetest"
)

// Every class of numbers that the contract refuses, and those it takes. Beside each bad item a good
// one arrives in the same call; the bad one's id is not used up.
func TestBadNumbers(t *testing.T) {
	t.Parallel()
	h := newHouse(t)
	type number struct{ value, code string }
	numbers := []number{
		{"", "blank"}, {" ", "blank"}, {"n/a", "not_number"}, {"-", "not_number"}, {"--", "not_number"}, {".", "not_number"}, {"+", "not_number"},
		{"abc", "not_number"}, {"nan", "not_number"}, {"Inf", "not_number"}, {"null", "not_number"},
		{"1e2", "exponent"}, {"1E-3", "exponent"}, {"0x10", "other_character"},
		{"2.4s", "other_character"}, {"2.4 s/d", "other_character"}, {"5%", "other_character"},
		{"1,5", "decimal_comma"}, {"1,234", "decimal_comma"}, {"1.234,5", "grouping"}, {"1 000.5", "grouping"}, {"1'000", "grouping"}, {"1_000", "grouping"},
		{"=1+1", "formula"}, {"=A1", "formula"}, {"@1", "formula"},
		{"2026-12-01", "not_number"}, {"1/2", "other_character"}, {"12:30", "other_character"},
		{"- 5", "sign_apart"}, {"+ 5", "sign_apart"}, {"\u2013 5", "other_character"}, {"\u20135", "other_character"}, {"\u20145", "other_character"}, {"\uff0d5", "other_character"},
		{"\u0663", "other_character"}, {"\uff15", "other_character"}, {"5\u200b", "other_character"}, {"\ufeff5", "other_character"}, {"5\u0000", "text_nul"}, {"5\n6", "other_character"},
		{"0.0005", "too_fine"}, {"-1.2345", "too_fine"}, {"1.5.2", "not_number"}, {"++5", "not_number"}, {"5-", "not_number"}, {"(5)", "other_character"},
		{"21600.001", "beyond_half_dial"}, {"-21600.001", "beyond_half_dial"}, {"99999999999999999999", "too_large"}, {"86395", "beyond_half_dial"},
		{strings.Repeat("9", 5000), "too_large"}, {"Stopped", "not_number"}, {"dropped.", "not_number"},
	}
	h.Batch(t, "26-001", len(numbers)+1)
	items := make([]fields, len(numbers), len(numbers)+1)
	for i, n := range numbers {
		items[i] = h.state(i+1, 0, n.value)
	}
	last := len(numbers) + 1
	answers := h.post(t, h.all, append(items, h.state(last, 0, "0.5"))...)
	for i, n := range numbers {
		if answers[i].Status != "refused" || string(answers[i].Code) != n.code {
			t.Errorf("%.40q: %s %s, want refused %s", n.value, answers[i].Status, answers[i].Code, n.code)
			continue
		}
		wantStatus(t, answers[i], "refused", n.code)
	}
	wantStatus(t, answers[last-1], "accepted", "")
	h.wantStrays(t, len(numbers))
	for i := range items {
		items[i] = items[i].with("value", "1.5")
	}
	for i, a := range h.post(t, h.all, items...) {
		if a.Status != "accepted" {
			t.Errorf("put right after %.40q: %s %s", numbers[i].value, a.Status, a.Code)
		}
	}
}

func TestGoodNumbers(t *testing.T) {
	t.Parallel()
	h := newHouse(t)
	numbers := map[string]string{"5": "5", "+5": "5", "-5": "-5", "\u22125": "-5", ".5": "0.5", "5.": "5", "-.5": "-0.5", "0": "0", "-0": "0", "+0.000": "0",
		"1.50000": "1.5", " 5\t": "5", "\u00a05\u202f": "5", "0.001": "0.001", "000.5": "0.5", "21600": "21600", "-21600": "-21600",
		"stopped": "stopped", "hand": "hand", "unreadable": "unreadable", "not_there": "not_there", "dropped": "dropped"}
	h.Batch(t, "26-001", len(numbers))
	i := 0
	for sent, want := range numbers {
		i++
		a := h.post(t, h.all, h.state(i, 0, sent))[0]
		if got := h.values(t, i); a.Status != "accepted" || got != "0:"+want {
			t.Errorf("%q: %s %s %s, want %s", sent, a.Status, a.Code, got, want)
		}
	}
}

func TestRateBounds(t *testing.T) {
	t.Parallel()
	h := newHouse(t)
	h.Batch(t, "26-001", 4)
	h.Clock.Advance(24 * time.Hour)
	for i, c := range []struct{ value, status, code string }{
		{"600.001", "refused", "beyond_600"}, {"-600.001", "refused", "beyond_600"}, {"600", "second_look", ""}, {"60", "accepted", ""},
	} {
		wantStatus(t, h.post(t, h.all, h.rate(i+1, 1, c.value))[0], c.status, c.code)
	}
	// Two states that would make such a rate are refused at the later one.
	h.Clock.Set(storetest.Start)
	wantStatus(t, h.post(t, h.all, h.state(1, 0, "0"))[0], "accepted", "")
	h.Clock.Advance(24 * time.Hour)
	wantStatus(t, h.post(t, h.all, h.state(1, 1, "601"))[0], "refused", "beyond_600")
	wantStatus(t, h.post(t, h.all, h.state(1, 1, "-3590"))[0], "refused", "beyond_600") // an hour set wrongly
}

// What can be wrong with an item: it is refused by itself and kept; the good one beside it is saved.
func TestBadItems(t *testing.T) {
	t.Parallel()
	h := newHouse(t)
	h.Batch(t, "26-001", 70)
	if err := h.EndMovement(t.Context(), h.Lead, "26-001", storetest.Serial(1), store.Rejected, "stopped", store.Stopped); err != nil {
		t.Fatal(err)
	}
	wantStatus(t, h.post(t, h.all, h.rate(2, 1, "3"))[0], "accepted", "")
	now := h.Clock.Now()
	state := func() fields { return h.state(3, 0, "0.5") }
	table := []struct {
		name string
		item fields
		code string
	}{
		{"bad uuid", state().with("id", "12345"), "id_form"},
		{"uuid in braces", state().with("id", "{"+newID()+"}"), "id_form"},
		{"uuid without hyphens", state().with("id", strings.ReplaceAll(newID(), "-", "")), "id_form"},
		{"nil uuid", state().with("id", "00000000-0000-0000-0000-000000000000"), "id_form"},
		{"no id", state().with("id", nil), "id_missing"},
		{"empty id", state().with("id", ""), "id_missing"},
		{"id a number", state().with("id", 5), "field_type"},
		{"step and day", state().with("day", 0), "step_or_day"},
		{"neither", state().with("step", nil), "step_or_day"},
		{"step below 0", state().with("step", -1), "unknown_step"},
		{"step below 0 and a day", state().with("step", -1, "day", 3), "unknown_step"},
		{"step beyond", state().with("step", 16), "unknown_step"},
		{"step far beyond", state().with("step", 70000), "unknown_step"},
		{"step beyond any number", state().with("step", 1e30), "field_type"},
		{"day beyond", state().with("step", nil, "day", 16), "unknown_step"},
		{"day below 0", state().with("step", nil, "day", -1), "unknown_step"},
		{"step a text", state().with("step", "0"), "field_type"},
		{"step broken", state().with("step", 0.5), "field_type"},
		{"no batch", state().with("batch", nil), "field_missing"},
		{"unknown batch", state().with("batch", "26-009"), "unknown_batch"},
		{"batch NUL", state().with("batch", "26\x00"), "text_nul"},
		{"no serial", state().with("serial", ""), "field_missing"},
		{"unknown movement", state().with("serial", "S-9999"), "unknown_movement"},
		{"small letters", state().with("serial", "s-0003"), "unknown_movement"},
		{"serial NUL", state().with("serial", "S\x00"), "text_nul"},
		{"no kind", state().with("kind", nil), "field_missing"},
		{"unknown kind", state().with("kind", "guess"), "kind"},
		{"no method", state().with("method", nil), "field_missing"},
		{"unknown method", state().with("method", "guess"), "method"},
		{"no value", state().with("value", nil), "field_missing"},
		{"value a number", state().with("value", 0.5), "field_type"},
		{"value true", state().with("value", true), "field_type"},
		{"value a list", state().with("value", []string{"0.5"}), "field_type"},
		{"no instant", state().with("read_at", nil), "read_at_missing"},
		{"a date", state().with("read_at", "2026-12-01"), "time_form"},
		{"no zone", state().with("read_at", "2026-12-01T08:00:00"), "time_form"},
		{"month 13", state().with("read_at", "2026-13-01T08:00:00Z"), "time_form"},
		{"seconds", state().with("read_at", 1764576000), "field_type"},
		{"future", state().with("read_at", now.Add(time.Hour).Format(time.RFC3339)), "future"},
		{"far future", state().with("read_at", "9999-12-31T23:59:59Z"), "future"},
		{"long ago", state().with("read_at", now.Add(-72*time.Hour).Format(time.RFC3339)), "too_early"},
		{"year 0", state().with("read_at", "0000-01-01T00:00:00Z"), "too_early"},
		{"unknown reader", state().with("read_by", "nobody"), "unknown_reader"},
		{"base below 0", state().with("base", -1), "field_type"},
		{"base a text", state().with("base", "1"), "field_type"},
		{"base ahead", state().with("base", 1, "reason", "x"), "base_ahead"},
		{"evidence a text", state().with("evidence", "abc"), "field_type"},
		{"evidence short", state().with("evidence", fields{"sha256": "abcd"}), "evidence_form"},
		{"evidence no hex", state().with("evidence", fields{"sha256": strings.Repeat("x", 64)}), "evidence_form"},
		{"evidence without sum", state().with("evidence", fields{"uri": "x"}), "evidence_form"},
		{"evidence with more", state().with("evidence", fields{"sha256": strings.Repeat("ab", 32), "size": 5}), "unknown_field"},
		{"confirm a text", state().with("confirm", "1"), "field_type"},
		{"confirm numbers", state().with("confirm", []any{1}), "field_type"},
		{"unknown field", state().with("colour", "red"), "unknown_field"},
		{"other case", state().with("Value", "0.5"), "unknown_field"},
		{"seconds hand", state().with("method", "hand"), "method_not_built"},
		{"a rate at the start", h.rate(3, 0, "1"), "no_rate_at_start"},
		{"ended", h.state(1, 0, "0.5"), "ended"},
		{"ended, a rate", h.rate(1, 1, "0.5"), "ended"},
		{"a state over a rate", h.state(2, 0, "0.5"), ""},
		{"station NUL", state().with("station", "A\x00"), "text_nul"},
		{"reason NUL", state().with("reason", "A\x00"), "text_nul"},
	}
	var items []fields
	for i, c := range table {
		items = append(items, c.item, h.state(i+4, 0, "0.5")) // a good one beside each
	}
	answers := h.post(t, h.all, items...)
	refused := 0
	for i, c := range table {
		a := answers[2*i]
		if answers[2*i+1].Status != "accepted" {
			t.Errorf("beside %s: %+v", c.name, answers[2*i+1])
		}
		if c.code == "" {
			continue
		}
		refused++
		if a.Status != "refused" || string(a.Code) != c.code {
			t.Errorf("%s: %s %s, want refused %s", c.name, a.Status, a.Code, c.code)
			continue
		}
		wantStatus(t, a, "refused", c.code)
	}
	if got := h.values(t, 3); got != "" {
		t.Errorf("something refused was saved: %s", got)
	}
	h.wantStrays(t, refused-3) // three name no batch of this laboratory
}

// An item that is no object is refused by itself too.
func TestItemsThatAreNoObjects(t *testing.T) {
	t.Parallel()
	h := newHouse(t)
	h.Batch(t, "26-001", 1)
	body := fmt.Sprintf(`{"sent_at": %q, "readings": [5, null, "x", [], %s]}`, h.Clock.Now().Format(time.RFC3339), h.state(1, 0, "0.5"))
	answers := h.postBody(t, h.all, body)
	for i := range 4 {
		wantStatus(t, answers[i], "refused", "not_object")
	}
	wantStatus(t, answers[4], "accepted", "")
}

// A source of a day is one: its two states, or a typed rate.
func TestOneSourceADay(t *testing.T) {
	t.Parallel()
	h := newHouse(t)
	h.Batch(t, "26-001", 2)
	wantStatus(t, h.post(t, h.all, h.state(1, 0, "0.5"))[0], "accepted", "")
	h.Clock.Advance(24 * time.Hour)
	wantStatus(t, h.post(t, h.all, h.state(1, 1, "2.5"))[0], "accepted", "")
	wantStatus(t, h.post(t, h.all, h.rate(1, 1, "2"))[0], "refused", "has_states")
	wantStatus(t, h.post(t, h.all, h.rate(2, 1, "2"))[0], "accepted", "")
	wantStatus(t, h.post(t, h.all, h.state(2, 1, "2.5"))[0], "refused", "has_rate")
}

// Calls that are not well-formed are refused whole, and nothing saved before is lost by them.
func TestBadCalls(t *testing.T) {
	t.Parallel()
	h := newHouse(t)
	h.Batch(t, "26-001", 2)
	wantStatus(t, h.post(t, h.all, h.state(1, 0, "0.5"))[0], "accepted", "")
	good := h.state(2, 0, "0.7")
	sent := h.Clock.Now().Format(time.RFC3339)
	whole := h.body(good)
	many := make([]fields, 1001)
	for i := range many {
		many[i] = fields{"id": "x"}
	}
	for name, c := range map[string]struct {
		body   string
		status int
		code   string
		header []string
	}{
		"empty":                {"", 400, "body_empty", nil},
		"no JSON":              {"serial=1&value=2", 400, "json_form", nil},
		"cut off":              {whole[:len(whole)-2], 400, "json_form", nil},
		"more behind":          {whole + "{}", 400, "json_form", nil},
		"comma behind":         {strings.Replace(whole, "}]", "},]", 1), 400, "json_form", nil},
		"comment":              {"// x\n" + whole, 400, "json_form", nil},
		"single quotes":        {"{'sent_at': 1}", 400, "json_form", nil},
		"byte order mark":      {"\ufeff" + whole, 400, "json_form", nil},
		"NaN":                  {`{"sent_at": NaN}`, 400, "json_form", nil},
		"NUL byte":             {whole[:20] + "\x00" + whole[20:], 400, "json_form", nil},
		"invalid UTF-8":        {strings.Replace(whole, "S-0002", "S\xff\xfe", 1), 400, "json_text", nil},
		"Latin-1":              {strings.Replace(whole, "S-0002", "S\xe9", 1), 400, "json_text", nil},
		"half a surrogate":     {strings.Replace(whole, "S-0002", `S\ud800`, 1), 400, "json_text", nil},
		"key twice":            {strings.Replace(whole, `"sent_at"`, `"sent_at": "x", "sent_at"`, 1), 400, "json_twice", nil},
		"key twice in an item": {strings.Replace(whole, `"value":"0.7"`, `"value":"0.7","value":"0.8"`, 1), 400, "json_twice", nil},
		"key twice, escaped":   {strings.Replace(whole, `"value":"0.7"`, `"value":"0.7","val\u0075e":"0.8"`, 1), 400, "json_twice", nil},
		"deep":                 {strings.Repeat("[", 100_000), 400, "json_deep", nil},
		"deep and closed":      {`{"sent_at": ` + strings.Repeat("[", 1000) + strings.Repeat("]", 1000) + "}", 400, "json_deep", nil},
		"a list":               {"[" + whole + "]", 422, "not_object", nil},
		"null":                 {"null", 422, "not_object", nil},
		"a text":               {`"x"`, 422, "not_object", nil},
		"empty object":         {"{}", 422, "field_missing", nil},
		"no sent_at":           {fields{"readings": []fields{good}}.String(), 422, "field_missing", nil},
		"bad sent_at":          {fields{"sent_at": "now", "readings": []fields{good}}.String(), 422, "time_form", nil},
		"no readings":          {fields{"sent_at": sent}.String(), 422, "field_missing", nil},
		"readings an object":   {fields{"sent_at": sent, "readings": good}.String(), 422, "field_type", nil},
		"unknown field":        {fields{"sent_at": sent, "readings": []fields{good}, "batch": "26-001"}.String(), 422, "unknown_field", nil},
		"1,001 items":          {h.body(many...), 422, "too_many_items", nil},
		"form":                 {whole, 415, "media_type", []string{"Content-Type", "application/x-www-form-urlencoded"}},
		"text":                 {whole, 415, "media_type", []string{"Content-Type", "text/plain"}},
		"no type":              {whole, 415, "media_type", []string{"Content-Type", ""}},
		"broken type":          {whole, 415, "media_type", []string{"Content-Type", "application/json; charset"}},
		"Latin-1 said":         {whole, 415, "media_type", []string{"Content-Type", "application/json; charset=iso-8859-1"}},
		"compressed":           {whole, 415, "media_type", []string{"Content-Encoding", "gzip"}},
		"a byte too long":      {whole + strings.Repeat(" ", 1<<20-len(whole)+1), 413, "body_too_large", nil},
		"10 MB":                {whole + strings.Repeat(" ", 10<<20), 413, "body_too_large", nil},
		"unknown parameter":    {whole, 422, "parameter", nil},
	} {
		t.Run(name, func(t *testing.T) {
			path := "/api/v1/readings"
			if name == "unknown parameter" {
				path += "?dry_run=1"
			}
			h.call(t, h.all, "POST", path, c.body, c.header...).want(t, c.status, c.code)
			if got := h.values(t, 1) + "|" + h.values(t, 2); got != "0:0.5|" {
				t.Errorf("afterwards: %s", got)
			}
		})
	}
	// 10 MB whose length nobody said, and one that breaks off.
	h.send(t, h.all, "POST", "/api/v1/readings", io.MultiReader(strings.NewReader(whole), bytes.NewReader(bytes.Repeat([]byte(" "), 10<<20)))).want(t, 413, "body_too_large")
	h.send(t, h.all, "POST", "/api/v1/readings", io.MultiReader(strings.NewReader(whole[:30]), brokenOff{})).want(t, 400, "body_cut_off")
	// What is exactly as long as allowed is taken, and so are the other ways to write the type.
	full := whole + strings.Repeat(" ", 1<<20-len(whole))
	wantStatus(t, h.postBody(t, h.all, full)[0], "accepted", "")
	h.call(t, h.all, "POST", "/api/v1/readings", whole, "Content-Type", "Application/JSON; charset=UTF-8").want(t, 200, "")
	wantStatus(t, h.postBody(t, h.all, whole)[0], "duplicate", "")
	if got := h.postBody(t, h.all, h.body([]fields{}...)); len(got) != 0 {
		t.Errorf("no items: %+v", got)
	}
}

// brokenOff is a body whose sender has gone.
type brokenOff struct{}

func (brokenOff) Read([]byte) (int, error) { return 0, io.ErrUnexpectedEOF }

// A name that is wrong is named.
func TestUnknownFieldsAreNamed(t *testing.T) {
	t.Parallel()
	h := newHouse(t)
	h.Batch(t, "26-001", 1)
	a := h.post(t, h.all, h.state(1, 0, "0.5").with("colour", "red"))[0]
	if a.Args["field"] != "colour" || !strings.Contains(a.Detail, "colour") {
		t.Errorf("%+v", a)
	}
	p := h.call(t, h.all, "POST", "/api/v1/readings", `{"sent_at": "2026-12-01T08:00:00Z", "readings": [], "colour": 1}`).want(t, 422, "unknown_field").problem(t)
	if p.Errors[0].Location != "body.colour" || !strings.Contains(p.Detail, "colour") {
		t.Errorf("%+v", p)
	}
}

// Sentences come in the language that was asked for.
func TestSentencesInTheLanguageAskedFor(t *testing.T) {
	t.Parallel()
	h := newHouse(t)
	seen := map[string]bool{}
	for _, lang := range []string{"en", "fr", "de"} {
		seen[h.call(t, h.all, "GET", "/api/v1/batches/26-009", "", "Accept-Language", lang).want(t, 404, "no_batch").problem(t).Detail] = true
	}
	if len(seen) != 3 {
		t.Errorf("%v", seen)
	}
}

// A thousand items go in one call.
func TestAThousandItems(t *testing.T) {
	t.Parallel()
	h := newHouse(t)
	h.Batch(t, "26-001", 1000)
	items := make([]fields, 1000)
	for i := range items {
		items[i] = h.state(i+1, 0, "0.5")
	}
	body := h.body(items...)
	if len(body) > 1<<20 {
		t.Fatalf("%d bytes: a thousand items do not fit", len(body))
	}
	for i, a := range h.postBody(t, h.all, body) {
		if a.Status != "accepted" {
			t.Fatalf("item %d: %+v", i, a)
		}
	}
	for i, a := range h.postBody(t, h.all, body) {
		if a.Status != "duplicate" {
			t.Fatalf("item %d again: %+v", i, a)
		}
	}
}
