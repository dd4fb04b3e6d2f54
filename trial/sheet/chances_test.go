package sheet

import (
	"math"
	"strings"
	"testing"

	"ratehouse/trial"
)

// Probabilities stand between unreachable and calibre, are blank where there is none, and belong to
// one movement alone.
func TestVerdictsWithChances(t *testing.T) {
	t.Parallel()
	p := trial.ISO3159()
	j, err := trial.NewJudge(p, "1")
	if err != nil {
		t.Fatal(err)
	}
	var r trial.Result
	j.Rates(nil, &r)
	for format, want := range map[VerdictFormat]string{
		CSV: "serial,category,verdict,M,V,Vmax,D,P,C,R,failed,unreachable,pM,pV,pVmax,pD,pP,pC,pR,pAll,calibre,end\n" +
			"A,1,open,,,,,,,,,,0.500000,,0.000000,1.000000,0.333333,0.000001,0.999999,,K,out\n" +
			"B,1,open,,,,,,,,,,,,,,,,,,K,\n",
		JSON: `"unreachable":null,"pM":"0.500000","pV":null,"pVmax":"0.000000","pD":"1.000000","pP":"0.333333","pC":"0.000001","pR":"0.999999","pAll":null,"calibre":"K","end":"out"}`,
	} {
		var b strings.Builder
		v := NewVerdictsWithChances(&b, p, format, true, "end")
		none := math.NaN()
		v.WithChances([]float64{0.5, none, 0, 1, 1. / 3, 0.000001, 0.999999}, none)
		if err := v.Write([]byte("A"), []byte("1"), []byte("K"), &r, []byte("out")); err != nil {
			t.Fatal(err)
		}
		if err := v.Write([]byte("B"), []byte("1"), []byte("K"), &r, nil); err != nil {
			t.Fatal(err)
		}
		if err := v.Close(); err != nil {
			t.Fatal(err)
		}
		if got := b.String(); format == CSV && got != want || !strings.Contains(got, want) {
			t.Errorf("%s:\n%s\nwant\n%s", format, got, want)
		}
	}
}
