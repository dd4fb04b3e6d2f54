package main

import (
	"bytes"
	"context"
	"encoding/csv"
	"encoding/json"
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"testing/iotest"
)

// runWith runs the program on an input and gives what it printed and its exit code.
func runWith(t testing.TB, input string, args ...string) (stdout, stderr string, code int) {
	t.Helper()
	var out, fault bytes.Buffer
	code = run(context.Background(), args, func(string) string { return "" }, strings.NewReader(input), &out, &fault)
	return out.String(), fault.String(), code
}

// Rows and answers written by tools/judge_vectors.py.
func TestJudgeVectors(t *testing.T) {
	t.Parallel()
	for _, name := range []string{"random", "limit", "partial", "states"} {
		file := filepath.Join("..", "..", "testdata", "judge", name+".csv")
		want, err := os.ReadFile(filepath.Join("..", "..", "testdata", "judge", name+".want.csv"))
		if err != nil {
			t.Fatal(err)
		}
		args := []string{"judge"}
		if name == "states" {
			args = append(args, "-states")
		}
		stdout, stderr, code := runWith(t, "", append(args, file)...)
		if code != exitDone || stderr != "" {
			t.Errorf("%s: exit %d, %s", name, code, stderr)
		}
		sameLines(t, name, stdout, string(want))
		stdout, _, _ = runWith(t, "", append(args, "-format", "json", file)...)
		sameLines(t, name+" as JSON", fromJSON(t, stdout), string(want))
	}
}

func sameLines(t *testing.T, name, got, want string) {
	t.Helper()
	g, w := strings.Split(got, "\n"), strings.Split(want, "\n")
	if len(g) != len(w) {
		t.Errorf("%s: %d lines, want %d", name, len(g), len(w))
		return
	}
	wrong := 0
	for i := range g {
		if g[i] != w[i] && wrong < 5 {
			wrong++
			t.Errorf("%s line %d:\n%s\nwant\n%s", name, i+1, g[i], w[i])
		}
	}
}

// fromJSON turns judge's JSON lines into its CSV, checking the kinds of value on the way.
func fromJSON(t *testing.T, text string) string {
	t.Helper()
	names := strings.Split("serial,category,verdict,M,V,Vmax,D,P,C,R,failed,unreachable", ",")
	out := strings.Join(names, ",") + "\n"
	for line := range strings.Lines(text) {
		var row map[string]any
		if err := json.Unmarshal([]byte(line), &row); err != nil {
			t.Fatalf("%s: %v", line, err)
		}
		var cells []string
		for _, name := range names {
			switch v := row[name].(type) {
			case string:
				cells = append(cells, v)
			case nil:
				cells = append(cells, "")
			case []any:
				var list []string
				for _, x := range v {
					list = append(list, x.(string))
				}
				if len(list) == 0 || name != "failed" && name != "unreachable" {
					t.Fatalf("%s: %s is %v", line, name, v)
				}
				cells = append(cells, strings.Join(list, " "))
			default:
				t.Fatalf("%s: %s is %T", line, name, v)
			}
		}
		if len(row) != len(names) {
			t.Fatalf("%s: %d keys", line, len(row))
		}
		out += strings.Join(cells, ",") + "\n"
	}
	return out
}

func TestJudgeJSONKeepsTheOrderOfTheHeader(t *testing.T) {
	t.Parallel()
	stdout, _, code := runWith(t, header+",calibre\n"+row("A\"1", "1", nil)+",\n", "judge", "-format", "json")
	want := `{"serial":"A\"1","category":"1","verdict":"pass","M":"0.000000","V":"0.000000","Vmax":"0.000000","D":"0.000000",` +
		`"P":"0.000000","C":"0.000000","R":"0.000000","failed":null,"unreachable":null,"calibre":null}` + "\n"
	// The serial holds a quotation mark and is quoted in the input by row.
	if stdout != want || code != 0 {
		t.Errorf("%d %s", code, stdout)
	}
}

const header = "serial,category,d1,d2,d3,d4,d5,d6,d7,d8,d9,d10,d11,d12,d13,d14,d15"

// row writes a row of zeros with some days replaced.
func row(serial, category string, days map[int]string) string {
	cells := []string{serial, category}
	if strings.ContainsAny(serial, `",`) {
		cells[0] = `"` + strings.ReplaceAll(serial, `"`, `""`) + `"`
	}
	for d := 1; d <= 15; d++ {
		cell, ok := days[d]
		if !ok {
			cell = "0"
		}
		cells = append(cells, cell)
	}
	return strings.Join(cells, ",")
}

// refusedCell is what judge says about one cell in place of d5.
var refusedCells = []struct{ cell, reason string }{
	{"x", `"x" is not a number; a number is digits with an optional sign and at most one point, a day not read is left blank`},
	{"n/a", `"n/a" is not a number; a number is digits with an optional sign and at most one point, a day not read is left blank`},
	{"null", `"null" is not a number; a number is digits with an optional sign and at most one point, a day not read is left blank`},
	{"NaN", `"NaN" is not a number; a number is digits with an optional sign and at most one point, a day not read is left blank`},
	{"-inf", `"-inf" is not a number; a number is digits with an optional sign and at most one point, a day not read is left blank`},
	{"-", `"-" is not a number; a number is digits with an optional sign and at most one point, a day not read is left blank`},
	{"+", `"+" is not a number; a number is digits with an optional sign and at most one point, a day not read is left blank`},
	{".", `"." is not a number; a number is digits with an optional sign and at most one point, a day not read is left blank`},
	{"-.", `"-." is not a number; a number is digits with an optional sign and at most one point, a day not read is left blank`},
	{"--1", `"--1" is not a number; a number is digits with an optional sign and at most one point, a day not read is left blank`},
	{"1-", `"1-" is not a number; a number is digits with an optional sign and at most one point, a day not read is left blank`},
	{"1.2.3", `"1.2.3" is not a number; a number is digits with an optional sign and at most one point, a day not read is left blank`},
	{"2026-01-31", `"2026-01-31" is not a number; a number is digits with an optional sign and at most one point, a day not read is left blank`},
	{"31.01.2026", `"31.01.2026" is not a number; a number is digits with an optional sign and at most one point, a day not read is left blank`},
	{"12:30", `"12:30" is not a number: ':' is not allowed in one`},
	{"1/2", `"1/2" is not a number: '/' is not allowed in one`},
	{"1.5s", `"1.5s" is not a number: 's' is not allowed in one`},
	{"1.5 s/d", `"1.5 s/d" is not a number: ' ' is not allowed in one`},
	{"5%", `"5%" is not a number: '%' is not allowed in one`},
	{"0x10", `"0x10" is not a number: 'x' is not allowed in one`},
	{"(1.5)", `"(1.5)" is not a number: '(' is not allowed in one`},
	{"~1.5", `"~1.5" is not a number: '~' is not allowed in one`},
	{"<1", `"<1" is not a number: '<' is not allowed in one`},
	{"±1", `"±1" is not a number: '±' (U+00B1) is not allowed in one`},
	{"–1", `"–1" is not a number: '–' (U+2013) is not allowed in one`},
	{"—1", `"—1" is not a number: '—' (U+2014) is not allowed in one`},
	{"‐1", `"‐1" is not a number: '‐' (U+2010) is not allowed in one`},
	{"‑1", `"‑1" is not a number: '‑' (U+2011) is not allowed in one`},
	{"－1", `"－1" is not a number: '－' (U+FF0D) is not allowed in one`},
	{"\u00ad1", `"\u00ad1" is not a number: U+00AD is not allowed in one`},
	{"１", `"１" is not a number: '１' (U+FF11) is not allowed in one`},
	{"٣", `"٣" is not a number: '٣' (U+0663) is not allowed in one`},
	{"²", `"²" is not a number: '²' (U+00B2) is not allowed in one`},
	{"½", `"½" is not a number: '½' (U+00BD) is not allowed in one`},
	{"1\u200b", `"1\u200b" is not a number: U+200B is not allowed in one`},
	{"\ufeff1", `"\ufeff1" is not a number: U+FEFF is not allowed in one`},
	{"1\u200e", `"1\u200e" is not a number: U+200E is not allowed in one`},
	{"1\x00", `"1\x00" is not a number: U+0000 is not allowed in one`},
	{"1\x1b[2J", `"1\x1b[2J" is not a number: U+001B is not allowed in one`},
	{"1\r", `"1\r" is not a number: U+000D is not allowed in one`},
	{"1\u2028", `"1\u2028" is not a number: U+2028 is not allowed in one`},
	{"1\u3000", `"1\u3000" is not a number: U+3000 is not allowed in one`},
	{"1e3", `"1e3" has an exponent; write the number out`},
	{"1E-2", `"1E-2" has an exponent; write the number out`},
	{"-1.5e+2", `"-1.5e+2" has an exponent; write the number out`},
	{"- 1", `"- 1" has its sign apart from its digits`},
	{"+\u00a01", `"+\u00a01" has its sign apart from its digits`},
	{"=1", `"=1" is a formula; write the number itself`},
	{"=SUM(A1:A2)", `"=SUM(A1:A2)" is a formula; write the number itself`},
	{"@1", `"@1" is a formula; write the number itself`},
	{`"1,5"`, `"1,5" has a decimal comma, which only files separated by semicolon or tab may use`},
	{`"1,234"`, `"1,234" has a decimal comma, which only files separated by semicolon or tab may use`},
	{`"1,234.5"`, `"1,234.5" has digits in groups; write the number without separators`},
	{`"1,234,567"`, `"1,234,567" has digits in groups; write the number without separators`},
	{"1 234", `"1 234" has digits in groups; write the number without separators`},
	{"1'234", `"1'234" has digits in groups; write the number without separators`},
	{"1\u202f234", `"1\u202f234" has digits in groups; write the number without separators`},
	{"1_000", `"1_000" has digits in groups; write the number without separators`},
	{"0.0001", `"0.0001" is finer than 0.001; nothing is rounded`},
	{"-5.0005", `"-5.0005" is finer than 0.001; nothing is rounded`},
	{"3.2999999999", `"3.2999999999" is finer than 0.001; nothing is rounded`},
	{"600.001", "600.001 is beyond ±600 s/d"},
	{"-600.001", "-600.001 is beyond ±600 s/d"},
	{"601", "601 is beyond ±600 s/d"},
	{"99999999999999", "99999999999999 is beyond ±600 s/d"},
	{"9999999999999999", `9999999999999999 is beyond ±600 s/d`},
	{"1\xff", `bytes that are not valid text: "\xff"`},
	{"\xc3\x28", `bytes that are not valid text: "\xc3("`},
	{"\xed\xa0\x80", `bytes that are not valid text: "\xed\xa0\x80"`},
	{`1"2`, `a quotation mark stands inside the cell "1\"2"; put the cell in quotation marks and double it`},
	{`"1`, "a quotation mark is still open at the end of the line; a cell never spans lines"},
	{`"1"2`, `a quotation mark stands inside the cell "1"; put the cell in quotation marks and double it`},
}

func TestJudgeRefusesCells(t *testing.T) {
	t.Parallel()
	for _, c := range refusedCells {
		input := header + "\n" + row("A1", "1", nil) + "\n" + row("A2", "1", map[int]string{5: c.cell}) + "\n" + row("A3", "2", nil) + "\n"
		stdout, stderr, code := runWith(t, input, "judge")
		if want := "line 3, column d5: " + c.reason + "\n"; stderr != want || code != exitRefused {
			t.Errorf("%q: exit %d\n%swant\n%s", c.cell, code, stderr, want)
		}
		if got := serials(t, stdout); got != "A1 A3" {
			t.Errorf("%q: rows %s", c.cell, got)
		}
	}
}

// serials lists the first column of judge's output.
func serials(t *testing.T, stdout string) string {
	t.Helper()
	rows, err := csv.NewReader(strings.NewReader(stdout)).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var list []string
	for _, row := range rows[min(1, len(rows)):] {
		list = append(list, row[0])
	}
	return strings.Join(list, " ")
}

func TestJudgeAcceptsCells(t *testing.T) {
	t.Parallel()
	for cell, want := range map[string]string{
		"1.5": "0.150000", "+1.5": "0.150000", "-1.5": "-0.150000", "\u22121.5": "-0.150000", ".5": "0.050000", "5.": "0.500000",
		"1.5000000": "0.150000", " \t1.5\u00a0": "0.150000", `"1.5"`: "0.150000", ` "1.5" `: "0.150000", "600": "60.000000",
		"-600.000": "-60.000000", "0.001": "0.000100", "-0": "0.000000", "0000.001": "0.000100", "": "", `""`: "", "\u00a0": "",
	} {
		stdout, stderr, code := runWith(t, header+"\n"+row("A1", "1", map[int]string{5: cell})+"\n", "judge")
		rows, err := csv.NewReader(strings.NewReader(stdout)).ReadAll()
		if err != nil || code != exitDone || stderr != "" || rows[1][3] != want {
			t.Errorf("%q: exit %d, %s%s", cell, code, stdout, stderr)
		}
	}
}

// known is the header as messages list it.
var known = strings.ReplaceAll(header, ",", ", ")

// judgeFiles are whole files: what is printed on standard error, the rows judged, the exit code.
var judgeFiles = []struct {
	name, input string
	args        []string
	stderr      string
	rows        string
	code        int
}{
	{"empty", "", nil, "line 1, column serial: the file is empty; a header is required\n", "", 2},
	{"blank lines", "\n \n\t\n", nil, "line 1, column serial: the file is empty; a header is required\n", "", 2},
	{"header only", header + "\n", nil, "", "", 0},
	{"header without line end", header, nil, "", "", 0},
	{"header and blanks", header + "\r\n\r\n  \r\n", nil, "", "", 0},
	{"missing day", strings.Replace(header, ",d7", "", 1) + "\n", nil, "line 1, column d7: the column is missing\n", "", 2},
	{"missing serial", strings.TrimPrefix(header, "serial,") + "\n", nil, "line 1, column serial: the column is missing\n", "", 2},
	{"missing category", strings.Replace(header, "category,", "", 1) + "\n", nil, "line 1, column category: the column is missing\n", "", 2},
	{"unknown column", header + ",d16\n", nil, "line 1, column d16: the column is not known here (" + known + ", calibre)\n", "", 2},
	{"unknown before missing", "serial,kind\n", nil, "line 1, column kind: the column is not known here (" + known + ", calibre)\n", "", 2},
	{"repeated column", header + ",d1\n", nil, "line 1, column d1: the column appears twice\n", "", 2},
	{"upper case column", strings.Replace(header, "d1,", "D1,", 1) + "\n", nil, `line 1, column D1: the column is not known here (` + known + ", calibre)\n", "", 2},
	{"states for rates", strings.ReplaceAll(header, ",d", ",s") + "\n", nil, "line 1, column s1: the column is not known here (" + known + ", calibre)\n", "", 2},
	{"rates for states", header + "\n", []string{"-states"}, "line 1, column d1: the column is not known here (" + strings.Replace(strings.ReplaceAll(known, ", d", ", s"), "s1,", "s0, s1,", 1) + ", calibre)\n", "", 2},
	{"no header", row("A1", "1", nil) + "\n", nil, `line 1, column A1: the column is not known here (` + known + ", calibre)\n", "", 2},
	{"padded columns", strings.ReplaceAll(header, ",", " , ") + "\n" + row("A1", "1", nil) + "\n", nil, "", "A1", 0},
	{"quoted columns", `"` + strings.ReplaceAll(header, ",", `","`) + "\"\n" + row("A1", "1", nil) + "\n", nil, "", "A1", 0},
	{"bad text in header", header + ",\xff\n", nil, `line 1, column serial: bytes that are not valid text: "\xff"` + "\n", "", 2},
	{"UTF-16 without mark", "s\x00e\x00r\x00", nil, `line 1, column "s\x00e\x00r\x00": the column is not known here (` + known + ", calibre)\n", "", 2},
	{"too few cells", header + "\nA1,1,0\n" + row("A2", "1", nil) + "\n", nil, "line 2, column serial: the row has 3 cells, the header 17\n", "A2", 1},
	{"too many cells", header + "\n" + row("A1", "1", nil) + ",\n", nil, "line 2, column serial: the row has 18 cells, the header 17\n", "", 1},
	{"empty serial", header + "\n" + row("", "1", nil) + "\n", nil, "line 2, column serial: is blank\n", "", 1},
	{"blank serial", header + "\n" + row(" \u00a0", "1", nil) + "\n", nil, "line 2, column serial: is blank\n", "", 1},
	{"no category", header + "\n" + row("A1", "", nil) + "\n", nil, "line 2, column category: \"\" is not a category of the programme (1, 2)\n", "", 1},
	{"other category", header + "\n" + row("A1", "3", nil) + "\n", nil, "line 2, column category: \"3\" is not a category of the programme (1, 2)\n", "", 1},
	{"category 01", header + "\n" + row("A1", "01", nil) + "\n", nil, "line 2, column category: \"01\" is not a category of the programme (1, 2)\n", "", 1},
	{"padded category", header + "\n" + row("A1", " 2\t", nil) + "\n", nil, "", "A1", 0},
	{"duplicate", header + "\n" + row("A1", "1", nil) + "\n\n" + row(" A1 ", "2", nil) + "\n", nil, "line 4, column serial: serial \"A1\" stands on line 2 already; line 4 repeats it\n", "A1", 1},
	{"duplicate of a refused row", header + "\n" + row("A1", "1", map[int]string{3: "x"}) + "\n" + row("A1", "1", nil) + "\n", nil,
		"line 2, column d3: \"x\" is not a number; a number is digits with an optional sign and at most one point, a day not read is left blank\n" +
			"line 3, column serial: serial \"A1\" stands on line 2 already; line 3 repeats it\n", "", 1},
	{"no duplicate of a row with too few cells", header + "\nA1,1\n" + row("A1", "1", nil) + "\n", nil, "line 2, column serial: the row has 2 cells, the header 17\n", "A1", 1},
	{"no duplicate of a row with an open quote", header + "\nA1,1,\"0\n" + row("A1", "1", nil) + "\n", nil, "line 2, column d1: a quotation mark is still open at the end of the line; a cell never spans lines\n", "A1", 1},
	{"duplicate of a row with bad bytes", header + "\n" + row("A1", "1", map[int]string{2: "\xff"}) + "\n" + row("A1", "1", nil) + "\n", nil,
		"line 2, column d2: bytes that are not valid text: \"\\xff\"\nline 3, column serial: serial \"A1\" stands on line 2 already; line 3 repeats it\n", "", 1},
	{"serials differ in case", header + "\n" + row("a1", "1", nil) + "\n" + row("A1", "1", nil) + "\n", nil, "", "a1 A1", 0},
	{"first fault from the left", header + "\n" + row("A1", "9", map[int]string{2: "x", 9: "y"}) + "\n", nil, "line 2, column category: \"9\" is not a category of the programme (1, 2)\n", "", 1},
	{"first fault by the file's own order", "d2,d1,category,serial,d3,d4,d5,d6,d7,d8,d9,d10,d11,d12,d13,d14,d15\n0,x,9,A1,y,0,0,0,0,0,0,0,0,0,0,0,0\n", nil,
		"line 2, column d1: \"x\" is not a number; a number is digits with an optional sign and at most one point, a day not read is left blank\n", "", 1},
	{"category left of a repeated serial", "category,serial,d1,d2,d3,d4,d5,d6,d7,d8,d9,d10,d11,d12,d13,d14,d15\n1,A,,,,,,,,,,,,,,,\n9,A,,,,,,,,,,,,,,,\n", nil,
		"line 3, column category: \"9\" is not a category of the programme (1, 2)\n", "A", 1},
	{"only separators", header + "\n,,,,,,,,,,,,,,,,\n", nil, "line 2, column serial: is blank\n", "", 1},
	{"open quote alone", header + "\n\"A1,1\n" + row("A2", "1", nil) + "\n", nil, "line 2, column serial: a quotation mark is still open at the end of the line; a cell never spans lines\n", "A2", 1},
	{"serial with separator", header + "\n" + row("A,1", "1", nil) + "\n", nil, "", "A,1", 0},
	{"serial with quote", header + "\n" + row(`A"1`, "1", nil) + "\n", nil, "", `A"1`, 0},
	{"serial as formula", header + "\n" + row("=A1", "1", nil) + "\n", nil, "", "=A1", 0},
	{"last line without end", header + "\n" + row("A1", "1", nil), nil, "", "A1", 0},
	{"CRLF", header + "\r\n" + row("A1", "1", nil) + "\r\n", nil, "", "A1", 0},
	{"BOM", "\ufeff" + header + "\n" + row("A1", "1", nil) + "\n", nil, "", "A1", 0},
	{"decimal comma by semicolon", strings.ReplaceAll(header, ",", ";") + "\nA1;1;1,5;-2,25;,5;1,2340;1234,5;0;0;0;0;0;0;0;0;0;0\n", nil, "line 2, column d5: 1234.5 is beyond ±600 s/d\n", "", 1},
	{"ambiguous comma", strings.ReplaceAll(header, ",", ";") + "\nA1;1;1,500;0;0;0;0;0;0;0;0;0;0;0;0;0;0\n", nil, "line 2, column d1: \"1,500\" is ambiguous: its comma may be a decimal comma or a thousands separator\n", "", 1},
	{"tabs", strings.ReplaceAll(header+"\n"+row("A1", "1", map[int]string{1: "1;5"}), ",", "\t") + "\n", nil, "line 2, column d1: \"1;5\" is not a number: ';' is not allowed in one\n", "", 1},
	{"state beyond half a dial", statesOf("21600.001", "21600") + "\n", []string{"-states"}, "line 2, column s0: a state of 21600.001 s is beyond ±21600 s, half a dial period; give it from the nearer side\n", "", 1},
	{"state at half a dial", statesOf("21600", "21599") + "\n", []string{"-states"}, "", "A1", 0},
	{"states too far apart", statesOf("0", "600.001") + "\n", []string{"-states"}, "line 2, column s1: from 0 s the day before to 600.001 s is a rate beyond ±600 s/d\n", "", 1},
	{"states just near enough", statesOf("-300", "300") + "\n", []string{"-states"}, "", "A1", 0},
	{"jump over a gap", statesOf("0", "", "900") + "\n", []string{"-states"}, "", "A1", 0},
}

// statesOf writes a states file of one row with its first states given.
func statesOf(first ...string) string {
	cells := append([]string{"A1", "1"}, first...)
	for len(cells) < 18 {
		cells = append(cells, "")
	}
	return strings.Replace(strings.ReplaceAll(header, ",d", ",s"), "s1,", "s0,s1,", 1) + "\n" + strings.Join(cells, ",")
}

func TestJudgeFiles(t *testing.T) {
	t.Parallel()
	for _, c := range judgeFiles {
		stdout, stderr, code := runWith(t, c.input, append([]string{"judge"}, c.args...)...)
		if stderr != c.stderr || code != c.code {
			t.Errorf("%s: exit %d\n%swant %d\n%s", c.name, code, stderr, c.code, c.stderr)
		}
		if got := serials(t, stdout); got != c.rows {
			t.Errorf("%s: rows %q, want %q", c.name, got, c.rows)
		}
		if c.code == 2 && stdout != "" {
			t.Errorf("%s: prints %q", c.name, stdout)
		}
	}
	if n := len(judgeFiles) + len(refusedCells); n < 100 {
		t.Errorf("only %d malformed files", n)
	}
}

func TestJudgeHeaderAndCalibre(t *testing.T) {
	t.Parallel()
	const want = "serial,category,verdict,M,V,Vmax,D,P,C,R,failed,unreachable"
	if stdout, _, code := runWith(t, header+"\n", "judge"); stdout != want+"\n" || code != 0 {
		t.Errorf("%d %q", code, stdout)
	}
	if stdout, _, code := runWith(t, header+"\n", "judge", "-format", "json"); stdout != "" || code != 0 {
		t.Errorf("%d %q", code, stdout)
	}
	stdout, _, _ := runWith(t, "calibre,"+header+"\n K 1 ,"+row("A1", "1", nil)+"\n\"a,b\","+row("A2", "2", map[int]string{15: "7"})+"\n", "judge", "-")
	if want := want + ",calibre\nA1,1,pass,0.000000,0.000000,0.000000,0.000000,0.000000,0.000000,0.000000,,,K 1\n" +
		"A2,2,fail,0.000000,0.000000,0.000000,0.000000,0.000000,0.000000,7.000000,R,,\"a,b\"\n"; stdout != want {
		t.Errorf("%s", stdout)
	}
}

func TestJudgeUsage(t *testing.T) {
	t.Parallel()
	for _, c := range []struct {
		args []string
		want string
	}{
		{[]string{"judge", "-programme", "winter.json"}, "ratehouse judge: -programme winter.json: neither a built-in programme (iso3159, contest, weekly) nor a file\n"},
		{[]string{"judge", "-format", "xml"}, "ratehouse judge: -format \"xml\": csv and json are known\n"},
		{[]string{"judge", "a", "b"}, "ratehouse judge: one file at a time, and flags stand before it\n"},
		{[]string{"serve"}, ""},
		{[]string{"no-such"}, "ratehouse: unknown command \"no-such\"; ratehouse -h lists the commands\n"},
	} {
		if c.want == "" {
			continue
		}
		stdout, stderr, code := runWith(t, header+"\n", c.args...)
		if stdout != "" || stderr != c.want || code != exitUsage {
			t.Errorf("%v: exit %d, %q, %q", c.args, code, stdout, stderr)
		}
	}
	if _, stderr, code := runWith(t, "", "judge", "no-such-file.csv"); code != exitUsage || !strings.Contains(stderr, "no-such-file.csv") {
		t.Errorf("%d %s", code, stderr)
	}
	if _, stderr, code := runWith(t, "", "judge", "-no-such-flag"); code != exitUsage || !strings.Contains(stderr, "no-such-flag") {
		t.Errorf("%d %s", code, stderr)
	}
	if stdout, _, code := runWith(t, header+"\n", "judge", "-programme", "iso3159", "-"); code != 0 || stdout == "" {
		t.Errorf("%d %s", code, stdout)
	}
}

func TestEveryCommandHelpsWithAnExample(t *testing.T) {
	t.Parallel()
	for _, c := range commands() {
		stdout, stderr, code := runWith(t, "", c.name, "-h")
		if code != exitDone || stderr != "" || !strings.Contains(stdout, "Example:\n  ") || !strings.Contains(c.example, "ratehouse "+c.name) {
			t.Errorf("%s: exit %d, %s%s", c.name, code, stdout, stderr)
		}
		if c.run != nil {
			continue
		}
		if stdout, stderr, code := runWith(t, "", c.name); stdout != "" || code != exitUsage || stderr != "ratehouse "+c.name+": not built yet\n" {
			t.Errorf("%s: exit %d, %q, %q", c.name, code, stdout, stderr)
		}
	}
	if _, stderr, code := runWith(t, ""); code != exitUsage || !strings.Contains(stderr, "judge") {
		t.Errorf("no command: %d %s", code, stderr)
	}
}

func TestJudgeReportsWhatItCannotReadOrWrite(t *testing.T) {
	t.Parallel()
	var fault bytes.Buffer
	in := iotest.TimeoutReader(strings.NewReader(header + "\n" + strings.Repeat(" ", 1<<19)))
	if code := judge(nil, in, &bytes.Buffer{}, &fault); code != exitUsage || !strings.Contains(fault.String(), "cannot read") {
		t.Errorf("%d %s", code, fault.String())
	}
	fault.Reset()
	if code := judge(nil, strings.NewReader(header+"\n"), fullDisk{}, &fault); code != exitUsage || !strings.Contains(fault.String(), "cannot write") {
		t.Errorf("%d %s", code, fault.String())
	}
}

// fullDisk is a writer on a full disk.
type fullDisk struct{}

func (fullDisk) Write([]byte) (int, error) { return 0, errors.New("no space left") }

// Whatever comes: no panic, an exit code of the contract, output that the standard reader reads,
// one row or one message a line that is not blank.
func FuzzJudge(f *testing.F) {
	for _, c := range judgeFiles[:20] {
		f.Add([]byte(c.input), len(c.args) > 0)
	}
	f.Add([]byte(header+"\n"+row("A1", "1", nil)), false)
	f.Add([]byte(statesOf("1", "2", "3.5")), true)
	f.Fuzz(func(t *testing.T, input []byte, states bool) {
		var out, fault bytes.Buffer
		args := []string{}
		if states {
			args = append(args, "-states")
		}
		code := judge(args, bytes.NewReader(input), &out, &fault)
		r := csv.NewReader(&out)
		rows, err := r.ReadAll()
		if err != nil || code < 0 || code > 2 {
			t.Fatalf("exit %d, %v", code, err)
		}
		messages := strings.Count(fault.String(), "\n")
		if (code == 0) != (messages == 0) || code == 2 && (messages != 1 || len(rows) != 0) {
			t.Fatalf("exit %d with %d messages and %d rows", code, messages, len(rows))
		}
		for _, row := range rows {
			if len(row) != 12 && len(row) != 13 {
				t.Fatal(row)
			}
		}
		if lines := fmt.Sprint(len(rows) + messages); code != 2 && len(rows)+messages > bytes.Count(input, []byte("\n"))+1 && !bytes.HasPrefix(input, []byte("\xff\xfe")) && !bytes.HasPrefix(input, []byte("\xfe\xff")) {
			t.Fatalf("%s rows and messages", lines)
		}
	})
}
