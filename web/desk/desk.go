package desk

import (
	"ratehouse/store"
	"ratehouse/web/page"
)

// Desk answers the QA lead's pages of one laboratory. Its methods are page.Handlers.
type Desk struct{ lab *store.Lab }

// New makes the pages of a laboratory.
func New(lab *store.Lab) *Desk { return &Desk{lab} }

// param is a part of the address as it was meant.
var param = page.Param

// rights are what the actor may do on these pages.
type rights struct {
	verdicts, doubt, enter, register, correct, end, remark, assess, release, papers, bench bool
}

func rightsOf(c *page.Context) rights {
	may := c.Actor.May
	return rights{may(store.RightVerdicts), may(store.RightDoubt), may(store.RightEnter), may(store.RightRegister), may(store.RightCorrect), may(store.RightEnd),
		may(store.RightRemark), may(store.RightAssess), may(store.RightRelease), may(store.RightCertificates),
		may(store.RightBench)}
}
