// Ratehouse runs the trials of a chronometer-testing laboratory: subcommands, flags and
// environment; it wires the rest.
package main

import (
	"context"
	"fmt"
	"io"
	"os"
	"os/signal"
	"syscall"
)

// Exit codes of every subcommand.
const (
	exitDone    = 0
	exitRefused = 1 // done with refusals, or what was checked is not right
	exitUsage   = 2 // usage or set-up error, unreadable input, unwritable output
)

// program is what a subcommand may touch of the process.
type program struct {
	getenv         func(string) string
	stdin          io.Reader
	stdout, stderr io.Writer
}

// command is one subcommand. A command without run is listed and not built yet.
type command struct {
	name    string
	does    string // one line
	example string
	run     func(ctx context.Context, p program, args []string) int
	flags   func(w io.Writer) // lists arguments and flags for -h; nil if there are none
}

// commands is the one table of subcommands, in the order in which help lists them. To add a
// command give it a run function in its own file of this package.
func commands() []command {
	return []command{
		{"serve", "run the laboratory's web service", "RATEHOUSE_ADDR=127.0.0.1:8080 ratehouse serve", runServe, serveFlags},
		{"demo", "serve an invented laboratory with demo data", "ratehouse demo", runDemo, demoFlags},
		{"judge", "judge movements from a file of rates or states", "ratehouse judge rates.csv", runJudge, judgeFlags},
		{"outlook", "estimate how likely open movements will pass", "ratehouse outlook -history past.csv open.csv", runOutlook, outlookFlags},
		{"simulate", "make physically plausible movements", "ratehouse simulate -n 100 -seed 1 | ratehouse judge", runSimulate, simulateFlags},
		{"programme", "check, show or add test programmes", "ratehouse programme check winter.json", runProgramme, programmeFlags},
		{"verify", "verify a certificate file", "ratehouse verify -key lab.pub certificate.json", runVerify, verifyFlags},
		{"migrate", "bring the database up to date", "DATABASE_OWNER_URL=postgres://... ratehouse migrate", runMigrate, migrateFlags},
		{"backup", "write a backup", "ratehouse backup lab.backup", nil, nil},
		{"restore", "restore a backup into an empty database", "ratehouse restore lab.backup", nil, nil},
		{"journal", "verify the journal", "ratehouse journal verify", nil, nil},
		{"account", "add, list or disable accounts", `ratehouse account add -role technician -title "Ada Brink" ada < password`, runAccount, accountFlags},
		{"token", "add, list or revoke tokens", `ratehouse token add -account ada -scope readings "bench 3" > token`, runToken, tokenFlags},
		{"send", "send readings from a file to a server", "ratehouse send readings.csv", nil, nil},
		{"tls", "make a certificate for the local network", "ratehouse tls init", nil, nil},
		{"validate", "check the program against published values", "ratehouse validate > validation-2026-12-01.json", runValidate, validateFlags},
		{"version", "print the version", "ratehouse version", runVersion, nil},
	}
}

func main() {
	ctx, stop := signal.NotifyContext(context.Background(), os.Interrupt, syscall.SIGTERM)
	context.AfterFunc(ctx, stop) // a second signal ends the program at once
	code := run(ctx, os.Args[1:], os.Getenv, os.Stdin, os.Stdout, os.Stderr)
	stop()
	os.Exit(code)
}

// run is the whole program; it returns the exit code.
func run(ctx context.Context, args []string, getenv func(string) string, stdin io.Reader, stdout, stderr io.Writer) int {
	if len(args) == 0 {
		usage(stderr)
		return exitUsage
	}
	switch args[0] {
	case "-h", "-help", "--help", "help":
		usage(stdout)
		return exitDone
	}
	for _, c := range commands() {
		if c.name != args[0] {
			continue
		}
		if wantsHelp(args[1:]) {
			c.help(stdout)
			return exitDone
		}
		if c.run == nil {
			fmt.Fprintf(stderr, "ratehouse %s: not built yet\n", c.name)
			return exitUsage
		}
		return c.run(ctx, program{getenv, stdin, stdout, stderr}, args[1:])
	}
	fmt.Fprintf(stderr, "ratehouse: unknown command %q; ratehouse -h lists the commands\n", args[0])
	return exitUsage
}

// wantsHelp tells whether the first argument asks for help.
func wantsHelp(args []string) bool {
	return len(args) > 0 && (args[0] == "-h" || args[0] == "-help" || args[0] == "--help")
}

// help prints what -h shows for one command.
func (c command) help(w io.Writer) {
	fmt.Fprintf(w, "ratehouse %s: %s\n\n", c.name, c.does)
	if c.flags != nil {
		c.flags(w)
	}
	fmt.Fprintf(w, "Example:\n  %s\n", c.example)
}

func usage(w io.Writer) {
	fmt.Fprint(w, "Usage: ratehouse COMMAND [arguments]\n\nCommands:\n")
	for _, c := range commands() {
		fmt.Fprintf(w, "  %-10s %s\n", c.name, c.does)
	}
	fmt.Fprint(w, "\nratehouse COMMAND -h shows an example.\n")
}

// runVersion prints the module version and the revision it was built from.
func runVersion(_ context.Context, p program, _ []string) int {
	fmt.Fprintf(p.stdout, "ratehouse %s\n", build())
	return exitDone
}
