package vault

import (
	"crypto/cipher"
	"crypto/hkdf"
	"crypto/hmac"
	"crypto/rand"
	"crypto/sha256"
	"encoding/binary"
	"fmt"

	"golang.org/x/crypto/chacha20poly1305"
)

// KeySize is the length of a data key in bytes.
const KeySize = 32

// A DataKey seals and finds what a branch keeps. It is safe for concurrent use.
type DataKey struct {
	raw  [KeySize]byte
	seal cipher.AEAD
	look []byte
}

// NewDataKey makes a key from the system's random source.
func NewDataKey() *DataKey {
	var raw [KeySize]byte
	rand.Read(raw[:]) // never fails: it ends the program instead
	return dataKey(raw)
}

// dataKey derives a key for each purpose, so that none can be used for the other.
func dataKey(raw [KeySize]byte) *DataKey {
	derive := func(purpose string) []byte {
		key, err := hkdf.Expand(sha256.New, raw[:], "weighhouse "+purpose, KeySize)
		if err != nil {
			panic(err) // only for a length that SHA-256 cannot give
		}
		return key
	}
	seal, err := chacha20poly1305.NewX(derive("seal"))
	if err != nil {
		panic(err) // only for a key of another length
	}
	return &DataKey{raw: raw, seal: seal, look: derive("look-up")}
}

// A Cell is where a sealed text stands. What was sealed for one cell opens in
// no other, so that nothing can be moved about by editing the file.
type Cell struct {
	Table, Column string
	Row           int64
}

// bytes are unlike for unlike cells, since no name holds a zero byte.
func (c Cell) bytes() []byte {
	b := append([]byte(c.Table), 0)
	b = append(append(b, c.Column...), 0)
	return binary.BigEndian.AppendUint64(b, uint64(c.Row))
}

// A Commitment is SHA-256(salt ‖ text) with a salt of 32 random bytes.
type Commitment [sha256.Size]byte

const saltSize = 32

// SealedOverhead is how many bytes longer than its text a sealed text is: a
// nonce, the commitment's salt and a tag.
const SealedOverhead = chacha20poly1305.NonceSizeX + saltSize + chacha20poly1305.Overhead

// Seal makes text unreadable without the key, for one cell, and commits to it.
func (k *DataKey) Seal(at Cell, text string) (sealed []byte, c Commitment) {
	sealed = make([]byte, chacha20poly1305.NonceSizeX, SealedOverhead+len(text))
	rand.Read(sealed)
	plain := make([]byte, saltSize, saltSize+len(text))
	rand.Read(plain)
	plain = append(plain, text...)
	return k.seal.Seal(sealed, sealed, plain, at.bytes()), sha256.Sum256(plain)
}

// Open reads what Seal sealed for the same cell. The error is ErrCannotOpen.
func (k *DataKey) Open(at Cell, sealed []byte) (text string, c Commitment, err error) {
	if len(sealed) < SealedOverhead {
		return "", c, fmt.Errorf("%w: too short", ErrCannotOpen)
	}
	nonce, rest := sealed[:chacha20poly1305.NonceSizeX], sealed[chacha20poly1305.NonceSizeX:]
	plain, err := k.seal.Open(nil, nonce, rest, at.bytes())
	if err != nil {
		return "", c, ErrCannotOpen
	}
	return string(plain[saltSize:]), sha256.Sum256(plain), nil
}

// Lookup is the keyed hash of text in a column: equal for equal texts, and
// nothing to anyone without the key. The caller folds case and spaces first.
func (k *DataKey) Lookup(table, column, text string) [sha256.Size]byte {
	h := hmac.New(sha256.New, k.look)
	h.Write(Cell{Table: table, Column: column}.bytes())
	h.Write([]byte(text))
	return [sha256.Size]byte(h.Sum(nil))
}
