package main

import (
	"errors"
	"fmt"
	"runtime/debug"
	"strings"
	"time"

	"ratehouse/store"
	"ratehouse/web/words"
)

// fail prints why a command did not do its work, and gives its exit code: 1 for what the laboratory
// refused, 2 for everything else.
func (p program) fail(name string, err error) int {
	e, refused := errors.AsType[*store.Error](err)
	if !refused {
		fmt.Fprintf(p.stderr, "ratehouse %s: %v\n", name, err)
		return exitUsage
	}
	english := words.New(words.EN, time.UTC)
	for _, one := range e.All() {
		where := ""
		if one.Field != "" {
			where = one.Field + ": "
		}
		fmt.Fprintf(p.stderr, "ratehouse %s: %s%s\n", name, where, english.Fault(one.Code, one.Args))
	}
	return exitRefused
}

// build names the version of the program and the revision it was built from.
func build() string {
	version, revision := "devel", ""
	if info, ok := debug.ReadBuildInfo(); ok {
		if v := info.Main.Version; v != "" && v != "(devel)" {
			version = v
		}
		for _, s := range info.Settings {
			if s.Key == "vcs.revision" {
				revision = " " + s.Value
			}
		}
	}
	return version + revision
}

// engine is what papers and summaries carry as the build that judged.
func engine() string { return "ratehouse " + strings.ReplaceAll(build(), " ", "+") }
