package trial

import "math/big"

// Criteria over sums of days: each day alone for a range of rates, a week for the weekly sums of a
// marine chronometer's trial. N is the greatest sum less the least (extent), or the greatest
// difference between neighbouring sums (step).

func (p *Programme) periodic(s shape, periods [][]int) criterion {
	c := criterion{shape: s, q: 1}
	var all []int
	var before int64
	for i, period := range periods {
		days := make([]int32, len(period))
		for k, d := range period {
			days[k] = int32(d - 1)
		}
		c.periods = append(c.periods, days)
		all = append(all, period...)
		n := int64(len(period))
		if s == step && i > 0 {
			c.lip = max(c.lip, before+n)
		} else if s == extent {
			c.lip = max(c.lip, 2*n)
		}
		before = n
	}
	c.require(p, all)
	return c
}

// singles makes a period of each day.
func singles(days []int) [][]int {
	periods := make([][]int, len(days))
	for i, d := range days {
		periods[i] = []int{d}
	}
	return periods
}

func (c *criterion) evalPeriods(r []int64) int64 {
	var least, most, jump, before int64
	for i, days := range c.periods {
		var sum int64
		for _, d := range days {
			sum += r[d]
		}
		if i == 0 {
			least, most = sum, sum
		} else {
			jump = max(jump, magnitude(sum-before))
		}
		least, most, before = min(least, sum), max(most, sum), sum
	}
	if c.shape == step {
		return jump
	}
	return most - least
}

// exactPeriods is evalPeriods by big numbers.
func (c *criterion) exactPeriods(rate func(d int32) *big.Rat) *big.Rat {
	var least, most, before *big.Rat
	jump := new(big.Rat)
	for i, days := range c.periods {
		sum := new(big.Rat)
		for _, d := range days {
			sum.Add(sum, rate(d))
		}
		if i > 0 {
			if d := new(big.Rat).Sub(sum, before); d.Abs(d).Cmp(jump) > 0 {
				jump = d
			}
		}
		if least == nil || sum.Cmp(least) < 0 {
			least = sum
		}
		if most == nil || sum.Cmp(most) > 0 {
			most = sum
		}
		before = sum
	}
	if c.shape == step {
		return jump
	}
	return new(big.Rat).Sub(most, least)
}
