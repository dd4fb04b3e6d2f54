// Package storetest gives every test a fresh database and builders made of the laboratory's
// verbs. It is imported by tests only.
package storetest
