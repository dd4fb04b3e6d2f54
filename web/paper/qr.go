package paper

import (
	"fmt"
	"image/color"
	"net/url"
	"strings"

	"github.com/boombuler/barcode/qr"

	"ratehouse/web/words"
)

// qrDrawing is the machine-readable mark as one path.
type qrDrawing struct{ Box, Path, Quiet, Says string }

// quiet is the white margin that readers of QR codes need, in modules (ISO/IEC 18004, from memory).
const quiet = 4

// proof makes the mark and says how to check the paper. The address is that of the record: where the
// laboratory answers was frozen with it, and is never taken from a request.
func (s *sheet) proof() {
	content := s.Number + " " + s.Code
	if s.VerifyURL != "" {
		content = s.VerifyURL + "?" + url.Values{"number": {s.Number}, "code": {s.Code}}.Encode()
		s.Address = strings.TrimPrefix(strings.TrimPrefix(s.VerifyURL, "https://"), "http://")
	}
	s.QR = draw(content)
	s.QR.Says = s.say(words.PaperQR.With(content))
	s.Signed = s.say(words.PaperReleasedBy.With(s.ReleasedBy, s.p.Instant(s.ReleasedAt.Time())))
}

// draw encodes the content with a quarter of it to spare (level Q needs room; M is enough for paper) and
// draws runs of dark modules.
func draw(content string) qrDrawing {
	code, err := qr.Encode(content, qr.M, qr.Auto)
	if err != nil {
		return qrDrawing{} // longer than any mark holds: number and code stand beside it
	}
	n := code.Bounds().Dx()
	dark := func(x, y int) bool { return code.At(x, y) == color.Black }
	var path strings.Builder
	for y := range n {
		for x := 0; x < n; x++ {
			if !dark(x, y) {
				continue
			}
			from := x
			for x < n && dark(x, y) {
				x++
			}
			fmt.Fprintf(&path, "M%d %dh%dv1h-%dz", from+quiet, y+quiet, x-from, x-from)
		}
	}
	size := n + 2*quiet
	return qrDrawing{Box: fmt.Sprintf("0 0 %d %d", size, size), Quiet: fmt.Sprint(size), Path: path.String()}
}
