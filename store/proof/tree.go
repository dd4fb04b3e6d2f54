package proof

import (
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"fmt"
	"math/bits"
)

// Hash is a SHA-256 value; its text is 64 lower-case hexadecimal digits.
type Hash [sha256.Size]byte

// String gives the hexadecimal text.
func (h Hash) String() string { return hex.EncodeToString(h[:]) }

// MarshalText gives the hexadecimal text.
func (h Hash) MarshalText() ([]byte, error) { return []byte(h.String()), nil }

// UnmarshalText reads exactly 64 lower-case hexadecimal digits.
func (h *Hash) UnmarshalText(text []byte) error {
	parsed, err := ParseHash(string(text))
	if err == nil {
		*h = parsed
	}
	return err
}

// ParseHash reads the hexadecimal text of a hash; capitals are refused, one hash has one text.
func ParseHash(s string) (Hash, error) {
	raw, err := hex.DecodeString(s)
	if err != nil || len(raw) != sha256.Size || hex.EncodeToString(raw) != s {
		return Hash{}, fmt.Errorf("a hash is %d lower-case hexadecimal digits, not %q", 2*sha256.Size, s)
	}
	return Hash(raw), nil
}

// Errors of the tree.
var (
	// ErrProof: a proof does not lead to the root it should.
	ErrProof = errors.New("the proof does not lead to the given root")
	// ErrTreeRange: an index or a size lies outside the tree, or a frontier is not one of its size.
	ErrTreeRange = errors.New("outside the tree")
)

// LeafHash is the hash of one entry: SHA-256(0x00 || data) (RFC 9162 2.1.1).
func LeafHash(data []byte) Hash {
	h := sha256.New()
	h.Write([]byte{0})
	h.Write(data)
	return Hash(h.Sum(nil))
}

// nodeHash is the hash of an inner node: SHA-256(0x01 || left || right) (RFC 9162 2.1.1). The
// prefix differs from a leaf's, so that no entry can pose as a node.
func nodeHash(left, right Hash) Hash {
	var buf [1 + 2*sha256.Size]byte
	buf[0] = 1
	copy(buf[1:], left[:])
	copy(buf[1+sha256.Size:], right[:])
	return sha256.Sum256(buf[:])
}

// EmptyRoot is the root of a tree without leaves: SHA-256 of nothing.
func EmptyRoot() Hash { return sha256.Sum256(nil) }

// Root is the Merkle tree hash of leaf hashes in order (RFC 9162 2.1.1). It does not keep leaves.
func Root(leaves []Hash) Hash {
	switch n := len(leaves); n {
	case 0:
		return EmptyRoot()
	case 1:
		return leaves[0]
	default:
		k := split(n)
		return nodeHash(Root(leaves[:k]), Root(leaves[k:]))
	}
}

// split is the largest power of two strictly below n, for n > 1.
func split(n int) int { return 1 << (bits.Len(uint(n-1)) - 1) }

// InclusionProof gives the nodes that lead from leaf m (from 0) to the root of leaves
// (RFC 9162 2.1.3.1). It fails with ErrTreeRange if there is no leaf m.
func InclusionProof(leaves []Hash, m int) ([]Hash, error) {
	if m < 0 || m >= len(leaves) {
		return nil, fmt.Errorf("leaf %d of a tree of %d: %w", m, len(leaves), ErrTreeRange)
	}
	path := make([]Hash, 0, bits.Len(uint(len(leaves))))
	return inclusion(path, leaves, m), nil
}

func inclusion(path, leaves []Hash, m int) []Hash {
	if len(leaves) == 1 {
		return path
	}
	k := split(len(leaves))
	if m < k {
		return append(inclusion(path, leaves[:k], m), Root(leaves[k:]))
	}
	return append(inclusion(path, leaves[k:], m-k), Root(leaves[:k]))
}

// VerifyInclusion checks that leaf is number m (from 0) of a tree of n leaves with that root
// (RFC 9162 2.1.3.2).
func VerifyInclusion(leaf Hash, m, n uint64, path []Hash, root Hash) error {
	if m >= n {
		return fmt.Errorf("leaf %d of a tree of %d: %w", m, n, ErrTreeRange)
	}
	fn, sn, r := m, n-1, leaf
	for _, p := range path {
		if sn == 0 {
			return ErrProof
		}
		if fn&1 == 1 || fn == sn {
			r = nodeHash(p, r)
			for fn&1 == 0 && fn != 0 {
				fn, sn = fn>>1, sn>>1
			}
		} else {
			r = nodeHash(r, p)
		}
		fn, sn = fn>>1, sn>>1
	}
	if sn != 0 || r != root {
		return ErrProof
	}
	return nil
}

// ConsistencyProof gives the nodes that show the tree of the first m leaves to be the beginning
// of the tree of all leaves (RFC 9162 2.1.4.1), for 0 < m <= len(leaves).
func ConsistencyProof(leaves []Hash, m int) ([]Hash, error) {
	if m < 1 || m > len(leaves) {
		return nil, fmt.Errorf("first %d of a tree of %d: %w", m, len(leaves), ErrTreeRange)
	}
	path := make([]Hash, 0, 1+bits.Len(uint(len(leaves))))
	return subproof(path, leaves, m, true), nil
}

// subproof is SUBPROOF of RFC 9162 2.1.4.1; whole says that the first m leaves are a complete
// subtree whose root the checker already has.
func subproof(path, leaves []Hash, m int, whole bool) []Hash {
	if m == len(leaves) {
		if whole {
			return path
		}
		return append(path, Root(leaves))
	}
	k := split(len(leaves))
	if m <= k {
		return append(subproof(path, leaves[:k], m, whole), Root(leaves[k:]))
	}
	return append(subproof(path, leaves[k:], m-k, false), Root(leaves[:k]))
}

// VerifyConsistency checks that the tree of m leaves with root first is the beginning of the
// tree of n leaves with root second (RFC 9162 2.1.4.2), for 0 < m <= n.
func VerifyConsistency(m, n uint64, path []Hash, first, second Hash) error {
	if m < 1 || m > n {
		return fmt.Errorf("first %d of a tree of %d: %w", m, n, ErrTreeRange)
	}
	if m == n {
		if len(path) != 0 || first != second {
			return ErrProof
		}
		return nil
	}
	if m&(m-1) == 0 {
		path = append([]Hash{first}, path...)
	}
	if len(path) == 0 {
		return ErrProof
	}
	return climb(m, n, path, first, second)
}

// climb walks both trees from the lowest common node up: steps 4 to 7 of RFC 9162 2.1.4.2.
func climb(m, n uint64, path []Hash, first, second Hash) error {
	fn, sn := m-1, n-1
	for fn&1 == 1 {
		fn, sn = fn>>1, sn>>1
	}
	fr, sr := path[0], path[0]
	for _, c := range path[1:] {
		if sn == 0 {
			return ErrProof
		}
		if fn&1 == 1 || fn == sn {
			fr, sr = nodeHash(c, fr), nodeHash(c, sr)
			for fn&1 == 0 && fn != 0 {
				fn, sn = fn>>1, sn>>1
			}
		} else {
			sr = nodeHash(sr, c)
		}
		fn, sn = fn>>1, sn>>1
	}
	if sn != 0 || fr != first || sr != second {
		return ErrProof
	}
	return nil
}

// Frontier grows a tree leaf by leaf and holds only the roots of its complete subtrees, at most
// one for each bit of its size. The zero Frontier is the empty tree. It is not safe for
// concurrent use.
type Frontier struct {
	size  uint64
	peaks []Hash // greatest subtree first
}

// NewFrontier takes up a tree where Peaks left it. It fails with ErrTreeRange if size needs
// another number of peaks; whether they are the right ones shows in the root.
func NewFrontier(size uint64, peaks []Hash) (*Frontier, error) {
	if want := bits.OnesCount64(size); len(peaks) != want {
		return nil, fmt.Errorf("a tree of %d leaves has %d peaks, not %d: %w", size, want, len(peaks), ErrTreeRange)
	}
	return &Frontier{size: size, peaks: append([]Hash(nil), peaks...)}, nil
}

// Append adds one leaf hash at the end.
func (f *Frontier) Append(leaf Hash) {
	for n := f.size; n&1 == 1; n >>= 1 {
		last := len(f.peaks) - 1
		leaf = nodeHash(f.peaks[last], leaf)
		f.peaks = f.peaks[:last]
	}
	f.peaks = append(f.peaks, leaf)
	f.size++
}

// Size is the number of leaves.
func (f *Frontier) Size() uint64 { return f.size }

// Peaks gives the roots of the complete subtrees, greatest first, for NewFrontier.
func (f *Frontier) Peaks() []Hash { return append([]Hash(nil), f.peaks...) }

// Root is the Merkle tree hash of all leaves appended so far.
func (f *Frontier) Root() Hash {
	if f.size == 0 {
		return EmptyRoot()
	}
	last := len(f.peaks) - 1
	root := f.peaks[last]
	for i := last - 1; i >= 0; i-- {
		root = nodeHash(f.peaks[i], root)
	}
	return root
}
