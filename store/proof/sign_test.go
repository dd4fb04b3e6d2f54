package proof

import (
	"bytes"
	"crypto/ecdsa"
	"crypto/ed25519"
	"crypto/elliptic"
	"crypto/rand"
	"crypto/x509"
	"encoding/hex"
	"encoding/json"
	"encoding/pem"
	"errors"
	"fmt"
	"log/slog"
	"strings"
	"testing"
)

type signVectors struct {
	Ed25519 struct {
		JWK                  json.RawMessage
		Header, Payload, JWS string
		Thumbprint           string `json:"thumbprint_rfc7638"`
	} `json:"rfc8037_ed25519_jws"`
	RFC8032 map[string]struct{ Secret, Public, Message, Signature string }
	HS256   struct{ JWS string }            `json:"rfc7515_A1_hs256"`
	Example struct{ Canonical, JWS string } `json:"certificate_like_example"`
}

func readSignVectors(t *testing.T) (v signVectors) {
	testJSON(t, "vectors.json", &v)
	return v
}

// RFC 8037 A.1 to A.5: key, thumbprint, signing and checking.
func TestSignVectors(t *testing.T) {
	t.Parallel()
	v := readSignVectors(t)
	key, err := ParseKey(v.Ed25519.JWK)
	if err != nil {
		t.Fatal(err)
	}
	if key.ID() != v.Ed25519.Thumbprint {
		t.Errorf("thumbprint %s, want %s", key.ID(), v.Ed25519.Thumbprint)
	}
	for _, c := range [][2]string{{v.Ed25519.Payload, v.Ed25519.JWS}, {v.Example.Canonical, v.Example.JWS}} {
		jws, err := sign(key, header{Alg: algorithm}, []byte(c[0]))
		if err != nil || jws != c[1] {
			t.Errorf("%s, %v\nwant %s", jws, err, c[1])
		}
		payload, err := Verify(key.Public(), c[1])
		if err != nil || string(payload) != c[0] {
			t.Errorf("payload %q, %v", payload, err)
		}
	}
}

// RFC 8032 7.1: the raw signatures, through keys of this package.
func TestEd25519Vectors(t *testing.T) {
	t.Parallel()
	for name, c := range readSignVectors(t).RFC8032 {
		unhex := func(s string) []byte {
			raw, err := hex.DecodeString(s)
			if err != nil {
				t.Fatal(err)
			}
			return raw
		}
		form := jwk{Kty: "OKP", Crv: "Ed25519", D: b64.EncodeToString(unhex(c.Secret)), X: b64.EncodeToString(unhex(c.Public))}
		key, err := ParseKey(form.json())
		if err != nil {
			t.Fatalf("%s: %v", name, err)
		}
		if got := ed25519.Sign(key.private(), unhex(c.Message)); hex.EncodeToString(got) != c.Signature {
			t.Errorf("%s: signature %x", name, got)
		}
	}
}

func TestSignNamesItsKey(t *testing.T) {
	t.Parallel()
	key, err := GenerateKey()
	if err != nil {
		t.Fatal(err)
	}
	jws, err := Sign(key, []byte("payload"))
	if err != nil {
		t.Fatal(err)
	}
	raw, _ := decode64(strings.Split(jws, ".")[0])
	if want := `{"alg":"EdDSA","kid":"` + key.ID() + `"}`; string(raw) != want {
		t.Errorf("header %s, want %s", raw, want)
	}
	other, err := GenerateKey()
	if err != nil {
		t.Fatal(err)
	}
	if _, err := Verify(other.Public(), jws); !errors.Is(err, ErrOtherKey) {
		t.Errorf("%v, want ErrOtherKey", err)
	}
}

// forge signs any header and any payload text with the right key: only the checks before the
// signature can refuse it.
func forge(key Key, head, payload string) string {
	signed := b64.EncodeToString([]byte(head)) + "." + payload
	return signed + "." + b64.EncodeToString(ed25519.Sign(key.private(), []byte(signed)))
}

func TestVerifyRefusals(t *testing.T) {
	t.Parallel()
	v := readSignVectors(t)
	key := publishedTestKey(t)
	good := forge(key, `{"alg":"EdDSA"}`, "YQ")
	if _, err := Verify(key.Public(), good); err != nil {
		t.Fatal(err)
	}
	none := b64.EncodeToString([]byte(`{"alg":"none"}`)) + ".YQ."
	for _, c := range []struct {
		jws  string
		want error
	}{
		{v.HS256.JWS, ErrAlgorithm}, {none, ErrAlgorithm},
		{forge(key, `{"alg":"none"}`, "YQ"), ErrAlgorithm}, {forge(key, `{"alg":"eddsa"}`, "YQ"), ErrAlgorithm},
		{forge(key, `{"alg":"HS256"}`, "YQ"), ErrAlgorithm}, {forge(key, `{"alg":["EdDSA"]}`, "YQ"), ErrAlgorithm},
		{forge(key, `{}`, "YQ"), ErrAlgorithm}, {forge(key, `{"Alg":"EdDSA"}`, "YQ"), ErrAlgorithm},
		{forge(key, `{"alg":"EdDSA","crit":["b64"],"b64":false}`, "YQ"), ErrAlgorithm},
		{forge(key, `{"alg":"EdDSA","jwk":{}}`, "YQ"), ErrAlgorithm},
		{forge(key, `{"alg":"EdDSA","kid":"x"}`, "YQ"), ErrOtherKey}, {forge(key, `{"alg":"EdDSA","kid":null}`, "YQ"), ErrOtherKey},
		{forge(key, `{"alg":"EdDSA","alg":"EdDSA"}`, "YQ"), ErrMalformed}, {forge(key, `["alg"]`, "YQ"), ErrMalformed},
		{forge(key, `{"alg":"EdDSA"}`, "YR"), ErrMalformed}, {forge(key, `{"alg":"EdDSA"}`, "YQ=="), ErrMalformed},
		{forge(key, `{"alg":"EdDSA"}`, "Y\nQ"), ErrMalformed}, {forge(key, `{"alg":"EdDSA"}`, "Y+Q"), ErrMalformed},
		{good + ".", ErrMalformed}, {"." + good, ErrMalformed}, {good + "\n", ErrMalformed}, {" " + good, ErrMalformed},
		{"", ErrMalformed}, {"..", ErrMalformed}, {good[:strings.LastIndex(good, ".")+1], ErrSignature},
		{`{"payload":"YQ"}`, ErrMalformed},
	} {
		if payload, err := Verify(key.Public(), c.jws); !errors.Is(err, c.want) || payload != nil {
			t.Errorf("%q: %q, %v; want %v", c.jws, payload, err, c.want)
		}
	}
	if _, err := Verify(PublicKey{}, good); !errors.Is(err, ErrKey) {
		t.Errorf("no key: %v", err)
	}
	if _, err := Sign(Key{}, nil); !errors.Is(err, ErrKey) {
		t.Errorf("no key to sign: %v", err)
	}
}

// Every byte of a signed text, replaced by every other byte, left out, or preceded by any byte,
// is refused.
func TestEveryMutationRefused(t *testing.T) {
	t.Parallel()
	v := readSignVectors(t)
	key := publishedTestKey(t)
	named, err := Sign(key, []byte("a"))
	if err != nil {
		t.Fatal(err)
	}
	for _, jws := range []string{v.Ed25519.JWS, named} {
		refuse := func(what string, i int, mutant string) {
			if _, err := Verify(key.Public(), mutant); err == nil {
				t.Fatalf("byte %d %s: accepted %q", i, what, mutant)
			}
		}
		for i := range len(jws) {
			refuse("left out", i, jws[:i]+jws[i+1:])
			for c := range 256 {
				insert := string([]byte{byte(c)})
				refuse("preceded", i, jws[:i]+insert+jws[i:])
				if byte(c) != jws[i] {
					refuse("replaced", i, jws[:i]+insert+jws[i+1:])
				}
			}
		}
		for c := range 256 {
			refuse("followed", len(jws), jws+string([]byte{byte(c)}))
		}
	}
}

func TestKeyForms(t *testing.T) {
	t.Parallel()
	key, err := GenerateKey()
	if err != nil {
		t.Fatal(err)
	}
	for name, text := range map[string][]byte{"PEM": key.PEM(), "JWK": key.JWK()} {
		again, err := ParseKey(append([]byte("\n "), text...))
		if err != nil || !again.private().Equal(key.private()) {
			t.Errorf("%s: another private key, %v", name, err)
		}
		if _, err := ParsePublicKey(text); !errors.Is(err, ErrPrivateKey) {
			t.Errorf("%s taken for a public key: %v", name, err)
		}
	}
	for name, text := range map[string][]byte{"PEM": key.Public().PEM(), "JWK": key.Public().JWK()} {
		again, err := ParsePublicKey(text)
		if err != nil || again.ID() != key.ID() {
			t.Errorf("%s: another public key, %v", name, err)
		}
		if _, err := ParseKey(text); !errors.Is(err, ErrKey) {
			t.Errorf("%s taken for a private key: %v", name, err)
		}
	}
}

// The published key in each form, written by another implementation.
func TestPublishedKeyFiles(t *testing.T) {
	t.Parallel()
	for _, form := range []string{"jwk", "pem"} {
		key, err := ParseKey(testFile(t, "published-key.private."+form))
		if err != nil || key.ID() != publishedKey {
			t.Errorf("private %s: %v, %v", form, key, err)
		}
		public, err := ParsePublicKey(testFile(t, "published-key.public."+form))
		if err != nil || public.ID() != publishedKey {
			t.Errorf("public %s: %v, %v", form, public.ID(), err)
		}
	}
	key := publishedTestKey(t)
	if !bytes.Equal(key.PEM(), testFile(t, "published-key.private.pem")) || !bytes.Equal(key.Public().PEM(), testFile(t, "published-key.public.pem")) {
		t.Error("PEM differs from the other implementation's")
	}
}

func TestKeyRefusals(t *testing.T) {
	t.Parallel()
	other, err := ecdsa.GenerateKey(elliptic.P256(), rand.Reader)
	if err != nil {
		t.Fatal(err)
	}
	der, err := x509.MarshalPKCS8PrivateKey(other)
	if err != nil {
		t.Fatal(err)
	}
	key := publishedTestKey(t)
	x, d := key.Public().form().X, b64.EncodeToString(key.private().Seed())
	private := func(format string, args ...any) []byte { return fmt.Appendf(nil, format, args...) }
	for i, text := range [][]byte{
		nil, []byte("key"), []byte("{}"), []byte("[]"), pem.EncodeToMemory(&pem.Block{Type: "PRIVATE KEY", Bytes: der}),
		pem.EncodeToMemory(&pem.Block{Type: "PRIVATE KEY", Bytes: []byte("x")}), append(key.PEM(), key.PEM()...),
		private(`{"kty":"OKP","crv":"X25519","d":%q,"x":%q}`, d, x), private(`{"kty":"EC","crv":"Ed25519","d":%q,"x":%q}`, d, x),
		private(`{"kty":"OKP","crv":"Ed25519","d":%q,"x":%q}`, d, "A"+x[1:]), private(`{"kty":"OKP","crv":"Ed25519","d":%q}`, d),
		private(`{"kty":"OKP","crv":"Ed25519","d":%q,"x":%q}`, d+"AA", x), private(`{"kty":"OKP","crv":"Ed25519","d":%q,"d":%q,"x":%q}`, d, d, x),
		private(`{"kty":"OKP","crv":"Ed25519","D":%q,"x":%q}`, d, x), private(`{"kty":"OKP","crv":"Ed25519","x":"AA"}`),
	} {
		if key, err := ParseKey(text); !errors.Is(err, ErrKey) {
			t.Errorf("%d: private %v, %v", i, key, err)
		}
		if i == 13 {
			continue // a public key with a member nobody knows
		}
		if _, err := ParsePublicKey(text); err == nil {
			t.Errorf("%d: taken for a public key", i)
		}
	}
}

// No way of printing a key shows it.
func TestKeyNeverPrintsItself(t *testing.T) {
	t.Parallel()
	key := publishedTestKey(t)
	var out bytes.Buffer
	slog.New(slog.NewJSONHandler(&out, nil)).Info("m", "key", key)
	slog.New(slog.NewTextHandler(&out, nil)).Info("m", "key", key)
	for _, verb := range []string{"%v", "%+v", "%#v", "%s", "%q", "%x", "%d"} {
		for _, v := range []any{key, &key, struct{ K Key }{key}, struct{ k Key }{key}, []Key{key}, map[string]*Key{"k": &key}} {
			fmt.Fprintf(&out, verb+"\n", v)
		}
	}
	if _, err := json.Marshal(key); !errors.Is(err, ErrPrivateKey) {
		t.Errorf("a key became JSON: %v", err)
	}
	if _, err := Canonical(key); !errors.Is(err, ErrPrivateKey) {
		t.Errorf("a key became canonical JSON: %v", err)
	}
	seed := key.private().Seed()
	for _, secret := range []string{b64.EncodeToString(seed), hex.EncodeToString(seed), fmt.Sprint(seed[:4])[1:10], "0x9d"} {
		if strings.Contains(out.String(), secret) {
			t.Errorf("printed %s", secret)
		}
	}
	if !strings.Contains(out.String(), key.ID()) {
		t.Error("a printed key does not say its name")
	}
}
