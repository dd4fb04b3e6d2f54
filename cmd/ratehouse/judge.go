package main

import (
	"context"
	"fmt"
	"io"
)

func runJudge(_ context.Context, p program, args []string) int {
	return judge(args, p.stdin, p.stdout, p.stderr)
}

// judge reads rates or states and prints a verdict a movement.
func judge(args []string, stdin io.Reader, stdout, stderr io.Writer) int {
	fmt.Fprintln(stderr, "ratehouse judge: not built yet")
	return exitUsage
}
