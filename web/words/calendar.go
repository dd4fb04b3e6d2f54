package words

import (
	"fmt"
	"time"
)

var weekdays = map[Lang][7]string{
	EN: {"Sun", "Mon", "Tue", "Wed", "Thu", "Fri", "Sat"},
	FR: {"dim.", "lun.", "mar.", "mer.", "jeu.", "ven.", "sam."},
	DE: {"So.", "Mo.", "Di.", "Mi.", "Do.", "Fr.", "Sa."},
}

var months = map[Lang][12]string{
	EN: {"Jan", "Feb", "Mar", "Apr", "May", "Jun", "Jul", "Aug", "Sep", "Oct", "Nov", "Dec"},
	FR: {"janv.", "févr.", "mars", "avr.", "mai", "juin", "juil.", "août", "sept.", "oct.", "nov.", "déc."},
	DE: {"Jan.", "Feb.", "März", "Apr.", "Mai", "Juni", "Juli", "Aug.", "Sept.", "Okt.", "Nov.", "Dez."},
}

// Day shows a date without its year: 1 Dec, 1er déc., 1. Dez.
func (p *Printer) Day(t time.Time) string {
	t = t.In(p.zone)
	day := fmt.Sprint(t.Day())
	switch {
	case p.lang == DE:
		day += "."
	case p.lang == FR && t.Day() == 1:
		day += "er"
	}
	return day + nbsp + months[p.lang][t.Month()-1]
}

// Weekday shows a date with its weekday, without its year: Tue 1 Dec.
func (p *Printer) Weekday(t time.Time) string {
	return weekdays[p.lang][t.In(p.zone).Weekday()] + " " + p.Day(t)
}

// Date shows a date in full: Tue 1 Dec 2026. The zero instant is Blank.
func (p *Printer) Date(t time.Time) string {
	if t.IsZero() {
		return Blank
	}
	return p.Weekday(t) + " " + fmt.Sprint(t.In(p.zone).Year())
}

// Time shows the time of day: 08:52.
func (p *Printer) Time(t time.Time) string { return t.In(p.zone).Format("15:04") }

// Second shows the time of day with its seconds: 08:51:40.
func (p *Printer) Second(t time.Time) string { return t.In(p.zone).Format("15:04:05") }

// Instant shows date and time: Tue 1 Dec 2026, 08:52. The zero instant is Blank.
func (p *Printer) Instant(t time.Time) string {
	if t.IsZero() {
		return Blank
	}
	return p.Date(t) + ", " + p.Time(t)
}

// Stamp shows date and time short, for tables: 14 Nov 08:10:00. The zero instant is Blank.
func (p *Printer) Stamp(t time.Time) string {
	if t.IsZero() {
		return Blank
	}
	return p.Day(t) + " " + p.Second(t)
}

// FieldDate and FieldInstant are what a form field holds: 2026-12-01 and 2026-12-01 08:30, in every
// language, so that there is no order of day and month to guess.
func (p *Printer) FieldDate(t time.Time) string { return t.In(p.zone).Format("2006-01-02") }

// FieldInstant is FieldDate with the time of day.
func (p *Printer) FieldInstant(t time.Time) string { return t.In(p.zone).Format("2006-01-02 15:04") }

// ParseFieldInstant reads what FieldInstant wrote, in the printer's zone; a T between date and time
// is taken too. The error is for the caller to say in words.
func (p *Printer) ParseFieldInstant(s string) (time.Time, error) {
	t, err := time.ParseInLocation("2006-01-02 15:04", s, p.zone)
	if err != nil {
		t, err = time.ParseInLocation("2006-01-02T15:04", s, p.zone)
	}
	return t, err
}

// Offset is the zone's distance from UTC at t: UTC+1, UTC−3:30, UTC.
func (p *Printer) Offset(t time.Time) string {
	_, s := t.In(p.zone).Zone()
	sign := "+"
	if s < 0 {
		sign, s = minus, -s
	}
	switch {
	case s == 0:
		return "UTC"
	case s%3600 == 0:
		return fmt.Sprintf("UTC%s%d", sign, s/3600)
	}
	return fmt.Sprintf("UTC%s%d:%02d", sign, s/3600, s%3600/60)
}

// Span shows a duration as people say it, without its sign and cut to whole minutes: 1 h 22 min,
// 28 min, 3 d 4 h (h in French is h, d is j or T.), "less than 1 min".
func (p *Printer) Span(d time.Duration) string {
	m := int(d.Abs() / time.Minute)
	switch {
	case m < 1:
		return p.Say(LessThanMinute)
	case m < 60:
		return fmt.Sprintf("%d%smin", m, nbsp)
	case m < 24*60 && m%60 == 0:
		return fmt.Sprintf("%d%sh", m/60, nbsp)
	case m < 24*60:
		return fmt.Sprintf("%d%sh %02d%smin", m/60, nbsp, m%60, nbsp)
	}
	day := map[Lang]string{EN: "d", FR: "j", DE: "T."}[p.lang]
	if h := m / 60 % 24; h > 0 {
		return fmt.Sprintf("%d%s%s %d%sh", m/60/24, nbsp, day, h, nbsp)
	}
	return fmt.Sprintf("%d%s%s", m/60/24, nbsp, day)
}

// Due says how an instant lies from now: due in 28 min, late by 1 h 22 min, due now.
func (p *Printer) Due(due, now time.Time) string {
	switch d := due.Sub(now); {
	case d.Abs() < time.Minute:
		return p.Say(DueNow)
	case d > 0:
		return p.Say(DueIn.With(p.Span(d)))
	default:
		return p.Say(LateBy.With(p.Span(d)))
	}
}
