#!/usr/bin/env bash
# Opens the window on the practice branch. Without a display, it says so and
# takes one invented applicant from questions to result in the terminal.
set -euo pipefail
. "$(dirname "$0")/setup.sh"
find_go

if [ -z "${DISPLAY:-}${WAYLAND_DISPLAY:-}" ]; then
  say "There is no display here, so the window cannot open. The same work in the terminal:"
  mkdir -p .bin
  CGO_ENABLED=0 go build -o .bin/clerk ./app/clerk
  rm -f .bin/practice.xlsx # of an older program, which clerk would leave as it is
  .bin/clerk practice .bin/practice.xlsx
  exec .bin/clerk ask -card .bin/practice.xlsx
fi

need $window_packages
[ -x .bin/weighhouse ] || say "Building the window; the first time takes about four minutes"
build_window
say "Opening the practice branch. Everyone in it is invented."
exec .bin/weighhouse -practice "$@"
