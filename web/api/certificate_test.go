package api_test

import (
	"bytes"
	"strings"
	"testing"

	"ratehouse/store"
	"ratehouse/store/proof"
	"ratehouse/store/storetest"
	"ratehouse/web/api"
)

// A released paper comes with its record and the signature, and whoever has the key can check it.
func TestCertificate(t *testing.T) {
	t.Parallel()
	h := newHouse(t)
	h.Batch(t, "26-001", 1, func(n *store.NewBatch) { n.Entry = store.EntryRate })
	h.Run(t, "26-001", [][]string{strings.Fields("1.2 0.8 -0.5 -0.9 2.1 2.0 1.1 0.7 -0.4 1.9 1.5 1.6 1.8 1.0 1.1")})
	released, err := h.Release(t.Context(), h.Lead, "26-001", []string{storetest.Serial(1)})
	if err != nil || len(released) != 1 || released[0].Number == "" {
		t.Fatalf("released %+v, %v", released, err)
	}
	var c api.Certificate
	h.call(t, h.all, "GET", "/api/v1/certificates/"+released[0].Number, "").want(t, 200, "").into(t, &c)
	if c.Number != released[0].Number || c.RevokedAt != nil || c.VerifyCode == "" {
		t.Errorf("%+v", c)
	}
	pub, err := proof.ParsePublicKey(c.PublicKey)
	if err != nil {
		t.Fatal(err)
	}
	record, err := proof.Open(pub, c.JWS)
	if err != nil {
		t.Fatal(err)
	}
	if text, err := record.Canonical(); err != nil || !bytes.Equal(text, c.Record) {
		t.Errorf("the record shown is not the one signed: %v\n%s\n%s", err, text, c.Record)
	}
	if m := h.movement(t, 1); m.Paper == nil || m.Paper.Number != c.Number || m.Paper.Kind != "certificate" {
		t.Errorf("the movement names the paper %+v", m.Paper)
	}
	wantStatus(t, h.post(t, h.all, h.rate(1, 1, "1.3").with("base", 1, "reason", "x"))[0], "refused", "released")
	if err := h.Revoke(t.Context(), h.Lead, c.Number, "clock was off"); err != nil {
		t.Fatal(err)
	}
	h.call(t, h.all, "GET", "/api/v1/certificates/"+c.Number, "").want(t, 200, "").into(t, &c)
	if c.RevokedAt == nil || c.Revoked != "clock was off" {
		t.Errorf("after revoking: %+v %q", c.RevokedAt, c.Revoked)
	}
	h.call(t, h.all, "GET", "/api/v1/certificates/NO-SUCH", "").want(t, 404, "no_certificate")
	h.call(t, h.all, "GET", "/api/v1/certificates/N%00", "").want(t, 404, "no_certificate")
	// A number already certified for this depositor is not taken in again.
	again := newBatch.with("code", "26-002", "serials", []string{storetest.Serial(1)})
	h.call(t, h.all, "POST", "/api/v1/batches", again.String()).want(t, 201, "") // revoked: nothing stands against it
}
