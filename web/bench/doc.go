// Package bench holds the adjusters' pages.
package bench
