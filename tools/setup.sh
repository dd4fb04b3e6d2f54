#!/usr/bin/env bash
# Finds or installs what the project needs besides Go: the PostgreSQL server programs and, for the
# browser tests, Chromium with a font. Writes where they are to .cache/env (PG_BIN, CHROMIUM), which
# the Makefile reads. Says nothing and takes no time when all is there. Never calls sudo.
#
#   tools/setup.sh                     both
#   tools/setup.sh postgres            only the database (make demo)
#
# Debian and Ubuntu: as root by packages, else by unpacking the packages into .cache. Elsewhere it
# says what to install. SETUP_SYSTEM is a prefix for the places looked at outside PATH; tests set it.
set -euo pipefail

project=$(cd "$(dirname "${BASH_SOURCE[0]}")/.." && pwd)
cache=$project/.cache
log=$cache/setup.log
system=${SETUP_SYSTEM:-}
want=("$@")
[ ${#want[@]} -gt 0 ] || want=(postgres chromium)

say() { printf 'setup: %s\n' "$*" >&2; }
die() { say "$@"; exit 1; }
have() { command -v "$1" >/dev/null 2>&1; }

# --- finding -----------------------------------------------------------------------------------

is_server() { [ -x "$1/postgres" ] && [ -x "$1/initdb" ] && "$1/postgres" --version >/dev/null 2>&1; }

find_postgres() {
  local dir
  for dir in \
    "${PG_BIN:-}" \
    "$(pg_config --bindir 2>/dev/null || true)" \
    "$(dirname "$(command -v postgres || echo /nowhere/postgres)")" \
    $(ls -d "$system"/usr/lib/postgresql/*/bin "$system"/usr/pgsql-*/bin "$system"/opt/homebrew/opt/postgresql@*/bin \
      "$system"/usr/local/opt/postgresql@*/bin 2>/dev/null | sort -rV) \
    "$cache/pg/bin"; do
    if [ -n "$dir" ] && is_server "$dir"; then
      printf '%s\n' "$dir"
      return
    fi
  done
  return 1
}

find_chromium() {
  local program
  for program in \
    "${CHROMIUM:-}" \
    "$system/usr/lib/chromium/chromium-headless-shell" \
    "$(command -v chromium || true)" "$(command -v chromium-browser || true)" \
    "$system/usr/bin/chromium" "$system/usr/lib/chromium/chromium" \
    "$system/Applications/Chromium.app/Contents/MacOS/Chromium" \
    "$cache/chromium/bin/chromium"; do
    # The version is asked for: a stub that only points to another store of programs does not run.
    if [ -n "$program" ] && [ -x "$program" ] && "$program" --version >/dev/null 2>&1; then
      printf '%s\n' "$program"
      return
    fi
  done
  return 1
}

find_font() {
  [ -n "$(find "$system/usr/share/fonts" "$cache/chromium/tree/usr/share/fonts" "$system/Library/Fonts" \
    \( -name '*.ttf' -o -name '*.otf' \) -print -quit 2>/dev/null)" ]
}

wanted() { [[ " ${want[*]} " == *" $1 "* ]]; }

# find_all sets PG_BIN and CHROMIUM and leaves in missing the Debian packages of what is not there.
find_all() {
  missing=()
  found_pg='' found_chromium=''
  if wanted postgres; then found_pg=$(find_postgres) || missing+=(postgresql); fi
  if wanted chromium; then
    found_chromium=$(find_chromium) || missing+=(chromium)
    find_font || missing+=(fonts-dejavu-core)
  fi
}

# --- installing --------------------------------------------------------------------------------

apt_options=(-q -y -o Acquire::Retries=2 -o Acquire::http::Timeout=60 -o Dpkg::Options::=--force-confold)

# without_main_cluster keeps the package from making and starting a server of its own on TCP.
without_main_cluster() {
  local conf=$system/etc/postgresql-common/createcluster.conf
  if ! grep -qs '^[[:space:]]*create_main_cluster' "$conf"; then
    mkdir -p "$(dirname "$conf")"
    printf 'create_main_cluster = false\n' >>"$conf"
  fi
}

# Chromium without windows runs the tests in three fifths of the CPU time; not every system has it as
# a package of its own.
light=chromium-headless-shell

# prefer_light APT asks for the light one where APT, the package tool, knows it.
prefer_light() {
  local i
  for i in "${!missing[@]}"; do
    if [ "${missing[$i]}" = chromium ] && "$1" -s install "$light" >/dev/null 2>&1; then missing[i]=$light; fi
  done
}

apt_root() { DEBIAN_FRONTEND=noninteractive apt-get "${apt_options[@]}" "$@"; }

# A container is made anew rather than repaired, so dpkg need not flush every file to the disk.
install_packages() { apt_root -o Dpkg::Options::=--force-unsafe-io install --no-install-recommends --no-remove "$@" >>"$log" 2>&1; }

install_as_root() {
  say "installing ${missing[*]} by packages"
  [[ " ${missing[*]} " != *" postgresql "* ]] || without_main_cluster
  apt_root update >>"$log" 2>&1 || return 1
  prefer_light apt_root
  install_packages "${missing[@]}"
}

# lighten adds the light Chromium for root of a container that has the whole one; without a network or
# the package the whole one does.
lighten() {
  local refused=$cache/no-$light
  if [[ $found_chromium == "$system"/usr/* ]] && [[ $found_chromium != *"$light" ]] && [ "$(id -u)" = 0 ] && have apt-get && [ ! -e "$refused" ]; then
    apt_root -s install --no-remove "$light" >/dev/null 2>&1 || return 0
    say "installing $light by packages: the browser tests take less time with it"
    mkdir -p "$cache"
    install_packages "$light" || touch "$refused"
    found_chromium=$(find_chromium)
  fi
}

# apt_own is apt-get with lists and locks of our own, so that it works for an ordinary user.
apt_own() {
  mkdir -p "$cache/apt/lists/partial" "$cache/apt/archives/partial"
  apt-get "${apt_options[@]}" -o Dir::State::lists="$cache/apt/lists" -o Dir::Cache="$cache/apt" \
    -o Debug::NoLocking=1 "$@"
}

# needed lists the packages to unpack: what would be installed, without the C library, which must be
# the one that the system's own loader belongs to.
needed() {
  apt_own -s install --no-install-recommends "$@" | sed -n 's/^Inst \([^ ]*\) .*/\1/p' |
    grep -v -x -E 'libc6|libc-bin|libc-l10n|locales|libc6:.*'
}

install_unpacked() {
  say "unpacking ${missing[*]} into .cache (no root)"
  local package where
  apt_own update >>"$log" 2>&1 || return 1
  prefer_light apt_own
  for package in "${missing[@]}"; do
    where=$cache/chromium
    [ "$package" != postgresql ] || where=$cache/pg
    unpack "$package" "$where" >>"$log" 2>&1 || return 1
  done
  wrap_postgres
  wrap_chromium
  rm -rf "$cache/apt"
}

unpack() {
  local debs=$2/debs deb
  mkdir -p "$debs" "$2/tree"
  needed "$1" >"$2/packages"
  (cd "$debs" && xargs apt-get "${apt_options[@]}" -o Dir::State::lists="$cache/apt/lists" -o Dir::Cache="$cache/apt" \
    -o Debug::NoLocking=1 download <"$2/packages") || return 1
  for deb in "$debs"/*.deb; do
    dpkg -x "$deb" "$2/tree" || return 1
  done
  rm -r "$debs"
}

# libraries lists the unpacked library folders for the loader.
libraries() {
  local dir list=''
  for dir in "$1"/usr/lib/*-linux-gnu* "$1"/lib/*-linux-gnu* "$1"/usr/lib/*-linux-gnu*/{pulseaudio,blas,lapack}; do
    [ ! -d "$dir" ] || list=$list:$dir
  done
  printf '%s' "${list#:}"
}

# wrapper PROGRAM AT LINE... writes a small program that runs an unpacked one with its own libraries.
wrapper() {
  local program=$1 at=$2
  shift 2
  mkdir -p "$(dirname "$at")"
  {
    echo '#!/bin/sh'
    printf '%s\n' "$@"
    printf 'exec "%s" "$@"\n' "$program"
  } >"$at.new"
  chmod +x "$at.new"
  mv "$at.new" "$at"
}

wrap_postgres() {
  local program bin
  bin=$(ls -d "$cache"/pg/tree/usr/lib/postgresql/*/bin 2>/dev/null | sort -rV | head -n 1)
  [ -n "$bin" ] || return 0
  for program in "$bin"/*; do
    wrapper "$program" "$cache/pg/bin/$(basename "$program")" \
      "export LD_LIBRARY_PATH=\"$(libraries "$cache/pg/tree")\${LD_LIBRARY_PATH:+:\$LD_LIBRARY_PATH}\""
  done
}

wrap_chromium() {
  local root=$cache/chromium/tree program
  program=$(ls "$root/usr/lib/chromium/$light" "$root/usr/lib/chromium/chromium" 2>/dev/null | head -n 1)
  [ -n "$program" ] || return 0
  cat >"$cache/chromium/fonts.conf" <<EOF
<?xml version="1.0"?>
<!DOCTYPE fontconfig SYSTEM "fonts.dtd">
<fontconfig>
  <dir>$root/usr/share/fonts</dir>
  <dir>/usr/share/fonts</dir>
  <cachedir>$cache/chromium/fontcache</cachedir>
</fontconfig>
EOF
  wrapper "$program" "$cache/chromium/bin/chromium" \
    "export LD_LIBRARY_PATH=\"$(libraries "$root")\${LD_LIBRARY_PATH:+:\$LD_LIBRARY_PATH}\"" \
    "export FONTCONFIG_FILE=\"$cache/chromium/fonts.conf\""
}

# --- what to do elsewhere ----------------------------------------------------------------------

advise_mac() {
  [[ " ${missing[*]} " == *" postgresql "* ]] && die "install PostgreSQL: brew install postgresql@17"
  [[ " ${missing[*]} " == *" chromium "* ]] &&
    say "no Chromium: the browser tests will be skipped and counted; for them install it (brew install --cask chromium) or set CHROMIUM"
  return 0
}

advise() {
  local parts=()
  [[ " ${missing[*]} " == *" postgresql "* ]] && parts+=("the PostgreSQL server programs (package postgresql or postgresql-server; or set PG_BIN to the folder of postgres and initdb)")
  [[ " ${missing[*]} " == *" chromium "* ]] && parts+=("Chromium (package chromium; or set CHROMIUM to the program)")
  [[ " ${missing[*]} " == *" fonts-dejavu-core "* ]] && parts+=("a TrueType font (package fonts-dejavu-core or dejavu-sans-fonts)")
  local text
  text=$(printf '; %s' "${parts[@]}")
  die "please install ${text#; }"
}

# --- the run -----------------------------------------------------------------------------------

provide() {
  mkdir -p "$cache"
  if [ "$(uname -s)" = Darwin ]; then
    advise_mac
  elif ! have apt-get || ! have dpkg; then
    advise
  else
    : >"$log"
    local way=install_unpacked
    [ "$(id -u)" != 0 ] || way=install_as_root
    "$way" || { tail -n 5 "$log" >&2; say "that did not work (all of it is in .cache/setup.log)"; advise; }
    find_all
    [ ${#missing[@]} -eq 0 ] || advise
  fi
}

# note writes .cache/env when it would change; what this run did not look for stays as it was.
note() {
  local text='' old=''
  [ ! -f "$cache/env" ] || old=$(cat "$cache/env")
  keep() { # NAME VALUE
    if [ -n "$2" ]; then
      text+=$(printf '%s=%q' "$1" "$2")$'\n'
    elif ! wanted "$3"; then
      text+=$(printf '%s\n' "$old" | grep "^$1=" || true)$'\n'
    fi
  }
  keep PG_BIN "$found_pg" postgres
  keep CHROMIUM "$found_chromium" chromium
  text=${text%$'\n'}
  if [ "$text" != "$old" ] || [ ! -f "$cache/env" ]; then
    mkdir -p "$cache"
    printf '%s\n' "$text" >"$cache/env.new"
    mv "$cache/env.new" "$cache/env"
  fi
}

find_all
[ ${#missing[@]} -eq 0 ] || provide
lighten
note
