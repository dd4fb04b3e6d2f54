// Package sheet reads and writes tables and numbers: CSV, XLSX, programme JSON; refusals by
// line and column.
package sheet
