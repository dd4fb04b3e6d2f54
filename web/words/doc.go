// Package words is the message catalogue (English, French, German) with numbers, dates and
// signs for display: the only place that formats.
package words
