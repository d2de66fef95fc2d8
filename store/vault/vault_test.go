package vault

import (
	"bytes"
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"testing"

	"golang.org/x/crypto/argon2"
	"pgregory.net/rapid"
)

var here = Cell{"results", "kept", 7}

func TestSealedTextOpensOnlyInItsCellWithItsKey(t *testing.T) {
	key := NewDataKey()
	sealed, committed := key.Seal(here, "stall\tmarket")
	text, again, err := key.Open(here, sealed)
	if err != nil || text != "stall\tmarket" || again != committed {
		t.Fatalf("got %q %v, commitments alike: %v", text, err, again == committed)
	}
	elsewhere := map[string]Cell{
		"another row":    {"results", "kept", 8},
		"another column": {"results", "kep", 7},
		"another table":  {"result", "skept", 7},
		"a shifted name": {"resultskept", "", 7},
	}
	for name, cell := range elsewhere {
		if _, _, err := key.Open(cell, sealed); !errors.Is(err, ErrCannotOpen) {
			t.Errorf("opens in %s: %v", name, err)
		}
	}
	if _, _, err := NewDataKey().Open(here, sealed); !errors.Is(err, ErrCannotOpen) {
		t.Errorf("opens with another key: %v", err)
	}
}

func TestEveryFlippedBitIsNoticed(t *testing.T) {
	key := NewDataKey()
	sealed, _ := key.Seal(here, "x")
	for i := range sealed {
		for bit := range 8 {
			altered := bytes.Clone(sealed)
			altered[i] ^= 1 << bit
			if _, _, err := key.Open(here, altered); !errors.Is(err, ErrCannotOpen) {
				t.Fatalf("byte %d bit %d: %v", i, bit, err)
			}
		}
		if _, _, err := key.Open(here, sealed[:i]); !errors.Is(err, ErrCannotOpen) {
			t.Fatalf("cut to %d bytes: %v", i, err)
		}
	}
}

func TestSealingKeepsEveryText(t *testing.T) {
	key := NewDataKey()
	rapid.Check(t, func(t *rapid.T) {
		text := rapid.String().Draw(t, "text")
		cell := Cell{"t", "c", rapid.Int64().Draw(t, "row")}
		sealed, committed := key.Seal(cell, text)
		if len(sealed) != len(text)+SealedOverhead {
			t.Fatalf("%d bytes for %d", len(sealed), len(text))
		}
		got, again, err := key.Open(cell, sealed)
		if err != nil || got != text || again != committed {
			t.Fatalf("got %q, %v", got, err)
		}
	})
}

func TestCommitmentsOfOneTextAreUnlike(t *testing.T) {
	key := NewDataKey()
	_, a := key.Seal(here, "yes")
	_, b := key.Seal(here, "yes")
	if a == b || a == sha256.Sum256([]byte("yes")) {
		t.Fatal("a commitment can be guessed from its text")
	}
}

func TestLookupIsEqualOnlyForEqualTextColumnAndKey(t *testing.T) {
	key := NewDataKey()
	want := key.Lookup("people", "telephone", "0712")
	if want != key.Lookup("people", "telephone", "0712") {
		t.Fatal("not found again")
	}
	for name, other := range map[string][32]byte{
		"text":   key.Lookup("people", "telephone", "0713"),
		"column": key.Lookup("people", "identity", "0712"),
		"table":  key.Lookup("visits", "telephone", "0712"),
		"key":    NewDataKey().Lookup("people", "telephone", "0712"),
	} {
		if other == want {
			t.Errorf("another %s gives the same hash", name)
		}
	}
}

func TestKeysUnlockWithTheirPassphraseAndOwner(t *testing.T) {
	keys := Keys{NewDataKey(), NewSigningKey()}
	locked := keys.Lock("blé 7 ﬁelds", "person 1")
	got, err := Unlock(locked, "ble\u0301 7 fields", "person 1") // typed in another form
	if err != nil || got.Data.raw != keys.Data.raw || !bytes.Equal(got.Signing.Public(), keys.Signing.Public()) {
		t.Fatalf("unlocked other keys, %v", err)
	}
	for _, wrong := range []struct{ name, passphrase, owner string }{
		{"passphrase", "ble 7 fields", "person 1"},
		{"empty passphrase", "", "person 1"},
		{"owner", "blé 7 ﬁelds", "person 2"},
	} {
		if _, err := Unlock(locked, wrong.passphrase, wrong.owner); !errors.Is(err, ErrCannotOpen) {
			t.Errorf("unlocked with a wrong %s: %v", wrong.name, err)
		}
	}
	for i, b := range locked[:costSize] {
		altered := bytes.Clone(locked)
		altered[i] = b ^ 0x80 // a cost without bounds, or another format
		if _, err := Unlock(altered, "blé 7 ﬁelds", "person 1"); !errors.Is(err, ErrCannotOpen) {
			t.Errorf("byte %d altered: %v", i, err)
		}
	}
	if _, err := Unlock(locked[:len(locked)-1], "blé 7 ﬁelds", "person 1"); !errors.Is(err, ErrCannotOpen) {
		t.Errorf("cut: %v", err)
	}
}

func TestSignatures(t *testing.T) {
	key := NewSigningKey()
	signature := key.Sign([]byte("release"))
	if !Signed(key.Public(), []byte("release"), signature) {
		t.Fatal("own signature refused")
	}
	if Signed(key.Public(), []byte("Release"), signature) || Signed(NewSigningKey().Public(), []byte("release"), signature) || Signed(nil, []byte("release"), signature) {
		t.Fatal("a signature holds for something else")
	}
}

// A test value of Argon2's reference implementation, for version 0x13 (from
// memory): the library's Argon2id is the published one, so that a later
// version of it opens what this one locked.
func TestArgon2idIsTheStandardOne(t *testing.T) {
	hash := argon2.IDKey([]byte("password"), []byte("somesalt"), 2, 65536, 1, 32)
	if h := hex.EncodeToString(hash); h != "09316115d5cf24ed5a15a31a3ba326e5cf32edc24702987c02b6566f61913cf7" {
		t.Error(h)
	}
}

func BenchmarkSeal(b *testing.B) {
	key := NewDataKey()
	text := string(make([]byte, 400))
	for b.Loop() {
		key.Seal(here, text)
	}
}

func BenchmarkUnlock(b *testing.B) {
	locked := Keys{NewDataKey(), NewSigningKey()}.Lock("passphrase", "1")
	for b.Loop() {
		if _, err := Unlock(locked, "passphrase", "1"); err != nil {
			b.Fatal(err)
		}
	}
}
