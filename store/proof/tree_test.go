package proof

import (
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"fmt"
	"math/rand/v2"
	"slices"
	"testing"
)

type treeVectors struct {
	Merkle struct {
		Leaves      []string `json:"leaves_hex"`
		Roots       []string `json:"roots_by_size"`
		Inclusion   map[string][]Hash
		Consistency map[string][]Hash
	} `json:"merkle_rfc6962_9162"`
}

func TestTreeVectors(t *testing.T) {
	t.Parallel()
	var v treeVectors
	testJSON(t, "vectors.json", &v)
	var leaves []Hash
	for _, text := range v.Merkle.Leaves {
		raw, err := hex.DecodeString(text)
		if err != nil {
			t.Fatal(err)
		}
		leaves = append(leaves, LeafHash(raw))
	}
	for n, want := range v.Merkle.Roots {
		if got := Root(leaves[:n]); got.String() != want {
			t.Errorf("root of %d: %s, want %s", n, got, want)
		}
	}
	for name, want := range v.Merkle.Inclusion {
		var m, n int
		scan(t, name, "m%d_n%d", &m, &n)
		path, err := InclusionProof(leaves[:n], m)
		if err != nil || !slices.Equal(path, want) {
			t.Errorf("%s: %v, %v", name, path, err)
		}
		if err := VerifyInclusion(leaves[m], uint64(m), uint64(n), want, Root(leaves[:n])); err != nil {
			t.Errorf("%s: %v", name, err)
		}
	}
	for name, want := range v.Merkle.Consistency {
		var m, n int
		scan(t, name, "%d_%d", &m, &n)
		path, err := ConsistencyProof(leaves[:n], m)
		if err != nil || !slices.Equal(path, want) {
			t.Errorf("%s: %v, %v", name, path, err)
		}
		if err := VerifyConsistency(uint64(m), uint64(n), want, Root(leaves[:m]), Root(leaves[:n])); err != nil {
			t.Errorf("%s: %v", name, err)
		}
	}
}

func scan(t *testing.T, name, format string, m, n *int) {
	t.Helper()
	if _, err := fmt.Sscanf(name, format, m, n); err != nil {
		t.Fatalf("%s: %v", name, err)
	}
}

// The naive tree below is RFC 9162 2.1 written down once more, from the data and with slices of
// bytes: MTH, PATH, PROOF and SUBPROOF as they stand there, sharing nothing with the package.

func naiveK(n int) int {
	k := 1
	for 2*k < n {
		k *= 2
	}
	return k
}

func naiveMTH(d [][]byte) []byte {
	var in []byte
	switch n := len(d); n {
	case 0:
	case 1:
		in = append([]byte{0x00}, d[0]...)
	default:
		k := naiveK(n)
		in = append(append([]byte{0x01}, naiveMTH(d[:k])...), naiveMTH(d[k:])...)
	}
	h := sha256.Sum256(in)
	return h[:]
}

func naivePath(m int, d [][]byte) [][]byte {
	n := len(d)
	if n == 1 {
		return nil
	}
	if k := naiveK(n); m < k {
		return append(naivePath(m, d[:k]), naiveMTH(d[k:]))
	} else {
		return append(naivePath(m-k, d[k:]), naiveMTH(d[:k]))
	}
}

func naiveSubproof(m int, d [][]byte, b bool) [][]byte {
	n := len(d)
	if m == n && b {
		return nil
	}
	if m == n {
		return [][]byte{naiveMTH(d)}
	}
	if k := naiveK(n); m <= k {
		return append(naiveSubproof(m, d[:k], b), naiveMTH(d[k:]))
	} else {
		return append(naiveSubproof(m-k, d[k:], false), naiveMTH(d[:k]))
	}
}

func sameHashes(got []Hash, want [][]byte) bool {
	return slices.EqualFunc(got, want, func(a Hash, b []byte) bool { return string(a[:]) == string(b) })
}

// entries makes n random entries with their leaf hashes.
func entries(rng *rand.Rand, n int) (data [][]byte, leaves []Hash) {
	for range n {
		entry := make([]byte, rng.IntN(70))
		for i := range entry {
			entry[i] = byte(rng.Uint32())
		}
		data, leaves = append(data, entry), append(leaves, LeafHash(entry))
	}
	return data, leaves
}

const treeSizes = 40 // every size up to here, with every leaf and every beginning

// Roots, proofs and their checks against the naive tree, and the frontier on the way.
func TestTreeAgainstNaive(t *testing.T) {
	t.Parallel()
	data, leaves := entries(rand.New(rand.NewPCG(9162, 1)), treeSizes)
	grown := &Frontier{}
	for n := range treeSizes + 1 {
		root := Root(leaves[:n])
		if !sameHashes([]Hash{root}, [][]byte{naiveMTH(data[:n])}) {
			t.Fatalf("root of %d differs", n)
		}
		if grown.Root() != root || grown.Size() != uint64(n) {
			t.Fatalf("frontier of %d differs", n)
		}
		for m := range n {
			path, err := InclusionProof(leaves[:n], m)
			if err != nil || !sameHashes(path, naivePath(m, data[:n])) {
				t.Fatalf("inclusion %d of %d differs: %v", m, n, err)
			}
			if err := VerifyInclusion(leaves[m], uint64(m), uint64(n), path, root); err != nil {
				t.Fatalf("inclusion %d of %d: %v", m, n, err)
			}
			path, err = ConsistencyProof(leaves[:n], m+1)
			if err != nil || !sameHashes(path, naiveSubproof(m+1, data[:n], true)) {
				t.Fatalf("consistency %d of %d differs: %v", m+1, n, err)
			}
			if err := VerifyConsistency(uint64(m+1), uint64(n), path, Root(leaves[:m+1]), root); err != nil {
				t.Fatalf("consistency %d of %d: %v", m+1, n, err)
			}
		}
		if n < treeSizes {
			grown = resumed(t, grown)
			grown.Append(leaves[n])
		}
	}
}

// resumed takes a frontier apart and up again, as the drain does between two runs.
func resumed(t *testing.T, f *Frontier) *Frontier {
	t.Helper()
	again, err := NewFrontier(f.Size(), f.Peaks())
	if err != nil {
		t.Fatal(err)
	}
	return again
}

// mutants are all ways to spoil a proof by one element.
func mutants(path []Hash) (all [][]Hash) {
	extra := LeafHash([]byte("extra"))
	for i := range len(path) + 1 {
		all = append(all, slices.Insert(slices.Clone(path), i, extra))
		if i == len(path) {
			break
		}
		flipped := slices.Clone(path)
		flipped[i][i%len(Hash{})] ^= 1
		all = append(all, flipped, slices.Delete(slices.Clone(path), i, i+1))
		if i > 0 {
			swapped := slices.Clone(path)
			swapped[i-1], swapped[i] = swapped[i], swapped[i-1]
			all = append(all, swapped)
		}
	}
	return all
}

func TestSpoiledProofsRefused(t *testing.T) {
	t.Parallel()
	_, leaves := entries(rand.New(rand.NewPCG(9162, 2)), 19)
	other := LeafHash([]byte("other"))
	for n := 1; n <= len(leaves); n++ {
		root := Root(leaves[:n])
		for m := range n {
			path, _ := InclusionProof(leaves[:n], m)
			for i, bad := range mutants(path) {
				if err := VerifyInclusion(leaves[m], uint64(m), uint64(n), bad, root); !errors.Is(err, ErrProof) {
					t.Fatalf("inclusion %d of %d, mutant %d: %v", m, n, i, err)
				}
			}
			for at := range n {
				if err := VerifyInclusion(leaves[m], uint64(at), uint64(n), path, root); (err == nil) != (at == m) {
					t.Fatalf("leaf %d of %d taken for leaf %d: %v", m, n, at, err)
				}
			}
			if VerifyInclusion(other, uint64(m), uint64(n), path, root) == nil || VerifyInclusion(leaves[m], uint64(m), uint64(n), path, other) == nil {
				t.Fatalf("inclusion %d of %d: another leaf or root accepted", m, n)
			}
		}
		spoilConsistency(t, leaves[:n], root, other)
	}
}

func spoilConsistency(t *testing.T, leaves []Hash, root, other Hash) {
	t.Helper()
	n := uint64(len(leaves))
	for m := uint64(1); m <= n; m++ {
		first := Root(leaves[:m])
		path, _ := ConsistencyProof(leaves, int(m))
		for i, bad := range mutants(path) {
			if err := VerifyConsistency(m, n, bad, first, root); !errors.Is(err, ErrProof) {
				t.Fatalf("consistency %d of %d, mutant %d: %v", m, n, i, err)
			}
		}
		if VerifyConsistency(m, n, path, other, root) == nil || VerifyConsistency(m, n, path, first, other) == nil {
			t.Fatalf("consistency %d of %d: another root accepted", m, n)
		}
	}
}

func TestTreeRanges(t *testing.T) {
	t.Parallel()
	_, leaves := entries(rand.New(rand.NewPCG(9162, 3)), 3)
	_, negative := InclusionProof(leaves, -1)
	_, beyond := InclusionProof(leaves, 3)
	_, nothing := ConsistencyProof(leaves, 0)
	_, more := ConsistencyProof(leaves, 4)
	_, peaks := NewFrontier(3, leaves[:1])
	for i, err := range []error{negative, beyond, nothing, more, peaks,
		VerifyInclusion(leaves[0], 3, 3, nil, leaves[0]), VerifyInclusion(leaves[0], 0, 0, nil, EmptyRoot()),
		VerifyConsistency(0, 3, nil, EmptyRoot(), Root(leaves)), VerifyConsistency(4, 3, nil, leaves[0], leaves[0])} {
		if !errors.Is(err, ErrTreeRange) {
			t.Errorf("%d: %v, want ErrTreeRange", i, err)
		}
	}
}

// Proofs of the wrong length whose hashes add up all the same: with a root made to fit, only
// the count of levels can refuse them.
func TestFittedProofsRefused(t *testing.T) {
	t.Parallel()
	a, b := LeafHash([]byte("a")), LeafHash([]byte("b"))
	two, swapped := nodeHash(a, b), nodeHash(b, a)
	for i, err := range []error{
		VerifyInclusion(a, 0, 1, []Hash{b}, two), VerifyInclusion(a, 0, 1, []Hash{b}, swapped),
		VerifyInclusion(a, 1, 2, []Hash{b, b}, nodeHash(b, swapped)), VerifyInclusion(a, 0, 2, nil, a),
		VerifyConsistency(3, 4, nil, a, a), VerifyConsistency(2, 4, nil, a, a), VerifyConsistency(1, 2, nil, a, a),
		VerifyConsistency(1, 2, []Hash{b, b}, nodeHash(b, a), nodeHash(b, two)),
		VerifyConsistency(1, 2, []Hash{b, b}, a, nodeHash(two, b)), VerifyConsistency(3, 4, []Hash{a}, a, a),
	} {
		if !errors.Is(err, ErrProof) {
			t.Errorf("%d: %v, want ErrProof", i, err)
		}
	}
}

// A million leaves leave at most 20 peaks behind, and one path is as short.
func TestFrontierStaysSmall(t *testing.T) {
	t.Parallel()
	var f Frontier
	for n := range 1_000_000 {
		f.Append(Hash{byte(n), byte(n >> 8), byte(n >> 16)})
		if len(f.peaks) > 20 || cap(f.peaks) > 64 {
			t.Fatalf("%d leaves: %d peaks, room for %d", n+1, len(f.peaks), cap(f.peaks))
		}
	}
}

func TestHashText(t *testing.T) {
	t.Parallel()
	h := LeafHash([]byte("text"))
	again, err := ParseHash(h.String())
	if err != nil || again != h {
		t.Errorf("%v, %v", again, err)
	}
	for _, s := range []string{"", h.String()[1:], h.String() + "0", "A" + h.String()[1:], "g" + h.String()[1:]} {
		if _, err := ParseHash(s); err == nil {
			t.Errorf("%q taken for a hash", s)
		}
	}
}

// FuzzVerify: no proof makes the checks panic, and what they accept for a tree of our own is
// the one true path.
func FuzzVerify(f *testing.F) {
	_, leaves := entries(rand.New(rand.NewPCG(9162, 4)), 21)
	f.Add(uint64(5), uint64(21), []byte{1, 2, 3})
	f.Add(uint64(1<<63), uint64(1<<63+1), make([]byte, 64*32))
	path, _ := InclusionProof(leaves, 5)
	var raw []byte
	for _, h := range path {
		raw = append(raw, h[:]...)
	}
	f.Add(uint64(5), uint64(21), raw)
	f.Fuzz(func(t *testing.T, m, n uint64, raw []byte) {
		var path []Hash
		for chunk := range slices.Chunk(raw, len(Hash{})) {
			var h Hash
			copy(h[:], chunk)
			path = append(path, h)
		}
		_ = VerifyConsistency(m, n, path, leaves[0], leaves[1])
		root := Root(leaves)
		if err := VerifyInclusion(leaves[5], m, n, path, root); err == nil && n == uint64(len(leaves)) {
			want, _ := InclusionProof(leaves, 5)
			if m != 5 || !slices.Equal(path, want) {
				t.Fatalf("accepted leaf 5 as %d with %v", m, path)
			}
		}
	})
}
