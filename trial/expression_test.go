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
