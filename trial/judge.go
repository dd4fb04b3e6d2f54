package trial

import (
	"errors"
	"math/big"
)

// ErrNotBuilt marks what the contract names and this version does not compute yet.
var ErrNotBuilt = errors.New("not built yet")

// Judge holds a programme compiled for one category. It is immutable and safe for use by many
// goroutines at once.
type Judge struct {
	prog     *Programme
	category string
	crits    []criterion
}

type criterion struct{}

func (c *criterion) exact(rates []Rate) *big.Rat { return new(big.Rat) }

// NewJudge compiles a programme for one of its categories.
func NewJudge(p *Programme, category string) (*Judge, error) { return nil, ErrNotBuilt }

// Programme is the programme the judge was made from; do not change it.
func (j *Judge) Programme() *Programme { return j.prog }

// Category is the category code the judge was made for.
func (j *Judge) Category() string { return j.category }

// Limit gives the limits of criterion i in the judge's category.
func (j *Judge) Limit(i int) Limit { return j.prog.Criteria[i].Limits[j.category] }

// Milli judges rates given in whole thousandths of s/d, rates[d-1] for day d, bit d-1 of known
// set where it was read; the others are ignored. No allocation once out has been used before.
func (j *Judge) Milli(rates []int64, known uint64, out *Result) {}

// Rates judges exact rates, rates[d-1] for day d; a shorter slice leaves the rest not read.
func (j *Judge) Rates(rates []Rate, out *Result) {}

// CannotPass tells whether the movement is open and no real numbers for its blank days, free of
// each other, satisfy all limited criteria together. Exact; other than unreachable, which looks
// at each criterion by itself within ±60 s/d.
func (j *Judge) CannotPass(rates []Rate) bool { return false }

// Needed gives the closed interval in which the rate of a blank day (1..n) must lie for the
// movement still to be able to pass. ok is false if the day is read, if the movement has failed
// or cannot pass whatever comes, or if the day is not bounded on both sides.
func (j *Judge) Needed(rates []Rate, day int) (lo, hi Exact, ok bool) { return Exact{}, Exact{}, false }
