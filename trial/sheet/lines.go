package sheet

import (
	"bufio"
	"bytes"
	"errors"
	"io"
	"unicode/utf16"
	"unicode/utf8"
)

// mostLine bounds one line, so that memory does not follow a file without line ends.
const mostLine = 1 << 20

// lines cuts a text into lines without copying it. Line ends are LF or CRLF.
type lines struct {
	r          io.Reader
	buf        []byte
	start, end int
	eof        bool
	n          int // lines given so far
}

// newLines reads UTF-8, with or without byte order mark, or UTF-16 with one.
func newLines(r io.Reader) (*lines, error) {
	head := make([]byte, 3)
	n, err := io.ReadFull(r, head)
	if err != nil && !errors.Is(err, io.EOF) && !errors.Is(err, io.ErrUnexpectedEOF) {
		return nil, err
	}
	head = head[:n]
	rest := io.MultiReader(bytes.NewReader(head), r)
	switch {
	case bytes.Equal(head, []byte{0xef, 0xbb, 0xbf}):
		rest = r
	case len(head) >= 2 && head[0] == 0xff && head[1] == 0xfe:
		rest = newUTF16(io.MultiReader(bytes.NewReader(head[2:]), r), false)
	case len(head) >= 2 && head[0] == 0xfe && head[1] == 0xff:
		rest = newUTF16(io.MultiReader(bytes.NewReader(head[2:]), r), true)
	}
	return &lines{r: rest, buf: make([]byte, 1<<16)}, nil
}

// next gives the next line without its end, valid until the next call; io.EOF after the last. A
// line longer than mostLine comes back cut, with long set.
func (l *lines) next() (line []byte, long bool, err error) {
	for from := l.start; ; {
		if i := bytes.IndexByte(l.buf[from:l.end], '\n'); i >= 0 {
			line = l.buf[l.start : from+i]
			l.start = from + i + 1
			l.n++
			return cutCR(line), long || len(line) > mostLine, nil
		}
		if l.eof {
			if line = l.buf[l.start:l.end]; len(line) == 0 && !long {
				return nil, false, io.EOF
			}
			l.start = l.end
			l.n++
			return cutCR(line), long || len(line) > mostLine, nil
		}
		from = l.end
		if l.end-l.start > mostLine { // forget what is there, go on to the line's end
			long = true
			l.end, from = l.start, l.start
		}
		moved, err := l.fill()
		if err != nil {
			return nil, false, err
		}
		from -= moved
	}
}

func cutCR(line []byte) []byte {
	if n := len(line); n > 0 && line[n-1] == '\r' {
		return line[:n-1]
	}
	return line
}

// fill reads more and tells by how much it moved what was there.
func (l *lines) fill() (moved int, err error) {
	if l.start > 0 {
		moved = l.start
		copy(l.buf, l.buf[l.start:l.end])
		l.start, l.end = 0, l.end-l.start
	}
	if l.end == len(l.buf) {
		l.buf = append(l.buf, make([]byte, len(l.buf))...)
	}
	for range 100 {
		n, err := l.r.Read(l.buf[l.end:])
		l.end += n
		if errors.Is(err, io.EOF) {
			l.eof = true
			return moved, nil
		}
		if err != nil || n > 0 {
			return moved, err
		}
	}
	return moved, io.ErrNoProgress
}

// utf16Reader turns UTF-16 into UTF-8. What is no valid text, a lone surrogate or half a unit,
// becomes a byte that UTF-8 never has, so that its line is refused like any other bad text.
type utf16Reader struct {
	r    *bufio.Reader
	big  bool
	high uint16 // surrogate waiting for its partner
	out  []byte
	err  error
}

const noText = 0xff

func newUTF16(r io.Reader, big bool) *utf16Reader {
	return &utf16Reader{r: bufio.NewReaderSize(r, 1<<16), big: big}
}

// Read implements io.Reader.
func (u *utf16Reader) Read(p []byte) (int, error) {
	for len(u.out) < 4096 && u.err == nil {
		u.unit()
	}
	n := copy(p, u.out)
	u.out = u.out[:copy(u.out, u.out[n:])]
	if n == 0 && u.err != nil {
		return 0, u.err
	}
	return n, nil
}

// unit decodes one 16-bit unit.
func (u *utf16Reader) unit() {
	var b [2]byte
	if _, err := io.ReadFull(u.r, b[:]); err != nil {
		if u.high != 0 || errors.Is(err, io.ErrUnexpectedEOF) {
			u.out = append(u.out, noText)
		}
		u.high = 0
		if u.err = err; errors.Is(err, io.ErrUnexpectedEOF) {
			u.err = io.EOF
		}
		return
	}
	c := uint16(b[0]) | uint16(b[1])<<8
	if u.big {
		c = uint16(b[0])<<8 | uint16(b[1])
	}
	if u.high != 0 {
		r := utf16.DecodeRune(rune(u.high), rune(c))
		u.high = 0
		if r != utf8.RuneError {
			u.out = utf8.AppendRune(u.out, r)
			return
		}
		u.out = append(u.out, noText)
	}
	switch {
	case c >= 0xd800 && c < 0xdc00:
		u.high = c
	case c >= 0xdc00 && c < 0xe000:
		u.out = append(u.out, noText)
	default:
		u.out = utf8.AppendRune(u.out, rune(c))
	}
}
