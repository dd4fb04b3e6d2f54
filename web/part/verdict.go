package part

import (
	"ratehouse/store"
	"ratehouse/trial"
	"ratehouse/web/words"
)

// Mark is the shape a verdict is drawn with: two bars for the limits and a dot for the movement.
type Mark string

// The marks. Cannot is open but past saving; Void has left the trial without a verdict; Look asks for a
// second reading.
const (
	Pass   Mark = "pass"
	Fail   Mark = "fail"
	Open   Mark = "open"
	Cannot Mark = "cannot"
	Void   Mark = "void"
	Look   Mark = "look"
)

// Judged is a verdict ready to be drawn: its mark and its word.
type Judged struct {
	Mark Mark
	Word words.Text
}

// JudgedOf is how a movement stands: its end if it has one, else its verdict, else whether it can still
// pass.
func JudgedOf(v trial.Verdict, cannot bool, end store.End) Judged {
	switch end {
	case store.Rejected:
		return Judged{Fail, words.EndRejected}
	case store.Removed:
		return Judged{Fail, words.EndRemoved}
	case store.Withdrawn:
		return Judged{Void, words.EndWithdrawn}
	case store.Void:
		return Judged{Void, words.EndVoid}
	}
	switch {
	case v == trial.Pass:
		return Judged{Pass, words.VerdictPass}
	case v == trial.Fail:
		return Judged{Fail, words.VerdictFail}
	case v == trial.None:
		return Judged{Open, words.VerdictNone}
	case cannot:
		return Judged{Cannot, words.VerdictCannot}
	}
	return Judged{Open, words.VerdictOpen}
}

// OutcomeOf is how one criterion stands; cannot marks one that is undecided and out of reach.
func OutcomeOf(o trial.Outcome, cannot bool) Judged {
	switch {
	case o == trial.Inside:
		return Judged{Pass, words.VerdictPass}
	case o == trial.Outside:
		return Judged{Fail, words.VerdictFail}
	case o == trial.Unlimited:
		return Judged{Open, words.VerdictNone}
	case cannot:
		return Judged{Cannot, words.VerdictCannot}
	}
	return Judged{Open, words.VerdictOpen}
}

// Tally is how many stand so, of how many.
type Tally struct {
	Judged
	N, Of int
	URL   string // where they are listed; "" for no link
}
