package store

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"math"
	"strconv"
	"strings"
	"time"

	"github.com/jackc/pgx/v5"

	"ratehouse/store/proof"
	"ratehouse/store/rows"
)

// Certificate is a paper as it was frozen, and what happened to it since.
type Certificate struct {
	Record     proof.Record
	No         int // of the movement in its batch
	JWS        string
	Code       string // to be read aloud and typed beside the number
	PublicKey  string // JWK
	Replaces   string
	ReplacedBy string
	RevokedAt  time.Time
	Revoked    string // why
}

// Certificate is one paper by its number.
func (l *Lab) Certificate(ctx context.Context, a Actor, number string) (Certificate, error) {
	if !a.May(RightCertificates) {
		return Certificate{}, failure(KindForbidden, "not_allowed", "right", string(RightCertificates))
	}
	return l.paper(ctx, number)
}

func (l *Lab) paper(ctx context.Context, number string) (Certificate, error) {
	row, err := rows.CertificateByNumber(ctx, l.pool, l.site, number)
	if errors.Is(err, pgx.ErrNoRows) {
		return Certificate{}, failure(KindNotFound, "no_certificate", "number", number)
	}
	if err != nil {
		return Certificate{}, fmt.Errorf("certificate %s: %w", number, err)
	}
	return paperOf(row)
}

// paperOf opens a stored paper with its signature checked: what was altered in the database, or put
// under another number, is not shown as a paper.
func paperOf(row rows.Certificate) (Certificate, error) {
	c := Certificate{No: int(row.No), JWS: row.JWS, PublicKey: value(row.PublicJWK), Replaces: value(row.Replaces), ReplacedBy: value(row.ReplacedBy),
		RevokedAt: value(row.RevokedAt).UTC(), Revoked: value(row.Revoked)}
	pub, err := proof.ParsePublicKey([]byte(c.PublicKey))
	if err != nil {
		return Certificate{}, fmt.Errorf("certificate %s: key: %w", row.Number, err)
	}
	if c.Record, err = proof.Open(pub, row.JWS); err != nil {
		return Certificate{}, fmt.Errorf("certificate %s: %w", row.Number, err)
	}
	hash, err := c.Record.Hash()
	if err != nil {
		return Certificate{}, fmt.Errorf("certificate %s: %w", row.Number, err)
	}
	if c.Record.Number != row.Number || !bytes.Equal(hash[:], row.Hash) {
		return Certificate{}, fmt.Errorf("certificate %s: the signed record is that of %s", row.Number, c.Record.Number)
	}
	c.Code = proof.ShortCode(hash)
	return c, nil
}

// Paper is a released paper without its record: for lists.
type Paper struct {
	Number     string
	No         int // of the movement in its batch
	Serial     string
	Kind       string // "certificate", "rejection"
	At         time.Time
	By         string // who released it
	Replaces   string
	ReplacedBy string
	RevokedAt  time.Time
	Revoked    string // why
}

// Valid tells whether the paper was neither taken back nor replaced.
func (p Paper) Valid() bool { return p.RevokedAt.IsZero() && p.ReplacedBy == "" }

// Papers lists the papers of a batch in the order of its movements, revoked and replaced ones too.
func (l *Lab) Papers(ctx context.Context, a Actor, code string) ([]Paper, error) {
	if !a.May(RightCertificates) {
		return nil, failure(KindForbidden, "not_allowed", "right", string(RightCertificates))
	}
	var (
		list []rows.Paper
		b    = &pgx.Batch{}
	)
	rows.PapersOf(b, &list, l.site, code)
	if err := rows.Run(ctx, l.pool, b); err != nil {
		return nil, fmt.Errorf("papers of batch %s: %w", code, err)
	}
	out := make([]Paper, len(list))
	for i, r := range list {
		out[i] = Paper{Number: r.Number, No: int(r.No), Serial: r.Serial, Kind: r.Kind, At: r.At.UTC(), By: r.By, Replaces: value(r.Replaces),
			ReplacedBy: value(r.ReplacedBy), RevokedAt: value(r.RevokedAt).UTC(), Revoked: value(r.Revoked)}
	}
	return out, nil
}

// Certificates opens the valid papers of a batch in the order of its movements, at most so many after
// the movement with number after: a batch of 5,000 is printed in parts.
func (l *Lab) Certificates(ctx context.Context, a Actor, code string, after, most int) ([]Certificate, error) {
	if !a.May(RightCertificates) {
		return nil, failure(KindForbidden, "not_allowed", "right", string(RightCertificates))
	}
	list, err := rows.CertificatesAfter(ctx, l.pool, l.site, code, int16(min(max(after, 0), math.MaxInt16)), most)
	if err != nil {
		return nil, fmt.Errorf("certificates of batch %s: %w", code, err)
	}
	out := make([]Certificate, len(list))
	for i, row := range list {
		if out[i], err = paperOf(row); err != nil {
			return nil, err
		}
	}
	return out, nil
}

// Verify tells the public whether a paper is genuine. It wants the number and the code printed on
// it, never the number alone, so that papers cannot be listed; a wrong code answers like a wrong
// number.
func (l *Lab) Verify(ctx context.Context, number, code string) (Certificate, error) {
	typed, err := proof.ParseShortCode(code)
	if err != nil {
		return Certificate{}, invalid("code", "paper_code_form")
	}
	unknown := failure(KindNotFound, "no_such_paper")
	c, err := l.paper(ctx, strings.ToUpper(strings.TrimSpace(number)))
	if KindOf(err) == KindNotFound {
		return Certificate{}, unknown
	}
	if err != nil {
		return Certificate{}, err
	}
	hash, err := c.Record.Hash()
	if err != nil {
		return Certificate{}, err
	}
	if !typed.Matches(hash) {
		return Certificate{}, unknown
	}
	return c, nil
}

// Revoke takes a paper back for a reason; it stays readable, marked. The movement can then be
// corrected and released again: the new paper names the one it replaces and this reason.
func (l *Lab) Revoke(ctx context.Context, a Actor, number, reason string) error {
	if reason = strings.TrimSpace(reason); reason == "" {
		return invalid("reason", "needed")
	}
	c, err := l.Certificate(ctx, a, number)
	if err != nil {
		return err
	}
	if !c.RevokedAt.IsZero() {
		return failure(KindConflict, "revoked_already", "number", number)
	}
	return l.do(ctx, a, verb{"revoke", RightRelease}, func(w *work) error {
		w.act.Reason = &reason
		w.act.Body = map[string]any{"number": number, "reason": reason}
		rows.QueueRevocation(w.out, number, reason, w.now, w.act.ID)
		return nil
	})
}

// paperNumber is the number of a movement's nth paper: batch and number within it, and from the
// second paper on how many there were.
func paperNumber(batch string, no int16, nth int) string {
	number := fmt.Sprintf("%s-%04d", batch, no)
	if nth > 1 {
		number += "-" + strconv.Itoa(nth)
	}
	return number
}
