package trial

// Printed writes a criterion for paper or screen: so many decimals, half to even, and one more,
// and again one more, as long as the rounded number would contradict the verdict against the
// limits (6.04 against a limit of 6 prints 6.04, not 6.0; domain notes, section 6). A number that
// no decimal can tell from its limit prints as p/q.
func Printed(value Exact, limit Limit, decimals int) string {
	const most = 18
	for places := max(decimals, 0); places <= decimals+most; places++ {
		s := value.Decimal(places)
		shown, err := ParseExact(s)
		if err == nil && sameSide(value, shown, limit) {
			return s
		}
	}
	return value.String()
}

// sameSide tells whether both numbers stand alike to each limit.
func sameSide(value, shown Exact, l Limit) bool {
	return (!l.HasMin || (value.Cmp(l.Min) < 0) == (shown.Cmp(l.Min) < 0)) &&
		(!l.HasMax || (value.Cmp(l.Max) > 0) == (shown.Cmp(l.Max) > 0))
}
