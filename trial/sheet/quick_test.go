package sheet

import (
	"errors"
	"fmt"
	"io"
	"math/rand/v2"
	"strings"
	"testing"

	"ratehouse/trial"
)

// log reads a file of movements into text, quickly or cell by cell.
func log(text string, states, careful bool) string {
	m, err := OpenMovements(strings.NewReader(text), trial.ISO3159(), states)
	if err != nil {
		return err.Error()
	}
	m.careful = careful
	var b strings.Builder
	for {
		row, fault, err := m.Next()
		switch {
		case errors.Is(err, io.EOF):
			return b.String()
		case err != nil:
			return b.String() + err.Error()
		case fault != nil:
			fmt.Fprintln(&b, fault)
			continue
		}
		fmt.Fprintf(&b, "%d %q %q %d", row.Line, row.Serial, row.Calibre, row.Category)
		for d, r := range row.Rates {
			if row.Known[0]>>d&1 == 1 {
				fmt.Fprintf(&b, " %d:%d", d+1, r)
			}
		}
		b.WriteByte('\n')
	}
}

const (
	rateHeader  = "serial,category,d1,d2,d3,d4,d5,d6,d7,d8,d9,d10,d11,d12,d13,d14,d15,calibre\n"
	stateHeader = "calibre,s0,s1,s2,s3,s4,s5,s6,s7,s8,s9,s10,s11,s12,s13,s14,s15,category,serial\n"
)

// Rows put together from cells that are plain, and cells that are not quite.
func TestQuickRowsReadLikeCarefulOnes(t *testing.T) {
	t.Parallel()
	rng := rand.New(rand.NewPCG(9, 9))
	odd := []string{"", "1", "-2.5", "+.5", "5.", ".", "-", "1.2345", "1.2340", "600", "600.001", "-601", "1234567890", "12345678901234567890", "x",
		" 1", "1 ", "\u22121", "\"1\"", "\"1", "1e3", "=1", "A 1", "A", "2", "1.2.3", "--1", "\xff", "\x00", "\t", "\r", "7000", "21600", "21601"}
	for range 4_000 {
		states := rng.IntN(2) == 0
		text := rateHeader
		if states {
			text = stateHeader
		}
		columns := strings.Count(text, ",") + 1
		for range 1 + rng.IntN(4) {
			cells := make([]string, columns)
			for i := range cells {
				cells[i] = []string{"0", "1.5", "-12.25", "2"}[rng.IntN(4)]
				if rng.IntN(40) == 0 {
					cells[i] = odd[rng.IntN(len(odd))]
				}
			}
			if rng.IntN(5) > 0 {
				cells[strings.Count(text[:strings.Index(text, "category")], ",")] = "1"
				cells[strings.Count(text[:strings.Index(text, "serial")], ",")] = fmt.Sprint("A", rng.IntN(5))
			}
			if rng.IntN(30) == 0 {
				cells = cells[:rng.IntN(columns)]
			}
			text += strings.Join(cells, ",") + []string{"\n", "\r\n", "\n\n"}[rng.IntN(3)]
		}
		if quick, slow := log(text, states, false), log(text, states, true); quick != slow {
			t.Fatalf("%q\nquickly\n%s\ncarefully\n%s", text, quick, slow)
		}
	}
}

func FuzzQuick(f *testing.F) {
	f.Add("A1,1,0,0,0,0,0,0,0,0,0,0,0,0,0,0,0,K", false)
	f.Add("K,0,1,2,3,4.5,,,,,,,,,,,,1,A1\nK,0,1,2,3,4.5,,,,,,,,,,,,2,A1", true)
	f.Add("A1;1;0,5;0;0;0;0;0;0;0;0;0;0;0;0;0;0;K", false)
	f.Fuzz(func(t *testing.T, body string, states bool) {
		header := rateHeader
		if states {
			header = stateHeader
		}
		if strings.Contains(body, ";") {
			header = strings.ReplaceAll(header, ",", ";")
		}
		if quick, slow := log(header+body, states, false), log(header+body, states, true); quick != slow {
			t.Fatalf("quickly\n%s\ncarefully\n%s", quick, slow)
		}
	})
}
