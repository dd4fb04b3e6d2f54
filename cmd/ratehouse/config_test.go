package main

import (
	"bytes"
	"io"
	"log/slog"
	"os"
	"path/filepath"
	"strings"
	"sync"
	"testing"
)

func configOf(env map[string]string, args ...string) (config, error) {
	var c config
	p := program{getenv: func(name string) string { return env[name] }, stderr: io.Discard}
	err := flagsOf(p, "serve", &c, settings()).Parse(args)
	return c, err
}

// Every setting has its variable and its flag, and the flag wins.
func TestEverySettingHasVariableAndFlag(t *testing.T) {
	t.Parallel()
	names := map[string]bool{}
	for _, s := range settings() {
		names[s.variable] = true
		c, err := configOf(map[string]string{s.variable: "from variable"})
		if err != nil || *s.field(&c) != "from variable" {
			t.Errorf("%s does not set anything: %v", s.variable, err)
		}
		c, err = configOf(map[string]string{s.variable: "from variable"}, "-"+s.flag, "from flag")
		if err != nil || *s.field(&c) != "from flag" {
			t.Errorf("-%s does not win: %v", s.flag, err)
		}
		c, err = configOf(nil)
		if err != nil || *s.field(&c) != s.absent {
			t.Errorf("-%s absent is %q, %v", s.flag, *s.field(&c), err)
		}
	}
	for _, name := range []string{"DATABASE_URL", "DATABASE_OWNER_URL", "DATABASE_READ_URL", "RATEHOUSE_DATA", "RATEHOUSE_ADDR", "RATEHOUSE_URL",
		"RATEHOUSE_TLS_CERT", "RATEHOUSE_TLS_KEY", "RATEHOUSE_TRUSTED_PROXIES", "RATEHOUSE_METRICS_ADDR"} {
		if !names[name] {
			t.Errorf("%s is no setting", name)
		}
	}
}

// What the log shows of the configuration holds no password, in whatever form the address came.
func TestLoggedConfigurationKeepsSecrets(t *testing.T) {
	t.Parallel()
	for _, dsn := range []string{"postgres://rh_app:geheim@db:5432/lab", "host=db user=rh_app password=geheim dbname=lab", "postgres://rh_app@db/lab?password=geheim"} {
		c, err := configOf(map[string]string{"DATABASE_URL": dsn, "DATABASE_OWNER_URL": dsn})
		if err != nil {
			t.Fatal(err)
		}
		var out bytes.Buffer
		slog.New(slog.NewTextHandler(&out, nil)).Info("configuration", "config", c)
		if text := out.String(); strings.Contains(text, "geheim") || !strings.Contains(text, "rh_app@db:5432/lab") || !strings.Contains(text, "config.DATABASE_OWNER_URL") {
			t.Errorf("%s is logged as %s", dsn, text)
		}
	}
	c, err := configOf(map[string]string{"DATABASE_URL": "postgres://u:geheim@h:x/"})
	if err != nil {
		t.Fatal(err)
	}
	if err := c.check(); err == nil || strings.Contains(err.Error(), "geheim") {
		t.Errorf("unreadable address: %v", err)
	}
}

func TestProxies(t *testing.T) {
	t.Parallel()
	c := config{TrustedProxies: "10.1.2.3/8, 192.0.2.7 2001:db8::/32"}
	list, err := c.proxies()
	if err != nil || len(list) != 3 || list[0].String() != "10.0.0.0/8" || list[1].String() != "192.0.2.7/32" {
		t.Errorf("%v, %v", list, err)
	}
}

// Programs that start at once on an empty folder sign with one key, and leave nothing else behind.
func TestSigningKeyIsMadeOnce(t *testing.T) {
	t.Parallel()
	file := filepath.Join(t.TempDir(), "new", "signing.pem")
	ids := make([]string, 8)
	var wg sync.WaitGroup
	for i := range ids {
		wg.Go(func() {
			key, err := signingKey(file)
			if err != nil {
				t.Error(err)
				return
			}
			ids[i] = key.ID()
		})
	}
	wg.Wait()
	for _, id := range ids {
		if id == "" || id != ids[0] {
			t.Errorf("keys %v", ids)
		}
	}
	left, err := os.ReadDir(filepath.Dir(file))
	if err != nil || len(left) != 1 {
		t.Errorf("left behind: %v, %v", left, err)
	}
	if info, err := os.Stat(file); err != nil || info.Mode().Perm() != 0o600 {
		t.Errorf("%v, %v", info, err)
	}
}
