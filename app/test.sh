#!/usr/bin/env bash
# Everything that must hold: formatting, vet, staticcheck, every test, the
# window under a virtual display worked by real keys, and real spreadsheets
# opening our files. A missing tool is installed, or fails the run.
set -euo pipefail
. "$(dirname "$0")/setup.sh"
find_go
need git $window_packages $test_packages

# All but the window's own main package build without cgo, and fast.
export CGO_ENABLED=0
packages=$(go list -e ./... | grep -v '^weighhouse/app$')

say "Formatting"
unformatted=$(gofmt -l app model store assets)
[ -z "$unformatted" ] || fail "Not formatted: $unformatted"

say "Vet, also for Windows"
go vet $packages
GOOS=windows go vet $packages

say "Staticcheck"
go tool staticcheck $packages

say "The companion program builds without cgo"
mkdir -p .bin
go build -o .bin/clerk ./app/clerk

say "Tests"
go test $packages

say "The same figures with fused arithmetic"
if grep -qw fma /proc/cpuinfo && grep -qw avx2 /proc/cpuinfo; then
  GOAMD64=v3 go test ./model
else
  # Without such a processor the test still builds what it would run.
  GOAMD64=v3 go vet ./model
fi

say "Races"
CGO_ENABLED=1 go test -race ./model ./store ./app/desk

say "The window, worked by real keys"
build_window
CGO_ENABLED=1 go vet -tags "$window_tags" ./app
go test -count=1 -tags window -run TestWindow ./app/desk -args -program "$PWD/.bin/weighhouse" -clerk "$PWD/.bin/clerk" -shots "$PWD/.shots"

say "All is well"
