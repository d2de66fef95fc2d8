// Package vault holds the keys of a branch and seals what must not be read
// from a stolen laptop. It has no SQL and keeps nothing.
//
// A branch has one data key. It seals columns (DataKey.Seal), and makes the
// keyed hashes by which something sealed is found again (DataKey.Lookup).
// Each person has a signing key of their own (SigningKey). Both are locked
// together by that person's passphrase (Keys.Lock, Unlock), so that whoever
// knows a passphrase, and nobody else, opens the branch and signs as one
// person.
//
// What is sealed can also be committed to: a Commitment is published in the
// journal, tells nothing by itself, and afterwards proves that the sealed
// text is the one that was meant. Its salt is sealed beside the text, so that
// erasing the sealed bytes leaves a commitment that no guess can be tried on.
//
// Methods: XChaCha20-Poly1305 (draft-irtf-cfrg-xchacha-03), HKDF and HMAC
// with SHA-256 (RFC 5869, RFC 2104), Ed25519 (RFC 8032), Argon2id (RFC 9106).
package vault

import "errors"

// ErrCannotOpen tells that the key, the passphrase or the place is not the
// one the text was sealed with, or that the text was altered. These cannot be
// told apart.
var ErrCannotOpen = errors.New("vault: cannot be opened with this key")
