package proof

import (
	"bytes"
	"crypto/ed25519"
	"crypto/sha256"
	"crypto/x509"
	"encoding/base64"
	"encoding/pem"
	"errors"
	"fmt"
	"io"
	"strings"
)

// Errors of keys and signatures.
var (
	// ErrKey: what was given is not an Ed25519 key in PEM or JWK form, or its halves do not match.
	ErrKey = errors.New("not an Ed25519 key")
	// ErrPrivateKey: a private key was given where the public one is wanted.
	ErrPrivateKey = errors.New("this is a private key: keep it secret and give the public one")
	// ErrMalformed: the text is not a compact JWS: three parts of base64url, joined by points.
	ErrMalformed = errors.New("not a signed document in compact form")
	// ErrAlgorithm: the header names another algorithm than EdDSA, or members nobody here writes.
	ErrAlgorithm = errors.New("signature algorithm is not EdDSA alone")
	// ErrOtherKey: the document says that it was signed with another key.
	ErrOtherKey = errors.New("signed with another key")
	// ErrSignature: the signature does not belong to this document and key.
	ErrSignature = errors.New("signature does not match: the document was altered, or signed with another key")
)

// algorithm is the only one ever written or accepted (RFC 8037 3.1).
const algorithm = "EdDSA"

// b64 refuses padding and stray bits at the end, so that one value has one text. Line ends
// must be refused apart: the decoder skips them.
var b64 = base64.RawURLEncoding.Strict()

func decode64(s string) ([]byte, error) {
	if strings.ContainsAny(s, "\r\n") {
		return nil, ErrMalformed
	}
	raw, err := b64.DecodeString(s)
	if err != nil {
		return nil, ErrMalformed
	}
	return raw, nil
}

// Key is a private Ed25519 key. It never prints itself: the bytes stand behind a function,
// because fmt walks the unexported fields of other types without asking Format, and follows
// a pointer there when the verb does not fit (%s).
type Key struct{ private func() ed25519.PrivateKey }

func newKey(private ed25519.PrivateKey) Key {
	return Key{func() ed25519.PrivateKey { return private }}
}

// PublicKey is the half of a Key that checks signatures.
type PublicKey struct{ public ed25519.PublicKey }

// jwk is a key as RFC 8037 2 writes it.
type jwk struct {
	Kty string `json:"kty"`
	Crv string `json:"crv"`
	D   string `json:"d,omitempty"`
	X   string `json:"x"`
}

// GenerateKey makes a key from the system's random source.
func GenerateKey() (Key, error) {
	_, private, err := ed25519.GenerateKey(nil)
	if err != nil {
		return Key{}, err
	}
	return newKey(private), nil
}

// ParseKey reads a private key: PEM with PKCS #8, or a JWK. It fails with ErrKey.
func ParseKey(text []byte) (Key, error) {
	block, form, err := keyForm(text)
	switch {
	case err != nil:
		return Key{}, err
	case block == nil:
		return form.private()
	case block.Type != "PRIVATE KEY":
		return Key{}, fmt.Errorf("PEM block %q: %w", block.Type, ErrKey)
	}
	parsed, err := x509.ParsePKCS8PrivateKey(block.Bytes)
	private, ok := parsed.(ed25519.PrivateKey)
	if err != nil || !ok {
		return Key{}, ErrKey
	}
	return newKey(private), nil
}

// ParsePublicKey reads a public key: PEM (SubjectPublicKeyInfo) or a JWK. It fails with ErrKey,
// and with ErrPrivateKey if the text holds a private one.
func ParsePublicKey(text []byte) (PublicKey, error) {
	block, form, err := keyForm(text)
	switch {
	case err != nil:
		return PublicKey{}, err
	case block == nil && form.D != "", block != nil && strings.HasSuffix(block.Type, "PRIVATE KEY"):
		return PublicKey{}, ErrPrivateKey
	case block == nil:
		return form.public()
	case block.Type != "PUBLIC KEY":
		return PublicKey{}, fmt.Errorf("PEM block %q: %w", block.Type, ErrKey)
	}
	parsed, err := x509.ParsePKIXPublicKey(block.Bytes)
	public, ok := parsed.(ed25519.PublicKey)
	if err != nil || !ok {
		return PublicKey{}, ErrKey
	}
	return PublicKey{public}, nil
}

// keyForm tells PEM from JWK; exactly one of block and form is set.
func keyForm(text []byte) (*pem.Block, jwk, error) {
	if text = bytes.TrimSpace(text); !bytes.HasPrefix(text, []byte("{")) {
		block, rest := pem.Decode(text)
		if block == nil || len(bytes.TrimSpace(rest)) > 0 {
			return nil, jwk{}, ErrKey
		}
		return block, jwk{}, nil
	}
	form, err := readJWK(text)
	return nil, form, err
}

// readJWK reads the members this package needs, by their exact names, and skips all others.
func readJWK(text []byte) (jwk, error) {
	v, err := parseJSON(text)
	if err != nil {
		return jwk{}, fmt.Errorf("%w: %w", ErrKey, err)
	}
	members, _ := v.(map[string]any)
	member := func(name string) string {
		s, _ := members[name].(string)
		return s
	}
	form := jwk{Kty: member("kty"), Crv: member("crv"), D: member("d"), X: member("x")}
	if form.Kty != "OKP" || form.Crv != "Ed25519" {
		return jwk{}, ErrKey
	}
	return form, nil
}

func (j jwk) public() (PublicKey, error) {
	x, err := decode64(j.X)
	if err != nil || len(x) != ed25519.PublicKeySize {
		return PublicKey{}, ErrKey
	}
	return PublicKey{x}, nil
}

func (j jwk) private() (Key, error) {
	d, err := decode64(j.D)
	if err != nil || len(d) != ed25519.SeedSize {
		return Key{}, ErrKey
	}
	key := newKey(ed25519.NewKeyFromSeed(d))
	if key.Public().form().X != j.X {
		return Key{}, fmt.Errorf("x does not belong to d: %w", ErrKey)
	}
	return key, nil
}

// IsZero reports whether k holds no key.
func (k Key) IsZero() bool { return k.private == nil }

// Public gives the public half.
func (k Key) Public() PublicKey { return PublicKey{k.private().Public().(ed25519.PublicKey)} }

// ID is the key's name: the thumbprint of its public half.
func (k Key) ID() string { return k.Public().ID() }

// PEM gives the private key as PKCS #8. Whoever has it can sign in the laboratory's name.
func (k Key) PEM() []byte {
	der, err := x509.MarshalPKCS8PrivateKey(k.private())
	if err != nil {
		panic(err) // only for key types it does not know
	}
	return pem.EncodeToMemory(&pem.Block{Type: "PRIVATE KEY", Bytes: der})
}

// JWK gives the private key as JSON (RFC 8037 A.1). Whoever has it can sign in the
// laboratory's name.
func (k Key) JWK() []byte {
	form := k.Public().form()
	form.D = b64.EncodeToString(k.private().Seed())
	return form.json()
}

// Format prints the key's name whatever the verb, so that no log ever holds the key.
func (k Key) Format(f fmt.State, _ rune) {
	name := "no key"
	if !k.IsZero() {
		name = "key " + k.ID()
	}
	_, _ = io.WriteString(f, name)
}

// MarshalJSON refuses: a key leaves only by PEM and JWK, on purpose.
func (k Key) MarshalJSON() ([]byte, error) { return nil, ErrPrivateKey }

// IsZero reports whether p holds no key.
func (p PublicKey) IsZero() bool { return p.public == nil }

// ID is the RFC 7638 thumbprint of the key: base64url of the SHA-256 of its canonical JWK.
func (p PublicKey) ID() string {
	sum := sha256.Sum256(p.JWK())
	return b64.EncodeToString(sum[:])
}

// PEM gives the public key as SubjectPublicKeyInfo.
func (p PublicKey) PEM() []byte {
	der, err := x509.MarshalPKIXPublicKey(p.public)
	if err != nil {
		panic(err) // only for key types it does not know
	}
	return pem.EncodeToMemory(&pem.Block{Type: "PUBLIC KEY", Bytes: der})
}

// JWK gives the public key as canonical JSON (RFC 8037 2) with the members RFC 7638 hashes.
func (p PublicKey) JWK() []byte { return p.form().json() }

func (p PublicKey) form() jwk {
	return jwk{Kty: "OKP", Crv: "Ed25519", X: b64.EncodeToString(p.public)}
}

func (j jwk) json() []byte {
	raw, err := Canonical(j)
	if err != nil {
		panic(err) // a fixed form of ASCII strings
	}
	return raw
}

// header is the protected header of every document signed here.
type header struct {
	Alg string `json:"alg"`
	Kid string `json:"kid,omitempty"`
}

// Sign gives payload as a compact JWS (RFC 7515 7.1) with algorithm EdDSA and the key's
// thumbprint in its header. Ed25519 is deterministic: the same input gives the same text.
func Sign(key Key, payload []byte) (string, error) {
	if key.IsZero() {
		return "", ErrKey
	}
	return sign(key, header{algorithm, key.ID()}, payload)
}

func sign(key Key, h header, payload []byte) (string, error) {
	raw, err := Canonical(h)
	if err != nil {
		return "", err
	}
	signed := b64.EncodeToString(raw) + "." + b64.EncodeToString(payload)
	return signed + "." + b64.EncodeToString(ed25519.Sign(key.private(), []byte(signed))), nil
}

// Verify checks a compact JWS over the bytes as received and gives its payload. The algorithm
// is EdDSA whatever the header says; a header that says another, or has members beside alg
// and kid, is refused with ErrAlgorithm, one that names another key with ErrOtherKey. Other
// errors: ErrMalformed, ErrSignature, ErrKey.
func Verify(pub PublicKey, jws string) ([]byte, error) {
	if pub.IsZero() {
		return nil, ErrKey
	}
	parts := strings.Split(jws, ".")
	if len(parts) != 3 {
		return nil, ErrMalformed
	}
	var raw [3][]byte
	for i, part := range parts {
		var err error
		if raw[i], err = decode64(part); err != nil {
			return nil, err
		}
	}
	if err := checkHeader(pub, raw[0]); err != nil {
		return nil, err
	}
	signed := jws[:len(parts[0])+1+len(parts[1])]
	if !ed25519.Verify(pub.public, []byte(signed), raw[2]) {
		return nil, ErrSignature
	}
	return raw[1], nil
}

func checkHeader(pub PublicKey, raw []byte) error {
	v, err := parseJSON(raw)
	members, ok := v.(map[string]any)
	if err != nil || !ok {
		return ErrMalformed
	}
	if members["alg"] != algorithm {
		return ErrAlgorithm
	}
	kid, named := members["kid"]
	if len(members) != 1 && !(named && len(members) == 2) {
		return ErrAlgorithm
	}
	if named && kid != pub.ID() {
		return ErrOtherKey
	}
	return nil
}
