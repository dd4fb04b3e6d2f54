package proof

import (
	"bytes"
	"encoding/json"
	"errors"
	"fmt"
)

// Errors of records.
var (
	// ErrSchema: the document is signed, but is no certificate record of a known version.
	ErrSchema = errors.New("not a certificate record of a version this program knows")
	// ErrNotCanonical: the signed bytes are not the canonical form of the record in them.
	ErrNotCanonical = errors.New("record is not in canonical form")
	// ErrInconsistent: the record is incomplete or contradicts itself; see Faults.
	ErrInconsistent = errors.New("record contradicts itself or is incomplete")
	// ErrPublishedKey: a record not marked as a demonstration, and a key whose private half is
	// printed in RFC 8037 and proves nothing.
	ErrPublishedKey = errors.New("the key is a published example: anybody can sign with it")
)

// publishedKey is the thumbprint of the key of RFC 8037 A.1 and A.3.
const publishedKey = "kPrK_qmxVWaYVA9wwBF6Iuo3vVzz7TxHCTwXBygrS4k"

// MaxFile bounds what VerifyFile reads as one record, in bytes.
const MaxFile = 4 << 20

// Issue checks a record and signs its canonical form. It fails with Faults, with
// ErrPublishedKey, or as Canonical and Sign do.
func Issue(key Key, r Record) (string, error) {
	if err := r.Check(); err != nil {
		return "", err
	}
	if key.IsZero() {
		return "", ErrKey
	}
	if key.ID() == publishedKey && !r.Demo {
		return "", ErrPublishedKey
	}
	raw, err := r.Canonical()
	if err != nil {
		return "", err
	}
	return Sign(key, raw)
}

// Open checks a signed record and gives what it states. Nothing of the record is returned
// unless the signature holds, the bytes are canonical, every field is known and present, and
// the record is consistent. Errors: those of Verify, ErrSchema, ErrNotCanonical, Faults,
// ErrPublishedKey.
func Open(pub PublicKey, jws string) (Record, error) {
	payload, err := Verify(pub, jws)
	if err != nil {
		return Record{}, err
	}
	r, err := readRecord(payload)
	if err != nil {
		return Record{}, err
	}
	if err := r.Check(); err != nil {
		return Record{}, err
	}
	if !r.Demo && pub.ID() == publishedKey {
		return Record{}, ErrPublishedKey
	}
	return r, nil
}

// readRecord reads the record in a signed payload. Writing it again must give the same bytes,
// which proves that no field was missing, unknown, or understood otherwise.
func readRecord(payload []byte) (Record, error) {
	canonical, err := CanonicalJSON(payload)
	if err != nil {
		return Record{}, fmt.Errorf("%w: %w", ErrNotCanonical, err)
	}
	if !bytes.Equal(canonical, payload) {
		return Record{}, ErrNotCanonical
	}
	var named struct {
		Schema  string `json:"schema"`
		Version int    `json:"schema_version"`
	}
	if err := json.Unmarshal(payload, &named); err != nil || named.Schema != SchemaName || named.Version != SchemaVersion {
		return Record{}, ErrSchema
	}
	var r Record
	if err := json.Unmarshal(payload, &r); err != nil {
		return Record{}, fmt.Errorf("%w: %w", ErrSchema, err)
	}
	again, err := r.Canonical()
	if err != nil || !bytes.Equal(again, payload) {
		return Record{}, fmt.Errorf("%w: a field is missing, unknown or of another form", ErrSchema)
	}
	return r, nil
}

// VerifyFile is Open for the content of a file: one line end after the signature is allowed,
// anything else around it is not.
func VerifyFile(pub PublicKey, file []byte) (Record, error) {
	if len(file) > MaxFile {
		return Record{}, fmt.Errorf("%w: longer than %d bytes", ErrMalformed, MaxFile)
	}
	file = bytes.TrimSuffix(file, []byte("\n"))
	file = bytes.TrimSuffix(file, []byte("\r"))
	return Open(pub, string(file))
}
