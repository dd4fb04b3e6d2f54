package proof

import (
	"crypto/subtle"
	"errors"
	"fmt"
	"math/big"
	"strings"
)

// ErrCode: what was typed is not a code of a paper, or has a typing error.
var ErrCode = errors.New("not a code of a paper, or mistyped")

// codeSymbols are the 32 symbols of Crockford's base 32: no I, L, O, U.
const codeSymbols = "0123456789ABCDEFGHJKMNPQRSTVWXYZ"

// A code is 26 symbols for 128 bits and 2 for their remainder modulo 1021, the greatest prime
// below 32². With a prime above 31², every single wrong symbol and every exchange of two
// neighbours among the 26 changes the remainder.
const (
	codeData    = 26
	codeLength  = codeData + 2
	codeModulus = 1021
	codeGroup   = 4
)

// CodePrefix is what a code holds: the first 128 bits of a record's hash.
type CodePrefix [16]byte

// ShortCode gives the code printed beside the QR code of a paper: the first 128 bits of the
// record's hash in groups of four symbols, the last two of which check the others, such as
// "1H4F-...". A person can read it aloud and type it.
func ShortCode(h Hash) string {
	n := new(big.Int).SetBytes(h[:len(CodePrefix{})])
	rest := new(big.Int).Mod(n, big.NewInt(codeModulus)).Int64()
	n.Lsh(n, 10).Or(n, big.NewInt(rest))
	var code [codeLength]byte
	base, digit := big.NewInt(32), new(big.Int)
	for i := codeLength - 1; i >= 0; i-- {
		n.DivMod(n, base, digit)
		code[i] = codeSymbols[digit.Int64()]
	}
	groups := make([]string, 0, codeLength/codeGroup)
	for i := 0; i < codeLength; i += codeGroup {
		groups = append(groups, string(code[i:i+codeGroup]))
	}
	return strings.Join(groups, "-")
}

// ParseShortCode reads a code as people type it: capitals or not, with or without blanks and
// hyphens, O for 0, I or L for 1. It fails with ErrCode.
func ParseShortCode(s string) (CodePrefix, error) {
	n, count := new(big.Int), 0
	for _, r := range strings.ToUpper(s) {
		switch r {
		case ' ', '-':
			continue
		case 'O':
			r = '0'
		case 'I', 'L':
			r = '1'
		}
		i := strings.IndexRune(codeSymbols, r)
		if count++; i < 0 || count > codeLength {
			return CodePrefix{}, fmt.Errorf("%w: symbol %d", ErrCode, count)
		}
		n.Lsh(n, 5).Or(n, big.NewInt(int64(i)))
	}
	if count < codeLength {
		return CodePrefix{}, fmt.Errorf("%w: %d symbols instead of %d", ErrCode, count, codeLength)
	}
	rest := new(big.Int).And(n, big.NewInt(1<<10-1)).Int64()
	var prefix CodePrefix
	n.Rsh(n, 10)
	if n.BitLen() > 8*len(prefix) || new(big.Int).Mod(n, big.NewInt(codeModulus)).Int64() != rest {
		return CodePrefix{}, fmt.Errorf("%w: a symbol is wrong", ErrCode)
	}
	n.FillBytes(prefix[:])
	return prefix, nil
}

// Matches reports whether the code belongs to a record with hash h, in a time that does not
// depend on how much of it agrees.
func (p CodePrefix) Matches(h Hash) bool {
	return subtle.ConstantTimeCompare(p[:], h[:len(p)]) == 1
}
