package vault

import (
	"crypto/cipher"
	"crypto/ed25519"
	"crypto/rand"
	"encoding/binary"
	"fmt"

	"golang.org/x/crypto/argon2"
	"golang.org/x/crypto/chacha20poly1305"
	"golang.org/x/text/unicode/norm"
)

// A SigningKey is one person's Ed25519 key.
type SigningKey struct{ private ed25519.PrivateKey }

// NewSigningKey makes a key from the system's random source.
func NewSigningKey() SigningKey {
	seed := make([]byte, ed25519.SeedSize)
	rand.Read(seed)
	return SigningKey{ed25519.NewKeyFromSeed(seed)}
}

// Public is the half that checks signatures, 32 bytes.
func (k SigningKey) Public() ed25519.PublicKey { return k.private.Public().(ed25519.PublicKey) }

// Sign signs a message, 64 bytes.
func (k SigningKey) Sign(message []byte) []byte { return ed25519.Sign(k.private, message) }

// Signed tells whether the holder of a public key signed the message; a key
// of a wrong length has signed nothing.
func Signed(public ed25519.PublicKey, message, signature []byte) bool {
	return len(public) == ed25519.PublicKeySize && ed25519.Verify(public, message, signature)
}

// Keys are what a passphrase unlocks.
type Keys struct {
	Data    *DataKey
	Signing SigningKey
}

// The cost of trying a passphrase: Argon2id with 19 MiB, 2 passes and 1 lane,
// as the OWASP Password Storage Cheat Sheet has it. The cost stands in front
// of what is locked, so that a later version may raise it.
const (
	costMemory = 19 * 1024 // KiB
	costTime   = 2
	costLanes  = 1
)

// The most that Unlock agrees to spend: a file that was tampered with must
// not take all of the memory.
const (
	mostMemory = 1024 * 1024 // KiB
	mostTime   = 64
	mostLanes  = 16
)

const (
	lockFormat = 1
	costSize   = 1 + 4 + 4 + 1 // format, memory, time, lanes
	phraseSalt = 16
	lockedHead = costSize + phraseSalt + chacha20poly1305.NonceSizeX
	lockedSize = lockedHead + KeySize + ed25519.SeedSize + chacha20poly1305.Overhead
)

// Lock seals the keys under a passphrase for their owner, a name or number
// that Unlock must be told again. The passphrase is folded to NFKC, so that it
// may be typed on another keyboard.
func (k Keys) Lock(passphrase, owner string) []byte {
	out := make([]byte, lockedHead, lockedSize)
	out[0] = lockFormat
	binary.BigEndian.PutUint32(out[1:], costMemory)
	binary.BigEndian.PutUint32(out[5:], costTime)
	out[9] = costLanes
	rand.Read(out[costSize:])
	nonce := out[costSize+phraseSalt:]
	secret := append(k.Data.raw[:len(k.Data.raw):len(k.Data.raw)], k.Signing.private.Seed()...)
	return phraseKey(passphrase, out).Seal(out, nonce, secret, lockPlace(out, owner))
}

// Unlock opens what Lock locked. The error is ErrCannotOpen.
func Unlock(locked []byte, passphrase, owner string) (Keys, error) {
	if len(locked) != lockedSize || locked[0] != lockFormat {
		return Keys{}, fmt.Errorf("%w: unknown form", ErrCannotOpen)
	}
	memory, time, lanes := cost(locked)
	if memory > mostMemory || time == 0 || time > mostTime || lanes == 0 || lanes > mostLanes {
		return Keys{}, fmt.Errorf("%w: unlikely cost", ErrCannotOpen)
	}
	nonce := locked[costSize+phraseSalt : lockedHead]
	secret, err := phraseKey(passphrase, locked).Open(nil, nonce, locked[lockedHead:], lockPlace(locked, owner))
	if err != nil {
		return Keys{}, ErrCannotOpen
	}
	return Keys{
		Data:    dataKey([KeySize]byte(secret)),
		Signing: SigningKey{ed25519.NewKeyFromSeed(secret[KeySize:])},
	}, nil
}

func cost(locked []byte) (memory, time uint32, lanes uint8) {
	return binary.BigEndian.Uint32(locked[1:]), binary.BigEndian.Uint32(locked[5:]), locked[9]
}

// lockPlace binds the cost and the owner.
func lockPlace(locked []byte, owner string) []byte {
	return append(append([]byte("weighhouse keys\x00"), locked[:costSize]...), owner...)
}

func phraseKey(passphrase string, locked []byte) cipher.AEAD {
	memory, time, lanes := cost(locked)
	salt := locked[costSize : costSize+phraseSalt]
	key := argon2.IDKey([]byte(norm.NFKC.String(passphrase)), salt, time, memory, lanes, chacha20poly1305.KeySize)
	aead, err := chacha20poly1305.NewX(key)
	if err != nil {
		panic(err) // only for a key of another length
	}
	return aead
}
