#!/usr/bin/env bash
# Runs every fuzz target of the project for the given time each. A finding is written by go test
# below the package's testdata/fuzz and makes this fail.
set -euo pipefail
cd "$(dirname "$0")/.."
time=${1:-5s} count=0

for package in $(go list -f '{{if or .TestGoFiles .XTestGoFiles}}{{.ImportPath}} {{.Dir}}{{end}}' ./... |
  while read -r path dir; do ! grep -qs '^func Fuzz' "$dir"/*_test.go || echo "$path"; done); do
  for target in $(go test -list '^Fuzz' "$package" | grep '^Fuzz'); do
    echo "fuzz $package $target"
    go test -run '^$' -fuzz "^$target\$" -fuzztime "$time" "$package" >"${TMPDIR:-/tmp}/fuzz.$$" 2>&1 ||
      { cat "${TMPDIR:-/tmp}/fuzz.$$"; exit 1; }
    count=$((count + 1))
  done
done
rm -f "${TMPDIR:-/tmp}/fuzz.$$"
echo "fuzz: $count targets, $time each"
