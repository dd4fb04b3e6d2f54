package store

import (
	"context"
	"crypto/rand"
	"crypto/sha256"
	"crypto/subtle"
	"encoding/base64"
	"errors"
	"fmt"
	"regexp"
	"strconv"
	"strings"
	"time"
	"unicode/utf8"

	"github.com/google/uuid"
	"github.com/jackc/pgx/v5"
	"golang.org/x/crypto/argon2"

	"ratehouse/store/rows"
)

// Account is a person who works here or looks in.
type Account struct {
	ID       uuid.UUID
	Name     string // log-in name
	Title    string // name on papers
	Role     Role
	Language string
	Disabled bool
	MadeAt   time.Time
}

// NewAccount is what a manager types to let somebody in.
type NewAccount struct {
	Name, Title, Password string
	Role                  Role
	Language              string
}

const (
	passwordLeast  = 12 // characters; NIST SP 800-63B-4 asks for 15 alone, 8 with a second factor (from memory)
	passwordMost   = 256
	sessionIdle    = 12 * time.Hour
	sessionWhole   = 7 * 24 * time.Hour
	sessionTouched = time.Minute
)

var accountName = regexp.MustCompile(`^[a-z0-9][a-z0-9._-]{0,39}$`)

// AddAccount lets somebody in. The program adds the first manager, managers add the others.
func (l *Lab) AddAccount(ctx context.Context, a Actor, n NewAccount) (Account, error) {
	n.Name, n.Title = strings.TrimSpace(n.Name), strings.TrimSpace(n.Title)
	if err := n.check(); err != nil {
		return Account{}, err
	}
	secret, err := l.hashPassword(ctx, n.Password)
	if err != nil {
		return Account{}, err
	}
	made := Account{ID: l.newID(), Name: n.Name, Title: n.Title, Role: n.Role, Language: n.Language, MadeAt: l.Now()}
	err = l.do(ctx, a, verb{"add_account", RightAccounts}, func(w *work) error {
		w.act.Body = map[string]any{"account": made.ID.String(), "name": n.Name, "title": n.Title, "role": string(n.Role)}
		rows.QueueAccount(w.out, rows.Account{ID: made.ID, Site: l.site, Name: n.Name, Title: n.Title, Role: string(n.Role),
			Secret: &secret, Language: optional(n.Language), MadeAt: made.MadeAt})
		return nil
	})
	return made, err
}

func (n NewAccount) check() error {
	var f faults
	if !accountName.MatchString(n.Name) {
		f.add(invalid("name", "account_name_form"))
	}
	if n.Title == "" {
		f.add(invalid("title", "needed"))
	}
	if rights[n.Role] == nil {
		f.add(invalid("role", "unknown_role"))
	}
	switch size := utf8.RuneCountInString(n.Password); {
	case size < passwordLeast:
		f.add(invalid("password", "password_short", "least", fmt.Sprint(passwordLeast)))
	case size > passwordMost:
		f.add(invalid("password", "password_long", "most", fmt.Sprint(passwordMost)))
	}
	if n.Language != "" && n.Language != "en" && n.Language != "fr" && n.Language != "de" {
		f.add(invalid("language", "unknown_language"))
	}
	return f.err()
}

// Accounts lists everybody, by name.
func (l *Lab) Accounts(ctx context.Context, a Actor) ([]Account, error) {
	if !a.May(RightAccounts) {
		return nil, failure(KindForbidden, "not_allowed", "right", string(RightAccounts))
	}
	list, err := rows.Accounts(ctx, l.pool, l.site)
	if err != nil {
		return nil, fmt.Errorf("accounts: %w", err)
	}
	out := make([]Account, len(list))
	for i, r := range list {
		out[i] = accountOf(r)
	}
	return out, nil
}

func accountOf(r rows.Account) Account {
	return Account{ID: r.ID, Name: r.Name, Title: r.Title, Role: Role(r.Role), Language: value(r.Language),
		Disabled: r.DisabledAt != nil, MadeAt: r.MadeAt}
}

// DisableAccount locks somebody out and ends the sessions; what was read under the name stays.
func (l *Lab) DisableAccount(ctx context.Context, a Actor, name string) error {
	return l.do(ctx, a, verb{"disable_account", RightAccounts}, func(w *work) error {
		var found []rows.Account
		b := &pgx.Batch{}
		rows.FindAccount(b, &found, l.site, name)
		if err := w.read(ctx, b); err != nil {
			return err
		}
		if len(found) == 0 {
			return failure(KindNotFound, "no_account", "name", name)
		}
		w.act.Body = map[string]any{"account": found[0].ID.String()}
		rows.QueueDisable(w.out, found[0].ID, w.now)
		return nil
	})
}

// LogIn checks a password and starts a session. A wrong name costs as much time as a wrong
// password, so that names cannot be told apart.
func (l *Lab) LogIn(ctx context.Context, name, password string) (token string, a Actor, err error) {
	found, err := rows.AccountByName(ctx, l.pool, l.site, name)
	if err != nil && !errors.Is(err, pgx.ErrNoRows) {
		return "", a, fmt.Errorf("log in: %w", err)
	}
	secret := value(found.Secret)
	if secret == "" {
		secret = l.nobody()
	}
	ok, err := l.checkPassword(ctx, secret, password)
	if err != nil {
		return "", a, err
	}
	if !ok || found.Secret == nil || found.DisabledAt != nil {
		return "", a, failure(KindUnauthenticated, "log_in_failed")
	}
	raw := make([]byte, 32)
	rand.Read(raw)
	token = base64.RawURLEncoding.EncodeToString(raw)
	hash := sha256.Sum256([]byte(token))
	now := l.Now()
	if err := rows.AddSession(ctx, l.pool, hash[:], found.ID, now, now.Add(sessionWhole)); err != nil {
		return "", a, fmt.Errorf("log in: %w", err)
	}
	return token, actorOf(found, hash[:]), nil
}

func actorOf(r rows.Account, session []byte) Actor {
	return Actor{Account: r.ID, Name: r.Name, Title: r.Title, Role: Role(r.Role), Via: "page", Language: value(r.Language), session: session}
}

// Session tells whose session the token is. It costs one query; the time it was seen is written
// at most once a minute.
func (l *Lab) Session(ctx context.Context, token string) (Actor, error) {
	return l.session(ctx, token, true)
}

// PeekSession is Session for what nobody asked for, such as a page that draws itself anew: the session
// ends as if it had not been used.
func (l *Lab) PeekSession(ctx context.Context, token string) (Actor, error) {
	return l.session(ctx, token, false)
}

func (l *Lab) session(ctx context.Context, token string, used bool) (Actor, error) {
	hash := sha256.Sum256([]byte(token))
	now := l.Now()
	s, err := rows.SessionByHash(ctx, l.pool, hash[:])
	if errors.Is(err, pgx.ErrNoRows) || err == nil && (s.DisabledAt != nil || now.After(s.EndsAt) || now.Sub(s.SeenAt) > sessionIdle) {
		return Actor{}, failure(KindUnauthenticated, "session_over")
	}
	if err != nil {
		return Actor{}, fmt.Errorf("session: %w", err)
	}
	if used && now.Sub(s.SeenAt) > sessionTouched {
		if err := rows.TouchSession(ctx, l.pool, hash[:], now); err != nil {
			return Actor{}, fmt.Errorf("session: %w", err)
		}
	}
	return actorOf(s.Account(), hash[:]), nil
}

// LogOut ends the session.
func (l *Lab) LogOut(ctx context.Context, token string) error {
	hash := sha256.Sum256([]byte(token))
	if err := rows.EndSession(ctx, l.pool, hash[:]); err != nil {
		return fmt.Errorf("log out: %w", err)
	}
	return nil
}

// SetLanguage remembers the language that the actor wants to be spoken to in.
func (l *Lab) SetLanguage(ctx context.Context, a Actor, language string) error {
	if language != "en" && language != "fr" && language != "de" {
		return invalid("language", "unknown_language")
	}
	return l.do(ctx, a, verb{"set_language", RightSelf}, func(w *work) error {
		w.act.Body = map[string]any{"language": language}
		rows.QueueLanguage(w.out, a.Account, language)
		return nil
	})
}

// argon2id with 64 MiB, one pass, two lanes: 44 ms on the reference machine (platform notes). What a
// secret was made with stands in it, so that the cost can be raised later.
const argonTime, argonMemory, argonLanes, argonKey = 1, 64 * 1024, 2, 32

// nobody is a secret that no password opens; checked when the name is unknown.
func (l *Lab) nobody() string {
	return fmt.Sprintf("argon2id$%d$AAAAAAAAAAAAAAAAAAAAAA$AAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAAA", l.memory)
}

func (l *Lab) hashPassword(ctx context.Context, password string) (string, error) {
	salt := make([]byte, 16)
	rand.Read(salt)
	key, err := l.argonKey(ctx, password, salt, l.memory)
	if err != nil {
		return "", err
	}
	e := base64.RawStdEncoding
	return fmt.Sprintf("argon2id$%d$%s$%s", l.memory, e.EncodeToString(salt), e.EncodeToString(key)), nil
}

func (l *Lab) checkPassword(ctx context.Context, secret, password string) (bool, error) {
	parts := strings.Split(secret, "$")
	if len(parts) != 4 || parts[0] != "argon2id" || utf8.RuneCountInString(password) > passwordMost {
		return false, nil
	}
	memory, err0 := strconv.ParseUint(parts[1], 10, 32)
	salt, err1 := base64.RawStdEncoding.DecodeString(parts[2])
	want, err2 := base64.RawStdEncoding.DecodeString(parts[3])
	if err := errors.Join(err0, err1, err2); err != nil {
		return false, fmt.Errorf("stored secret: %w", err)
	}
	key, err := l.argonKey(ctx, password, salt, uint32(memory))
	return err == nil && subtle.ConstantTimeCompare(key, want) == 1, err
}

func (l *Lab) argonKey(ctx context.Context, password string, salt []byte, memory uint32) ([]byte, error) {
	select {
	case l.argon <- struct{}{}:
		defer func() { <-l.argon }()
	case <-ctx.Done():
		return nil, ctx.Err()
	}
	return argon2.IDKey([]byte(password), salt, argonTime, memory, argonLanes, argonKey), nil
}

func optional(s string) *string {
	if s == "" {
		return nil
	}
	return &s
}

func value[T any](p *T) T {
	if p == nil {
		var zero T
		return zero
	}
	return *p
}
