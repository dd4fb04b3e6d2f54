// Package floor holds the technicians' pages.
package floor
