package proof

import (
	"bytes"
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"errors"
	"math"
	"math/rand/v2"
	"reflect"
	"slices"
	"strconv"
	"strings"
	"testing"
	"time"
	"unicode/utf16"
	"unicode/utf8"
)

// vectors is the part of testdata/proof/vectors.json about canonical JSON.
type jcsVectors struct {
	JCS struct {
		Sample struct{ Input, Output, SHA256, Outhex string } `json:"jcs_sample"`
		Sort   struct {
			Input string
			Order []string
			Keys  []string `json:"keys_sorted_utf16"`
			Sum   string   `json:"output_sha256"`
		} `json:"jcs_sorting"`
		Numbers [][2]string `json:"jcs_numbers"`
		Unicode struct {
			NFC, NFD string
			SumNFC   string `json:"sha_nfc"`
			SumNFD   string `json:"sha_nfd"`
		} `json:"unicode_trap"`
		NumberText struct {
			Half string `json:"jcs_of_1_50"`
			Zero string `json:"jcs_of_minus0"`
			Big  string
		} `json:"number_text_trap"`
	}
	Certificate struct{ Canonical, SHA256, JWS string } `json:"certificate_like_example"`
}

func canonicalVectors(t *testing.T) (v jcsVectors) {
	testJSON(t, "vectors.json", &v)
	return v
}

func mustCanonical(t *testing.T, in string) string {
	t.Helper()
	out, err := CanonicalJSON([]byte(in))
	if err != nil {
		t.Fatalf("%s: %v", in, err)
	}
	return string(out)
}

func sum(s string) string {
	h := sha256.Sum256([]byte(s))
	return hex.EncodeToString(h[:])
}

func TestCanonicalVectors(t *testing.T) {
	t.Parallel()
	v := canonicalVectors(t)
	sample := mustCanonical(t, v.JCS.Sample.Input)
	for _, c := range [][3]string{
		{"sample", sample, v.JCS.Sample.Output},
		{"sample in hex", hex.EncodeToString([]byte(sample)), v.JCS.Sample.Outhex},
		{"sample's hash", sum(sample), v.JCS.Sample.SHA256},
		{"sorted hash", sum(mustCanonical(t, v.JCS.Sort.Input)), v.JCS.Sort.Sum},
		{"composed", sum(mustCanonical(t, v.JCS.Unicode.NFC)), v.JCS.Unicode.SumNFC},
		{"decomposed", sum(mustCanonical(t, v.JCS.Unicode.NFD)), v.JCS.Unicode.SumNFD},
		{"1.50", mustCanonical(t, `{"v":1.50}`), v.JCS.NumberText.Half},
		{"-0", mustCanonical(t, `{"v":-0}`), v.JCS.NumberText.Zero},
		{"-0.0", mustCanonical(t, `{"v":-0.0}`), v.JCS.NumberText.Zero},
		{"2^53", mustCanonical(t, `{"v":9007199254740992}`), v.JCS.NumberText.Big},
		{"certificate", mustCanonical(t, v.Certificate.Canonical), v.Certificate.Canonical},
		{"certificate's hash", sum(v.Certificate.Canonical), v.Certificate.SHA256},
	} {
		if c[1] != c[2] {
			t.Errorf("%s: %s, want %s", c[0], c[1], c[2])
		}
	}
}

func TestCanonicalKeyOrder(t *testing.T) {
	t.Parallel()
	v := canonicalVectors(t)
	decoder := json.NewDecoder(strings.NewReader(mustCanonical(t, v.JCS.Sort.Input)))
	var keys, values []string
	for decoder.More() || len(keys) == 0 {
		token, err := decoder.Token()
		if err != nil {
			t.Fatal(err)
		}
		if s, ok := token.(string); ok && len(keys) == len(values) {
			keys = append(keys, s)
		} else if ok {
			values = append(values, s)
		}
	}
	if !slices.Equal(values, v.JCS.Sort.Order) {
		t.Errorf("order %q, want %q", values, v.JCS.Sort.Order)
	}
	for i, key := range keys {
		units := ""
		for _, u := range utf16.Encode([]rune(key)) {
			units += hex.EncodeToString([]byte{byte(u >> 8), byte(u)})
		}
		if units != v.JCS.Sort.Keys[i] {
			t.Errorf("key %d is %s, want %s", i, units, v.JCS.Sort.Keys[i])
		}
	}
}

// Numbers are those of RFC 8785 Appendix B. Those that are integers beyond 2^53 have a text but
// are refused in a document.
func TestNumberVectors(t *testing.T) {
	t.Parallel()
	for _, pair := range canonicalVectors(t).JCS.Numbers {
		n, err := strconv.ParseUint(pair[0], 16, 64)
		if err != nil {
			t.Fatal(err)
		}
		f := math.Float64frombits(n)
		if got := string(appendES6(nil, f)); got != pair[1] {
			t.Errorf("%s: %s, want %s", pair[0], got, pair[1])
		}
		got, err := Canonical(f)
		if a := math.Abs(f); a > 1<<53 && a < 1e21 {
			if !errors.Is(err, ErrNumber) {
				t.Errorf("%s: %s, %v, want ErrNumber", pair[1], got, err)
			}
		} else if string(got) != pair[1] || err != nil {
			t.Errorf("%s: %s, %v", pair[1], got, err)
		}
	}
}

func TestCanonicalRefusals(t *testing.T) {
	t.Parallel()
	deep := strings.Repeat("[", 300) + strings.Repeat("]", 300)
	for _, c := range []struct {
		in   string
		want error
	}{
		{`{"a":1,"a":1}`, ErrDuplicateKey}, {`[{"b":{"a":1,"\u0061":2}}]`, ErrDuplicateKey},
		{"\"\xff\"", ErrText}, {"\"\xed\xa0\x80\"", ErrText}, {"{\"\xc0\x80\":1}", ErrText},
		{`"\ud800"`, ErrText}, {`"\udc00"`, ErrText}, {`"\ud800x"`, ErrText}, {`"\ud800\u0041"`, ErrText},
		{`"\udc00\ud800"`, ErrText}, {`{"\ud83d":1}`, ErrText}, {`"\ud800\ud800"`, ErrText},
		{`9007199254740993`, ErrNumber}, {`-9007199254740993`, ErrNumber}, {`9007199254740993.0`, ErrNumber},
		{`9007199254740992e0`, ErrNumber}, {`1e20`, ErrNumber}, {`99999999999999999999999`, ErrNumber},
		{`1e309`, ErrNumber}, {`-1e309`, ErrNumber}, {`1e-400`, ErrNumber}, {`0.0001e-400`, ErrNumber},
		{``, ErrSyntax}, {` `, ErrSyntax}, {`{`, ErrSyntax}, {`[1,]`, ErrSyntax}, {`{"a":1,}`, ErrSyntax}, {`{a:1}`, ErrSyntax},
		{`01`, ErrSyntax}, {`-`, ErrSyntax}, {`+1`, ErrSyntax}, {`.5`, ErrSyntax}, {`5.`, ErrSyntax}, {`1e`, ErrSyntax}, {`1e+`, ErrSyntax},
		{`NaN`, ErrSyntax}, {`Infinity`, ErrSyntax}, {`-Infinity`, ErrSyntax}, {`nul`, ErrSyntax}, {`'a'`, ErrSyntax}, {`"a`, ErrSyntax},
		{`"\x"`, ErrSyntax}, {`"\u12"`, ErrSyntax}, {`"\u+123"`, ErrSyntax}, {"\"\n\"", ErrSyntax}, {`1 2`, ErrSyntax}, {`[1 2]`, ErrSyntax},
		{`{"a" 1}`, ErrSyntax}, {`{"a":}`, ErrSyntax}, {"\ufeff1", ErrSyntax}, {`"a"x`, ErrSyntax}, {"\u00a01", ErrSyntax},
		{deep, ErrDepth}, {deep[:299], ErrDepth}, {"[1\xff]", ErrText},
	} {
		if got, err := CanonicalJSON([]byte(c.in)); !errors.Is(err, c.want) || got != nil {
			t.Errorf("%q: %q, %v; want %v", c.in, got, err, c.want)
		}
	}
}

func TestCanonicalValueRefusals(t *testing.T) {
	t.Parallel()
	type circle struct{ Next *circle }
	round := &circle{}
	round.Next = round
	type embedded struct{ time.Duration }
	number := reflect.TypeFor[int]() // built at run time: vet would object to such a type
	twice := reflect.StructOf([]reflect.StructField{{Name: "A", Type: number, Tag: `json:"a"`}, {Name: "B", Type: number, Tag: `json:"a"`}})
	for i, c := range []struct {
		in   any
		want error
	}{
		{math.NaN(), ErrNumber}, {math.Inf(1), ErrNumber}, {math.Inf(-1), ErrNumber}, {math.Pow(2, 53) + 2, ErrNumber},
		{int64(1<<53 + 1), ErrNumber}, {int64(-1<<53 - 1), ErrNumber}, {uint64(math.MaxUint64), ErrNumber},
		{json.Number("1.x"), ErrSyntax}, {json.Number(""), ErrSyntax}, {json.Number("9007199254740993"), ErrNumber},
		{"\xff", ErrText}, {map[string]any{"\xff": 1}, ErrText}, {[]any{map[string]string{"a": "\xc3"}}, ErrText},
		{[]byte("a"), ErrValue}, {map[int]string{1: "a"}, ErrValue}, {func() {}, ErrValue}, {float32(1), ErrValue},
		{embedded{}, ErrValue}, {round, ErrDepth}, {struct {
			A int `json:"a,string"`
		}{1}, ErrValue},
		{reflect.Zero(twice).Interface(), ErrDuplicateKey},
		{json.RawMessage(`{"a":1,"a":2}`), ErrDuplicateKey},
	} {
		if got, err := Canonical(c.in); !errors.Is(err, c.want) || got != nil {
			t.Errorf("%d: %q, %v; want %v", i, got, err, c.want)
		}
	}
}

// Every field kind a record or a journal act uses, against the form encoding/json gives.
func TestCanonicalStruct(t *testing.T) {
	t.Parallel()
	type inner struct {
		Z string `json:"z"`
		A *int   `json:"a"`
	}
	n := 7
	v := struct {
		Text  string            `json:"text"`
		Plain int8              // named as in Go
		None  []string          `json:"none"`
		Empty []string          `json:"empty"`
		Gone  string            `json:"gone,omitempty"`
		Zero  time.Time         `json:"zero,omitzero"`
		At    time.Time         `json:"at"`
		Map   map[string]uint16 `json:"map"`
		In    []inner           `json:"in"`
		Any   any               `json:"any"`
		Left  string            `json:"-"`
		Num   json.Number       `json:"num"`
		Array [2]int            `json:"array"`
		Hash  Hash              `json:"hash"`
		Float float64           `json:"float"`
		inner int
	}{Text: "<&>\u2028\u007f", Empty: []string{}, At: time.Date(2026, 12, 1, 8, 0, 0, 0, time.UTC), Map: map[string]uint16{"b": 1, "a": 2},
		In: []inner{{"x", &n}, {"y", nil}}, Any: map[string]any{"k": nil}, Left: "no", Num: "1.50", Float: 0.1, inner: 3}
	got, err := Canonical(v)
	if err != nil {
		t.Fatal(err)
	}
	raw, err := json.Marshal(v)
	if err != nil {
		t.Fatal(err)
	}
	if want := mustCanonical(t, string(raw)); string(got) != want {
		t.Errorf("%s\nwant %s", got, want)
	}
	if !strings.Contains(string(got), "<&>\u2028\u007f") {
		t.Error("characters escaped that RFC 8785 leaves as they are")
	}
}

func TestCanonicalEscapes(t *testing.T) {
	t.Parallel()
	all := ""
	for c := range rune(0x80) {
		all += string(c)
	}
	want := `"\u0000\u0001\u0002\u0003\u0004\u0005\u0006\u0007\b\t\n\u000b\f\r\u000e\u000f` +
		`\u0010\u0011\u0012\u0013\u0014\u0015\u0016\u0017\u0018\u0019\u001a\u001b\u001c\u001d\u001e\u001f` +
		` !\"#$%&'()*+,-./0123456789:;<=>?@ABCDEFGHIJKLMNOPQRSTUVWXYZ[\\]^_` + "`abcdefghijklmnopqrstuvwxyz{|}~\u007f" + `"`
	got, err := Canonical(all)
	if err != nil || string(got) != want {
		t.Errorf("%s, %v\nwant %s", got, err, want)
	}
}

// The order of keys is that of their UTF-16 units, whatever the characters.
func TestKeyOrderIsUTF16(t *testing.T) {
	t.Parallel()
	rng := rand.New(rand.NewPCG(8785, 1))
	pool := []rune{0, 'a', 'b', 0x7f, 0x80, 0x7ff, 0x800, 0xd7ff, 0xe000, 0xfb33, 0xfffd, 0xffff, 0x10000, 0x10001, 0x103ff, 0x10400, 0x1f600, 0x10ffff}
	text := func() string {
		s := make([]rune, rng.IntN(4))
		for i := range s {
			s[i] = pool[rng.IntN(len(pool))]
		}
		return string(s)
	}
	for range 20_000 {
		a, b := text(), text()
		want := slices.Compare(utf16.Encode([]rune(a)), utf16.Encode([]rune(b)))
		if got := compareUTF16(a, b); sign3(got) != want {
			t.Fatalf("%+q against %+q: %d, want %d", a, b, got, want)
		}
	}
}

func sign3(n int) int { return min(1, max(-1, n)) }

// Numbers read back as themselves, and in no fewer digits than Go's shortest form.
func TestNumbersReadBack(t *testing.T) {
	t.Parallel()
	rng := rand.New(rand.NewPCG(8785, 2))
	for range 50_000 {
		f := math.Float64frombits(rng.Uint64())
		if math.IsNaN(f) || math.IsInf(f, 0) {
			continue
		}
		s := string(appendES6(nil, f))
		if back, err := strconv.ParseFloat(s, 64); err != nil || back != f {
			t.Fatalf("%x became %s", math.Float64bits(f), s)
		}
		if e := strings.IndexByte(s, 'e'); e >= 0 && (s[e+1] != '+' && s[e+1] != '-' || s[e+2] == '0') {
			t.Fatalf("%s has a bad exponent", s)
		}
	}
}

// FuzzCanonicalJSON: what is accepted is JSON also for the standard library, means the same
// before and after, and is its own canonical form.
func FuzzCanonicalJSON(f *testing.F) {
	var v jcsVectors
	testJSON(f, "vectors.json", &v)
	for _, s := range []string{v.JCS.Sample.Input, v.JCS.Sort.Input, v.JCS.Unicode.NFD, `[1e20,9007199254740992,1e21,-0,5e-324]`,
		`{"a":1,"a":2}`, `"\ud83d\ude00\ud800"`, "\"\xff\"", `[[[{}]]]`, v.Certificate.Canonical} {
		f.Add([]byte(s))
	}
	f.Fuzz(func(t *testing.T, raw []byte) {
		once, err := CanonicalJSON(raw)
		if err != nil {
			if errors.Is(err, ErrSyntax) && json.Valid(raw) && utf8.Valid(raw) {
				t.Fatalf("%q is JSON, but refused: %v", raw, err)
			}
			return
		}
		twice, err := CanonicalJSON(once)
		if err != nil || !bytes.Equal(once, twice) {
			t.Fatalf("%q gives %q, then %q, %v", raw, once, twice, err)
		}
		var before, after any
		if json.Unmarshal(raw, &before) != nil || json.Unmarshal(once, &after) != nil {
			t.Fatalf("%q or %q is no JSON", raw, once)
		}
		fromGo, err := Canonical(before)
		if err != nil || !bytes.Equal(fromGo, once) {
			t.Fatalf("%q as Go values gives %q, %v; want %q", raw, fromGo, err, once)
		}
		if again, err := Canonical(after); err != nil || !bytes.Equal(again, once) {
			t.Fatalf("%q reads back as %q, %v", once, again, err)
		}
	})
}
