# Sourced by run.sh and test.sh: installs what is missing and says so.

cd "$(dirname "${BASH_SOURCE[0]}")/.." || exit 1

# Without a locale the window's library logs an error at every start.
case "${LC_ALL:-${LANG:-}}" in '' | C | POSIX) export LANG=en_GB.UTF-8 ;; esac

window_packages="gcc libgl1-mesa-dev libx11-dev libxcursor-dev libxrandr-dev libxinerama-dev libxi-dev libxxf86vm-dev"
test_packages="xvfb xauth xdotool openbox libgl1-mesa-dri imagemagick strace libreoffice-calc-nogui gnumeric"
window_tags="migrated_fynedo,no_animations"

say() { printf '\n== %s\n' "$*"; }
fail() { printf '%s\n' "$*" >&2; exit 1; }

# need PACKAGE...: installs the Debian packages that are not there.
need() {
  local missing=() package
  for package; do
    dpkg-query -W -f '${Status}' "$package" 2>/dev/null | grep -q 'ok installed' || missing+=("$package")
  done
  [ ${#missing[@]} -eq 0 ] && return
  command -v apt-get >/dev/null || fail "Please install these first, by the names Debian gives them: ${missing[*]}"
  say "Installing ${missing[*]}"
  local sudo=()
  [ "$(id -u)" -eq 0 ] || sudo=(sudo)
  "${sudo[@]}" apt-get update -qq || fail "The list of packages could not be fetched."
  "${sudo[@]}" env DEBIAN_FRONTEND=noninteractive apt-get install -y -qq --no-install-recommends "${missing[@]}" >/dev/null ||
    fail "Could not install ${missing[*]}."
}

# find_go: Go must be there already; look in its usual place too.
find_go() {
  command -v go >/dev/null || export PATH="$PATH:/usr/local/go/bin"
  command -v go >/dev/null || fail "Go is not installed. Weighhouse needs Go $(awk '/^go /{print $2}' go.mod) or newer."
}

# build_window: the program with its window, at .bin/weighhouse.
build_window() {
  mkdir -p .bin
  CGO_ENABLED=1 go build -tags "$window_tags" -o .bin/weighhouse ./app
}
