package store

import (
	"slices"

	"github.com/google/uuid"
)

// Role is what an account is for.
type Role string

// The roles of a laboratory.
const (
	Technician Role = "technician"
	Lead       Role = "lead"
	Adjuster   Role = "adjuster"
	Manager    Role = "manager"
)

// Roles lists all roles.
var Roles = []Role{Technician, Lead, Adjuster, Manager}

// Right is a coarse permission; the route table names one for each page, verbs check it again.
type Right string

// The rights. Fine ones (four eyes, own round) are decided in the verbs, with the data in hand.
const (
	RightToday        Right = "today"        // see what is due, print day sheets
	RightEnter        Right = "enter"        // open rounds, save readings
	RightRegister     Right = "register"     // register batches, assign places
	RightBatches      Right = "batches"      // see batches and their progress
	RightVerdicts     Right = "verdicts"     // see criteria and verdicts: not for who is reading
	RightDoubt        Right = "doubt"        // see how sure a verdict is, and on which reading it hangs
	RightCorrect      Right = "correct"      // correct what another person read, or after closing
	RightEnd          Right = "end"          // end a movement, take an end back
	RightRemark       Right = "remark"       // write remarks
	RightAssess       Right = "assess"       // assess and close remarks
	RightRelease      Right = "release"      // release certificates and reports
	RightCertificates Right = "certificates" // see and print certificates
	RightBench        Right = "bench"        // bench notes
	RightSetup        Right = "setup"        // programmes, calibres, depositors, holder types
	RightAccounts     Right = "accounts"     // accounts and tokens
	RightJournal      Right = "journal"      // read the journal
	RightClimate      Right = "climate"      // record the climate of chambers: tokens only
	RightSelf         Right = "self"         // one's own session and language: everybody
)

var rights = map[Role][]Right{
	Technician: {RightSelf, RightToday, RightEnter, RightRegister, RightBatches, RightRemark, RightEnd},
	Lead: {RightSelf, RightToday, RightEnter, RightRegister, RightBatches, RightVerdicts, RightDoubt, RightCorrect, RightEnd,
		RightRemark, RightAssess, RightRelease, RightCertificates, RightBench, RightSetup, RightJournal},
	Adjuster: {RightSelf, RightBatches, RightVerdicts, RightBench},
	Manager:  {RightSelf, RightToday, RightBatches, RightVerdicts, RightCertificates, RightSetup, RightAccounts, RightJournal},
}

// May tells whether the role has the right.
func (r Role) May(right Right) bool { return slices.Contains(rights[r], right) }

// Scope narrows what a token may do through the API.
type Scope string

// The scopes of tokens.
const (
	ScopeRead     Scope = "read"     // GET everything its account may see
	ScopeReadings Scope = "readings" // POST readings
	ScopeBatches  Scope = "batches"  // POST batches
	ScopeClimate  Scope = "climate"  // POST climate
)

// Scopes lists all scopes.
var Scopes = []Scope{ScopeRead, ScopeReadings, ScopeBatches, ScopeClimate}

// scopeRights is what a token may do: its scopes alone say it, whatever the role of its account.
var scopeRights = map[Scope][]Right{
	ScopeRead:     {RightBatches, RightVerdicts, RightCertificates},
	ScopeReadings: {RightEnter},
	ScopeBatches:  {RightRegister},
	ScopeClimate:  {RightClimate},
}

// viaAPI marks an actor that came with a token.
const viaAPI = "api"

// Actor is who does something: a person at a page, a token at the API, the program itself.
type Actor struct {
	Account  uuid.UUID
	Name     string // the log-in name
	Title    string // the name printed on papers
	Role     Role
	Via      string  // "page", "api", "program"
	Scopes   []Scope // of a token; nil for a person
	Station  string  // of a token
	Language string  // "en", "fr", "de", or "" for the browser's
	session  []byte
}

// Program is the laboratory acting by itself: first set-up, demo, drain.
var Program = Actor{Name: "program", Title: "Ratehouse", Role: Manager, Via: "program"}

// May tells whether the actor has the right: a person by the role, a token by its scopes; the
// program has all of them.
func (a Actor) May(right Right) bool {
	switch a.Via {
	case Program.Via:
		return true
	case viaAPI:
		return slices.ContainsFunc(a.Scopes, func(s Scope) bool { return slices.Contains(scopeRights[s], right) })
	}
	return a.Role.May(right)
}

// Has tells whether a token carries the scope.
func (a Actor) Has(s Scope) bool { return slices.Contains(a.Scopes, s) }
