package trial

import (
	"encoding/binary"
	"errors"
)

// ErrPriorBytes: these are not the bytes of a Prior.
var ErrPriorBytes = errors.New("prior: not its bytes")

// priorMostDays bounds what is believed of a length that was read, so that broken bytes cannot ask for
// all memory.
const priorMostDays = 1 << 12

// Bytes is the history as bytes, for ParsePrior: the number of days, then run by run the number of
// movements and, unless it is 0, sums and products, all as varints (Protocol Buffers encoding, zigzag
// where a sign is possible). The same history gives the same bytes.
func (p *Prior) Bytes() []byte {
	out := binary.AppendUvarint(nil, uint64(p.Days))
	for _, m := range p.Runs {
		out = binary.AppendVarint(out, m.N)
		for _, list := range [][]int64{m.Sum, m.Cross} {
			for _, x := range list {
				out = binary.AppendVarint(out, x)
			}
		}
	}
	return out
}

// ParsePrior reads what Bytes wrote. The error is ErrPriorBytes.
func ParsePrior(data []byte) (*Prior, error) {
	days, n := binary.Uvarint(data)
	if n <= 0 || days > priorMostDays {
		return nil, ErrPriorBytes
	}
	data = data[n:]
	whole := true
	next := func() int64 {
		x, n := binary.Varint(data)
		if n <= 0 {
			whole = false
			return 0
		}
		data = data[n:]
		return x
	}
	p := NewPrior(int(days))
	for i := range p.Runs {
		m, k := &p.Runs[i], i+1
		if m.N = next(); m.N == 0 {
			continue
		}
		products := k * (k + 1) / 2
		if m.N < 0 || len(data) < k+products { // a value takes a byte at least
			return nil, ErrPriorBytes
		}
		m.Sum, m.Cross = make([]int64, k), make([]int64, products)
		for _, list := range [][]int64{m.Sum, m.Cross} {
			for j := range list {
				list[j] = next()
			}
		}
	}
	if !whole || len(data) != 0 {
		return nil, ErrPriorBytes
	}
	return p, nil
}
