package rows

import (
	"context"
	"strconv"
	"strings"

	"github.com/jackc/pgx/v5"
)

// Setting holds what the laboratory says about itself, by name.
type Setting map[string]string

// Get is the value of name, or absent when it was never set.
func (s Setting) Get(name, absent string) string {
	if v, ok := s[name]; ok && v != "" {
		return v
	}
	return absent
}

// Int16 is a small number, or absent when it was never set.
func (s Setting) Int16(name string, absent int16) int16 {
	n, err := strconv.ParseInt(s[name], 10, 16)
	if err != nil {
		return absent
	}
	return int16(n)
}

// Lines is a value of several lines.
func (s Setting) Lines(name string) []string {
	if s[name] == "" {
		return nil
	}
	return strings.Split(s[name], "\n")
}

// Settings reads them all.
func Settings(ctx context.Context, db Reader) (Setting, error) {
	type row struct{ Name, Value string }
	list, err := collect[row](ctx, db, `SELECT name, value FROM setting`)
	if err != nil {
		return nil, err
	}
	s := Setting{}
	for _, r := range list {
		s[r.Name] = r.Value
	}
	return s, nil
}

// QueueSetting sets one value.
func QueueSetting(b *pgx.Batch, name, value string) {
	b.Queue(`INSERT INTO setting (name, value) VALUES ($1, $2)
		ON CONFLICT (name) DO UPDATE SET value = excluded.value`, name, value)
}

// QueueSettingLines sets a value of several lines.
func QueueSettingLines(b *pgx.Batch, name string, lines []string) {
	QueueSetting(b, name, strings.Join(lines, "\n"))
}
