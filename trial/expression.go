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
	case RangeOf:
		return "max Ri - min Ri, i = " + dayRange(f.Days)
	case StandardDeviation:
		n := len(f.Days)
		if f.Divisor == "n-1" {
			n--
		}
		return fmt.Sprintf("√(Σ (Ri - %s)²/%d), i = %s", meanOf(f.Days), n, dayRange(f.Days))
	case PeriodRange:
		return "max Sk - min Sk, " + sumsOf(f.Periods)
	case GreatestStep:
		return "max |Sk - Sk-1|, " + sumsOf(f.Periods)
	}
	return weighted(f)
}

// sumsOf names the sums Sk of periods: all of them, or the first two and the last where there are
// more than three.
func sumsOf(periods [][]int) string {
	var list []string
	for k, days := range periods {
		if len(periods) > 3 && k == 2 {
			list = append(list, "...")
		}
		if len(periods) > 3 && k >= 2 && k < len(periods)-1 {
			continue
		}
		names := make([]string, len(days))
		for i, d := range days {
			names[i] = fmt.Sprintf("R%d", d)
		}
		if consecutive(days) && len(days) > 3 {
			names = []string{names[0], "...", names[len(names)-1]}
		}
		list = append(list, fmt.Sprintf("S%d = %s", k+1, strings.Join(names, "+")))
	}
	return strings.Join(list, ", ")
}

// weighted writes a weighted sum in the symbols of its criteria.
func weighted(f Formula) string {
	var b strings.Builder
	if f.Constant.Sign() != 0 {
		b.WriteString(factor(f.Constant))
	}
	for _, t := range f.Terms {
		sign, w := " + ", t.Weight
		if w.Sign() < 0 {
			sign, w = " - ", w.Neg()
		}
		if b.Len() == 0 {
			sign = strings.TrimPrefix(strings.TrimSpace(sign), "+")
		}
		b.WriteString(sign)
		if w.Cmp(Ratio(1, 1)) != 0 {
			b.WriteString(factor(w) + "·")
		}
		if t.Absolute {
			b.WriteString("|" + t.Symbol + "|")
		} else {
			b.WriteString(t.Symbol)
		}
	}
	return b.String()
}

// factor writes a weight as a short decimal if it is one, else as a fraction in brackets.
func factor(e Exact) string {
	s := e.short()
	if back, err := ParseExact(s); err == nil && back.Cmp(e) == 0 {
		return s
	}
	return "(" + e.String() + ")"
}

// degrees is the nominal temperature difference between the days of a formula.
func (p *Programme) degrees(f Formula) string {
	d := p.meanTemperature(f.Of).Sub(p.meanTemperature(f.From))
	if d.Sign() < 0 {
		return "(" + factor(d) + ")"
	}
	return factor(d)
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
