package sheet

import (
	"bytes"
	"hash/maphash"
)

// seen remembers serials and the line each first stood on: exact, and compact, because it is the
// one thing that grows with a file. The bytes of all serials stand in blocks one after the other;
// an open-addressing table of 32-bit hashes and references finds them. Everything but the table
// grows by blocks, so that nothing is copied.
type seen struct {
	seed   maphash.Seed
	slots  []slot // a power of two of them
	n      int
	recs   [][]rec
	blocks [][]byte
}

type slot struct{ hash, ref uint32 } // ref counts from 1; 0 is empty

type rec struct{ block, off, size, line uint32 }

const (
	blockSize = 1 << 16
	recBits   = 12
)

func newSeen() *seen { return &seen{seed: maphash.MakeSeed(), slots: make([]slot, 1<<10)} }

// first notes a serial and gives the line it stood on before, 0 if none.
func (s *seen) first(serial []byte, line int) int {
	if s.n*4 >= len(s.slots)*3 {
		s.grow()
	}
	h := uint32(maphash.Bytes(s.seed, serial))
	mask := uint32(len(s.slots) - 1)
	for i := h & mask; ; i = (i + 1) & mask {
		at := &s.slots[i]
		if at.ref == 0 {
			s.keep(serial, line)
			at.hash, at.ref = h, uint32(s.n)
			return 0
		}
		if at.hash != h {
			continue
		}
		k := at.ref - 1
		r := &s.recs[k>>recBits][k&(1<<recBits-1)]
		if bytes.Equal(s.blocks[r.block][r.off:r.off+r.size], serial) {
			return int(r.line)
		}
	}
}

func (s *seen) keep(serial []byte, line int) {
	last := len(s.blocks) - 1
	if last < 0 || len(s.blocks[last])+len(serial) > cap(s.blocks[last]) {
		s.blocks = append(s.blocks, make([]byte, 0, max(blockSize, len(serial))))
		last++
	}
	off := len(s.blocks[last])
	s.blocks[last] = append(s.blocks[last], serial...)
	if s.n&(1<<recBits-1) == 0 {
		s.recs = append(s.recs, make([]rec, 0, 1<<recBits))
	}
	tail := &s.recs[len(s.recs)-1]
	*tail = append(*tail, rec{uint32(last), uint32(off), uint32(len(serial)), uint32(line)})
	s.n++
}

// grow makes the table four times as large.
func (s *seen) grow() {
	old := s.slots
	s.slots = make([]slot, 4*len(old))
	mask := uint32(len(s.slots) - 1)
	for _, at := range old {
		if at.ref == 0 {
			continue
		}
		i := at.hash & mask
		for s.slots[i].ref != 0 {
			i = (i + 1) & mask
		}
		s.slots[i] = at
	}
}
