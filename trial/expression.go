package trial

import (
	"fmt"
	"slices"
	"strings"
)

// Expression writes a formula in the rates R1…Rn as a reader of a paper can check it with a
// pencil: D of the built-in programme is "(R1+R2)/2 - (R9+R10)/2". It needs no language.
func (p *Programme) Expression(f Formula) string {
	switch f.Kind {
	case Mean:
		return meanOf(f.Days)
	case MeanVariation:
		return fmt.Sprintf("(%s)/%d", strings.Join(variations(f.Pairs), "+"), len(f.Pairs))
	case GreatestVariation:
		return "max(" + strings.Join(variations(f.Pairs), ", ") + ")"
	case Difference:
		return meanOf(f.Of) + " - " + meanOf(f.From)
	case GreatestDeviation:
		return "max |Ri - " + meanOf(f.Days) + "|, i = " + dayRange(f.Days)
	case PerDegree:
		return fmt.Sprintf("(%s - %s)/%s", meanOf(f.Of), meanOf(f.From), p.degrees(f))
	}
	return string(f.Kind)
}

// degrees is the nominal temperature difference between the days of a formula.
func (p *Programme) degrees(f Formula) string {
	of, okOf := p.Day(f.Of[0])
	from, okFrom := p.Day(f.From[0])
	if !okOf || !okFrom {
		return "?"
	}
	if d := of.TemperatureC - from.TemperatureC; d < 0 {
		return "(" + d.String() + ")"
	}
	return (of.TemperatureC - from.TemperatureC).String()
}

func meanOf(days []int) string {
	if len(days) == 1 {
		return fmt.Sprintf("R%d", days[0])
	}
	if consecutive(days) && len(days) > 3 {
		return fmt.Sprintf("(R%d+...+R%d)/%d", days[0], days[len(days)-1], len(days))
	}
	names := make([]string, len(days))
	for i, d := range days {
		names[i] = fmt.Sprintf("R%d", d)
	}
	return fmt.Sprintf("(%s)/%d", strings.Join(names, "+"), len(days))
}

func variations(pairs [][2]int) []string {
	out := make([]string, len(pairs))
	for i, p := range pairs {
		out[i] = fmt.Sprintf("|R%d-R%d|", p[1], p[0])
	}
	return out
}

func dayRange(days []int) string {
	if consecutive(days) {
		return fmt.Sprintf("%d...%d", days[0], days[len(days)-1])
	}
	return strings.Trim(strings.ReplaceAll(fmt.Sprint(days), " ", ", "), "[]")
}

func consecutive(days []int) bool {
	return len(days) > 0 && slices.IsSorted(days) && days[len(days)-1]-days[0] == len(days)-1
}
