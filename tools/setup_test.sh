#!/usr/bin/env bash
# Tests tools/setup.sh with PATH emptied of each tool in turn: programs are stand-ins in a folder
# that is the whole PATH, and the places outside PATH lie below SETUP_SYSTEM.
set -uo pipefail

script=$(cd "$(dirname "$0")" && pwd)/setup.sh
basics=(bash sh dirname basename ls sort cat mkdir mv grep sed tail head find rm chmod xargs tr touch ln env)
passed=0 failed=0
top=$(mktemp -d)
trap 'rm -rf "$top"' EXIT

# house NAME makes a fresh project and system; the tests then place stand-ins in it.
house() {
  name=$1 dir=$top/$1
  mkdir -p "$dir/project/tools" "$dir/bin" "$dir/system/usr/share/fonts"
  cp "$script" "$dir/project/tools/setup.sh"
  local tool
  for tool in "${basics[@]}"; do ln -s "$(command -v "$tool")" "$dir/bin/$tool"; done
  stand_in "$dir/bin/id" 'echo 0'
  stand_in "$dir/bin/uname" 'echo Linux'
  stand_in "$dir/bin/sudo" "echo sudo >>$dir/calls"
  touch "$dir/calls"
}

stand_in() { # FILE LINES...
  local file=$1
  shift
  mkdir -p "$(dirname "$file")"
  rm -f "$file"
  { echo '#!/bin/sh'; printf '%s\n' "$@"; } >"$file"
  chmod +x "$file"
}

server() { stand_in "$1/postgres" 'echo "postgres (PostgreSQL) 15.1"'; stand_in "$1/initdb" 'exit 0'; }
browser() { stand_in "$1" 'echo "Chromium 1"'; }
font() { mkdir -p "$1/usr/share/fonts/truetype" && touch "$1/usr/share/fonts/truetype/a.ttf"; }

setup() {
  env -i PATH="$dir/bin" HOME="$dir" SETUP_SYSTEM="$dir/system" "$@" bash "$dir/project/tools/setup.sh" ${args:-} >"$dir/out" 2>&1
  code=$?
}

check() { # WHAT CONDITION...
  local what=$1
  shift
  if "$@"; then
    passed=$((passed + 1))
  else
    failed=$((failed + 1))
    printf 'FAIL: %s: %s\n' "$name" "$what"
    sed 's/^/    /' "$dir/out"
  fi
}

says() { grep -q -e "$1" "$dir/out"; }
notes() { grep -q -x -e "$1" "$dir/project/.cache/env"; }
called() { grep -q -e "$1" "$dir/calls"; }
not() { ! "$@"; }
lines() { [ "$(wc -l <"$dir/out")" = "$1" ]; }
status() { [ "$code" = "$1" ]; }

house all-there
server "$dir/bin"; browser "$dir/bin/chromium"; font "$dir/system"
setup
check 'succeeds' status 0
check 'says nothing' lines 0
check 'notes the server' notes "PG_BIN=$dir/bin"
check 'notes the browser' notes "CHROMIUM=$dir/bin/chromium"
touch -d '2001-01-01' "$dir/project/.cache/env"
setup
check 'leaves the note as it is' test -n "$(find "$dir/project/.cache/env" ! -newermt 2002-01-01)"

house by-pg_config
server "$dir/elsewhere"; browser "$dir/bin/chromium"; font "$dir/system"
stand_in "$dir/bin/pg_config" "echo $dir/elsewhere"
setup
check 'notes the server' notes "PG_BIN=$dir/elsewhere"

house newest-of-several
for v in 9 15 16; do server "$dir/system/usr/lib/postgresql/$v/bin"; done
browser "$dir/system/usr/bin/chromium"; font "$dir/system"
setup
check 'takes the newest' notes "PG_BIN=$dir/system/usr/lib/postgresql/16/bin"
check 'finds the browser outside PATH' notes "CHROMIUM=$dir/system/usr/bin/chromium"

house by-hand
server "$dir/mine"; browser "$dir/mine/browser"; font "$dir/system"; server "$dir/bin"
setup PG_BIN="$dir/mine" CHROMIUM="$dir/mine/browser"
check 'the setting wins' notes "PG_BIN=$dir/mine"
check 'the setting wins' notes "CHROMIUM=$dir/mine/browser"

house no-package-tool
setup
check 'fails' status 1
check 'one line' lines 1
check 'says what to install' says 'please install the PostgreSQL.*Chromium.*font'

house only-postgres
server "$dir/bin"
args=postgres setup
check 'succeeds' status 0
check 'needs no browser' lines 0

apt_root='echo "$DEBIAN_FRONTEND $*" >>'
house root
stand_in "$dir/bin/apt-get" "${apt_root}$dir/calls" 'case "$*" in *-s*install*) exit 100;; *install*)' \
  "  grep -q 'create_main_cluster = false' $dir/system/etc/postgresql-common/createcluster.conf || exit 3" \
  "  touch $dir/installed;; esac"
stand_in "$dir/bin/dpkg" 'exit 0'
stand_in "$dir/bin/pg_config" "if [ -e $dir/installed ]; then echo $dir/elsewhere; fi"
server "$dir/elsewhere"; font "$dir/system"
stand_in "$dir/bin/chromium" "[ -e $dir/installed ]"
setup
check 'succeeds' status 0
check 'no main cluster, then install' notes "PG_BIN=$dir/elsewhere"
check 'updates the lists once' test "$(grep -c ' update' "$dir/calls")" = 1
check 'asks for what is missing' called '^noninteractive .*install.*postgresql chromium$'
check 'never calls sudo' not called sudo
setup
check 'the next run says nothing' lines 0

house root-light
stand_in "$dir/bin/apt-get" "${apt_root}$dir/calls" 'case "$*" in *-s*install*) exit 0;; *install*)' \
  "  mkdir -p $dir/system/usr/lib/chromium; printf '#!/bin/sh\n' >$dir/system/usr/lib/chromium/chromium-headless-shell" \
  "  chmod +x $dir/system/usr/lib/chromium/chromium-headless-shell;; esac"
stand_in "$dir/bin/dpkg" 'exit 0'; server "$dir/bin"; font "$dir/system"
setup
check 'takes the light browser where it is a package' notes "CHROMIUM=$dir/system/usr/lib/chromium/chromium-headless-shell"

house root-lightens
stand_in "$dir/bin/apt-get" "${apt_root}$dir/calls" 'case "$*" in *-s*install*) exit 0;; *install*)' \
  "  mkdir -p $dir/system/usr/lib/chromium; printf '#!/bin/sh\n' >$dir/system/usr/lib/chromium/chromium-headless-shell" \
  "  chmod +x $dir/system/usr/lib/chromium/chromium-headless-shell;; esac"
server "$dir/bin"; font "$dir/system"; browser "$dir/system/usr/bin/chromium"
setup
check 'adds the light browser' notes "CHROMIUM=$dir/system/usr/lib/chromium/chromium-headless-shell"
setup
check 'the next run says nothing' lines 0

house root-stays-heavy
stand_in "$dir/bin/apt-get" "${apt_root}$dir/calls" 'case "$*" in *-s*install*) exit 0;; *install*) exit 100;; esac'
server "$dir/bin"; font "$dir/system"; browser "$dir/system/usr/bin/chromium"
setup
check 'succeeds without it' status 0
check 'keeps the browser that is there' notes "CHROMIUM=$dir/system/usr/bin/chromium"
setup
check 'does not try again' lines 0

house root-fails
stand_in "$dir/bin/apt-get" 'echo "no such package"; exit 100'; stand_in "$dir/bin/dpkg" 'exit 0'
setup
check 'fails' status 1
check 'shows why' says 'no such package'
check 'says what to install' says 'please install the PostgreSQL'

house user
stand_in "$dir/bin/id" 'echo 1000'
stand_in "$dir/bin/apt-get" "echo \"\$*\" >>$dir/calls" 'case "$*" in' \
  '*-s*install*postgresql*) echo "Inst libc6 [1] (2 x)"; echo "Inst postgresql-15 (15 x [amd64])";;' \
  '*-s*install*chromium*) echo "Inst chromium (1 x)";;' \
  '*-s*install*) echo "Inst fonts-dejavu-core (1 x)";;' \
  '*download*) for last; do :; done; touch "$last.deb";; esac'
stand_in "$dir/bin/dpkg" 'case "$2" in' \
  '*fonts*) mkdir -p $3/usr/share/fonts; touch $3/usr/share/fonts/a.ttf;;' \
  '*postgresql*) at=$3/usr/lib/postgresql/15/bin; mkdir -p $at; for p in postgres initdb; do printf "#!/bin/sh\necho \"\$LD_LIBRARY_PATH\"\n" >$at/$p; chmod +x $at/$p; done;;' \
  '*chromium*) at=$3/usr/lib/chromium; mkdir -p $at $3/usr/lib/x86_64-linux-gnu; printf "#!/bin/sh\necho \"\$LD_LIBRARY_PATH\"\n" >$at/chromium; chmod +x $at/chromium;;' \
  'esac'
setup
check 'succeeds' status 0
check 'notes the unpacked server' notes "PG_BIN=$dir/project/.cache/pg/bin"
check 'notes the unpacked browser' notes "CHROMIUM=$dir/project/.cache/chromium/bin/chromium"
check 'the wrapper brings the libraries' grep -q x86_64-linux-gnu <(PATH=$dir/bin "$dir/project/.cache/chromium/bin/chromium")
check 'leaves the C library alone' not called 'download libc6'
check 'never calls sudo' not called sudo
setup
check 'the next run says nothing' lines 0

house mac-without-server
stand_in "$dir/bin/uname" 'echo Darwin'; browser "$dir/bin/chromium"; font "$dir/system"
setup
check 'fails' status 1
check 'gives the brew line' says 'brew install postgresql'

house mac-without-browser
stand_in "$dir/bin/uname" 'echo Darwin'; server "$dir/bin"; font "$dir/system"
setup
check 'succeeds' status 0
check 'says that tests will be skipped' says 'browser tests will be skipped and counted'

# Each tool away in turn: it is either not needed, or its absence is said in one line.
for away in postgres initdb pg_config chromium apt-get dpkg font; do
  house "without-$away"
  server "$dir/bin"; browser "$dir/bin/chromium"; font "$dir/system"
  stand_in "$dir/bin/pg_config" "echo $dir/bin"
  stand_in "$dir/bin/apt-get" 'exit 100'; stand_in "$dir/bin/dpkg" 'exit 1'
  case $away in
  font) rm -r "$dir/system/usr/share/fonts" ;;
  *) rm "$dir/bin/$away" ;;
  esac
  setup
  case $away in
  postgres | initdb) check 'says so' says 'please install the PostgreSQL' ;;
  chromium) check 'says so' says 'please install Chromium' ;;
  font) check 'says so' says 'please install a TrueType font' ;;
  *) check 'is not missed' lines 0 ;;
  esac
  check 'no bare shell error' not says 'command not found'
done

printf 'setup: %d passed, %d failed\n' "$passed" "$failed"
[ "$failed" = 0 ]
