package paper

import (
	"github.com/a-h/templ"

	"ratehouse/store"
)

// Drawn draws papers alone, for tests of their looks; level is that of their headings.
func Drawn(lang string, list ...store.Certificate) templ.Component {
	var sheets []sheet
	for _, c := range list {
		sheets = append(sheets, open(c, lang, "1"))
	}
	return printed(sheets)
}
