// Package paper holds certificates and reports.
package paper
