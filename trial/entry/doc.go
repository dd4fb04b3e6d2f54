// Package entry says what a reading should be, and whether a typed one smells; plausibility
// only, blind to limits.
package entry
