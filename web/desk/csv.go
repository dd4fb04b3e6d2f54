package desk

import (
	"bytes"
	"net/http"

	"ratehouse/web/page"
)

// SheetsCSV sends the batch's values as the API does.
func (d *Desk) SheetsCSV(w http.ResponseWriter, r *http.Request) error {
	c, code := page.Of(r), param(r, "code")
	var buf bytes.Buffer
	if err := d.lab.SheetCSV(r.Context(), c.Actor, code, &buf); err != nil {
		return err
	}
	h := w.Header()
	h.Set("Content-Type", "text/csv; charset=utf-8")
	h.Set("Content-Disposition", `attachment; filename="`+code+`.csv"`) // a code has no sign that needs quoting
	h.Set("Cache-Control", "no-store")
	w.Write(buf.Bytes()) //nolint:errcheck // who asked has gone
	return nil
}
