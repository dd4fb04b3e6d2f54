// Package migrations holds the numbered SQL of the schema rh, embedded, and applies it. A file is
// never edited once it has been released; what it made is changed by the next number.
package migrations
