package chart

import (
	"math"
	"strconv"
	"strings"
)

// Scale maps numbers onto pixels, linearly.
type Scale struct{ min, max, from, to float64 }

// NewScale maps min to the pixel from and max to the pixel to. A range without width, or one that is
// no range, is widened by one to either side, so that no coordinate is ever undefined.
func NewScale(min, max, from, to float64) Scale {
	if !(max > min) || math.IsInf(max-min, 0) {
		min, max = min-1, min+1
	}
	return Scale{min, max, from, to}
}

// At is the pixel of x.
func (s Scale) At(x float64) float64 { return s.from + (x-s.min)/(s.max-s.min)*(s.to-s.from) }

// Tick is a mark on an axis: where it lies, and the same number as an exact decimal for its label.
type Tick struct {
	At  float64
	Dec string
}

// Ticks are the round numbers of the steps 1, 2 and 5 times a power of ten that lie within [min, max],
// as dense as at most most of them allow. They are whole multiples of the step, so that zero is zero.
// A range without width has the one tick that is nearest.
func Ticks(min, max float64, most int) []Tick {
	if math.IsNaN(min) || math.IsNaN(max) || math.IsInf(max-min, 0) || max < min || most < 1 {
		return nil
	}
	span := max - min
	if span == 0 {
		span = 1
	}
	exp := int(math.Floor(math.Log10(span))) - 2
	for ; ; exp++ {
		for _, mantissa := range []int{1, 2, 5} {
			step := float64(mantissa) * math.Pow10(exp)
			first, last := int(math.Ceil(min/step-1e-9)), int(math.Floor(max/step+1e-9))
			if last-first+1 > most {
				continue
			}
			if last < first {
				first = int(math.Round(min / step))
				last = first
			}
			ticks := make([]Tick, 0, last-first+1)
			for i := first; i <= last; i++ {
				ticks = append(ticks, Tick{float64(i) * step, decimal(i*mantissa, exp)})
			}
			return ticks
		}
	}
}

// Widen gives the least range that ends on ticks and holds [min, max].
func Widen(min, max float64, most int) (float64, float64) {
	t := Ticks(min, max, most)
	if len(t) < 2 {
		return min, max
	}
	step := t[1].At - t[0].At
	return math.Floor(min/step+1e-9) * step, math.Ceil(max/step-1e-9) * step
}

// decimal is n times ten to the exp, exactly.
func decimal(n, exp int) string {
	s := strconv.Itoa(n)
	if exp >= 0 {
		if n != 0 {
			s += strings.Repeat("0", exp)
		}
		return s
	}
	neg := strings.HasPrefix(s, "-")
	s = strings.TrimPrefix(s, "-")
	if pad := 1 - exp - len(s); pad > 0 {
		s = strings.Repeat("0", pad) + s
	}
	s = s[:len(s)+exp] + "." + s[len(s)+exp:]
	if neg {
		s = "-" + s
	}
	return s
}

// places is the number of decimals that all ticks of an axis are labelled with.
func places(ticks []Tick) int {
	most := 0
	for _, t := range ticks {
		_, frac, _ := strings.Cut(strings.TrimRight(t.Dec, "0"), ".")
		if strings.Contains(t.Dec, ".") && len(frac) > most {
			most = len(frac)
		}
	}
	return most
}

// px writes a coordinate: tenths of a pixel are enough.
func px(x float64) string { return strconv.FormatFloat(x, 'f', 1, 64) }

// textWidth estimates the width of a label in the axis type, for the boxes behind tips.
func textWidth(s string) float64 { return 6.2*float64(len([]rune(s))) + 12 }
