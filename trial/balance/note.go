package balance

import (
	"cmp"
	"math"
	"slices"

	"ratehouse/trial"
)

// Note is the diagnosis for the adjuster's bench: an opinion from daily rates, never part of a report.
// Each part is in the order in which it is to be read.
type Note struct {
	Regulation []Finding // what regulating alone can do
	Beyond     []Finding // what it cannot mend
	Look       []Finding // where to look first
	Validity   []Finding // what the opinion rests on
}

// Finding is one statement: a code and its numbers, which web/words says. Numbers are rounded to
// thousandths.
type Finding struct {
	Code     Code
	Symbols  []string
	Days     []int
	Position trial.Position
	Organ    string
	Values   []trial.Milli
}

// Code names a finding; the meaning of Values stands beside each.
type Code string

// Regulation.
const (
	Undecided    Code = "undecided"      // Symbols not decided: nothing is said of regulating
	Room         Code = "room"           // passes; Values: how much it could be shifted, least and greatest, s/d
	Regulate     Code = "regulate"       // Values: shift to be made, least, greatest and middle, s/d
	Units        Code = "units"          // Organ; Values: the same in divisions or turns, least and greatest
	NoStep       Code = "no_step"        // the calibre card does not say what a division or turn does
	NotEnough    Code = "not_enough"     // Symbols stay outside whatever the mean
	MeanAsWell   Code = "mean_as_well"   // M is outside too; Values: shift that brings it inside once the rest is mended, least and greatest
	MeanIsInside Code = "mean_is_inside" // what is outside has nothing to do with regulating
)

// Beyond.
const (
	OneVariation Code = "one_variation" // Days and Position of one pair that stands out; Values: its variation, the median of the others, s/d
	Unsteady     Code = "unsteady"      // Values: mean and greatest variation, s/d
	Accessory    Code = "accessory"     // Days; Values: what the day with it differs by, s/d
	HangFlat     Code = "hang_flat"     // Values: the criterion, s/d: vertical minus horizontal
	FlatPair     Code = "flat_pair"     // Values: dial up minus dial down, s/d
	Vertical     Code = "vertical"      // vertical pattern; Values: size s/d, direction degrees, their standard uncertainties
	FarPosition  Code = "far_position"  // Days and Position farthest from the mean; Values: how far, s/d
	Thermal      Code = "thermal"       // Values: the criterion, s/d per °C, and the error of compensation behind it, 10^-6 per °C
	Resumption   Code = "resumption"    // Values: the criterion, s/d
)

// Look: common practice, no source. Each follows from one finding above.
const (
	LookReading   Code = "look_reading"   // Days: a wrong reading would look the same; see it before the movement
	LookDrive     Code = "look_drive"     // amplitude, cleanliness, oil, then mainspring and winding
	LookMagnetism Code = "look_magnetism" // magnetism, coils touching
	LookAccessory Code = "look_accessory" // what the additional mechanism takes from the amplitude
	LookHeavy     Code = "look_heavy"     // poise; Values: direction of the heavy side, degrees from 12, seen from the dial
	LookPattern   Code = "look_pattern"   // hairspring centred and flat, then pivots, then poise: the amplitude is not known
	LookPivots    Code = "look_pivots"    // pivots and endshake of the side that differs
	LookHang      Code = "look_hang"      // Values: -1 loses hanging (amplitude falls), +1 gains hanging (curb, outer curve)
	LookSpring    Code = "look_spring"    // spring and balance do not match; no index mends it
	LookSettling  Code = "look_settling"  // what warm and cold left behind: collet, stud, oil
)

// Validity.
const (
	Opinion       Code = "opinion"        // from means over a day each, through all its amplitudes; Values: days read
	NoAmplitude   Code = "no_amplitude"   // so no heavy side is named
	AmplitudeWide Code = "amplitude_wide" // the amplitude given leaves the sign open
	NoClosure     Code = "no_closure"     // three vertical positions: nothing tests the pattern
	ClosureOpen   Code = "closure_open"   // Values: closure and twice its standard uncertainty, s/d: more than one cause
	NoUncertainty Code = "no_uncertainty"
	DaysMissing   Code = "days_missing" // Days
)

// Facts are what is known besides the rates.
type Facts struct {
	Card      Card
	Amplitude Amplitude
	// U is the standard uncertainty of a position's mean rate, s/d; 0: not stated.
	U float64
}

// BenchNote makes the note of one movement from its rates by programme day and what the judge says of
// them. It says only what these numbers show: two movements with other causes get other codes.
func BenchNote(j *trial.Judge, rates []trial.Rate, f Facts) Note {
	b := &bench{judge: j, prog: j.Programme(), facts: f, rates: make([]trial.Rate, len(j.Programme().Days))}
	copy(b.rates, rates)
	j.Rates(b.rates, &b.result)
	b.regulation()
	for i, v := range b.result.Values {
		if v.Outcome == trial.Outside {
			b.beyond(i)
		}
	}
	b.validity()
	return b.note
}

// bench is the note in the making.
type bench struct {
	judge   *trial.Judge
	prog    *trial.Programme
	facts   Facts
	rates   []trial.Rate
	result  trial.Result
	note    Note
	pattern bool // the vertical pattern was spoken of
}

func milli(x float64) trial.Milli { return trial.Milli(math.Round(1000 * x)) }

func (b *bench) add(f Finding) { b.note.Beyond = append(b.note.Beyond, f) }
func (b *bench) look(f Finding) {
	for _, seen := range b.note.Look {
		if seen.Code == f.Code && slices.Equal(seen.Days, f.Days) {
			return
		}
	}
	b.note.Look = append(b.note.Look, f)
}

// regulation says what shifting all rates can do.
func (b *bench) regulation() {
	say := func(f Finding) { b.note.Regulation = append(b.note.Regulation, f) }
	var open, fixed, means []string
	for i, v := range b.result.Values {
		c := b.prog.Criteria[i]
		switch {
		case b.judge.Limit(i).Any() && !v.Known:
			open = append(open, c.Symbol)
		case v.Outcome == trial.Outside && c.Formula.Kind == trial.Mean:
			means = append(means, c.Symbol)
		case v.Outcome == trial.Outside:
			fixed = append(fixed, c.Symbol)
		}
	}
	switch s, ok := Regulation(b.judge, b.rates); {
	case ok && len(means) == 0:
		say(Finding{Code: Room, Values: []trial.Milli{s.Lo, s.Hi}})
	case ok:
		say(Finding{Code: Regulate, Symbols: means, Values: []trial.Milli{s.Lo, s.Hi, (s.Lo + s.Hi) / 2}})
		say(b.units(s))
	default:
		b.notByRegulating(say, fixed, means)
	}
	if len(open) > 0 {
		say(Finding{Code: Undecided, Symbols: open})
	}
}

// notByRegulating says what stays outside, and what the mean would need beside it.
func (b *bench) notByRegulating(say func(Finding), fixed, means []string) {
	if len(fixed) > 0 {
		say(Finding{Code: NotEnough, Symbols: fixed})
	}
	if len(means) > 0 {
		s := meanShift(b.judge, &b.result)
		say(Finding{Code: MeanAsWell, Symbols: means, Values: []trial.Milli{s.Lo, s.Hi}})
	} else if len(fixed) > 0 {
		say(Finding{Code: MeanIsInside})
	}
}

func (b *bench) units(s Shift) Finding {
	if lo, hi, ok := b.facts.Card.Units(s); ok {
		return Finding{Code: Units, Organ: b.facts.Card.Organ, Values: []trial.Milli{lo, hi}}
	}
	return Finding{Code: NoStep}
}

// beyond says what lies behind a criterion that is outside.
func (b *bench) beyond(i int) {
	c, v := b.prog.Criteria[i], b.result.Values[i]
	switch c.Formula.Kind {
	case trial.MeanVariation, trial.GreatestVariation:
		b.variation(c.Formula.Pairs)
	case trial.Difference:
		if b.isResumption(c.Formula) {
			b.add(Finding{Code: Resumption, Symbols: []string{c.Symbol}, Values: []trial.Milli{milli(v.Float())}})
			b.look(Finding{Code: LookSettling})
			return
		}
		b.add(Finding{Code: HangFlat, Symbols: []string{c.Symbol}, Values: []trial.Milli{milli(v.Float())}})
		b.look(Finding{Code: LookHang, Values: []trial.Milli{trial.Milli(1000 * v.Sign())}})
	case trial.GreatestDeviation, trial.RangeOf:
		b.deviation(c.Formula.Days)
	case trial.PerDegree:
		b.add(Finding{Code: Thermal, Symbols: []string{c.Symbol},
			Values: []trial.Milli{milli(v.Float()), milli(ThermalError(v.Float()) * 1e6)}})
		b.look(Finding{Code: LookSpring})
	}
}

// isResumption tells a difference between days of one position at one temperature.
func (b *bench) isResumption(f trial.Formula) bool {
	first := b.prog.Days[f.Of[0]-1]
	for _, d := range slices.Concat(f.Of, f.From) {
		if day := b.prog.Days[d-1]; day.Position != first.Position || day.TemperatureC != first.TemperatureC {
			return false
		}
	}
	return true
}

func (b *bench) rate(day int) float64 { return b.rates[day-1].Exact().Float() }

// variation tells one pair that stands out, an additional mechanism, or unsteadiness in all.
func (b *bench) variation(pairs [][2]int) {
	if len(b.note.Beyond) > 0 && slices.ContainsFunc(b.note.Beyond, func(f Finding) bool {
		return f.Code == OneVariation || f.Code == Unsteady || f.Code == Accessory
	}) {
		return // V and Vmax have one cause
	}
	sizes := make([]float64, len(pairs))
	var sum float64
	worst := 0
	for k, p := range pairs {
		sizes[k] = math.Abs(b.rate(p[1]) - b.rate(p[0]))
		sum += sizes[k]
		if sizes[k] > sizes[worst] {
			worst = k
		}
	}
	rest := slices.Delete(slices.Clone(sizes), worst, worst+1)
	typical := median(rest)
	const outlier = 3 // times the median of the others: common practice, no source
	p := pairs[worst]
	switch {
	case len(rest) == 0 || sizes[worst] <= outlier*typical:
		b.add(Finding{Code: Unsteady, Values: []trial.Milli{milli(sum / float64(len(pairs))), milli(sizes[worst])}})
		b.look(Finding{Code: LookDrive})
		b.look(Finding{Code: LookMagnetism})
	case b.prog.Days[p[0]-1].Accessory != b.prog.Days[p[1]-1].Accessory:
		with, without := p[1], p[0]
		if b.prog.Days[p[0]-1].Accessory {
			with, without = p[0], p[1]
		}
		b.add(Finding{Code: Accessory, Days: []int{with}, Values: []trial.Milli{milli(b.rate(with) - b.rate(without))}})
		b.look(Finding{Code: LookAccessory})
	default:
		b.add(Finding{Code: OneVariation, Days: p[:], Position: b.prog.Days[p[0]-1].Position,
			Values: []trial.Milli{milli(sizes[worst]), milli(typical)}})
		b.look(Finding{Code: LookReading, Days: p[:]})
		b.look(Finding{Code: LookMagnetism})
	}
}

func median(list []float64) float64 {
	if len(list) == 0 {
		return 0
	}
	list = slices.Sorted(slices.Values(list))
	n := len(list)
	return (list[(n-1)/2] + list[n/2]) / 2
}

// deviation names the position farthest out and what makes it so.
func (b *bench) deviation(days []int) {
	var mean float64
	for _, d := range days {
		mean += b.rate(d) / float64(len(days))
	}
	far := slices.MaxFunc(days, func(x, y int) int { return cmp.Compare(math.Abs(b.rate(x)-mean), math.Abs(b.rate(y)-mean)) })
	pos := b.prog.Days[far-1].Position
	b.add(Finding{Code: FarPosition, Days: []int{far}, Position: pos, Values: []trial.Milli{milli(b.rate(far) - mean)}})
	means := b.positions(days)
	if pos.Vertical() {
		b.vertical(means)
		return
	}
	up, haveUp := means[trial.CH]
	down, haveDown := means[trial.FH]
	if haveUp && haveDown {
		b.add(Finding{Code: FlatPair, Values: []trial.Milli{milli(up - down)}})
	}
	b.look(Finding{Code: LookPivots, Position: pos})
}

// positions are the mean rates by position, over days without an additional mechanism where there
// are such.
func (b *bench) positions(days []int) map[trial.Position]float64 {
	sum, n := map[trial.Position]float64{}, map[trial.Position]int{}
	for _, plain := range []bool{true, false} {
		for _, d := range days {
			day := b.prog.Days[d-1]
			if day.Accessory == !plain && b.rates[d-1].Known() && (plain || n[day.Position] == 0) {
				sum[day.Position] += b.rate(d)
				n[day.Position]++
			}
		}
	}
	for p := range sum {
		sum[p] /= float64(n[p])
	}
	return sum
}

// vertical speaks of the vertical pattern.
func (b *bench) vertical(means map[trial.Position]float64) {
	p, ok := VerticalPattern(means, b.facts.U)
	if !ok {
		return
	}
	b.pattern = true
	b.add(Finding{Code: Vertical, Values: []trial.Milli{milli(p.Size), milli(p.Direction), milli(p.USize), milli(p.UAngle)}})
	if heavy, ok := p.HeavyPoint(b.facts.Amplitude); ok {
		b.look(Finding{Code: LookHeavy, Values: []trial.Milli{milli(heavy)}})
	} else {
		b.look(Finding{Code: LookPattern})
	}
	switch {
	case !p.HasClosure:
		b.note.Validity = append(b.note.Validity, Finding{Code: NoClosure})
	case math.Abs(p.Closure) > 2*p.UClosure:
		b.note.Validity = append(b.note.Validity, Finding{Code: ClosureOpen, Values: []trial.Milli{milli(p.Closure), milli(2 * p.UClosure)}})
	}
}

// validity says what the opinion rests on.
func (b *bench) validity() {
	var missing []int
	for d, r := range b.rates {
		if !r.Known() {
			missing = append(missing, d+1)
		}
	}
	say := func(f Finding) { b.note.Validity = append(b.note.Validity, f) }
	if b.pattern && b.facts.Amplitude == (Amplitude{}) {
		say(Finding{Code: NoAmplitude})
	} else if b.pattern && slices.ContainsFunc(b.note.Look, func(f Finding) bool { return f.Code == LookPattern }) {
		say(Finding{Code: AmplitudeWide})
	}
	if b.pattern && b.facts.U == 0 {
		say(Finding{Code: NoUncertainty})
	}
	if len(missing) > 0 {
		say(Finding{Code: DaysMissing, Days: missing})
	}
	say(Finding{Code: Opinion, Values: []trial.Milli{trial.Milli(1000 * (len(b.rates) - len(missing)))}})
}
