package main

import (
	"context"
	"errors"
	"flag"
	"fmt"
	"io"
	"os"

	"ratehouse/store/proof"
)

const verifyExample = "ratehouse verify -key laboratory-public.pem 26-118-0113.jws"

// verifyFlags tells what -h tells about arguments and flags.
func verifyFlags(w io.Writer) {
	fmt.Fprint(w, `Usage: ratehouse verify -key KEY [-json] FILE

Checks that a certificate or a rejection report is as the laboratory signed it,
without a database or a network. FILE is the signed record as downloaded beside
the paper, - for standard input. Compare what is printed with the paper: the
check is about the file, not about the sheet in your hand.

  -key KEY   file with the laboratory's public key, PEM or JWK, got from the
             laboratory itself and not together with the paper
  -json      print the whole record instead of a summary

Exit status: 0 genuine; 1 altered, signed by somebody else, or no such record;
2 wrong usage, or a file that cannot be read.

`)
}

func runVerify(_ context.Context, p program, args []string) int {
	return verify(args, p.stdin, p.stdout, p.stderr)
}

// verify checks a signed record against a public key and says what it states.
func verify(args []string, stdin io.Reader, stdout, stderr io.Writer) int {
	flags := flag.NewFlagSet("verify", flag.ContinueOnError)
	flags.SetOutput(io.Discard)
	keyFile, whole := flags.String("key", "", ""), flags.Bool("json", false, "")
	switch err := flags.Parse(args); {
	case errors.Is(err, flag.ErrHelp):
		verifyFlags(stdout)
		fmt.Fprintf(stdout, "Example:\n  %s\n", verifyExample)
		return exitDone
	case err != nil:
		return verifyUsage(stderr, err.Error())
	case *keyFile == "":
		return verifyUsage(stderr, "-key is missing: the file with the laboratory's public key")
	case flags.NArg() != 1:
		return verifyUsage(stderr, fmt.Sprintf("one FILE is wanted after the flags, got %d", flags.NArg()))
	}
	key, err := readPublicKey(*keyFile)
	if err != nil {
		return verifyUsage(stderr, err.Error())
	}
	file, err := readInput(flags.Arg(0), stdin)
	if err != nil {
		return verifyUsage(stderr, err.Error())
	}
	record, err := proof.VerifyFile(key, file)
	if err != nil {
		fmt.Fprintf(stderr, "ratehouse verify: NOT GENUINE: %v\n", err)
		return exitRefused
	}
	return printVerified(record, key, *whole, stdout, stderr)
}

func verifyUsage(stderr io.Writer, what string) int {
	fmt.Fprintf(stderr, "ratehouse verify: %s\nratehouse verify -h shows an example.\n", what)
	return exitUsage
}

func readPublicKey(name string) (proof.PublicKey, error) {
	text, err := os.ReadFile(name)
	if err != nil {
		return proof.PublicKey{}, err
	}
	key, err := proof.ParsePublicKey(text)
	if err != nil {
		return key, fmt.Errorf("key %s: %w", name, err)
	}
	return key, nil
}

// readInput reads a file, or standard input for "-", and no more than any record can be long.
func readInput(name string, stdin io.Reader) ([]byte, error) {
	if name != "-" {
		file, err := os.Open(name)
		if err != nil {
			return nil, err
		}
		defer file.Close()
		stdin = file
	}
	return io.ReadAll(io.LimitReader(stdin, proof.MaxFile+1))
}

func printVerified(r proof.Record, key proof.PublicKey, whole bool, stdout, stderr io.Writer) int {
	raw, err := r.Canonical()
	if err != nil {
		return verifyUsage(stderr, err.Error())
	}
	hash, err := r.Hash()
	if err != nil {
		return verifyUsage(stderr, err.Error())
	}
	text := string(raw) + "\n"
	if !whole {
		text = summary(r, hash, key)
	}
	if _, err := io.WriteString(stdout, text); err != nil {
		return verifyUsage(stderr, err.Error())
	}
	return exitDone
}

// summary says what the record states, one thing a line, with texts quoted where they came from
// outside: a name must not be able to draw a line of its own.
func summary(r proof.Record, hash proof.Hash, key proof.PublicKey) string {
	genuine := "genuine: signed with the key given, unaltered, complete and in agreement with itself\n"
	if r.Demo {
		genuine += "DEMONSTRATION: this paper states nothing about any real movement\n"
	}
	if r.Programme.TextChecked == nil {
		genuine += "judged after published descriptions of the procedure, not after the text of a standard\n"
	}
	return genuine + fmt.Sprintf(`kind:        %s
number:      %s
issued:      %s
laboratory:  %q
movement:    %q, calibre %q, category %q
depositor:   %q
programme:   %q version %q
             %s
verdict:     %s%s
released:    %s by %q
code:        %s
record:      %s
key:         %s
`, r.Kind, r.Number, r.IssuedAt, r.Laboratory.Name, r.Movement.Serial, r.Movement.Calibre, r.Movement.Category.Code,
		r.Movement.Depositor.Title, r.Programme.Code, r.Programme.Version, r.Programme.Hash,
		r.Verdict, why(r), r.ReleasedAt, r.ReleasedBy, proof.ShortCode(hash), hash, key.ID())
}

// why names what a verdict of fail rests on.
func why(r proof.Record) string {
	text := ""
	for _, symbol := range r.Failed {
		text += fmt.Sprintf(" %q", symbol)
	}
	if r.End != "" {
		text += fmt.Sprintf(" %s: %q", r.End, r.EndCause)
	}
	return text
}
