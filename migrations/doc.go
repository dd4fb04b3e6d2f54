// Package migrations holds the numbered SQL, embedded.
package migrations
