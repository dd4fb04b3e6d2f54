package proof

import (
	"bytes"
	"encoding/json"
	"os"
	"path/filepath"
	"reflect"
	"testing"
)

// testFile reads a file of testdata/proof; its README says where each comes from.
func testFile(t testing.TB, name string) []byte {
	t.Helper()
	raw, err := os.ReadFile(filepath.Join("..", "..", "testdata", "proof", name))
	if err != nil {
		t.Fatal(err)
	}
	return raw
}

func testJSON(t testing.TB, name string, into any) {
	t.Helper()
	if err := json.Unmarshal(testFile(t, name), into); err != nil {
		t.Fatalf("%s: %v", name, err)
	}
}

// publishedTestKey is the example key of RFC 8037, never for real use.
func publishedTestKey(t testing.TB) Key {
	t.Helper()
	key, err := ParseKey(testFile(t, "published-key.private.jwk"))
	if err != nil {
		t.Fatal(err)
	}
	return key
}

// golden reads a record as people wrote it; each call gives its own copy.
func golden(t testing.TB, kind Kind) Record {
	t.Helper()
	var r Record
	testJSON(t, string(kind)+".record.json", &r)
	return r
}

// The golden papers were made without code of this project: the same record must give the same
// bytes, and the bytes the same record.
func TestGoldenPapers(t *testing.T) {
	t.Parallel()
	key := publishedTestKey(t)
	for _, kind := range []Kind{KindCertificate, KindRejection} {
		want := testFile(t, string(kind)+".jws")
		jws, err := Issue(key, golden(t, kind))
		if err != nil {
			t.Fatalf("%s: %v", kind, err)
		}
		if jws+"\n" != string(want) {
			t.Errorf("%s: signed text differs from the golden one", kind)
		}
		got, err := VerifyFile(key.Public(), want)
		if err != nil {
			t.Fatalf("%s: %v", kind, err)
		}
		if !reflect.DeepEqual(got, golden(t, kind)) {
			t.Errorf("%s: opened record differs from the golden one", kind)
		}
	}
}

// The readable record and the signed one are the same record.
func TestGoldenRecordIsThePayload(t *testing.T) {
	t.Parallel()
	for _, kind := range []Kind{KindCertificate, KindRejection} {
		payload, err := Verify(publishedTestKey(t).Public(), string(bytes.TrimSpace(testFile(t, string(kind)+".jws"))))
		if err != nil {
			t.Fatal(err)
		}
		canonical, err := CanonicalJSON(testFile(t, string(kind)+".record.json"))
		if err != nil {
			t.Fatal(err)
		}
		if !bytes.Equal(canonical, payload) {
			t.Errorf("%s: readable and signed record differ", kind)
		}
	}
}
