package paper

import (
	"slices"
	"strconv"
	"strings"

	"ratehouse/web/words"
)

// Where everything stands is decided here and not by the browser, because the leaves are numbered: a
// paper that ran over onto a leaf nobody counted could lose its second half. The heights follow
// paper.css; they are taken a little too great, and a browser test compares them with what is drawn.

// Room for text of a leaf in mm, and the type of its small print in points.
const (
	leafHeight = 297 - 11 - 8.0
	leafWidth  = 182.0
	gap        = 2.1  // between blocks
	heading    = 5.0  // a section's heading with its rule
	footHeight = 5.0  // the number at the foot
	half       = 87.5 // one of two columns
	small      = 7.0  // points
	perPoint   = 25.4 / 72
)

// leaves lays the notes out: on the first leaf if there is room, else on leaves of their own, and with
// them the statements where even those find no room.
func (s *sheet) leaves() int {
	above, terms, below := s.above(), s.termsHeight(), s.below()
	room := leafHeight - above - below
	switch {
	case s.notesHeight(s.Notes)+terms <= room:
		s.Here = s.Notes
		s.Chart = s.picture(min(room-terms-s.notesHeight(s.Notes), pictureGrows))
		return 1
	case terms > room-pointer:
		s.Moved = true
	}
	left, first := s.Notes, leafHeight-footHeight-16.0
	if s.Moved {
		first -= terms
	}
	for len(left) > 0 || len(s.More) == 0 {
		n := s.fitting(left, first)
		s.More, left = append(s.More, left[:n]), left[n:]
		first = leafHeight - footHeight - 16
	}
	return 1 + len(s.More)
}

// pointer is the line on the first leaf that tells what stands on the second, in mm.
const pointer = gap + 3.8

// fitting is how many of the notes fit into the room, at least one.
func (s *sheet) fitting(notes []string, room float64) int {
	n := len(notes)
	for n > 1 && s.notesHeight(notes[:n]) > room {
		n--
	}
	return n
}

// above is the height of everything before the statements.
func (s *sheet) above() float64 {
	n := float64(len(s.Criteria))
	for _, k := range s.Criteria {
		if k.Accept != "" {
			n++
		}
	}
	var defs strings.Builder
	for _, d := range append(slices.Clone(s.Defs), s.DefNote) {
		defs.WriteString(d.Symbol + "   ")
		for _, r := range d.Runs {
			defs.WriteString(r.Text + r.Sub)
		}
	}
	table := 4.7 + 4.6*n + block(defs.String(), 6.8, leafWidth-6, 1.4) + 0.8
	rows := 3.0
	if s.Days.States {
		rows++
	}
	days := heading + 3.9 + 4.1*rows + 5.9 + pictureLeast + 0.8 + block(s.positions()+" "+s.Days.Note, 6.8, leafWidth, 1.4)
	return s.head() + gap + table + gap + days
}

// head is the height of the letter head, the marks, the verdict and the ruled cells.
func (s *sheet) head() float64 {
	title := block(s.Heading, 15.5, 102, 1.1) + 0.8 + block(s.say(words.PaperNumber)+" "+s.Number+"  "+s.p.Date(s.IssuedAt.Time())+"       ", 8.6, 102, 1.3)
	address := block(s.Laboratory.Name, 8, 70, 1.25)
	for _, line := range append(slices.Clone(s.Laboratory.Address), s.Laboratory.Contact) {
		address += block(line, 7.5, 71, 1.25)
	}
	h := max(title, address)
	if len(s.Marks) > 0 {
		h += gap + 3
		for _, m := range s.Marks {
			h += block(m, 9.2, leafWidth-10, 1.3)
		}
	}
	h += gap + max(8.4, block(s.Word+"    "+strings.Join(s.Says, " "), 8.6, leafWidth-28, 1.35)+1) + 4
	h += gap
	for row, widths := range [][]float64{{56, 26, 41, 41}, {56, 41, 26, 41}} {
		most := 0.0
		for i, width := range widths {
			c, size := s.Cells[4*row+i], 8.0
			if c.Mono {
				size = 8.6
			}
			most = max(most, block(c.Text, size, width, 1.27))
		}
		h += most + 2.9 + 1.6
	}
	return h
}

func (s *sheet) termsHeight() float64 {
	list := make([]float64, len(s.Terms))
	for i, t := range s.Terms {
		list[i] = max(block(strings.Join(t.Lines, " "), small, half-17.5, 1.3), 3.3) + 0.7
	}
	return gap + heading + columns(list) + 4
}

// notesHeight is the height of notes in two columns; nothing when there are none.
func (s *sheet) notesHeight(notes []string) float64 {
	if len(notes) == 0 {
		return 0
	}
	list := make([]float64, len(notes))
	for i, n := range notes {
		list[i] = block(n, small, half-3, 1.3)
	}
	return gap + heading + columns(list)
}

// columns is the height of blocks that fill two columns in order, none of them broken.
func columns(list []float64) float64 {
	whole, left := 0.0, 0.0
	for _, h := range list {
		whole += h
	}
	best := whole
	for _, h := range list {
		left += h
		best = min(best, max(left, whole-left))
	}
	return best
}

// below is the height of the proof and the foot.
func (s *sheet) below() float64 {
	check := s.say(words.PaperAsk)
	if s.Address != "" {
		check = s.say(words.PaperScan.With(s.Address))
	}
	said := heading + block(check, 7.5, 79, 1.3) + 4.4
	signed := heading + block(s.Signed, 7.5, 63, 1.3) + 0.8 + block(s.say(words.PaperSigned), 7.5, 63, 1.3)
	list := s.cautions()
	heights := make([]float64, len(list)+1)
	for i, c := range append(list, s.say(words.PaperJudgedBy.With(s.Engine))) {
		heights[i] = block(c, 6.5, 69, 1.3)
	}
	return gap + max(27, max(said, signed)+1.6+columns(heights)) + 2 + footHeight
}

// block is the height in mm of text set in so many points within so many mm.
func block(text string, points, width, leading float64) float64 {
	return float64(lines(text, width/(points*perPoint))) * points * leading * perPoint
}

// lines counts the lines of text in a measure of so many ems: words are moved to the next line, words
// longer than a line are broken.
func lines(text string, measure float64) int {
	if strings.TrimSpace(text) == "" {
		return 0
	}
	n, at := 1, 0.0
	for _, word := range strings.FieldsFunc(text, func(r rune) bool { return r == ' ' }) {
		w := ems(word)
		if at > 0 && at+w > measure {
			n, at = n+1, 0
		}
		for ; w > measure; w -= measure {
			n++
		}
		at += w + ems(" ")
	}
	return n
}

// advances are the widths of the signs from blank to tilde in Plex Sans 400, in thousandths of an em, as
// a browser measured them.
var advances = [...]uint16{236, 284, 419, 713, 598, 927, 694, 242, 335, 335, 450, 600, 272, 399, 272, 383, 600, 600, 600, 600, 600, 600, 600, 600,
	600, 600, 292, 292, 600, 600, 600, 477, 891, 641, 653, 621, 671, 583, 559, 695, 707, 400, 510, 634, 501, 812, 707, 708, 606, 708, 640, 581,
	572, 678, 609, 891, 613, 593, 580, 317, 383, 317, 600, 565, 600, 534, 580, 503, 580, 549, 324, 528, 568, 250, 250, 527, 272, 873, 568, 560,
	580, 580, 367, 487, 351, 568, 492, 768, 507, 499, 464, 343, 314, 343, 600}

// ems is the width of a word in ems. Beyond the table it is rather too great than too small.
func ems(word string) float64 {
	w := 0
	for _, r := range word {
		switch i := int(r) - ' '; {
		case i >= 0 && i < len(advances):
			w += int(advances[i])
		case r == '\u00a0' || r == '’':
			w += 275
		case r >= 0xdf && r <= 0xff && r != 'æ':
			w += 580
		case r < 0x2014:
			w += 720
		case r < 0x2e80:
			w += 870
		default:
			w += 1050
		}
	}
	return float64(w) / 1000
}

// name is what the paper is called where it is not seen whole.
func (s *sheet) name() string {
	return s.say(words.PaperNamed.With(s.Heading, s.Number))
}

// table names a table so that it can be told from those of other papers on the page.
func (s *sheet) table(what words.Text) string {
	return s.say(words.TableOf.With(words.PaperNamed.With(what, s.Number)))
}

// elsewhere tells what stands on the second leaf.
func (s *sheet) elsewhere() string {
	var parts []string
	if s.Moved {
		parts = append(parts, s.say(words.PaperMethod))
	}
	if len(s.Notes) > 0 {
		parts = append(parts, s.say(words.PaperNotes))
	}
	return s.say(words.PaperElsewhere.With(strings.Join(parts, "; ")))
}

// acrossAt spreads the words across the leaf.
func (s *sheet) acrossAt(i int) string {
	return strconv.Itoa((i + 1) * 310 / (len(s.Across) + 1))
}

// positions says the symbols of the table in words.
func (s *sheet) positions() string {
	var seen, parts []string
	for _, d := range s.Record.Days {
		if slices.Contains(seen, d.Position) {
			continue
		}
		seen = append(seen, d.Position)
		parts = append(parts, s.say(words.PaperSymbol.With(d.Position, words.PositionTerm(d.Position))))
	}
	return strings.Join(parts, "; ") + "."
}

func (s *sheet) leafText(leaf int) string {
	at, all := strconv.Itoa(leaf), strconv.Itoa(s.Leaves)
	if leaf < s.Leaves {
		return s.say(words.PaperLeaf.With(at, all, strconv.Itoa(leaf+1)))
	}
	return s.say(words.PaperOneLeaf.With(at, all))
}
