package sheet

import "io"

// Writer writes CSV: UTF-8 without byte order mark, commas, LF, cells in quotation marks only
// where needed, text cells exactly as given.
type Writer struct {
	w   io.Writer
	buf []byte
	err error
}

// NewWriter makes a Writer; call Flush at the end.
func NewWriter(w io.Writer) *Writer { return &Writer{w: w} }

// Row writes one row. The first error of the writer beneath is given by this and every later call.
func (w *Writer) Row(cells ...string) error {
	for i, cell := range cells {
		if i > 0 {
			w.buf = append(w.buf, ',')
		}
		w.buf = appendCell(w.buf, []byte(cell))
	}
	if len(cells) == 1 && cells[0] == "" {
		w.buf = append(w.buf, `""`...) // or the row would be an empty line
	}
	w.buf = append(w.buf, '\n')
	if len(w.buf) >= 1<<15 {
		return w.Flush()
	}
	return w.err
}

// Flush writes what is left and gives the first error.
func (w *Writer) Flush() error {
	if w.err == nil && len(w.buf) > 0 {
		_, w.err = w.w.Write(w.buf)
	}
	w.buf = w.buf[:0]
	return w.err
}
