package words

import (
	"slices"
	"strings"
	"testing"
	"time"

	"github.com/google/go-cmp/cmp"
)

func TestEveryMessageInEveryLanguage(t *testing.T) {
	t.Parallel()
	if len(catalogue) < 200 {
		t.Fatalf("only %d messages registered", len(catalogue))
	}
	for _, e := range catalogue {
		for _, f := range check(e) {
			t.Errorf("%s: %s", e.at, f)
		}
	}
}

// check lists what is wrong with a message.
func check(e *entry) (faults []string) {
	want := slices.Sorted(slices.Values(placeholders(e.forms[EN][len(e.forms[EN])-1])))
	if e.args >= 0 && len(want) != e.args {
		faults = append(faults, "English names "+strings.Join(want, ", ")+", the type says otherwise")
	}
	if e.args == -1 && !slices.Contains(want, "n") {
		faults = append(faults, "a plural without {n}")
	}
	for _, l := range Langs {
		for i, f := range e.forms[l] {
			if strings.TrimSpace(f) == "" || f != strings.TrimSpace(f) {
				faults = append(faults, string(l)+" is missing or begins or ends with a blank")
			}
			got := slices.Sorted(slices.Values(placeholders(f)))
			singular := len(e.forms[l]) == 2 && i == 0
			if !slices.Equal(got, want) && !singular {
				faults = append(faults, string(l)+" names "+strings.Join(got, ", ")+", English "+strings.Join(want, ", "))
			}
			for _, bad := range []string{"'", "...", "--", "  ", " ...", "\t"} {
				if strings.Contains(f, bad) {
					faults = append(faults, string(l)+" holds the typewriter sign "+bad)
				}
			}
		}
	}
	return faults
}

func TestCheckFindsFaults(t *testing.T) {
	t.Parallel()
	for name, e := range map[string]*entry{
		"missing":     {args: 0, forms: one("a", "", "c")},
		"placeholder": {args: 1, forms: one("a {x}", "b {x}", "c {y}")},
		"arity":       {args: 2, forms: one("a {x}", "b {x}", "c {x}")},
		"apostrophe":  {args: 0, forms: one("a", "l'a", "c")},
		"plural":      {args: -1, forms: map[Lang][]string{EN: {"one", "many"}, FR: {"un", "des"}, DE: {"ein", "viele"}}},
	} {
		if len(check(e)) == 0 {
			t.Errorf("%s: no fault found", name)
		}
	}
}

func TestNumbers(t *testing.T) {
	t.Parallel()
	en, fr, de := New(EN, nil), New(FR, nil), New(DE, nil)
	for _, c := range []struct{ got, want string }{
		{en.Signed("1.265", 2), "+1.26"}, // half to even
		{en.Signed("1.275", 2), "+1.28"},
		{en.Signed("1.2650000001", 2), "+1.27"},
		{en.Signed("-0.004", 2), "0.00"},
		{en.Signed("-0.005", 2), "0.00"},
		{en.Signed("-0.0051", 2), "−0.01"},
		{en.Signed("9.995", 2), "+10.00"},
		{en.Signed("-9.996", 2), "−10.00"},
		{en.Signed("0", 1), "0.0"},
		{en.Signed("3", 1), "+3.0"},
		{en.Signed("+3.25", 1), "+3.2"},
		{en.Signed(".5", 0), "0"},
		{en.Signed("", 2), "·"},
		{fr.Signed("-1.27", 2), "−1,27"},
		{de.Magnitude("0.5", 2), "0,50"},
		{en.Interval("-4", "6", 1, true), "−4.0\u00a0… +6.0"},
		{de.Interval("0", "2", 1, false), "0,0\u00a0… 2,0"},
		{en.Interval("", "2", 1, false), "at most 2.0"},
		{fr.Interval("-0.6", "", 1, true), "au moins −0,6"},
		{en.Count(1200), "1,200"}, {fr.Count(1234567), "1\u00a0234\u00a0567"}, {en.Count(-5), "−5"}, {en.Count(100), "100"},
		{en.Celsius("23"), "23\u00a0°C"}, {de.Celsius("37.5"), "37,5\u00a0°C"},
		{en.Share(167, 200), "83.5\u00a0%"}, {en.Share(0, 9), "0.0\u00a0%"}, {en.Share(9, 9), "100.0\u00a0%"},
		{en.Share(1, 5000), "below 0.1\u00a0%"}, {en.Share(4999, 5000), "above 99.9\u00a0%"}, {en.Share(0, 0), "·"},
		{de.Share(1, 3), "33,3\u00a0%"},
		{en.Chance("0.978", 1), "97.8"}, {en.Chance("0.0004", 1), "below 0.1"}, {en.Chance("0.9996", 1), "above 99.9"},
		{en.Chance("0", 1), "0"}, {en.Chance("1.000000", 1), "100"}, {en.Chance("0.148", 0), "15"},
		{en.Chance("0.001", 0), "below 1"}, {en.Chance("0.999", 0), "above 99"}, {en.Chance("0.5", 0), "50"}, {en.Chance("", 1), "·"},
	} {
		if c.got != c.want {
			t.Errorf("got %q, want %q", c.got, c.want)
		}
	}
}

func TestCalendar(t *testing.T) {
	t.Parallel()
	zone, err := time.LoadLocation("Europe/Zurich")
	if err != nil {
		t.Fatal(err)
	}
	at := time.Date(2026, 12, 1, 7, 52, 40, 0, time.UTC)
	en, fr, de := New(EN, zone), New(FR, zone), New(DE, zone)
	got := []string{
		en.Date(at), fr.Date(at), de.Date(at), en.Instant(at), en.Stamp(at), en.FieldInstant(at), en.Offset(at),
		New(EN, time.FixedZone("", -12600)).Offset(at), New(EN, nil).Offset(at),
		en.Span(82 * time.Minute), en.Span(28*time.Minute + 59*time.Second), en.Span(2 * time.Hour), en.Span(68 * time.Minute),
		en.Span(30 * time.Second), en.Span(76 * time.Hour), fr.Span(48 * time.Hour),
		en.Due(at, at.Add(82*time.Minute)), en.Due(at, at.Add(-28*time.Minute)), en.Due(at, at), de.Due(at, at.Add(time.Hour)),
		en.Date(time.Time{}),
	}
	want := []string{
		"Tue 1 Dec 2026", "mar. 1er déc. 2026", "Di. 1. Dez. 2026", "Tue 1 Dec 2026, 08:52", "1 Dec 08:52:40", "2026-12-01 08:52", "UTC+1",
		"UTC−3:30", "UTC", "1 h 22 min", "28 min", "2 h", "1 h 08 min", "less than 1 min", "3 d 4 h", "2 j",
		"late by 1 h 22 min", "due in 28 min", "due now", "1 h verspätet", "·",
	}
	for i := range got {
		got[i] = strings.ReplaceAll(got[i], nbsp, " ")
	}
	if d := cmp.Diff(want, got); d != "" {
		t.Error(d)
	}
	back, err := en.ParseFieldInstant("2026-12-01 08:52")
	if err != nil || !back.Equal(at.Truncate(time.Minute)) {
		t.Errorf("field instant read back as %v, %v", back, err)
	}
}

func TestSaying(t *testing.T) {
	t.Parallel()
	en, fr, de := New(EN, nil), New(FR, nil), New(DE, nil)
	for _, c := range []struct{ got, want string }{
		{en.Say(Movements.With(1)), "1 movement"}, {en.Say(Movements.With(0)), "0 movements"},
		{fr.Say(Movements.With(0)), "0 mouvement"}, {fr.Say(Movements.With(2)), "2 mouvements"}, {de.Say(Movements.With(1500)), "1\u00a0500 Werke"},
		{en.Say(ReadOf.With(23, 39)), "23 of 39 read"}, {de.Say(ReadOf.With(23, 39)), "23 von 39 abgelesen"},
		{en.Say(FaultLine.With(Depositor, "x {field}")), "Depositor: x {field}"},
		{fr.Say(ForbiddenSub.With(Raw("Ada"))), "Vous êtes connecté comme Ada."},
		{fr.Say(FaultNumber), "Réessayez dans un instant. Si la page ne revient pas, donnez ce numéro à la direction du laboratoire\u00a0:"},
		{en.Fault("no_such_code", nil), "This was refused (no_such_code)."},
	} {
		if c.got != c.want {
			t.Errorf("got %q, want %q", c.got, c.want)
		}
	}
	defer func() {
		if recover() == nil {
			t.Error("a float was taken as an argument")
		}
	}()
	en.Say(ForbiddenSub.With(1.5))
}

func TestChoose(t *testing.T) {
	t.Parallel()
	for _, c := range []struct {
		account, accept string
		want            Lang
	}{
		{"de", "fr", DE}, {"", "fr-CH, en;q=0.9", FR}, {"", "it, de;q=0.5, fr;q=0.8", FR}, {"", "it", EN}, {"", "", EN},
		{"xx", "de-AT", DE}, {"", "fr;q=0, de;q=0.1", DE}, {"", ";;;q=,", EN},
	} {
		if got := Choose(c.account, c.accept); got != c.want {
			t.Errorf("account %q, header %q: %s, want %s", c.account, c.accept, got, c.want)
		}
	}
}
