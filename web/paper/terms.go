package paper

import (
	"regexp"
	"strings"

	"ratehouse/store/proof"
	"ratehouse/web/words"
)

// terms are the statements of the paper: by what it was judged, and what is not stated.
func (s *sheet) terms() []term {
	list := []term{
		s.programme(),
		{Label: s.say(words.PaperMeasurand), Lines: []string{s.say(measurand(s.Programme.Measurand))}},
		{Label: s.say(words.PaperDecision), Lines: []string{s.decision()}},
		{Label: s.say(words.PaperUncertainty), Lines: s.uncertainty()},
		{Label: s.say(words.PaperReference), Lines: []string{s.reference()}},
		{Label: s.say(words.PaperConditions), Lines: s.conditions()},
		{Label: s.say(words.PaperReadings), Lines: s.read()},
	}
	if len(s.Notes) == 0 {
		list = append(list, term{Label: s.say(words.ReleaseRemarks), Lines: []string{s.say(words.PaperNoNotes)}})
	}
	return list
}

// numbered finds the number of a standard in a title.
var numbered = regexp.MustCompile(`(?i)\b(ISO|IEC|NIHS|DIN|EN|JIS|BS|NF|ANSI|GB|GOST)\b[ /_-]*[A-Z/]*[ /_-]*[0-9]{2,}`)

// programme names the method. Nobody compared it with the text of a standard: then it cannot bear the
// number of one, not even by way of its title (practice notes X18).
func (s *sheet) programme() term {
	p := s.Programme
	title := p.Title
	if p.TextChecked == nil && numbered.MatchString(title) {
		title = s.say(words.PaperUnnamed.With(len(s.Record.Days)))
	}
	t := term{Label: s.say(words.PaperProgramme), Lines: []string{stop(s.say(words.PaperVersion.With(title, p.Version))) + "."}}
	if c := p.TextChecked; c != nil {
		t.Lines = append(t.Lines, s.say(words.PaperCompared.With(c.Edition, c.By, c.Date)))
	} else {
		t.Lines = append(t.Lines, s.say(words.PaperPublished))
	}
	return t
}

func measurand(code string) words.Text {
	switch code {
	case "as_performed":
		return words.PaperAsPerformed
	case "at_nominal":
		return words.PaperAtNominal
	}
	return words.Raw(code)
}

func (s *sheet) decision() string {
	switch s.Decision.Rule {
	case proof.RuleSimple:
		return s.say(words.PaperSimple)
	case proof.RuleGuarded:
		guard := string(s.Decision.Guard)
		return s.say(words.PaperGuarded.With(s.p.Magnitude(guard, places(guard))))
	}
	return s.Decision.Words
}

func (s *sheet) uncertainty() []string {
	u := s.Uncertainty
	if u.Reason != "" {
		return []string{s.say(words.PaperNoU)}
	}
	list := make([]string, len(u.Criteria))
	for i, c := range u.Criteria {
		list[i] = c.Symbol + " " + s.p.Magnitude(string(c.U), places(string(c.U)))
	}
	lines := []string{s.say(words.PaperU.With(s.p.Magnitude(string(u.K), places(string(u.K))), s.p.Magnitude(string(u.Rate), places(string(u.Rate))), strings.Join(list, ", ")))}
	if len(u.NotApplicable) > 0 {
		lines = append(lines, s.say(words.PaperUOther.With(strings.Join(u.NotApplicable, ", "))))
	}
	return lines
}

func (s *sheet) reference() string {
	if s.Reference.Text != "" {
		return stop(s.Reference.Text) + "."
	}
	return s.say(words.PaperNoReference)
}

func (s *sheet) conditions() (lines []string) {
	if s.Conditions.Code != proof.ConditionsMeasured {
		return []string{s.say(words.PaperNominal)}
	}
	for _, c := range s.Conditions.Chambers {
		line := s.say(words.PaperChamber.With(c.Code, s.p.Celsius(string(c.NominalC)), s.celsius1(c.MeanC), s.between(c.LowC, c.HighC, " °C")))
		if c.HumidityLowPct != "" {
			line += ", " + s.say(words.PaperHumidity.With(s.between(c.HumidityLowPct, c.HumidityHighPct, "")))
		}
		lines = append(lines, line+".")
	}
	return lines
}

func (s *sheet) celsius1(d proof.Decimal) string {
	if d == "" {
		return words.Blank
	}
	return s.p.Celsius(string(d))
}

// between is a range of measured values.
func (s *sheet) between(low, high proof.Decimal, unit string) string {
	if low == "" || high == "" {
		return words.Blank
	}
	return s.p.Magnitude(string(low), places(string(low))) + " … " + s.p.Magnitude(string(high), places(string(high))) + unit
}

// cautions says the cautions of the record.
func (s *sheet) cautions() []string {
	out := make([]string, len(s.Cautions))
	for i, code := range s.Cautions {
		out[i] = s.say(words.Caution(code))
	}
	return out
}
