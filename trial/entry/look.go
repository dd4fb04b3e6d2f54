package entry

import (
	"slices"

	"ratehouse/trial"
)

// Finding says what a typed reading calls for.
type Finding uint8

// None: nothing to ask. SecondLook: ask for it again, blind. Refuse: it cannot be a rate.
const (
	None Finding = iota
	SecondLook
	Refuse
)

// String is the finding's code.
func (f Finding) String() string { return [...]string{"none", "second_look", "refuse"}[f%3] }

// Bounds of plausibility in thousandths of s/d, either way, the bound itself allowed. Common
// practice, no source; they know nothing of any limit (practice.md X1).
const (
	SecondLookBeyond trial.Milli = 60_000
	RefuseBeyond     trial.Milli = 600_000
)

// Look judges one rate by its size alone. A rate not read gives None.
func Look(rate trial.Rate) Finding {
	e := rate.Exact()
	switch {
	case outside(e, RefuseBeyond):
		return Refuse
	case outside(e, SecondLookBeyond):
		return SecondLook
	}
	return None
}

func outside(e trial.Exact, bound trial.Milli) bool {
	return e.Cmp(bound.Exact()) > 0 || e.Cmp((-bound).Exact()) < 0
}

// Settle applies a programme's second-look rule to the value typed first and those typed again,
// in order (practice.md W29): the second within Agree of the first, and the first counts; else the
// median of three. ok is false while another value must be asked for. More than two confirming
// values, and a rule other than trial.MedianOfThree, settle nothing: ok is false.
func Settle(rule trial.SecondLook, first trial.Milli, confirms []trial.Milli) (value trial.Milli, ok bool) {
	if len(confirms) == 0 || len(confirms) > 2 {
		return 0, false
	}
	if d := confirms[0] - first; -rule.Agree <= d && d <= rule.Agree {
		return first, true
	}
	if len(confirms) == 1 || rule.Then != trial.MedianOfThree {
		return 0, false
	}
	three := []trial.Milli{first, confirms[0], confirms[1]}
	slices.Sort(three)
	return three[1], true
}
