package page

import (
	"net/http"
	"net/url"
	"strconv"
	"strings"
)

// Addresses without parameters. Every link and redirect of the program takes its address from this
// file, so that none is written twice.
const (
	LoginURL      = "/login"
	LogoutURL     = "/logout"
	LanguageURL   = "/language"
	ThemeURL      = "/theme"
	TodayURL      = "/today"
	BatchesURL    = "/batches"
	NewBatchURL   = "/batches/new"
	SearchURL     = "/search"
	TrendsURL     = "/trends"
	ChambersURL   = "/chambers"
	ProgrammesURL = "/programmes"
	CalibresURL   = "/calibres"
	DepositorsURL = "/depositors"
	EquipmentURL  = "/equipment"
	BenchURL      = "/bench"
	VerifyURL     = "/verify"
	JournalURL    = "/journal"
	AccountsURL   = "/accounts"
	SettingsURL   = "/settings"
	JobsURL       = "/jobs"
	HealthURL     = "/healthz"
	ReadyURL      = "/readyz"
)

func under(parts ...string) string {
	var b strings.Builder
	for _, p := range parts {
		b.WriteByte('/')
		b.WriteString(url.PathEscape(p))
	}
	return b.String()
}

// BatchURL is the page of a batch.
func BatchURL(code string) string { return under("batches", code) }

// LiveSuffix ends the address of the stream that tells a page of a batch when it is out of date;
// LiveHeader marks a request that such a page then makes by itself.
const (
	LiveSuffix = "/live"
	LiveHeader = "X-Live"
)

// LiveURL is the stream of a batch.
func LiveURL(code string) string { return BatchURL(code) + LiveSuffix }

// IntakeURL is the page that gives a batch's movements their places.
func IntakeURL(code string) string { return under("batches", code, "intake") }

// UnloadURL is the page that sorts a finished batch.
func UnloadURL(code string) string { return under("batches", code, "unload") }

// RoundURL is the page of round k of a batch.
func RoundURL(code string, k int) string { return under("batches", code, "rounds", strconv.Itoa(k)) }

// RoundPlaceURL is the round page at one holder and place.
func RoundPlaceURL(code string, k int, holder, place string) string {
	return Query(RoundURL(code, k), "holder", holder, "place", place)
}

// MovementURL is the rate sheet of a movement.
func MovementURL(code, serial string) string { return under("batches", code, "movements", serial) }

// DoubtURL is how sure the verdict of a movement is.
func DoubtURL(code, serial string) string { return Under(MovementURL(code, serial), "doubt") }

// OutlookURL is what the open movements of a batch will probably do.
func OutlookURL(code string) string { return under("batches", code, "outlook") }

// AimURL is what a batch would yield with all its rates shifted.
func AimURL(code string) string { return under("batches", code, "aim") }

// BenchNoteURL is the note on a movement for the adjuster's bench.
func BenchNoteURL(code, serial string) string { return under("bench", code, serial) }

// CertificateURL is a released paper.
func CertificateURL(number string) string { return under("certificates", number) }

// SheetsURL is the batch's values as CSV.
func SheetsURL(code string) string { return under("api", "v1", "batches", code, "sheets.csv") }

// Under is an address below another one: Under(BatchURL(code), "release").
func Under(base string, parts ...string) string { return base + under(parts...) }

// Query adds parameters, name and value in turn; empty values are left out.
func Query(base string, pairs ...string) string {
	q := url.Values{}
	for i := 0; i+1 < len(pairs); i += 2 {
		if pairs[i+1] != "" {
			q.Set(pairs[i], pairs[i+1])
		}
	}
	if len(q) == 0 {
		return base
	}
	return base + "?" + q.Encode()
}

// Local tells whether an address stays on this server: one path, no host, nothing a browser could
// take for one. Where to go after signing in comes from the address bar and is checked by this.
func Local(target string) bool {
	if !strings.HasPrefix(target, "/") || strings.HasPrefix(target, "//") || strings.ContainsAny(target, "\\\r\n\t") {
		return false
	}
	u, err := url.Parse(target)
	return err == nil && u.Host == "" && u.Scheme == ""
}

// Param is a part of the address as it was meant; the router leaves escapes in it where there are any.
func Param(r *http.Request, name string) string {
	v := r.PathValue(name)
	if r.URL.RawPath == "" {
		return v
	}
	if plain, err := url.PathUnescape(v); err == nil {
		return plain
	}
	return v
}
