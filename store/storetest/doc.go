// Package storetest gives every test a fresh database and builders made of the laboratory's
// verbs.
package storetest
