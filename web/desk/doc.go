// Package desk holds the QA lead's pages.
package desk
