package main

import (
	"errors"
	"flag"
	"fmt"
	"io"
	"log/slog"
	"net"
	"net/netip"
	"net/url"
	"os"
	"path/filepath"
	"strings"

	"github.com/jackc/pgx/v5"
)

// config is everything that can be set from outside, for all subcommands that need a database. Each
// has a variable of the environment and a flag; the flag wins.
type config struct {
	DatabaseURL    string // DATABASE_URL: the application role; empty: a private PostgreSQL under Data
	OwnerURL       string // DATABASE_OWNER_URL: the role that migrates
	ReadURL        string // DATABASE_READ_URL: a role or a copy for reports; not used yet
	Data           string // RATEHOUSE_DATA: folder of the private database and the signing key
	Addr           string // RATEHOUSE_ADDR: where to listen; port 0 takes a free one
	URL            string // RATEHOUSE_URL: public address, for QR codes and feeds
	TLSCert        string // RATEHOUSE_TLS_CERT: file, PEM
	TLSKey         string // RATEHOUSE_TLS_KEY: file, PEM
	TrustedProxies string // RATEHOUSE_TRUSTED_PROXIES: networks whose X-Forwarded-For is believed
	MetricsAddr    string // RATEHOUSE_METRICS_ADDR: where to serve /metrics; empty: nowhere
	name           string // of the private database; empty: databaseName
}

// setting ties a field of config to its variable and flag.
type setting struct {
	flag, variable, absent, says string
	field                        func(*config) *string
}

func settings() []setting {
	return append(databaseSettings(), []setting{
		{"addr", "RATEHOUSE_ADDR", "127.0.0.1:8080", "`HOST:PORT` to listen on; port 0 takes a free one", func(c *config) *string { return &c.Addr }},
		{"url", "RATEHOUSE_URL", "", "public `ADDRESS`, https://bench.example", func(c *config) *string { return &c.URL }},
		{"tls-cert", "RATEHOUSE_TLS_CERT", "", "certificate `FILE` (PEM) to serve https", func(c *config) *string { return &c.TLSCert }},
		{"tls-key", "RATEHOUSE_TLS_KEY", "", "key `FILE` (PEM) of the certificate", func(c *config) *string { return &c.TLSKey }},
		{"trusted-proxies", "RATEHOUSE_TRUSTED_PROXIES", "", "`NETWORKS`, separated by commas, whose X-Forwarded-For is believed", func(c *config) *string { return &c.TrustedProxies }},
		{"metrics-addr", "RATEHOUSE_METRICS_ADDR", "", "`HOST:PORT` to serve /metrics on", func(c *config) *string { return &c.MetricsAddr }},
	}...)
}

// databaseSettings are the settings of commands that only need the database.
func databaseSettings() []setting {
	return []setting{
		{"database", "DATABASE_URL", "", "`ADDRESS` of the database for the application role; empty: a private PostgreSQL under -data", func(c *config) *string { return &c.DatabaseURL }},
		{"owner-database", "DATABASE_OWNER_URL", "", "`ADDRESS` for the role that migrates", func(c *config) *string { return &c.OwnerURL }},
		{"read-database", "DATABASE_READ_URL", "", "`ADDRESS` for reports (not used yet)", func(c *config) *string { return &c.ReadURL }},
		{"data", "RATEHOUSE_DATA", defaultData(), "`FOLDER` of the private database and the signing key", func(c *config) *string { return &c.Data }},
	}
}

func defaultData() string {
	if os.Geteuid() == 0 {
		return "/var/lib/ratehouse"
	}
	return "./ratehouse-data"
}

// flagsOf makes the flag set of a command with its settings, their values taken from the environment.
func flagsOf(p program, name string, c *config, list []setting) *flag.FlagSet {
	f := flag.NewFlagSet("ratehouse "+name, flag.ContinueOnError)
	f.SetOutput(p.stderr)
	for _, s := range list {
		value := s.absent
		if v := p.getenv(s.variable); v != "" {
			value = v
		}
		f.StringVar(s.field(c), s.flag, value, s.says)
	}
	return f
}

// parsed tells whether the flags could be read, and with what code to end if not: asking for help is
// no mistake.
func parsed(err error) (code int, ok bool) {
	switch {
	case errors.Is(err, flag.ErrHelp):
		return exitDone, false
	case err != nil:
		return exitUsage, false
	}
	return exitDone, true
}

// listSettings prints the settings for -h with their variables; no value of the environment is shown.
func listSettings(w io.Writer, list []setting) {
	fmt.Fprint(w, "\nSettings, by flag or by the environment; the flag wins:\n")
	for _, s := range list {
		absent := ""
		if s.absent != "" {
			absent = " (" + s.absent + ")"
		}
		fmt.Fprintf(w, "  -%s, %s\n        %s%s\n", s.flag, s.variable, strings.ReplaceAll(s.says, "`", ""), absent)
	}
}

// check finds what is set wrongly, and says what would be right.
func (c *config) check() error {
	for _, d := range []struct{ name, value string }{{"DATABASE_URL", c.DatabaseURL}, {"DATABASE_OWNER_URL", c.OwnerURL}, {"DATABASE_READ_URL", c.ReadURL}} {
		if _, err := pgx.ParseConfig(d.value); d.value != "" && err != nil {
			return fmt.Errorf("%s is no database address like postgres://user@host/name", d.name) // the error may quote a password
		}
	}
	if c.Data == "" {
		return errors.New("RATEHOUSE_DATA must name a folder")
	}
	for _, a := range []struct{ name, value string }{{"RATEHOUSE_ADDR", c.Addr}, {"RATEHOUSE_METRICS_ADDR", c.MetricsAddr}} {
		if _, _, err := net.SplitHostPort(a.value); a.value != "" && err != nil {
			return fmt.Errorf("%s is %q: it must be HOST:PORT, like 127.0.0.1:8080", a.name, a.value)
		}
	}
	if u, err := url.Parse(c.URL); c.URL != "" && (err != nil || u.Host == "" || u.Scheme != "http" && u.Scheme != "https") {
		return fmt.Errorf("RATEHOUSE_URL is %q: it must be like https://bench.example", c.URL)
	}
	if (c.TLSCert == "") != (c.TLSKey == "") {
		return errors.New("RATEHOUSE_TLS_CERT and RATEHOUSE_TLS_KEY belong together: set both or neither")
	}
	_, err := c.proxies()
	return err
}

// proxies reads the networks; one address is a network of itself.
func (c *config) proxies() ([]netip.Prefix, error) {
	var list []netip.Prefix
	for _, text := range strings.FieldsFunc(c.TrustedProxies, func(r rune) bool { return r == ',' || r == ' ' }) {
		prefix, err := netip.ParsePrefix(text)
		if err != nil {
			a, err := netip.ParseAddr(text)
			if err != nil {
				return nil, fmt.Errorf("RATEHOUSE_TRUSTED_PROXIES holds %q: it must be a network like 10.0.0.0/8 or an address", text)
			}
			prefix = netip.PrefixFrom(a, a.BitLen())
		}
		list = append(list, prefix.Masked())
	}
	return list, nil
}

// private tells whether the program runs its own PostgreSQL.
func (c *config) private() bool { return c.DatabaseURL == "" }

// clusterDir is where the private PostgreSQL lives.
func (c *config) clusterDir() string { return filepath.Join(c.Data, "postgres") }

// keyFile is the key that signs papers.
func (c *config) keyFile() string { return filepath.Join(c.Data, "signing.pem") }

// LogValue is what the log may show: of a database, where it is and as whom, never a password.
func (c config) LogValue() slog.Value {
	var all []slog.Attr
	for _, s := range settings() {
		value := *s.field(&c)
		if strings.HasPrefix(s.variable, "DATABASE_") {
			value = withoutSecret(value)
		}
		if value != "" {
			all = append(all, slog.String(s.variable, value))
		}
	}
	return slog.GroupValue(all...)
}

func withoutSecret(dsn string) string {
	if dsn == "" {
		return ""
	}
	c, err := pgx.ParseConfig(dsn)
	if err != nil {
		return "(unreadable)"
	}
	return fmt.Sprintf("%s@%s:%d/%s", c.User, c.Host, c.Port, c.Database)
}
