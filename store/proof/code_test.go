package proof

import (
	"errors"
	"math/rand/v2"
	"strings"
	"testing"
)

func randomHash(rng *rand.Rand) (h Hash) {
	for i := range h {
		h[i] = byte(rng.Uint32())
	}
	return h
}

// Codes that can be told without the program: of 0, of 1, and of 2^128-1, whose remainder is
// summed here power by power.
func TestShortCodeKnown(t *testing.T) {
	t.Parallel()
	rest, power := 0, 1
	for range 128 { // 2^128-1 = sum of 2^i
		rest, power = (rest+power)%1021, power*2%1021
	}
	ones := Hash{}
	for i := range 16 {
		ones[i] = 0xff
	}
	want := "7ZZZ-ZZZZ-ZZZZ-ZZZZ-ZZZZ-ZZZZ-ZZ" + string([]byte{codeSymbols[rest/32], codeSymbols[rest%32]})
	for _, c := range []struct {
		hash Hash
		code string
	}{{Hash{}, "0000-0000-0000-0000-0000-0000-0000"}, {Hash{15: 1}, "0000-0000-0000-0000-0000-0000-0101"}, {ones, want}} {
		if got := ShortCode(c.hash); got != c.code {
			t.Errorf("%s, want %s", got, c.code)
		}
	}
}

func TestShortCodeReadsBack(t *testing.T) {
	t.Parallel()
	rng := rand.New(rand.NewPCG(32, 1))
	for range 2_000 {
		h, other := randomHash(rng), randomHash(rng)
		code := ShortCode(h)
		for _, typed := range []string{code, strings.ToLower(code), strings.ReplaceAll(code, "-", ""), strings.ReplaceAll(code, "-", " "),
			strings.NewReplacer("0", "o", "1", "l").Replace(code), strings.NewReplacer("0", "O", "1", "I").Replace(code)} {
			prefix, err := ParseShortCode(typed)
			if err != nil || !prefix.Matches(h) || prefix.Matches(other) {
				t.Fatalf("%s: %v", typed, err)
			}
		}
	}
}

// Every single wrong symbol and every exchange of two different neighbours is found, at every
// place, the check symbols included.
func TestShortCodeFindsMistakes(t *testing.T) {
	t.Parallel()
	rng := rand.New(rand.NewPCG(32, 2))
	for range 60 {
		code := []byte(strings.ReplaceAll(ShortCode(randomHash(rng)), "-", ""))
		for i, right := range code {
			for _, wrong := range []byte(codeSymbols) {
				if code[i] = wrong; wrong != right {
					refuseCode(t, string(code))
				}
			}
			code[i] = right
			if i > 0 && code[i-1] != code[i] {
				code[i-1], code[i] = code[i], code[i-1]
				refuseCode(t, string(code))
				code[i-1], code[i] = code[i], code[i-1]
			}
		}
		refuseCode(t, string(code[1:]))
		refuseCode(t, string(code)+"0")
	}
	for _, s := range []string{"", "-", "U" + strings.Repeat("0", 27), "*" + strings.Repeat("0", 27), strings.Repeat("0", 27) + "é", strings.Repeat("Z", 28)} {
		refuseCode(t, s)
	}
}

func refuseCode(t *testing.T, code string) {
	t.Helper()
	if _, err := ParseShortCode(code); !errors.Is(err, ErrCode) {
		t.Fatalf("%s: %v, want ErrCode", code, err)
	}
}
