package sheet

import (
	"bytes"
	"hash/maphash"
)

// seen remembers serials and the line each first stood on: exact, and compact, because it is the
// one thing that grows with a file. The bytes of all serials stand in blocks one after the other;
// an open-addressing table of 32-bit references finds them.
type seen struct {
	seed   maphash.Seed
	slots  []slot // a power of two of them
	recs   []rec
	blocks [][]byte
}

type slot struct{ hash, ref uint32 } // ref counts from 1; 0 is empty

type rec struct {
	block, off, size uint32
	line             uint32
}

const blockSize = 1 << 16

func newSeen() *seen { return &seen{seed: maphash.MakeSeed(), slots: make([]slot, 1<<10)} }

// first notes a serial and gives the line it stood on before, 0 if none.
func (s *seen) first(serial []byte, line int) int {
	if len(s.recs)*4 >= len(s.slots)*3 {
		s.grow()
	}
	h := maphash.Bytes(s.seed, serial)
	tag := uint32(h >> 32)
	mask := uint64(len(s.slots) - 1)
	for i := h & mask; ; i = (i + 1) & mask {
		at := &s.slots[i]
		if at.ref == 0 {
			s.recs = append(s.recs, s.keep(serial, line))
			at.hash, at.ref = tag, uint32(len(s.recs))
			return 0
		}
		if r := &s.recs[at.ref-1]; at.hash == tag && bytes.Equal(s.bytes(r), serial) {
			return int(r.line)
		}
	}
}

func (s *seen) bytes(r *rec) []byte { return s.blocks[r.block][r.off : r.off+r.size] }

func (s *seen) keep(serial []byte, line int) rec {
	last := len(s.blocks) - 1
	if last < 0 || len(s.blocks[last])+len(serial) > cap(s.blocks[last]) {
		s.blocks = append(s.blocks, make([]byte, 0, max(blockSize, len(serial))))
		last++
	}
	off := len(s.blocks[last])
	s.blocks[last] = append(s.blocks[last], serial...)
	return rec{uint32(last), uint32(off), uint32(len(serial)), uint32(line)}
}

// grow doubles the table. Serials are hashed again: the full hash is not kept, to stay compact.
func (s *seen) grow() {
	s.slots = make([]slot, 2*len(s.slots))
	mask := uint64(len(s.slots) - 1)
	for k := range s.recs {
		h := maphash.Bytes(s.seed, s.bytes(&s.recs[k]))
		i := h & mask
		for s.slots[i].ref != 0 {
			i = (i + 1) & mask
		}
		s.slots[i] = slot{uint32(h >> 32), uint32(k + 1)}
	}
}
