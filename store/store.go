// Package store keeps what a desk of a branch must not lose: one SQLite file
// in a folder of its own. It has the program's only SQL.
//
// Open gives a Branch: the file, checked before SQLite sees it, and locked.
// Branch.SignIn gives a Session, the front door: every act that changes
// something is a method of Session, in a file of its own, and runs in one
// transaction that checks model/duty, asks model, writes, and journals. An
// act that has returned without an error is on the disk.
//
// The journal is a chain: each entry holds the hash of the one before,
// commits to the rows it made, and is signed by the person who acted. What
// tells of an applicant is sealed by package vault; that includes a result's
// figures, since log-odds to nine places would give the answers away to
// whoever has the scorecard. Nothing that is kept is changed or deleted:
// triggers, and in this program an authorizer, forbid it. Session.Prove walks
// everything and says where it does not hold.
//
// Errors are of type *Error and carry typed problems.
package store

import (
	"context"
	"errors"
)

func isCancelled(err error) bool {
	return errors.Is(err, context.Canceled) || errors.Is(err, context.DeadlineExceeded)
}
