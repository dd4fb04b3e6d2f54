// Package part holds components on trial values: holder drawing, criteria table, verdict
// mark, programme strip.
package part
