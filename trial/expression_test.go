package trial

import "testing"

// The expressions are those of the project's domain notes, section 1.6.
func TestExpression(t *testing.T) {
	t.Parallel()
	p := ISO3159()
	for symbol, want := range map[string]string{
		"M":    "(R1+...+R10)/10",
		"V":    "(|R2-R1|+|R4-R3|+|R6-R5|+|R8-R7|+|R10-R9|)/5",
		"Vmax": "max(|R2-R1|, |R4-R3|, |R6-R5|, |R8-R7|, |R10-R9|)",
		"D":    "(R1+R2)/2 - (R9+R10)/2",
		"P":    "max |Ri - (R1+...+R10)/10|, i = 1...10",
		"C":    "(R13 - R11)/30",
		"R":    "R15 - (R1+R2)/2",
	} {
		c, ok := p.Criterion(symbol)
		if !ok {
			t.Fatalf("no criterion %s", symbol)
		}
		if got := p.Expression(c.Formula); got != want {
			t.Errorf("%s = %q, want %q", symbol, got, want)
		}
	}
}

func TestExpressionOfOtherKinds(t *testing.T) {
	t.Parallel()
	p := ISO3159()
	weeks := [][]int{{1, 2, 3, 4, 5, 6, 7}, {8, 9}, {10, 11}, {12, 13}}
	for want, f := range map[string]Formula{
		"max Ri - min Ri, i = 1...3":                                     {Kind: RangeOf, Days: []int{1, 2, 3}},
		"√(Σ (Ri - (R1+R2+R4)/3)²/2), i = 1, 2, 4":                       {Kind: StandardDeviation, Days: []int{1, 2, 4}, Divisor: "n-1"},
		"max Sk - min Sk, S1 = R1+...+R7, S2 = R8+R9":                    {Kind: PeriodRange, Periods: weeks[:2]},
		"max |Sk - Sk-1|, S1 = R1+...+R7, S2 = R8+R9, ..., S4 = R12+R13": {Kind: GreatestStep, Periods: weeks},
		"1000 - 12.5·|M| - (100/3)·|D| + R": {Kind: WeightedSum, Constant: Ratio(1000, 1), Terms: []Term{
			{Ratio(-25, 2), "M", true}, {Ratio(-100, 3), "D", true}, {Ratio(1, 1), "R", false}}},
		"-2·M":                     {Kind: WeightedSum, Terms: []Term{{Ratio(-2, 1), "M", false}}},
		"(R13 - (R10+R11)/2)/22.5": {Kind: PerDegree, Of: []int{13}, From: []int{10, 11}},
		"(R11 - R13)/(-30)":        {Kind: PerDegree, Of: []int{11}, From: []int{13}},
	} {
		if got := p.Expression(f); got != want {
			t.Errorf("%q, want %q", got, want)
		}
	}
}
