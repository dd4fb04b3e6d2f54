package proof

import (
	"bytes"
	"encoding/json"
	"errors"
	"fmt"
	"math/rand/v2"
	"reflect"
	"strings"
	"testing"
	"time"
)

func TestOpenGivesWhatWasIssued(t *testing.T) {
	t.Parallel()
	key, err := GenerateKey()
	if err != nil {
		t.Fatal(err)
	}
	for _, kind := range []Kind{KindCertificate, KindRejection} {
		r := golden(t, kind)
		r.Demo = false
		r.Remarks, r.Received, r.Laboratory.Address = nil, nil, nil
		jws, err := Issue(key, r)
		if err != nil {
			t.Fatal(err)
		}
		got, err := Open(key.Public(), jws)
		if err != nil {
			t.Fatal(err)
		}
		if !reflect.DeepEqual(got, r.filled()) {
			t.Errorf("%s: %+v\nwant %+v", kind, got, r)
		}
		a, _ := r.Hash()
		b, _ := got.Hash()
		if a != b || a == (Hash{}) {
			t.Errorf("hash %s became %s", a, b)
		}
	}
}

// Issuing leaves the caller's record as it was.
func TestCanonicalKeepsItsArgument(t *testing.T) {
	t.Parallel()
	r := golden(t, KindCertificate)
	r.Days[0].Enters, r.Remarks = nil, nil
	if _, err := r.Canonical(); err != nil {
		t.Fatal(err)
	}
	if r.Days[0].Enters != nil || r.Remarks != nil {
		t.Error("Canonical changed the record")
	}
}

// The example key may sign demonstrations and nothing else.
func TestPublishedKeyOnlyForDemo(t *testing.T) {
	t.Parallel()
	key := publishedTestKey(t)
	r := golden(t, KindCertificate)
	r.Demo = false
	if _, err := Issue(key, r); !errors.Is(err, ErrPublishedKey) {
		t.Errorf("issued: %v", err)
	}
	raw, err := r.Canonical()
	if err != nil {
		t.Fatal(err)
	}
	jws, err := Sign(key, raw)
	if err != nil {
		t.Fatal(err)
	}
	if _, err := Open(key.Public(), jws); !errors.Is(err, ErrPublishedKey) {
		t.Errorf("opened: %v", err)
	}
	if _, err := Issue(Key{}, r); !errors.Is(err, ErrKey) {
		t.Errorf("issued without a key: %v", err)
	}
}

// openSigned signs any payload with the right key: only the checks after the signature can
// refuse it.
func openSigned(t *testing.T, payload []byte) error {
	t.Helper()
	key := publishedTestKey(t)
	jws, err := Sign(key, payload)
	if err != nil {
		t.Fatal(err)
	}
	r, err := Open(key.Public(), jws)
	if err != nil && !reflect.DeepEqual(r, Record{}) {
		t.Error("a refused record was returned")
	}
	return err
}

func TestOpenRefusals(t *testing.T) {
	t.Parallel()
	raw, err := golden(t, KindCertificate).Canonical()
	if err != nil {
		t.Fatal(err)
	}
	if err := openSigned(t, raw); err != nil {
		t.Fatal(err)
	}
	with := func(old, to string) []byte {
		if !bytes.Contains(raw, []byte(old)) {
			t.Fatalf("%s is not in the record", old)
		}
		return bytes.Replace(raw, []byte(old), []byte(to), 1)
	}
	for name, c := range map[string]struct {
		payload []byte
		want    error
	}{
		"not JSON":            {[]byte("hello"), ErrNotCanonical},
		"two keys":            {with(`"batch":"26-118"`, `"batch":"26-118","batch":"26-118"`), ErrNotCanonical},
		"a blank":             {with(`"batch":`, `"batch": `), ErrNotCanonical},
		"a needless escape":   {with(`Nürn`, `N\u00fcrn`), ErrNotCanonical},
		"not sorted":          {with(`"batch":"26-118",`, ``), ErrSchema},
		"a tree head":         {[]byte(`{"root":"x","size":3}`), ErrSchema},
		"a list":              {[]byte(`[]`), ErrSchema},
		"another schema":      {with(`"schema":"ratehouse-certificate-record"`, `"schema":"x"`), ErrSchema},
		"a later version":     {with(`"schema_version":1`, `"schema_version":2`), ErrSchema},
		"a version text":      {with(`"schema_version":1`, `"schema_version":"1"`), ErrSchema},
		"an unknown field":    {with(`"batch":`, `"azimuth":1,"batch":`), ErrSchema},
		"a field in capitals": {with(`"batch":`, `"Batch":`), ErrSchema},
		"null for a list":     {with(`"failed":[]`, `"failed":null`), ErrSchema},
		"null for a text":     {with(`"end":""`, `"end":null`), ErrSchema},
		"empty for null":      {with(`"received":{`, `"received":{"x":0,`), ErrNotCanonical},
		"a number for a text": {with(`"batch":"26-118"`, `"batch":26`), ErrSchema},
		"an offset":           {with(`"issued_at":"2026-12-01T07:44:00.250Z"`, `"issued_at":"2026-12-01T08:44:00.250+01:00"`), ErrSchema},
		"needless decimals":   {with(`"issued_at":"2026-12-01T07:44:00.250Z"`, `"issued_at":"2026-12-01T07:44:00.000Z"`), ErrSchema},
		"microseconds":        {with(`"issued_at":"2026-12-01T07:44:00.250Z"`, `"issued_at":"2026-12-01T07:44:00.250001Z"`), ErrSchema},
		"an empty decimal":    {with(`"guard":null`, `"guard":""`), ErrSchema},
		"another value":       {with(`"printed":"2.01"`, `"printed":"2.02"`), ErrInconsistent},
	} {
		if err := openSigned(t, c.payload); !errors.Is(err, c.want) {
			t.Errorf("%s: %v, want %v", name, err, c.want)
		}
	}
}

// Every member of a record, at any depth, is needed: without it nothing opens.
func TestEveryFieldIsNeeded(t *testing.T) {
	t.Parallel()
	left := 0
	var walk func(v any, whole func() []byte)
	walk = func(v any, whole func() []byte) {
		switch v := v.(type) {
		case map[string]any:
			for name, old := range v {
				delete(v, name)
				if err := openSigned(t, whole()); !errors.Is(err, ErrSchema) {
					t.Errorf("without %s: %v", name, err)
				}
				v[name] = old
				left++
				walk(old, whole)
			}
		case []any:
			if len(v) > 0 {
				walk(v[0], whole)
			}
		}
	}
	root, err := parseJSON(testFile(t, "certificate.record.json"))
	if err != nil {
		t.Fatal(err)
	}
	walk(root, func() []byte {
		raw, err := Canonical(root)
		if err != nil {
			t.Fatal(err)
		}
		return raw
	})
	if left < 100 {
		t.Errorf("only %d members tried", left)
	}
}

// A golden file with a byte changed, lost or added, or cut off, is refused, all along it. (Every
// single byte is tried on a short text in TestEveryMutationRefused.)
func TestFileMutationsRefused(t *testing.T) {
	t.Parallel()
	file, public := testFile(t, "certificate.jws"), publishedTestKey(t).Public()
	rng := rand.New(rand.NewPCG(7515, 1))
	end := len(file) - 1 // without the line end
	for i := 0; i < end; i += 1 + rng.IntN(20) {
		changed := bytes.Clone(file)
		changed[i] ^= byte(1 + rng.IntN(255))
		lost := append(bytes.Clone(file[:i]), file[i+1:]...)
		added := append(append(bytes.Clone(file[:i]), b64Alphabet[rng.IntN(64)]), file[i:]...)
		for what, mutant := range map[string][]byte{"changed": changed, "lost": lost, "added": added, "cut": file[:i]} {
			if r, err := VerifyFile(public, mutant); err == nil {
				t.Fatalf("byte %d %s: opened %s", i, what, r.Number)
			}
		}
	}
}

const b64Alphabet = "ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz0123456789-_"

func TestVerifyFileEdges(t *testing.T) {
	t.Parallel()
	file, public := string(bytes.TrimSpace(testFile(t, "certificate.jws"))), publishedTestKey(t).Public()
	for _, good := range []string{file, file + "\n", file + "\r\n"} {
		if _, err := VerifyFile(public, []byte(good)); err != nil {
			t.Errorf("%q: %v", good[len(file):], err)
		}
	}
	for _, bad := range []string{"", "\n", file + "\n\n", "\n" + file, "\ufeff" + file, file + " ", file + file, strings.Repeat("A", MaxFile+1)} {
		if _, err := VerifyFile(public, []byte(bad)); !errors.Is(err, ErrMalformed) {
			t.Errorf("%.20q...: %v", bad, err)
		}
	}
	other, err := GenerateKey()
	if err != nil {
		t.Fatal(err)
	}
	if _, err := VerifyFile(other.Public(), []byte(file)); !errors.Is(err, ErrOtherKey) {
		t.Errorf("with another key: %v", err)
	}
}

func TestInstant(t *testing.T) {
	t.Parallel()
	zone := time.FixedZone("east", 3600)
	for _, c := range []struct {
		at   time.Time
		want string
	}{
		{time.Time{}, "null"}, {time.Date(2026, 12, 1, 9, 0, 0, 0, zone), `"2026-12-01T08:00:00Z"`},
		{time.Date(2026, 12, 1, 8, 0, 0, 999_999, time.UTC), `"2026-12-01T08:00:00Z"`},
		{time.Date(2026, 12, 1, 8, 0, 0, 50_000_000, time.UTC), `"2026-12-01T08:00:00.050Z"`},
	} {
		raw, err := json.Marshal(At(c.at))
		if err != nil || string(raw) != c.want {
			t.Errorf("%s, %v, want %s", raw, err, c.want)
		}
		var again Instant
		if err := json.Unmarshal(raw, &again); err != nil || again != At(c.at) {
			t.Errorf("%s came back as %s, %v", raw, again, err)
		}
	}
}

// FuzzOpen cuts a piece out of a right record and puts another text in, signed with the right
// key: opening it never panics, and what opens is its own canonical form. (Fuzzing the whole
// record instead spends its time making it smaller.)
func FuzzOpen(f *testing.F) {
	key := publishedTestKey(f)
	raw, err := golden(f, KindCertificate).Canonical()
	if err != nil {
		f.Fatal(err)
	}
	f.Add(uint16(0), uint16(0), "")
	for _, c := range [][2]string{{`null`, `"1/3"`}, {`"-4"`, `"x"`}, {`"6H"`, `""`}, {`"Nadja Quill"`, `"\u00e9"`}, {`[]`, `null`}, {`1,`, `-1,`}} {
		f.Add(uint16(bytes.Index(raw, []byte(c[0]))), uint16(len(c[0])), c[1])
	}
	f.Fuzz(func(t *testing.T, at, cut uint16, insert string) {
		from := min(int(at), len(raw))
		payload := fmt.Sprintf("%s%s%s", raw[:from], insert, raw[min(from+int(cut), len(raw)):])
		jws, err := Sign(key, []byte(payload))
		if err != nil {
			t.Fatal(err)
		}
		r, err := Open(key.Public(), jws)
		if err != nil {
			return
		}
		if again, err := r.Canonical(); err != nil || string(again) != payload {
			t.Fatalf("%q opened as %q, %v", payload, again, err)
		}
	})
}
