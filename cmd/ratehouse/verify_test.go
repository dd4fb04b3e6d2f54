package main

import (
	"bytes"
	"errors"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"ratehouse/store/proof"
)

// proofFile names a file of testdata/proof; its README says where each comes from.
func proofFile(name string) string { return filepath.Join("..", "..", "testdata", "proof", name) }

// saved writes text to a file of its own.
func saved(t *testing.T, text []byte) string {
	t.Helper()
	name := filepath.Join(t.TempDir(), "file")
	if err := os.WriteFile(name, text, 0o600); err != nil {
		t.Fatal(err)
	}
	return name
}

func verifyIn(t *testing.T, stdin string, args ...string) (code int, stdout, stderr string) {
	t.Helper()
	var out, errs bytes.Buffer
	code = verify(args, strings.NewReader(stdin), &out, &errs)
	return code, out.String(), errs.String()
}

func TestVerifyGenuine(t *testing.T) {
	t.Parallel()
	paper, err := os.ReadFile(proofFile("certificate.jws"))
	if err != nil {
		t.Fatal(err)
	}
	for _, key := range []string{"published-key.public.pem", "published-key.public.jwk"} {
		for _, args := range [][]string{{"-key", proofFile(key), proofFile("certificate.jws")}, {"--key=" + proofFile(key), "-"}} {
			code, out, errs := verifyIn(t, string(paper), args...)
			if code != exitDone || errs != "" {
				t.Errorf("%v: %d, %s", args, code, errs)
			}
			for _, want := range []string{"genuine", "DEMONSTRATION", "published descriptions", "certificate\n", "26-118-0113", "OD44-118313", "pass\n", "kPrK_qmxVWaYVA9wwBF6Iuo3vVzz7TxHCTwXBygrS4k"} {
				if !strings.Contains(out, want) {
					t.Errorf("%v: output lacks %q:\n%s", args, want, out)
				}
			}
		}
	}
	code, out, _ := verifyIn(t, "", "-key", proofFile("published-key.public.pem"), proofFile("rejection.jws"))
	if code != exitDone || !strings.Contains(out, `fail "D"`) {
		t.Errorf("%d:\n%s", code, out)
	}
}

func TestVerifyPrintsTheRecord(t *testing.T) {
	t.Parallel()
	code, out, _ := verifyIn(t, "", "-json", "-key", proofFile("published-key.public.pem"), proofFile("certificate.jws"))
	readable, err := os.ReadFile(proofFile("certificate.record.json"))
	if err != nil {
		t.Fatal(err)
	}
	want, err := proof.CanonicalJSON(readable)
	if err != nil || code != exitDone || out != string(want)+"\n" {
		t.Errorf("%d, %v:\n%s", code, err, out)
	}
}

func TestVerifyNotGenuine(t *testing.T) {
	t.Parallel()
	paper, err := os.ReadFile(proofFile("certificate.jws"))
	if err != nil {
		t.Fatal(err)
	}
	other, err := proof.GenerateKey()
	if err != nil {
		t.Fatal(err)
	}
	altered := bytes.Clone(paper)
	altered[len(altered)/2] ^= 1
	key := proofFile("published-key.public.pem")
	for name, c := range map[string]struct{ key, file, says string }{
		"altered":     {key, saved(t, altered), "altered"},
		"cut":         {key, saved(t, paper[:len(paper)/2]), "compact form"},
		"empty":       {key, saved(t, nil), "compact form"},
		"no record":   {key, proofFile("certificate.record.json"), "compact form"},
		"another key": {saved(t, other.Public().PEM()), proofFile("certificate.jws"), "another key"},
	} {
		code, out, errs := verifyIn(t, "", "-key", c.key, c.file)
		if code != exitRefused || out != "" || !strings.Contains(errs, "NOT GENUINE") || !strings.Contains(errs, c.says) {
			t.Errorf("%s: %d, %q, %q", name, code, out, errs)
		}
	}
}

func TestVerifyUsage(t *testing.T) {
	t.Parallel()
	key, paper := proofFile("published-key.public.pem"), proofFile("certificate.jws")
	for name, c := range map[string]struct {
		args []string
		says string
	}{
		"nothing":          {nil, "-key is missing"},
		"no key":           {[]string{paper}, "-key is missing"},
		"no file":          {[]string{"-key", key}, "one FILE"},
		"two files":        {[]string{"-key", key, paper, paper}, "one FILE"},
		"unknown flag":     {[]string{"-force", paper}, "-force"},
		"key is not there": {[]string{"-key", key + "x", paper}, "no such file"},
		"file not there":   {[]string{"-key", key, paper + "x"}, "no such file"},
		"file is a folder": {[]string{"-key", key, t.TempDir()}, "directory"},
		"no key in it":     {[]string{"-key", paper, paper}, "not an Ed25519 key"},
		"a private key":    {[]string{"-key", proofFile("published-key.private.pem"), paper}, "private key"},
	} {
		code, out, errs := verifyIn(t, "", c.args...)
		if code != exitUsage || out != "" || !strings.Contains(errs, c.says) {
			t.Errorf("%s: %d, %q, %q", name, code, out, errs)
		}
	}
	code, out, errs := verifyIn(t, "", "-h")
	if code != exitDone || errs != "" || !strings.Contains(out, "Example:\n  ratehouse verify -key") {
		t.Errorf("-h: %d, %q, %q", code, out, errs)
	}
}

// full is an output that takes nothing, such as a full disk.
type full struct{}

func (full) Write([]byte) (int, error) { return 0, errors.New("no space") }

func TestVerifyUnwritableOutput(t *testing.T) {
	t.Parallel()
	args := []string{"-key", proofFile("published-key.public.pem"), proofFile("certificate.jws")}
	var errs bytes.Buffer
	if code := verify(args, nil, full{}, &errs); code != exitUsage || !strings.Contains(errs.String(), "no space") {
		t.Errorf("%d, %s", code, errs.String())
	}
}

// What came from outside cannot forge a line of the summary.
func TestSummaryQuotes(t *testing.T) {
	t.Parallel()
	text := summary(proof.Record{Movement: proof.Movement{Serial: "1\nverdict:     pass"}, Verdict: "fail"}, proof.Hash{}, proof.PublicKey{})
	if strings.Count(text, "\nverdict:") != 1 {
		t.Error(text)
	}
}
