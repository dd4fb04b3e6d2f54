package store_test

import (
	"slices"
	"testing"

	"ratehouse/store"
)

// A token may do what its scopes say and nothing else, whatever the role of its account.
func TestScopesGiveRights(t *testing.T) {
	t.Parallel()
	want := map[store.Scope][]store.Right{
		store.ScopeRead:     {store.RightBatches, store.RightVerdicts, store.RightCertificates},
		store.ScopeReadings: {store.RightEnter},
		store.ScopeBatches:  {store.RightRegister},
		store.ScopeClimate:  {store.RightClimate},
	}
	all := []store.Right{store.RightToday, store.RightEnter, store.RightRegister, store.RightBatches, store.RightVerdicts,
		store.RightCorrect, store.RightEnd, store.RightRemark, store.RightAssess, store.RightRelease, store.RightCertificates,
		store.RightBench, store.RightSetup, store.RightAccounts, store.RightJournal, store.RightSelf, store.RightClimate}
	for _, role := range store.Roles {
		for _, scope := range store.Scopes {
			a := store.Actor{Role: role, Via: "api", Scopes: []store.Scope{scope}}
			for _, right := range all {
				if got, want := a.May(right), slices.Contains(want[scope], right); got != want {
					t.Errorf("token of a %s with scope %s: may %s = %v, want %v", role, scope, right, got, want)
				}
			}
		}
		if (store.Actor{Role: role, Via: "api"}).May(store.RightBatches) {
			t.Errorf("token of a %s without scopes may see batches", role)
		}
	}
	both := store.Actor{Via: "api", Scopes: []store.Scope{store.ScopeRead, store.ScopeReadings}}
	if !both.May(store.RightEnter) || !both.May(store.RightBatches) {
		t.Error("two scopes do not add up")
	}
}
