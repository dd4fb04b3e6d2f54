package desk

import (
	"ratehouse/store"
	"ratehouse/web/page"
	"ratehouse/web/part"
	"ratehouse/web/words"
)

// endedLine is a movement that left the trial.
type endedLine struct {
	Serial, URL string
	Judged      part.Judged
	Cause, When string
}

// ended lists the movements that left the trial. That one could not pass is a verdict: who is reading
// is told that it was taken out.
func (v batchView) ended() (lines []endedLine) {
	for i := range v.pieces {
		p := &v.pieces[i]
		if p.End == store.InTrial {
			continue
		}
		line := endedLine{Serial: p.Serial, URL: page.MovementURL(v.Batch.Code, p.Serial), Judged: judgedAs(p.standing()), Cause: p.Cause, When: v.c.Instant(p.EndedAt)}
		if !v.may.verdicts {
			line.Judged = plainStanding(p.End)
			if p.End == store.Removed {
				line.Cause = ""
			}
		}
		if p.EndCode != "" {
			line.When = v.c.Say(words.EndSeenWhen.With(words.Seen(p.EndCode), line.When))
		}
		lines = append(lines, line)
	}
	return lines
}
