// Package migrations holds the numbered SQL that makes a desk's file, and
// brings one of an earlier version up to this one. A released file is never
// edited: add the next number. Each ends by setting user_version to its own
// number, in the same transaction.
package migrations

import (
	"embed"
	"io/fs"
	"strconv"
)

// Files are the migrations, named 00001_what.sql.
//
//go:embed *.sql
var Files embed.FS

// Latest is the number of the last one: the user_version of this program's files.
func Latest() int {
	names, _ := fs.Glob(Files, "*.sql") // the pattern is well-formed
	n, _ := strconv.Atoi(names[len(names)-1][:5])
	return n
}
