package sheet

import (
	"bytes"
	"encoding/csv"
	"errors"
	"fmt"
	"io"
	"math/rand/v2"
	"strconv"
	"strings"
	"testing"
	"testing/iotest"
	"unicode/utf16"
	"unicode/utf8"

	"ratehouse/trial"
)

var words3 = []column{{"serial", false}, {"a", false}, {"b", true}}

// readAll reads a table into rows of text and refusals.
func readAll(r io.Reader) (rows [][]string, refused []string, err error) {
	t, err := openTable(r, words3)
	if err != nil {
		return nil, nil, err
	}
	for {
		fault, _, err := t.next()
		switch {
		case errors.Is(err, io.EOF):
			return rows, refused, nil
		case err != nil:
			return rows, refused, err
		case fault != nil:
			refused = append(refused, fault.Error())
		default:
			var row []string
			for _, c := range t.cells {
				row = append(row, string(c))
			}
			rows = append(rows, row)
		}
	}
}

// The same table in every encoding, line end, separator and chunking.
func TestTablesReadTheSameHoweverTheyAreWritten(t *testing.T) {
	t.Parallel()
	const want = `[[Ä1 x,y 1] [Z"2  -] [3 \ud83d\ude00 🙂]]`
	text := "serial|a|b\n\n \t\nÄ1|\"x,y\"| 1 \n\"Z\"\"2\"||-\n3|\\ud83d\\ude00|🙂"
	for _, sep := range []string{",", ";", "\t"} {
		for _, end := range []string{"\n", "\r\n"} {
			for _, last := range []string{"", end} {
				for name, encode := range encodings {
					data := encode(strings.ReplaceAll(strings.ReplaceAll(text, "|", sep), "\n", end) + last)
					for _, r := range []io.Reader{bytes.NewReader(data), iotest.OneByteReader(bytes.NewReader(data)), iotest.DataErrReader(bytes.NewReader(data))} {
						rows, refused, err := readAll(r)
						if err != nil || len(refused) > 0 || fmt.Sprint(rows) != want {
							t.Fatalf("%s separated by %q, lines by %q: %v %v %v", name, sep, end, rows, refused, err)
						}
					}
				}
			}
		}
	}
}

var encodings = map[string]func(string) []byte{
	"UTF-8":          func(s string) []byte { return []byte(s) },
	"UTF-8 with BOM": func(s string) []byte { return []byte("\ufeff" + s) },
	"UTF-16 LE":      func(s string) []byte { return utf16Bytes(s, false) },
	"UTF-16 BE":      func(s string) []byte { return utf16Bytes(s, true) },
}

func utf16Bytes(s string, big bool) []byte {
	var b []byte
	for _, u := range utf16.Encode([]rune("\ufeff" + s)) {
		if big {
			b = append(b, byte(u>>8), byte(u))
		} else {
			b = append(b, byte(u), byte(u>>8))
		}
	}
	return b
}

func TestTableRefusals(t *testing.T) {
	t.Parallel()
	for _, c := range []struct{ name, text, want string }{
		{"empty", "", "line 1, column serial: the file is empty; a header is required"},
		{"blank lines only", " \n\t\n", "line 1, column serial: the file is empty; a header is required"},
		{"BOM only", "\ufeff", "line 1, column serial: the file is empty; a header is required"},
		{"upper case", "Serial,a\n", `line 1, column Serial: the column is not known here (serial, a, b)`},
		{"unnamed", "serial,a,\n", `line 1, column "": the column is not known here (serial, a, b)`},
		{"twice", "serial,a,a\n", "line 1, column a: the column appears twice"},
		{"missing", "serial,b\n", "line 1, column a: the column is missing"},
		{"bad text", "serial,a\xff\n", `line 1, column serial: bytes that are not valid text: "\xff"`},
		{"bad UTF-16", "\xff\xfes\x00\x00\xd8,\x00", `line 1, column serial: bytes that are not valid text: "\xff,"`},
		{"open quote in header", "serial,\"a\n", "line 1, column serial: a quotation mark is still open at the end of the line; a cell never spans lines"},
		{"mixed separators", "serial,a;b\n", `line 1, column "a;b": the column is not known here (serial, a, b)`},
	} {
		_, _, err := readAll(strings.NewReader(c.text))
		if err == nil || err.Error() != c.want {
			t.Errorf("%s: %v, want %s", c.name, err, c.want)
		}
	}
	for _, c := range []struct{ name, line, want string }{
		{"too few", "1", "line 2, column serial: the row has 1 cells, the header 2"},
		{"too many", "1,2,3", "line 2, column serial: the row has 3 cells, the header 2"},
		{"open quote", `1,"2`, "line 2, column a: a quotation mark is still open at the end of the line; a cell never spans lines"},
		{"open quote in a cell too many", `1,2,"3`, "line 2, column serial: a quotation mark is still open at the end of the line; a cell never spans lines"},
		{"quote inside", `1,2"3`, `line 2, column a: a quotation mark stands inside the cell "2\"3"; put the cell in quotation marks and double it`},
		{"text after quote", `"1"x,2`, `line 2, column serial: a quotation mark stands inside the cell "1"; put the cell in quotation marks and double it`},
		{"bad bytes", "1,\xc3\x28", `line 2, column a: bytes that are not valid text: "\xc3("`},
		{"bad bytes and count", "1,2,\xff", `line 2, column serial: bytes that are not valid text: "\xff"`},
		{"too long", "1," + strings.Repeat("x", mostLine), "line 2, column serial: the line is longer than 1048576 bytes"},
		{"much too long", "1," + strings.Repeat("x", 5*mostLine), "line 2, column serial: the line is longer than 1048576 bytes"},
	} {
		rows, refused, err := readAll(strings.NewReader("serial,a\n" + c.line + "\n8,9\n"))
		if err != nil || fmt.Sprint(refused) != "["+c.want+"]" || fmt.Sprint(rows) != "[[8 9]]" {
			t.Errorf("%s: %v %v %v, want %s", c.name, rows, refused, err, c.want)
		}
	}
}

func TestReaderErrorsComeThrough(t *testing.T) {
	t.Parallel()
	broken := errors.New("unplugged")
	for n := range 30 {
		text := "serial,a\n1,2\n3,4\n5,6\n7,8\n9,10\n"[:n]
		_, _, err := readAll(io.MultiReader(strings.NewReader(text), iotest.ErrReader(broken)))
		if !errors.Is(err, broken) {
			t.Errorf("after %d bytes: %v", n, err)
		}
	}
}

// Memory does not follow a file without line ends.
func TestLongLinesAreNotKept(t *testing.T) {
	t.Parallel()
	l, err := newLines(io.LimitReader(zeros{}, 64<<20))
	if err != nil {
		t.Fatal(err)
	}
	if _, long, err := l.next(); !long || err != nil {
		t.Fatal(long, err)
	}
	if len(l.buf) > 4*mostLine {
		t.Errorf("a buffer of %d bytes", len(l.buf))
	}
}

type zeros struct{}

func (zeros) Read(p []byte) (int, error) { clear(p); return len(p), nil }

func TestSeenIsExact(t *testing.T) {
	t.Parallel()
	s, want := newSeen(), map[string]int{}
	rng := rand.New(rand.NewPCG(1, 1))
	for line := 1; line < 60_000; line++ {
		serial := fmt.Sprintf("%x", rng.IntN(40_000))
		if rng.IntN(1000) == 0 {
			serial = strings.Repeat(serial, 20_000) // larger than a block
		}
		if got := s.first([]byte(serial), line); got != want[serial] {
			t.Fatalf("%.20s on line %d: first %d, want %d", serial, line, got, want[serial])
		}
		if want[serial] == 0 {
			want[serial] = line
		}
	}
}

// Among 400,000 serials some twenty pairs share their 32-bit hash; none may pass for another.
func TestSeenComparesSerialsNotHashes(t *testing.T) {
	t.Parallel()
	s := newSeen()
	for k := range 400_000 {
		if line := s.first(strconv.AppendInt(nil, int64(k), 10), k+1); line != 0 {
			t.Fatalf("serial %d is taken for the one on line %d", k, line)
		}
	}
}

// Whatever comes: no panic, every line that is not blank is a row or a refusal, in order, and rows
// survive being written and read by the standard reader.
func FuzzTable(f *testing.F) {
	for _, s := range []string{"1,2\n", "\"a\"\"b\" , 2\r\n\n,,\n", "1,\"2\n3,4", "\xff,1\n", "a\x00b,c\n", " \u00a0,x", "1;2"} {
		f.Add([]byte(s))
	}
	f.Fuzz(func(t *testing.T, body []byte) {
		tab, err := openTable(io.MultiReader(strings.NewReader("serial,a\n"), bytes.NewReader(body)), words3)
		if err != nil {
			t.Fatal(err)
		}
		lines := strings.Split(string(body), "\n")
		next := 2
		for {
			fault, countable, err := tab.next()
			if errors.Is(err, io.EOF) {
				break
			}
			if err != nil {
				t.Fatal(err)
			}
			for ; next < tab.line; next++ {
				if len(bytes.TrimFunc([]byte(strings.TrimSuffix(lines[next-2], "\r")), isBlank)) > 0 {
					t.Fatalf("line %d is lost: %q", next, lines[next-2])
				}
			}
			next++
			if fault != nil {
				if fault.Line != tab.line || strings.ContainsAny(fault.Error(), "\n\r\x00") {
					t.Fatalf("line %d: %q", tab.line, fault)
				}
				continue
			}
			if !countable || len(tab.cells) != 2 || !utf8.Valid(bytes.Join(tab.cells, nil)) {
				t.Fatalf("line %d: %q", tab.line, tab.cells)
			}
			var out strings.Builder
			w := NewWriter(&out)
			if err := errors.Join(w.Row(string(tab.cells[0]), string(tab.cells[1])), w.Flush()); err != nil {
				t.Fatal(err)
			}
			back, err := csv.NewReader(strings.NewReader(out.String())).Read()
			// The standard reader turns CR LF inside quotation marks into LF; no cell holds LF here.
			if len(tab.cells[0])+len(tab.cells[1]) > 0 && (err != nil || back[0] != string(tab.cells[0]) || back[1] != string(tab.cells[1])) {
				t.Fatalf("%q is written %q and read %q, %v", tab.cells, out.String(), back, err)
			}
		}
	})
}

func TestIntake(t *testing.T) {
	t.Parallel()
	for _, c := range []struct{ text, rows, refused string }{
		{"A1\nA2\n\n  A3  \n", "A1@1 A2@2 A3@4", ""},
		{"\ufeffA1\r\nÄ2", "A1@1 Ä2@2", ""},
		{"serial\nA1\n", "A1@2", ""},
		{"serial;place\nA1;3\nA2;\n", "A1@2:3 A2@3", ""},
		{"place,serial\n3,A1\n", "A1@2:3", ""},
		{"A1\nA1\n", "A1@1", `line 2, column serial: serial "A1" stands on line 1 already; line 2 repeats it`},
		{"A1,3\nA2\n", "A2@2", "line 1, column serial: the row has 2 cells, the header 1"},
		{"\"A1,3\"\n", "A1,3@1", ""},
		{"=A1\n+2\n@x\n-1\nok\n", "ok@5", `line 1, column serial: serial "=A1" begins with '='; spreadsheets take such a text for a formula` + "\n" +
			`line 2, column serial: serial "+2" begins with '+'; spreadsheets take such a text for a formula` + "\n" +
			`line 3, column serial: serial "@x" begins with '@'; spreadsheets take such a text for a formula` + "\n" +
			`line 4, column serial: serial "-1" begins with '-'; spreadsheets take such a text for a formula`},
		{"\x01A\n", "", `line 1, column serial: serial "\x01A" begins with U+0001; spreadsheets take such a text for a formula`},
		{"\u0085A\n", "", `line 1, column serial: serial "\u0085A" begins with U+0085; spreadsheets take such a text for a formula`},
		{"serial,place\n,3\n", "", "line 2, column serial: is blank"},
		{"A\xff\n", "", `line 1, column serial: bytes that are not valid text: "\xff"`},
	} {
		rows, refused, err := ReadIntake(strings.NewReader(c.text))
		if err != nil {
			t.Errorf("%q: %v", c.text, err)
		}
		var got, faults []string
		for _, r := range rows {
			s := fmt.Sprint(r.Serial, "@", r.Line)
			if r.Place != "" {
				s += ":" + r.Place
			}
			got = append(got, s)
		}
		for _, r := range refused {
			faults = append(faults, r.Error())
		}
		if strings.Join(got, " ") != c.rows || strings.Join(faults, "\n") != c.refused {
			t.Errorf("%q: rows %v, refused %s", c.text, got, strings.Join(faults, "\n"))
		}
	}
	for text, want := range map[string]string{
		"":                          "line 1, column serial: the file is empty; a header is required",
		"serial,number\n1,2\n":      "line 1, column number: the column is not known here (serial, place)",
		"serial,serial\n":           "line 1, column serial: the column appears twice",
		"place;serial;place\n1;2;3": "line 1, column place: the column appears twice",
	} {
		if _, _, err := ReadIntake(strings.NewReader(text)); err == nil || err.Error() != want {
			t.Errorf("%q: %v, want %s", text, err, want)
		}
	}
}

func TestReadings(t *testing.T) {
	t.Parallel()
	text := `serial;step;value;code;read_at;read_by
A1;3;1,5;;2026-01-31T08:05:00.25Z;ada
A1;4;;stopped;;
A1;3;2;;;
A2;x;2;;;
A2;5;;;;
A2;5;1;hand;;
A2;5;;lost;;
A2;5;1;;31.01.2026;
;5;1;;;
A3;5;−0,25;;2026-01-31T08:05:00+01:00;
A4;-1;1;;;
`
	rows, refused, err := ReadReadings(strings.NewReader(text))
	if err != nil {
		t.Fatal(err)
	}
	want := []Reading{
		{Line: 2, Serial: "A1", Step: 3, HasValue: true, Value: 1500, ReadAt: "2026-01-31T08:05:00.25Z", ReadBy: "ada"},
		{Line: 3, Serial: "A1", Step: 4, Code: "stopped"},
		{Line: 11, Serial: "A3", Step: 5, HasValue: true, Value: -250, ReadAt: "2026-01-31T08:05:00+01:00"},
	}
	if fmt.Sprint(rows) != fmt.Sprint(want) {
		t.Errorf("rows %+v", rows)
	}
	var faults []string
	for _, r := range refused {
		faults = append(faults, r.Error())
	}
	wantFaults := `line 4, column serial: serial "A1" has a value for this step on line 2 already
line 5, column step: "x" is not a whole number from 0 to 9999
line 6, column value: exactly one of value and code must be filled
line 7, column value: exactly one of value and code must be filled
line 8, column code: "lost" is not an observation code (stopped, hand, unreadable, not_there, dropped)
line 9, column read_at: "31.01.2026" is not an instant like 2026-01-31T08:05:00Z (RFC 3339)
line 10, column serial: is blank
line 12, column step: "-1" is not a whole number from 0 to 9999`
	if got := strings.Join(faults, "\n"); got != wantFaults {
		t.Errorf("refused\n%s", got)
	}
	for text, want := range map[string]string{
		"serial,value\n":          "line 1, column step: a file has either a column step or a column day",
		"serial,step,day,value\n": "line 1, column step: a file has either a column step or a column day",
		"serial,day\n":            "line 1, column value: the column is missing",
	} {
		if _, _, err := ReadReadings(strings.NewReader(text)); err == nil || err.Error() != want {
			t.Errorf("%q: %v", text, err)
		}
	}
	if rows, _, err := ReadReadings(strings.NewReader("serial,day,value\nA,7,1.25\n")); err != nil || !rows[0].ByDay || rows[0].Step != 7 {
		t.Errorf("by day: %+v, %v", rows, err)
	}
}

func TestWriterNeverAltersText(t *testing.T) {
	t.Parallel()
	rows := [][]string{{"", "a,b", `c"d`, "e\nf"}, {"=1+1", "-5", " x "}, {""}, {"Ä", "\u2212"}}
	var out strings.Builder
	w := NewWriter(&out)
	for _, row := range rows {
		if err := w.Row(row...); err != nil {
			t.Fatal(err)
		}
	}
	if err := w.Flush(); err != nil {
		t.Fatal(err)
	}
	r := csv.NewReader(strings.NewReader(out.String()))
	r.FieldsPerRecord = -1
	back, err := r.ReadAll()
	if err != nil || fmt.Sprint(back) != fmt.Sprint(rows) {
		t.Errorf("%q reads %v, %v", out.String(), back, err)
	}
	bad := NewWriter(failing{})
	if err := errors.Join(bad.Row("x"), bad.Flush()); err == nil {
		t.Error("a failing writer is not reported")
	}
}

type failing struct{}

func (failing) Write([]byte) (int, error) { return 0, errors.New("disk full") }

func TestProgrammeFileRoundTrip(t *testing.T) {
	t.Parallel()
	p := trial.ISO3159()
	data := Canonical(p)
	back, err := ParseProgramme(data)
	if err != nil {
		t.Fatal(err)
	}
	if string(Canonical(back)) != string(data) || Hash(back) != Hash(p) {
		t.Errorf("reads back as\n%s\nfrom\n%s", Canonical(back), data)
	}
	// The programme read from a file judges like the one built in.
	for _, category := range []string{"1", "2"} {
		a, err1 := trial.NewJudge(p, category)
		b, err2 := trial.NewJudge(back, category)
		if err1 != nil || err2 != nil {
			t.Fatal(err1, err2)
		}
		rng := rand.New(rand.NewPCG(5, 5))
		var x, y trial.Result
		for range 500 {
			r := make([]int64, 15)
			for d := range r {
				r[d] = rng.Int64N(9000) - 3000
			}
			known := rng.Uint64() | rng.Uint64()
			a.Milli(r, known, &x)
			b.Milli(r, known, &y)
			if x.Verdict != y.Verdict || fmt.Sprint(x.Failed(), x.Unreachable()) != fmt.Sprint(y.Failed(), y.Unreachable()) {
				t.Fatalf("%v: %s and %s", r, x.Verdict, y.Verdict)
			}
		}
	}
	p.Criteria[0].Limits["1"] = trial.Limit{HasMin: true, Min: trial.Ratio(-4, 1)}
	if Hash(p) == Hash(back) {
		t.Error("another limit, the same hash")
	}
}

func TestProgrammeFileFaults(t *testing.T) {
	t.Parallel()
	good := string(Canonical(trial.ISO3159()))
	for _, c := range []struct{ old, new, want string }{
		{`"code":"iso3159",`, ``, "code: is missing"},
		{`"code":"iso3159"`, `"code":5`, "code: must be a text"},
		{`"code":"iso3159"`, `"code":"a b"`, "code: a b is no code: up to 40 of letters, digits, . _ -, beginning with a letter or digit"},
		{`"code":"iso3159"`, `"code":"iso3159","code":"x"`, `code: "code" appears twice`},
		{`"code":"iso3159"`, `"code":"iso3159","colour":"red"`, "colour: is not a name of the programme file"},
		{`"day":1,`, `"day":2,`, "days[0].day: days must be numbered 1, 2, 3, ... in order; found 2"},
		{`{"day":3,"position":"3H"`, `{"day":3,"position":"4H"`, `days[2].position: "4H" is not a position (CH, FH, 3H, 6H, 9H, 12H)`},
		{`{"day":3,"position":"3H","temperature_c":23}`, `{"day":3,"position":"3H","temperature_c":"23"}`, "days[2].temperature_c: must be a number"},
		{`{"day":3,"position":"3H","temperature_c":23}`, `{"day":3,"position":"3H"}`, "days[2].temperature_c: is missing"},
		{`"kind":"mean"`, `"kind":"median"`, `criteria[0].formula.kind: "median" is not a kind of formula`},
		{`"formula":{"days":[1,2,`, `"formula":{"days":[1,16,`, "criteria[0].formula.days[1]: day 16 is not a day of the programme"},
		{`"formula":{"days":[1,2,`, `"formula":{"days":[1,1,`, "criteria[0].formula.days[1]: 1 appears twice"},
		{`"formula":{"days":[1,2,`, `"formula":{"days":[1.5,2,`, "criteria[0].formula.days[0]: must be a whole number"},
		{`"pairs":[[1,2]`, `"pairs":[[1,2,3]`, "criteria[1].formula.pairs[0]: must be a pair of days"},
		{`"pairs":[[1,2]`, `"pairs":[[1,1]`, "criteria[1].formula.pairs[0]: both days of a pair are day 1"},
		{`"from":[11]`, `"from":[12,14]`, "criteria[5].formula.from"},
		{`{"max":"6","min":"-4"}`, `{"max":6,"min":"-4"}`, "criteria[0].limits.1.max: must be a text"},
		{`{"max":"6","min":"-4"}`, `{"max":"1e1","min":"-4"}`, `criteria[0].limits.1.max: must be a text with a decimal number or p/q, such as "-0.6" or "1/3"`},
		{`{"max":"6","min":"-4"}`, `{"max":"-6","min":"-4"}`, "criteria[0].limits.1: the lower limit -4 is above the upper limit -6"},
		{`"limits":{"1":{"max":"6"`, `"limits":{"3":{"max":"6"`, "criteria[0].limits.3: category 3 is not one of the programme's"},
		{`"symbol":"V"`, `"symbol":"M"`, "criteria[1].symbol: M appears twice"},
		{`"symbol":"V"`, `"symbol":"serial"`, "criteria[1].symbol: serial is no symbol: a letter, then letters, digits or _, and no name of a fixed column"},
		{`"then":"median_of_three"`, `"then":"mean"`, "reading.second_look.then: mean is not allowed here"},
		{`"rule":"simple"`, `"rule":"kind"`, "decision.rule: kind is not allowed here"},
		{`"measurand":"as_performed"`, `"measurand":"other"`, "measurand: other is not allowed here"},
		{`"wind":true`, `"wind":1`, "conditioning.wind: must be true or false"},
		{`"agree":"0.3"`, `"agree":"0.3000001"`, "reading.second_look.agree: must be a decimal number with at most three decimals"},
		{`{"code":"1",`, `{"code":"2",`, "categories[1].code: 2 appears twice"},
	} {
		if !strings.Contains(good, c.old) {
			t.Errorf("%s is not in the file", c.old)
			continue
		}
		_, err := ParseProgramme([]byte(strings.Replace(good, c.old, c.new, 1)))
		if c.new == `"from":[12,14]` { // allowed: 38 against a mean of 23
			if err != nil {
				t.Error(err)
			}
			continue
		}
		var f *trial.Fault
		if !errors.As(err, &f) || err.Error() != c.want {
			t.Errorf("%s: %v, want %s", c.new, err, c.want)
		}
	}
	for _, text := range []string{"", "{", "[]", "null", good + "x", good[:len(good)-1], "{\"code\":}"} {
		if _, err := ParseProgramme([]byte(text)); err == nil {
			t.Errorf("%.20q is read", text)
		}
	}
	same := strings.Replace(good, `"from":[11]`, `"from":[13]`, 1)
	if _, err := ParseProgramme([]byte(same)); err == nil || err.Error() != "criteria[5].formula: both sides have the same mean temperature, so there is nothing to divide by" {
		t.Error(err)
	}
}

// Every kind of formula of the contract can be written, read and judged.
func TestEveryKindOfFormulaHasItsForm(t *testing.T) {
	t.Parallel()
	p := trial.ISO3159()
	days := []int{1, 2, 3}
	for kind := range formulaFields {
		p.Criteria = []trial.Criterion{
			{Symbol: "A", Title: "a", Unit: "s/d", Formula: trial.Formula{Kind: trial.Mean, Days: days}},
			{Symbol: "B", Title: "b", Unit: "s/d", Formula: trial.Formula{Kind: kind}},
		}
		f := &p.Criteria[1].Formula
		for _, field := range formulaFields[kind] {
			switch field {
			case "days":
				f.Days = days
			case "pairs":
				f.Pairs = [][2]int{{1, 2}}
			case "of":
				f.Of = []int{13}
			case "from":
				f.From = []int{11}
			case "divisor":
				f.Divisor = "n-1"
			case "periods":
				f.Periods = [][]int{{1, 2}, {3, 4}}
			case "constant":
				f.Constant = trial.Ratio(1, 3)
			case "terms":
				f.Terms = []trial.Term{{Weight: trial.Ratio(-2, 1), Symbol: "A", Absolute: true}}
			}
		}
		data := Canonical(p)
		back, err := ParseProgramme(data)
		if err != nil {
			t.Errorf("%s: %v", kind, err)
			continue
		}
		if string(Canonical(back)) != string(data) {
			t.Errorf("%s reads back as %s", kind, Canonical(back))
		}
		if _, err := trial.NewJudge(back, "1"); err != nil {
			t.Errorf("%s: %v", kind, err)
		}
	}
}
