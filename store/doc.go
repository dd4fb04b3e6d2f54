// Package store is the laboratory: every verb one method, one transaction, one act; actors and
// rights; jobs; the drain.
package store
