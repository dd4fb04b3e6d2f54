package trial

// ISO3159 builds the programme after published descriptions of ISO 3159:2009 (wrist-chronometers
// with spring balance oscillator), two size categories. The text of the standard itself was not
// read: where descriptions disagree the readings R1 to R10 of the project's domain notes are
// adopted, each named at its line, and TextChecked stays empty until somebody compares.
func ISO3159() *Programme {
	return &Programme{
		Code:    "iso3159",
		Version: "1",
		Title:   "Fifteen-day wrist-chronometer trial, two categories",
		Source:  "published descriptions of ISO 3159:2009; the standard's text was not read",
		// R10: 15 days of rate plus the day of conditioning.
		Days: iso3159Days(),
		// "Methods of measurement" (read): wound, then at least 12 h at 23 °C. The position is
		// that of a contest variant (read: "Concours de 2013"), for want of another.
		Conditioning: Conditioning{Position: H6, TemperatureC: 23_000, MinHours: 12, Wind: true},
		Measurand:    AsPerformed,
		// 24 h is read; no tolerance on the interval was found: ±60 min is common practice, no source.
		Reading: Reading{
			IntervalS: SecondsPerDay, ToleranceS: 3600,
			SecondLook: SecondLook{Agree: 300, Then: MedianOfThree},
		},
		// ±1 °C is read for the conditioning, by analogy for the rest. R6: humidity is recorded,
		// not limited. 15 min outside the chamber: common practice, no source.
		Environment: Environment{TemperatureToleranceC: 1000, OutsideMinutes: 15},
		// Common practice, no source: days of one position repeat together, the three
		// temperatures as one group.
		Recovery: Recovery{
			Groups:     [][]int{{1, 2}, {3, 4}, {5, 6}, {7, 8}, {9, 10}, {11, 12, 13}, {14, 15}},
			MaxRepeats: 1, IdleDaysAllowed: 3, MaxTotalDays: 21,
		},
		// R2: above 20 mm is category 1.
		Categories: []Category{{"1", "diameter above 20 mm, or area above 314 mm²"},
			{"2", "diameter 20 mm or less, or area 314 mm² or less"}},
		Criteria: iso3159Criteria(),
		Decision: Decision{Rule: Simple},
	}
}

// MedianOfThree is the one second-look rule built: two that do not agree ask for a third, and the
// middle one of the three counts.
const MedianOfThree = "median_of_three"

func iso3159Days() []Day {
	plan := []struct {
		pos     Position
		celsius Milli
	}{
		{H6, 23}, {H6, 23}, {H3, 23}, {H3, 23}, {H9, 23}, {H9, 23}, {FH, 23}, {FH, 23}, {CH, 23}, {CH, 23},
		{CH, 8}, {CH, 23}, {CH, 38}, {H6, 23}, {H6, 23},
	}
	days := make([]Day, len(plan))
	for i, d := range plan {
		// An additional mechanism is engaged on day 10 (four descriptions agree).
		days[i] = Day{N: i + 1, Position: d.pos, TemperatureC: d.celsius * 1000, Accessory: i+1 == 10}
	}
	return days
}

func iso3159Criteria() []Criterion {
	ten := []int{1, 2, 3, 4, 5, 6, 7, 8, 9, 10}
	// R5, R9: five variations, each within one position.
	pairs := [][2]int{{1, 2}, {3, 4}, {5, 6}, {7, 8}, {9, 10}}
	const daily = "s/d"
	return []Criterion{
		// R8: the mean of ten, never a limit on each position.
		{"M", "mean daily rate", daily, 1, Formula{Kind: Mean, Days: ten}, limits("-4", "6", "-5", "8")},
		{"V", "mean variation", daily, 1, Formula{Kind: MeanVariation, Pairs: pairs}, limits("", "2", "", "3.4")},
		{"Vmax", "greatest variation", daily, 1, Formula{Kind: GreatestVariation, Pairs: pairs}, limits("", "5", "", "7")},
		// R1: 6H minus CH. R3: -6 to +8.
		{"D", "vertical minus horizontal", daily, 1,
			Formula{Kind: Difference, Of: []int{1, 2}, From: []int{9, 10}}, limits("-6", "8", "-8", "10")},
		// R4: greatest of ten deviations from M.
		{"P", "greatest deviation from the mean", daily, 1,
			Formula{Kind: GreatestDeviation, Days: ten}, limits("", "10", "", "15")},
		// R7: over the nominal 30 °C, in s/d per °C.
		{"C", "rate variation with temperature", "s/d/°C", 2,
			Formula{Kind: PerDegree, Of: []int{13}, From: []int{11}}, limits("-0.6", "0.6", "-0.7", "0.7")},
		{"R", "rate resumption", daily, 1,
			Formula{Kind: Difference, Of: []int{15}, From: []int{1, 2}}, limits("-5", "5", "-6", "6")},
	}
}

// limits makes the limits of categories 1 and 2; an empty string is no limit.
func limits(min1, max1, min2, max2 string) map[string]Limit {
	return map[string]Limit{"1": limitOf(min1, max1), "2": limitOf(min2, max2)}
}

func limitOf(least, most string) (l Limit) {
	if least != "" {
		l.HasMin, l.Min = true, mustExact(least)
	}
	if most != "" {
		l.HasMax, l.Max = true, mustExact(most)
	}
	return l
}

// mustExact reads a number written in this file.
func mustExact(s string) Exact {
	e, err := ParseExact(s)
	if err != nil {
		panic(err)
	}
	return e
}
