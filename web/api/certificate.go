package api

import (
	"context"
	"encoding/json"
	"net/http"
	"time"

	"github.com/danielgtaylor/huma/v2"

	"ratehouse/store"
)

func (a *API) certificateRoutes() {
	op := operation(http.MethodGet, "/certificates/{number}", "get-certificate", "A released paper: its record and the signature over it", store.RightCertificates, http.StatusNotFound)
	huma.Register(a.huma, op, answering(a, a.getCertificate))
}

// Certificate is a paper as it was frozen, and what happened to it since.
type Certificate struct {
	Number     string     `json:"number"`
	VerifyCode string     `json:"verify_code" doc:"typed beside the number to verify the paper"`
	Record     Record     `json:"record"`
	JWS        string     `json:"jws" doc:"the canonical record, signed: JWS in compact form, EdDSA"`
	PublicKey  Record     `json:"public_key" doc:"JWK that verifies it"`
	Replaces   string     `json:"replaces,omitempty"`
	ReplacedBy string     `json:"replaced_by,omitempty"`
	RevokedAt  *time.Time `json:"revoked_at,omitempty"`
	Revoked    string     `json:"revoked_because,omitempty"`
}

// Record is an object given exactly as it was stored; its own schema member says which form it has.
type Record json.RawMessage

// MarshalJSON gives the text unchanged.
func (r Record) MarshalJSON() ([]byte, error) { return r, nil }

// UnmarshalJSON keeps the text as it came.
func (r *Record) UnmarshalJSON(text []byte) error {
	*r = append((*r)[:0], text...)
	return nil
}

// Schema says no more than that it is an object.
func (Record) Schema(huma.Registry) *huma.Schema {
	return &huma.Schema{Type: huma.TypeObject, AdditionalProperties: true}
}

type numberIn struct {
	Number string `path:"number" doc:"number of the paper"`
}

type certificateOut struct {
	Body Certificate
}

func (a *API) getCertificate(ctx context.Context, in *numberIn) (*certificateOut, error) {
	if err := sane(in.Number, "no_certificate", "number", printable(in.Number)); err != nil {
		return nil, err
	}
	c, err := a.lab.Certificate(ctx, actorOf(ctx), in.Number)
	if err != nil {
		return nil, err
	}
	record, err := c.Record.Canonical()
	if err != nil {
		return nil, err
	}
	out := &certificateOut{Certificate{Number: c.Record.Number, VerifyCode: c.Code, Record: record, JWS: c.JWS, PublicKey: Record(c.PublicKey),
		Replaces: c.Replaces, ReplacedBy: c.ReplacedBy, Revoked: c.Revoked}}
	if !c.RevokedAt.IsZero() {
		out.Body.RevokedAt = &c.RevokedAt
	}
	return out, nil
}
