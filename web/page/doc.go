// Package page holds what every page shares: frame, form, errors, session, URLs.
package page
