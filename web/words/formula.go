package words

import (
	"slices"
	"strconv"
	"strings"

	"ratehouse/trial"
)

// What each kind of formula means, for the reader who asks how a figure came about.
var (
	formulaMean              = say1("mean of days {days}", "moyenne des jours {days}", "Mittel der Tage {days}")
	formulaMeanVariation     = say1("mean of the differences between days {pairs}", "moyenne des différences entre les jours {pairs}", "Mittel der Unterschiede zwischen den Tagen {pairs}")
	formulaGreatestVariation = say1("greatest of the differences between days {pairs}", "plus grande des différences entre les jours {pairs}", "größter der Unterschiede zwischen den Tagen {pairs}")
	formulaDifference        = say2("mean of days {of} less mean of days {from}", "moyenne des jours {of} moins moyenne des jours {from}", "Mittel der Tage {of} weniger Mittel der Tage {from}")
	formulaDeviation         = say1("greatest distance of days {days} from their mean", "plus grand écart des jours {days} à leur moyenne", "größter Abstand der Tage {days} von ihrem Mittel")
	formulaPerDegree         = say2("days {of} less days {from}, per degree", "jours {of} moins jours {from}, par degré", "Tage {of} weniger Tage {from}, je Grad")
	formulaRange             = say1("greatest less least rate of days {days}", "plus grande moins plus petite marche des jours {days}", "größter weniger kleinster Gang der Tage {days}")
	formulaDeviationStandard = say1("standard deviation of days {days}", "écart-type des jours {days}", "Standardabweichung der Tage {days}")
	formulaPeriodRange       = say("greatest less least sum of its periods", "plus grande moins plus petite somme des périodes", "größte weniger kleinste Summe der Abschnitte")
	formulaGreatestStep      = say("greatest step from one period to the next", "plus grand saut d’une période à la suivante", "größter Sprung von einem Abschnitt zum nächsten")
	formulaWeightedSum       = say("weighted sum of criteria listed before", "somme pondérée de critères précédents", "gewichtete Summe vorangehender Kriterien")
	daysTo                   = say2("{from} to {until}", "{from} à {until}", "{from} bis {until}")
)

// Formula says in a few words how a criterion is computed.
func Formula(f trial.Formula) Text { return formulaText(f) }

type formulaText trial.Formula

func (f formulaText) text(p *Printer) string {
	switch f.Kind {
	case trial.Mean:
		return p.Say(formulaMean.With(p.days(f.Days)))
	case trial.MeanVariation:
		return p.Say(formulaMeanVariation.With(pairs(f.Pairs)))
	case trial.GreatestVariation:
		return p.Say(formulaGreatestVariation.With(pairs(f.Pairs)))
	case trial.Difference:
		return p.Say(formulaDifference.With(p.days(f.Of), p.days(f.From)))
	case trial.GreatestDeviation:
		return p.Say(formulaDeviation.With(p.days(f.Days)))
	case trial.PerDegree:
		return p.Say(formulaPerDegree.With(p.days(f.Of), p.days(f.From)))
	case trial.RangeOf:
		return p.Say(formulaRange.With(p.days(f.Days)))
	case trial.StandardDeviation:
		return p.Say(formulaDeviationStandard.With(p.days(f.Days)))
	case trial.PeriodRange:
		return p.Say(formulaPeriodRange)
	case trial.GreatestStep:
		return p.Say(formulaGreatestStep)
	}
	return p.Say(formulaWeightedSum)
}

// days lists day numbers, runs of three and more as "1 to 10".
func (p *Printer) days(days []int) string {
	days = slices.Sorted(slices.Values(days))
	var parts []string
	for i := 0; i < len(days); {
		j := i
		for j+1 < len(days) && days[j+1] == days[j]+1 {
			j++
		}
		switch {
		case j-i >= 2:
			parts = append(parts, p.Say(daysTo.With(days[i], days[j])))
		case j-i == 1:
			parts = append(parts, strconv.Itoa(days[i]), strconv.Itoa(days[j]))
		default:
			parts = append(parts, strconv.Itoa(days[i]))
		}
		i = j + 1
	}
	return strings.Join(parts, ", ")
}

func pairs(list [][2]int) string {
	parts := make([]string, len(list))
	for i, d := range list {
		parts[i] = strconv.Itoa(d[0]) + "-" + strconv.Itoa(d[1])
	}
	return strings.Join(parts, ", ")
}

// Unit is the unit of a criterion in the reader's language; one we do not know stays as its programme
// writes it.
func Unit(unit string) Text {
	switch unit {
	case "s/d":
		return UnitSecondsPerDay
	case "s/d/K", "s/d/°C", "s/d per °C", "(s/d)/°C", "(s/d)/K":
		return UnitPerDegree
	case "s":
		return UnitSeconds
	}
	return Raw(unit)
}

// SignedKind tells whether figures of this kind carry a sign; variations, deviations and ranges are
// magnitudes.
func SignedKind(k trial.Kind) bool {
	switch k {
	case trial.MeanVariation, trial.GreatestVariation, trial.GreatestDeviation, trial.RangeOf, trial.StandardDeviation, trial.PeriodRange, trial.GreatestStep:
		return false
	}
	return true
}

// Decimals is the number of decimals a criterion is shown with on screen: one more than its programme
// prints on paper, except greatest variations and ranges, which lose nothing at the decimals of the
// readings.
func Decimals(c trial.Criterion) int {
	if c.Formula.Kind == trial.GreatestVariation || c.Formula.Kind == trial.RangeOf {
		return c.Decimals
	}
	return c.Decimals + 1
}

// Criterion shows the value of a criterion with so many decimals, and more where rounding would
// contradict the verdict: +6.004 against a limit of 6, never +6.00.
func (p *Printer) Criterion(c trial.Criterion, l trial.Limit, v trial.Exact, places int) string {
	return p.exactly(trial.Printed(v, l, places), SignedKind(c.Formula.Kind))
}

// Margin shows the distance from the nearer limit: positive inside, negative outside. It keeps its
// sign however small it is.
func (p *Printer) Margin(m trial.Exact, places int) string {
	zero := trial.Limit{HasMin: true, HasMax: true}
	return p.exactly(trial.Printed(m, zero, places), true)
}

// Limits shows the limits of a criterion as an interval. Magnitudes begin at zero by nature.
func (p *Printer) Limits(c trial.Criterion, l trial.Limit) string {
	sign := SignedKind(c.Formula.Kind)
	lo, hi, places := "", "", 1
	for _, e := range []struct {
		has bool
		at  trial.Exact
		to  *string
	}{{l.HasMin, l.Min, &lo}, {l.HasMax, l.Max, &hi}} {
		if e.has {
			*e.to = Shortest(e.at)
			places = max(places, decimals(*e.to))
		}
	}
	if lo == "" && hi != "" && !sign {
		lo = "0"
	}
	return p.Interval(lo, hi, places, sign)
}

// Shortest is the shortest decimal that is exactly e, with at least one place; p/q when there is none
// of up to nine places.
func Shortest(e trial.Exact) string {
	for places := 1; places <= 9; places++ {
		s := e.Decimal(places)
		if back, err := trial.ParseExact(s); err == nil && back.Cmp(e) == 0 {
			return s
		}
	}
	return e.String()
}

func (p *Printer) exactly(dec string, sign bool) string { return p.Number(dec, decimals(dec), sign) }
